package main

import (
	"fmt"
	"runtime"
	"slices"

	"github.com/spf13/cobra"

	"fewbits/cmd/fewbits/internal/bench"
	"fewbits/cmd/fewbits/internal/folder"
)

const compareHelp = `Codes each recording with each design and measures what was lost.

RECORDING is a WAV or FLAC file or a folder, searched for .wav and .flac files.
The output folder gets results.json (everything), summary.csv (a line per clip
and design), report.html, and under audio/ the reconstructions and their errors
(the error is never amplified). Each --design is a spec:

` + "  family[:bits][,key=value...]   see fewbits design --help"

// compareCommand is the main job on the user's recordings.
func compareCommand() *cobra.Command {
	var f runFlags
	c := &cobra.Command{
		Use:   "compare [flags] RECORDING...",
		Short: "code recordings with every design and measure what was lost",
		Long:  compareHelp,
		Example: `  fewbits compare recordings/
  fewbits compare --design mu-law:6 --design lloyd-max:6,from=gamma talk.wav
  fewbits compare --bits 5,7 --train others/ --out trained recordings/
  fewbits compare --level -26 --rate 8000 --no-audio recordings/`,
		Args: atLeast(1),
	}
	f.register(c, "fewbits-out")
	c.RunE = func(c *cobra.Command, args []string) error {
		plan, err := f.plan(args)
		if err != nil {
			return err
		}
		return runCompare(c, plan, &f)
	}
	return c
}

// runCompare opens the output folder and runs into it.
func runCompare(c *cobra.Command, plan bench.Plan, f *runFlags) error {
	out, err := folder.Open(f.out, f.replace, slices.Concat(plan.Inputs, plan.Train))
	if err != nil {
		return err
	}
	defer out.Abort()
	return runInto(c, plan, f, out)
}

// runInto fills the output folder and prints the table.
func runInto(c *cobra.Command, plan bench.Plan, f *runFlags, out *folder.Folder) error {
	bar := newProgress(c.ErrOrStderr())
	plan.Place, plan.Progress = out.Path, bar.step
	plan.Workers, plan.Command = runtime.GOMAXPROCS(0), commandLine(c)
	results, traces, err := bench.Run(c.Context(), plan)
	bar.stop()
	if err != nil {
		return err
	}
	if err := writeOutputs(out, results, traces, f.pictures.value, plan.Audio); err != nil {
		return err
	}
	if err := out.Commit(); err != nil {
		return err
	}
	if err := printResults(c, results, f.format.value); err != nil {
		return err
	}
	if f.format.value == "table" {
		fmt.Fprintf(c.OutOrStdout(), "\nwritten to %s: open report.html there, or read results.json and summary.csv\n", out.Out())
	}
	return refusals(c, results)
}

// refusals names what was refused and settles the exit status.
func refusals(c *cobra.Command, r *bench.Results) error {
	for _, x := range r.Refused {
		fmt.Fprintf(c.ErrOrStderr(), "fewbits: refused %s: %s\n", x.File, x.Reason)
	}
	if len(r.Refused) > 0 {
		return errRefused
	}
	return nil
}
