package main

import (
	"encoding/csv"
	"encoding/json"
	"fmt"
	"io"
	"math"
	"runtime"
	"strconv"
	"strings"

	"github.com/spf13/cobra"

	"fewbits/cmd/fewbits/internal/bench"
	"fewbits/codec/family"
	"fewbits/measure/model"
)

// designCommand shows staircases by themselves.
func designCommand() *cobra.Command {
	var bits string
	var level float64
	var like []string
	var trace bool
	c := &cobra.Command{
		Use:   "design SPEC...",
		Short: "make designs and show their thresholds, values and error",
		Long:  designHelp(),
		Example: `  fewbits design lloyd-max:3,from=gaussian --level 0
  fewbits design mu-law:4 uniform:4,overload=optimal --format csv
  fewbits design lloyd-max:6,from=data --like recordings/
  fewbits design lloyd-max:8,from=gamma --trace`,
		Args: atLeast(1),
	}
	c.Flags().StringVar(&bits, "bits", "4,6,8", "bits of designs that name none")
	c.Flags().Float64Var(&level, "level", -20, "level of the model in `dBov`; 0 is an rms of 1")
	c.Flags().StringArrayVar(&like, "like", nil, "make fitted designs on these recordings; repeatable")
	c.Flags().BoolVar(&trace, "trace", false, "show how each designer converged (csv: in place of the cells)")
	judge := choose(c, "model", "model that designs without one are judged by", model.Names()...)
	format := choose(c, "format", "how to print", "table", "csv", "json")
	c.RunE = func(c *cobra.Command, args []string) error {
		plan, err := designPlan(args, bits, like, level)
		if err != nil {
			return err
		}
		plan.Trace = trace
		got, refused, err := bench.MakeStaircases(c.Context(), plan, judge.value, math.Pow(10, level/20))
		if err != nil {
			return err
		}
		if err := printStaircases(c.OutOrStdout(), got, format.value, trace); err != nil {
			return err
		}
		return refusals(c, &bench.Results{Refused: refused})
	}
	return c
}

// designPlan checks the flags.
func designPlan(args []string, bits string, like []string, level float64) (bench.Plan, error) {
	var f runFlags
	f.defaults()
	f.bits, f.designs = bits, args
	if !(level >= -120 && level <= 40) {
		return bench.Plan{}, usagef("--level %g: want -120 to 40 dBov", level)
	}
	plan, err := f.plan(like)
	if err != nil {
		return plan, err
	}
	plan.Workers = runtime.GOMAXPROCS(0)
	for _, s := range plan.Specs {
		if s.Need() >= family.Data && len(like) == 0 {
			return plan, usagef("design %q is made from recordings: name some with --like", s.Text)
		}
	}
	return plan, nil
}

// designHelp lists the families and their keys from the register.
func designHelp() string {
	var b strings.Builder
	b.WriteString("Makes each design and prints its staircase, its error under its model, the size\nof its table and what it costs to code.\n\nSPEC is family[:bits][,key=value...]; levels=N may stand for the bits. Families:\n")
	for _, f := range family.Register {
		fmt.Fprintf(&b, "\n  %-10s %s (%d to %d bits)\n", f.Name, f.About, f.MinBits, f.MaxBits)
		for _, k := range f.Keys {
			fmt.Fprintf(&b, "             %s=%s (default %s)\n", k.Name, k.Accepts, k.Default)
		}
	}
	return b.String()
}

func printStaircases(w io.Writer, list []bench.Staircase, format string, trace bool) error {
	switch format {
	case "json":
		e := json.NewEncoder(w)
		e.SetIndent("", "  ")
		return e.Encode(map[string]any{"schema": bench.Schema, "designs": list})
	case "csv":
		if trace {
			return tracesCSV(w, list)
		}
		return staircasesCSV(w, list)
	}
	for i, s := range list {
		if i > 0 {
			fmt.Fprintln(w)
		}
		printStaircase(w, s)
	}
	return nil
}

