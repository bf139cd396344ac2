package main

import (
	"encoding/csv"
	"encoding/json"
	"fmt"
	"io"
	"runtime"
	"strings"

	"github.com/spf13/cobra"

	"fewbits/cmd/fewbits/internal/bench"
)

// sweepCommand measures designs at other levels than the recordings' own.
func sweepCommand() *cobra.Command {
	var f runFlags
	var target float64
	c := &cobra.Command{
		Use:   "sweep [flags] RECORDING...",
		Short: "measure designs over levels from -60 to +10 dB around the recordings' own",
		Long: `A talker is never at the level a design was made for. Prints SNR (exact, from
the histogram) and segmental SNR against level, and the dynamic range: the span
of levels with at least a stated SNR. For 8-bit designs also sine and noise
tests against the limits of ITU-T G.712; the limits' sources are printed, those
of the noise test are unverified and give no verdict.`,
		Example: "  fewbits sweep recordings/\n  fewbits sweep --design mu-law:8 --design lloyd-max:8 --target 30 --format csv talk.wav",
		Args:    atLeast(1),
	}
	f.registerMeasuring(c)
	c.Flags().Float64Var(&target, "target", 25, "least SNR in `dB` that the dynamic range is told for")
	c.RunE = func(c *cobra.Command, args []string) error {
		if !(target > 0 && target < 100) {
			return usagef("--target %g: want a number of dB above 0, below 100", target)
		}
		plan, err := f.plan(args)
		if err != nil {
			return err
		}
		bar := newProgress(c.ErrOrStderr())
		plan.Progress, plan.Workers = bar.step, runtime.GOMAXPROCS(0)
		run, err := bench.SweepLevels(c.Context(), plan, target)
		bar.stop()
		if err != nil {
			return err
		}
		if err := printSweep(c.OutOrStdout(), run, f.format.value); err != nil {
			return err
		}
		return refusals(c, &bench.Results{Refused: run.Refused})
	}
	return c
}

func printSweep(w io.Writer, run *bench.LevelRun, format string) error {
	switch format {
	case "json":
		e := json.NewEncoder(w)
		e.SetIndent("", "  ")
		return e.Encode(run)
	case "csv":
		return sweepCSV(w, run)
	}
	wide := 12
	for _, d := range run.Designs {
		wide = max(wide, len(d.Spec))
	}
	fmt.Fprintf(w, "SNR in dB against level (dB re the recordings' own), and the range of levels with %g dB or more\n", run.Target)
	levelRows(w, run, wide, func(d bench.LevelDesign) []bench.Num { return d.SNRDB }, true)
	fmt.Fprintln(w, "\nsegmental SNR in dB (segsnr_db) against level")
	levelRows(w, run, wide, func(d bench.LevelDesign) []bench.Num { return d.SegSNRDB }, false)
	tests(w, run, wide)
	for _, s := range run.Warnings {
		fmt.Fprintf(w, "\nnote: %s\n", s)
	}
	return nil
}

// levelRows prints every other level, a line a design.
func levelRows(w io.Writer, run *bench.LevelRun, wide int, of func(bench.LevelDesign) []bench.Num, ranges bool) {
	fmt.Fprintf(w, "%-*s", wide, "design")
	for i, g := range run.Designs[0].LevelDB {
		if i%2 == 0 {
			fmt.Fprintf(w, " %6.0f", g)
		}
	}
	if ranges {
		fmt.Fprint(w, "   range dB")
	}
	fmt.Fprintln(w)
	for _, d := range run.Designs {
		fmt.Fprintf(w, "%-*s", wide, d.Spec)
		for i, v := range of(d) {
			if i%2 == 0 {
				fmt.Fprintf(w, " %6s", num(v, 1))
			}
		}
		if ranges {
			fmt.Fprintf(w, "   %s", spanText(d))
		}
		fmt.Fprintln(w)
	}
}

// spanText is "41 (-38 to 3)"; an end where the sweep ended is marked.
func spanText(d bench.LevelDesign) string {
	if !d.RangeDB.Defined() {
		return "none"
	}
	lo, hi := num(d.RangeLo, 0), num(d.RangeHi, 0)
	if d.OpenLo {
		lo = "below " + lo
	}
	if d.OpenHi {
		hi = "above " + hi
	}
	return fmt.Sprintf("%s (%s to %s)", num(d.RangeDB, 0), lo, hi)
}

// tests prints the sine and noise margins of 8-bit designs.
func tests(w io.Writer, run *bench.LevelRun, wide int) {
	for _, t := range []struct {
		head, source string
		of           func(bench.LevelDesign) []bench.TestPoint
		margin       bool
	}{
		{"sine test, 8 bits: signal to total distortion in dB at dBm0, less the limit (margin)", run.SineSource,
			func(d bench.LevelDesign) []bench.TestPoint { return d.Sine }, true},
		{"noise test, 8 bits: signal to total distortion in dB at dBm0 (no verdict)", run.NoiseSource,
			func(d bench.LevelDesign) []bench.TestPoint { return d.Noise }, false},
	} {
		head := false
		for _, d := range run.Designs {
			points := t.of(d)
			if len(points) == 0 {
				continue
			}
			if !head {
				head = true
				fmt.Fprintf(w, "\n%s\n%-*s", t.head, wide, "design")
				for _, p := range points {
					fmt.Fprintf(w, " %6.0f", p.LevelDBm0)
				}
				fmt.Fprintln(w)
			}
			fmt.Fprintf(w, "%-*s", wide, d.Spec)
			for _, p := range points {
				v := p.DB
				if t.margin {
					v = p.MarginDB
				}
				fmt.Fprintf(w, " %6s", num(v, 1))
			}
			fmt.Fprintln(w)
		}
		if head {
			fmt.Fprintf(w, "limits: %s; 0 dBm0 from each design's own overload point\n", strings.TrimSuffix(t.source, "."))
		}
	}
}

// sweepCSV writes a line per design and level.
func sweepCSV(w io.Writer, run *bench.LevelRun) error {
	out := csv.NewWriter(w)
	out.Write([]string{"design", "level_db", "snr_db", "segsnr_db"})
	for _, d := range run.Designs {
		for i, g := range d.LevelDB {
			out.Write([]string{d.Spec, full(bench.Num(g)), full(d.SNRDB[i]), full(d.SegSNRDB[i])})
		}
	}
	out.Flush()
	return out.Error()
}
