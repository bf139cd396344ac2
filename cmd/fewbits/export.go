package main

import (
	"bytes"
	"fmt"
	"io"
	"math"
	"os"
	"path/filepath"
	"strings"

	"github.com/spf13/cobra"

	"fewbits/cmd/fewbits/internal/bench"
	"fewbits/codec/firmware"
	"fewbits/measure/model"
	"fewbits/samples"
)

// exportCommand hands a table over to firmware.
func exportCommand() *cobra.Command {
	var level float64
	var like []string
	var out, name string
	c := &cobra.Command{
		Use:   "export SPEC",
		Short: "write a design as an integer table for 16-bit input",
		Long: `Writes one design as integer tables for 16-bit input: a C99 header with encode
and decode, CSV or JSON. Values are rounded to Q15; what that costs is printed.
Fitted designs are made on the recordings of --like, or for a model at --level.`,
		Example: `  fewbits export mu-law:6 --as c --out mulaw6.h
  fewbits export lloyd-max:6,from=data --like recordings/ --as c --out table.h
  fewbits export g711-a --as csv`,
		Args: exactly(1),
	}
	as := choose(c, "as", "form of the table", "c", "csv", "json")
	index := choose(c, "index", "index assignment: usual is a standard's own codes where there are any, else natural",
		"usual", "natural", "folded", "gray")
	c.Flags().StringArrayVar(&like, "like", nil, "make fitted designs on these recordings; repeatable")
	c.Flags().Float64Var(&level, "level", -20, "level of the model in `dBov` where there are no recordings")
	c.Flags().StringVarP(&out, "out", "o", "-", "file to write, - for standard output; never overwritten")
	c.Flags().StringVar(&name, "name", "", "name in the C code; the design's own when empty")
	c.RunE = func(c *cobra.Command, args []string) error {
		plan, err := designPlan(args, "8", like, level)
		if err != nil {
			return err
		}
		if plan.Specs[0].Text != args[0] {
			return usagef("design %q: an exported design names its bits, such as %s", args[0], plan.Specs[0].Text)
		}
		got, refused, err := bench.MakeStaircases(c.Context(), plan, model.Names()[0], math.Pow(10, level/20))
		if err != nil {
			return err
		}
		assignment := firmware.Assignment(strings.TrimPrefix(index.value, "usual"))
		if err := exportOne(c, got[0], assignment, as.value, out, name); err != nil {
			return err
		}
		return refusals(c, &bench.Results{Refused: refused})
	}
	return c
}

// exportOne writes the table and prints what rounding costs.
func exportOne(c *cobra.Command, s bench.Staircase, index firmware.Assignment, as, out, name string) error {
	t, err := firmware.Export(s.Stair, firmware.Options{Assignment: index, Weights: s.Words})
	if err != nil {
		return fmt.Errorf("design %q: %w", s.Spec, err)
	}
	if name == "" {
		name = s.Name
	}
	provenance := fmt.Sprintf("%s, made on: %s, by fewbits %s", s.Spec, s.MadeOn, version())
	var b bytes.Buffer
	switch as {
	case "c":
		err = t.C(&b, name, provenance)
	case "csv":
		err = t.CSV(&b)
	default:
		err = t.JSON(&b, name, provenance)
	}
	if err != nil {
		return err
	}
	fmt.Fprintf(c.ErrOrStderr(), "fewbits: %s\n", t.Loss.Sentence())
	if out == "-" {
		_, err = c.OutOrStdout().Write(b.Bytes())
		return err
	}
	if _, err := os.Lstat(out); err == nil {
		return fmt.Errorf("%q is there already: choose another with --out", out)
	}
	if err := os.MkdirAll(filepath.Dir(out), 0o777); err != nil {
		return err
	}
	return samples.WriteFile(out, func(w io.Writer) error { _, err := w.Write(b.Bytes()); return err })
}
