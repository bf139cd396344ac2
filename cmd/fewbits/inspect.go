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

	"github.com/jedib0t/go-pretty/v6/table"
	"github.com/jedib0t/go-pretty/v6/text"
	"github.com/spf13/cobra"

	"fewbits/cmd/fewbits/internal/bench"
)

// inspectCommand says what recordings are like before anyone trusts a table
// made from them.
func inspectCommand() *cobra.Command {
	var f runFlags
	c := &cobra.Command{
		Use:   "inspect [flags] RECORDING...",
		Short: "say what recordings are like and what is wrong with them",
		Long: `Reads each recording and prints its format, levels, activity, fitted amplitude
models, and in plain sentences what is wrong with it and what to do.`,
		Example: "  fewbits inspect recordings/\n  fewbits inspect --format json talk.wav",
		Args:    atLeast(1),
	}
	f.registerMeasuring(c)
	c.RunE = func(c *cobra.Command, args []string) error {
		plan, err := f.plan(args)
		if err != nil {
			return err
		}
		bar := newProgress(c.ErrOrStderr())
		plan.Progress, plan.Workers = bar.step, runtime.GOMAXPROCS(0)
		clips, refused, err := bench.Inspect(c.Context(), plan)
		bar.stop()
		if err != nil {
			return err
		}
		if err := printClips(c.OutOrStdout(), clips, refused, f.format.value); err != nil {
			return err
		}
		return refusals(c, &bench.Results{Refused: refused})
	}
	return c
}

func printClips(w io.Writer, clips []bench.Clip, refused []bench.Refusal, format string) error {
	switch format {
	case "json":
		e := json.NewEncoder(w)
		e.SetIndent("", "  ")
		return e.Encode(map[string]any{"schema": bench.Schema, "clips": clips, "refused": refused})
	case "csv":
		return clipsCSV(w, clips)
	}
	for i, c := range clips {
		if i > 0 {
			fmt.Fprintln(w)
		}
		printClip(w, c)
	}
	return nil
}

// printClip prints one recording: figures, fits, findings.
func printClip(w io.Writer, c bench.Clip) {
	fmt.Fprintf(w, "%s\n  %s, %d Hz, %d channel%s, %.2f s\n", c.File, c.Format, c.RateHz, c.Channels, plural(c.Channels), c.Seconds)
	fmt.Fprintf(w, "  level %s dBov, active speech level %s dBov, active %s of the time\n",
		num(c.LevelDBov, 1), num(c.ActiveDBov, 1), percent(c.Activity))
	fmt.Fprintf(w, "  peak %s dB, crest %s dB, DC %s, noise out of range %s dBov\n",
		num(c.PeakDB, 1), num(c.CrestDB, 1), num(c.DC, 5), num(c.NoiseDBov, 1))
	fmt.Fprintf(w, "  %s of the samples exactly zero, %d effective bits, %d of %d frames in range\n",
		percent(c.ZeroShare), c.EffectiveBits, c.FramesInRange, c.Frames)
	for _, p := range c.Preparation {
		fmt.Fprintf(w, "  prepared: %s\n", p)
	}
	printFits(w, c.Fits)
	for _, f := range c.Warnings {
		fmt.Fprintf(w, "  ! %s\n", f)
	}
	if len(c.Warnings) == 0 {
		fmt.Fprintln(w, "  nothing found wrong")
	}
}

// printFits prints the models, best likelihood first as they come.
func printFits(w io.Writer, fits []bench.Fit) {
	if len(fits) == 0 {
		return
	}
	t := table.NewWriter()
	style := table.StyleLight
	style.Options = table.OptionsNoBordersAndSeparators
	style.Format.Header = text.FormatDefault
	t.SetStyle(style)
	t.AppendHeader(table.Row{" ", "model", "over", "shape", "scale", "rms", "nats/sample", "KS", "design loss dB"})
	for _, f := range fits {
		t.AppendRow(table.Row{" ", f.Model, f.Over, num(f.Shape, 3), num(f.Scale, 5), num(f.RMS, 5), num(f.LogLik, 4), num(f.KS, 3), num(f.DesignLossDB, 2)})
	}
	fmt.Fprintln(w, t.Render())
	fmt.Fprintln(w, "  the best fit need not make the best table: go by the design loss")
}

// clipsCSV writes a line per recording.
func clipsCSV(w io.Writer, clips []bench.Clip) error {
	out := csv.NewWriter(w)
	out.Write([]string{
		"file", "sha256", "format", "rate_hz", "channels", "seconds", "level_dbov", "active_level_dbov", "activity", "peak_db",
		"crest_db", "dc", "noise_dbov", "zero_share", "effective_bits", "frames", "frames_in_range", "findings",
	})
	for _, c := range clips {
		var kinds strings.Builder
		for i, f := range c.Findings {
			if i > 0 {
				kinds.WriteString(" ")
			}
			kinds.WriteString(f.Kind)
		}
		out.Write([]string{
			c.File, c.SHA256, c.Format, strconv.Itoa(c.RateHz), strconv.Itoa(c.Channels), full(bench.Num(c.Seconds)),
			full(c.LevelDBov), full(c.ActiveDBov), full(c.Activity), full(c.PeakDB), full(c.CrestDB), full(c.DC),
			full(c.NoiseDBov), full(c.ZeroShare), strconv.Itoa(c.EffectiveBits),
			strconv.FormatInt(c.Frames, 10), strconv.FormatInt(c.FramesInRange, 10), kinds.String(),
		})
	}
	out.Flush()
	return out.Error()
}

// num prints a figure with so many decimals, or a dash where undefined.
func num(n bench.Num, decimals int) string {
	if !n.Defined() {
		return "-"
	}
	return strconv.FormatFloat(float64(n), 'f', decimals, 64)
}

// full prints a figure in full precision, nothing where undefined.
func full(n bench.Num) string {
	if !n.Defined() {
		return ""
	}
	return strconv.FormatFloat(float64(n), 'g', -1, 64)
}

func percent(n bench.Num) string {
	if !n.Defined() {
		return "-"
	}
	return strconv.FormatFloat(math.Round(float64(n)*1000)/10, 'f', 1, 64) + " %"
}

func plural(n int) string {
	if n == 1 {
		return ""
	}
	return "s"
}
