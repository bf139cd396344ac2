package main

import (
	"encoding/csv"
	"encoding/json"
	"fmt"
	"io"
	"runtime"
	"strconv"
	"strings"

	"github.com/spf13/cobra"

	"fewbits/cmd/fewbits/internal/bench"
)

// bitsFamilies are compared when no design is named.
var bitsFamilies = []string{"uniform", "uniform,overload=optimal", "mu-law", "a-law", "lloyd-max,from=laplacian", "lloyd-max,from=gamma"}

// bitsCommand says what a target costs.
func bitsCommand() *cobra.Command {
	var f runFlags
	var target string
	c := &cobra.Command{
		Use:   `bits --target "segsnr 30" [flags] RECORDING...`,
		Short: "say how many bits each family needs for a target",
		Long: `Measures every family at each of --bits and prints, interpolated, how many bits
it needs to reach the target, what its table costs there, and how many bits it
saves against mu-law and uniform, with its 95 % interval. The target is
"snr", "segsnr" or "open" and a number of dB; a segmental target is held against
segsnr_open_db where more than 5 % of the frames sit at the 35 dB ceiling.`,
		Example: "  fewbits bits --target \"segsnr 25\" recordings/\n  fewbits bits --target \"snr 30\" --bits 4..10 --design mu-law --design lloyd-max,from=data recordings/",
		Args:    atLeast(1),
	}
	f.registerMeasuring(c)
	c.Flags().Lookup("bits").DefValue, f.bits = "2..12", "2..12"
	c.Flags().StringVar(&target, "target", "", "figure and dB, such as \"segsnr 30\"")
	c.RunE = func(c *cobra.Command, args []string) error {
		figure, db, err := parseTarget(target)
		if err != nil {
			return err
		}
		if len(f.designs) == 0 {
			f.designs = bitsFamilies
		}
		plan, err := f.plan(args)
		if err != nil {
			return err
		}
		bar := newProgress(c.ErrOrStderr())
		plan.Progress, plan.Workers = bar.step, runtime.GOMAXPROCS(0)
		run, err := bench.NeedBits(c.Context(), plan, figure, db)
		bar.stop()
		if err != nil {
			return err
		}
		if err := printBits(c.OutOrStdout(), run, f.format.value); err != nil {
			return err
		}
		return refusals(c, &bench.Results{Refused: run.Refused})
	}
	return c
}

// parseTarget reads "segsnr 30".
func parseTarget(text string) (figure string, db float64, err error) {
	words := strings.Fields(text)
	if len(words) == 2 && (words[0] == "snr" || words[0] == "segsnr" || words[0] == "open") {
		if db, err = strconv.ParseFloat(words[1], 64); err == nil && db > -10 && db < 100 {
			return words[0], db, nil
		}
	}
	return "", 0, usagef("--target %q: want snr, segsnr or open and a number of dB, such as \"segsnr 30\"", text)
}

func printBits(w io.Writer, run *bench.BitsRun, format string) error {
	switch format {
	case "json":
		e := json.NewEncoder(w)
		e.SetIndent("", "  ")
		return e.Encode(run)
	case "csv":
		out := csv.NewWriter(w)
		out.Write([]string{"family", "bits", "at_bits", "figure_db", "table_bytes", "comparisons"})
		for _, n := range run.Families {
			out.Write([]string{n.Family, full(n.Bits), strconv.Itoa(n.AtBits), full(n.Figure), strconv.Itoa(n.TableBytes), strconv.Itoa(n.Comparisons)})
		}
		out.Flush()
		return out.Error()
	}
	wide := 12
	for _, n := range run.Families {
		wide = max(wide, len(n.Family))
	}
	fmt.Fprintf(w, "bits for %g dB of %s (%s)\n\n", run.Target, run.Figure, run.Why)
	fmt.Fprintf(w, "%-*s  needs  take  there dB  table bytes  comparisons\n", wide, "family")
	for _, n := range run.Families {
		if n.AtBits == 0 {
			fmt.Fprintf(w, "%-*s  not reached up to %d bits\n", wide, n.Family, n.Rates[len(n.Rates)-1])
			continue
		}
		need := num(n.Bits, 2)
		if !n.Bits.Defined() {
			need = fmt.Sprintf("<=%d", n.AtBits)
		}
		fmt.Fprintf(w, "%-*s  %5s  %4d  %8s  %11d  %11d\n", wide, n.Family, need, n.AtBits, num(n.Figure, 1), n.TableBytes, n.Comparisons)
	}
	fmt.Fprintln(w)
	for _, s := range run.Against {
		fmt.Fprintln(w, s.Sentence())
	}
	if run.Method != "" {
		fmt.Fprintf(w, "95 %%: interval of the paired difference; %s\n", run.Method)
	}
	for _, s := range run.Warnings {
		fmt.Fprintf(w, "note: %s\n", s)
	}
	return nil
}