// printStaircase prints one design's figures, then its cells.
func printStaircase(w io.Writer, s bench.Staircase) {
	fmt.Fprintf(w, "%s: %d levels, %d bits, made on: %s\n", s.Spec, s.Levels, s.Bits, s.MadeOn)
	fmt.Fprintf(w, "  for %s: mse %.6g, SNR %s dB, entropy %s bits\n",
		s.Model, float64(s.MSE), num(s.SNRDB, 3), num(s.EntropyBits, 4))
	if s.BoundGapDB.Defined() {
		fmt.Fprintf(w, "  %s dB short of Shannon's bound at this number of levels; %s dB %s than Panter-Dite's error for many levels\n",
			num(s.BoundGapDB, 2), num(bench.Num(math.Abs(float64(s.HighRateGapDB))), 2), map[bool]string{true: "better", false: "worse"}[s.HighRateGapDB < 0])
	}
	fmt.Fprintf(w, "  overload beyond %.6g and %.6g: %.3g of the samples, %.3g %% of the error\n",
		float64(s.Lo), float64(s.Hi), float64(s.OverloadP), 100*float64(s.OverloadMSE/s.MSE))
	if s.FrameSNRDB.Defined() {
		fmt.Fprintf(w, "  mean SNR of the frames it was made on, each limited: %s dB\n", num(s.FrameSNRDB, 3))
	}
	fmt.Fprint(w, "  SNR with the level off by")
	for _, o := range s.Off {
		fmt.Fprintf(w, " %+g dB: %s", o.DB, num(o.SNRDB, 2))
	}
	fmt.Fprintf(w, "\n  table %d bytes, %d comparisons a sample", s.TableBytes, s.Comparisons)
	if s.Proof != "" {
		fmt.Fprintf(w, "; %s, %d rounds, residual %s", s.Proof, s.Rounds, strconv.FormatFloat(float64(s.Residual), 'g', 2, 64))
	}
	fmt.Fprintln(w)
	for _, n := range s.Notes {
		fmt.Fprintf(w, "  %s\n", n)
	}
	printTrace(w, s)
	fmt.Fprintf(w, "  %6s %18s %18s %18s\n", "cell", "from", "to", "value")
	for k, y := range s.Values {
		from, to := "-inf", "inf"
		if k > 0 {
			from = fmt.Sprintf("%.10g", s.Thresholds[k-1])
		}
		if k < len(s.Thresholds) {
			to = fmt.Sprintf("%.10g", s.Thresholds[k])
		}
		fmt.Fprintf(w, "  %6d %18s %18s %18.10g\n", k, from, to, y)
	}
}

// printTrace prints a designer's convergence, a round a line.
func printTrace(w io.Writer, s bench.Staircase) {
	if len(s.Trace) == 0 {
		return
	}
	fmt.Fprintf(w, "  %6s  %s\n", "round", s.TraceOf)
	for i, x := range s.Trace {
		fmt.Fprintf(w, "  %6d  %.10g\n", i, x)
	}
}

// staircasesCSV writes a line per cell, in full precision.
func staircasesCSV(w io.Writer, list []bench.Staircase) error {
	out := csv.NewWriter(w)
	out.Write([]string{"design", "cell", "from", "to", "value"})
	for _, s := range list {
		for k, y := range s.Values {
			from, to := "", ""
			if k > 0 {
				from = full(bench.Num(s.Thresholds[k-1]))
			}
			if k < len(s.Thresholds) {
				to = full(bench.Num(s.Thresholds[k]))
			}
			out.Write([]string{s.Spec, strconv.Itoa(k), from, to, full(bench.Num(y))})
		}
	}
	out.Flush()
	return out.Error()
}

// tracesCSV writes a line per round, in full precision.
func tracesCSV(w io.Writer, list []bench.Staircase) error {
	out := csv.NewWriter(w)
	out.Write([]string{"design", "round", "value", "of"})
	for _, s := range list {
		for i, x := range s.Trace {
			out.Write([]string{s.Spec, strconv.Itoa(i), full(bench.Num(x)), s.TraceOf})
		}
	}
	out.Flush()
	return out.Error()
}
