package main

import (
	"bytes"
	"path/filepath"
	"regexp"
	"slices"
	"strings"
	"testing"

	"fewbits/cmd/fewbits/internal/bench"
	"fewbits/codec"
	"fewbits/codec/family"
	"fewbits/measure"
	"fewbits/samples/demo"
)

// program runs the command line within the test.
func program(t *testing.T, want int, args ...string) (stdout, stderr string) {
	t.Helper()
	var out, err bytes.Buffer
	if got := run(args, strings.NewReader(""), &out, &err); got != want {
		t.Fatalf("fewbits %q: status %d, want %d: %s", args, got, want, err.String())
	}
	return out.String(), err.String()
}

// clipIn writes the demo clips and gives the path of one.
func clipIn(t *testing.T, name string) string {
	t.Helper()
	dir := t.TempDir()
	if _, err := demo.WriteTo(dir); err != nil {
		t.Fatal(err)
	}
	return filepath.Join(dir, name)
}

// TestToyDesignAndMeasure: a design takes a file with a Family and a line in
// family.Register, a figure a file with a Measure and a line in
// measure.Register. Here the lines are added for the test; help, the run,
// results.json, the CSV and the definitions know both without more.
func TestToyDesignAndMeasure(t *testing.T) {
	families, measures := family.Register, measure.Register
	t.Cleanup(func() { family.Register, measure.Register = families, measures })
	family.Register = append(append([]family.Family{}, families...), family.Family{
		Name: "sign", About: "the sign alone, for this test", MinBits: 1, MaxBits: 1,
		Make: func(family.Spec, family.Material) (family.Made, error) {
			return family.Made{Stair: &codec.Staircase{
				Thresholds: []float64{0}, Values: []float64{-0.125, 0.125}, Lo: -0.25, Hi: 0.25,
			}}, nil
		},
	})
	measure.Register = append(append([]measure.Measure{}, measures...), measure.Measure{
		Name: "toy_energy", Unit: "FS^2", Means: "energy of the error, for this test",
		Of: func(t *measure.Tally) float64 { return t.Error },
	})
	if help, _ := program(t, 0, "design", "--help"); !strings.Contains(help, "the sign alone, for this test") {
		t.Error("design --help does not list the family")
	}
	out := filepath.Join(t.TempDir(), "out")
	csv, _ := program(t, 0, "compare", "--no-audio", "--design", "sign", "--format", "csv", "--out", out, clipIn(t, "stand-by.wav"))
	if head, _, _ := strings.Cut(csv, "\n"); !strings.Contains(head, "toy_energy") || !strings.Contains(csv, ",sign") {
		t.Errorf("the CSV lacks the figure or the design: %s", csv)
	}
	r, err := readResults(out)
	if err != nil {
		t.Fatal(err)
	}
	f := r.Results[0].Figures
	want := float64(f["mse"]) * float64(r.Clips[0].Samples)
	if got := float64(f["toy_energy"]); !(got > 0 && got > 0.999999*want && got < 1.000001*want) {
		t.Errorf("toy_energy %g, mse times samples %g", got, want)
	}
	if !slices.ContainsFunc(r.Definitions, func(d bench.Definition) bool { return d.Name == "toy_energy" }) {
		t.Error("the figure is not among the definitions")
	}
}

// TestHelpOfEveryCommand: each says what it does, with examples that name it,
// and every flag in an example is one that the command has.
func TestHelpOfEveryCommand(t *testing.T) {
	for _, c := range commands() {
		text, _ := program(t, 0, c.Name(), "--help")
		if !strings.Contains(text, "Examples:\n") || !strings.Contains(c.Example, "fewbits "+c.Name()) {
			t.Errorf("%s --help shows no example of it", c.Name())
		}
		for _, flag := range regexp.MustCompile(`--[a-z-]+`).FindAllString(c.Example, -1) {
			if c.Flags().Lookup(flag[2:]) == nil {
				t.Errorf("%s: the example's %s is no flag of it", c.Name(), flag)
			}
		}
	}
}
