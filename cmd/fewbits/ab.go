package main

import (
	"encoding/json"
	"errors"
	"fmt"
	"os"
	"path/filepath"
	"strings"

	"github.com/spf13/cobra"

	"fewbits/cmd/fewbits/internal/bench"
	"fewbits/cmd/fewbits/internal/folder"
	"fewbits/cmd/fewbits/internal/listening"
)

// abCommand makes blind listening material from a run.
func abCommand() *cobra.Command {
	var designs, out string
	var seed uint64
	var replace bool
	c := &cobra.Command{
		Use:   "ab RESULTS_DIR --designs A,B --seed N --out DIR",
		Short: "make blind, level-matched listening pairs from a run",
		Long: `Makes one WAV per clip: one design, half a second of silence, the other. The
order is balanced over the clips and drawn from the seed, names are neutral, the
key is a file apart. Both sides are matched in level by the gain 1/b with b =
<x,y>/<x,x> over the frames in range, and never clipped.

Mind the playback level: start low, set it once on the first pair, keep it for
all, never raise it for a quiet passage, and follow your local rules.`,
		Example: "  fewbits ab fewbits-out --designs mu-law:6,lloyd-max:6,from=gamma --seed 7 --out listening",
		Args:    exactly(1),
	}
	c.Flags().StringVar(&designs, "designs", "", "two `SPECS` of the run, parted by a comma")
	c.Flags().Uint64Var(&seed, "seed", 1, "seed that the order is drawn from")
	c.Flags().StringVarP(&out, "out", "o", "fewbits-listening", "output folder")
	c.Flags().BoolVar(&replace, "replace", false, "replace what a former run wrote in the output folder")
	c.RunE = func(c *cobra.Command, args []string) error {
		r, err := readResults(args[0])
		if err != nil {
			return err
		}
		a, b, err := twoDesigns(r, designs)
		if err != nil {
			return err
		}
		return makePairs(c, args[0], r, a, b, seed, out, replace)
	}
	return c
}

// readResults loads a run's results.json.
func readResults(dir string) (*bench.Results, error) {
	path := filepath.Join(dir, "results.json")
	b, err := os.ReadFile(path)
	if err != nil {
		return nil, fmt.Errorf("%w; RESULTS_DIR is the output folder of fewbits compare", err)
	}
	var r bench.Results
	if err := json.Unmarshal(b, &r); err != nil {
		return nil, fmt.Errorf("%s: %w; make it anew with fewbits compare", path, err)
	}
	if r.Schema != bench.Schema {
		return nil, fmt.Errorf("%s: schema %q, this program reads %q: make it anew with fewbits compare", path, r.Schema, bench.Schema)
	}
	return &r, nil
}

// twoDesigns finds the two specs in the text; specs may hold commas, so every
// split is tried.
func twoDesigns(r *bench.Results, text string) (a, b bench.Design, err error) {
	known := map[string]bench.Design{}
	var names []string
	for _, d := range r.Designs {
		known[d.Spec], known[d.Name] = d, d
		names = append(names, d.Spec)
	}
	words := strings.Split(text, ",")
	for i := 1; i < len(words); i++ {
		a, okA := known[strings.Join(words[:i], ",")]
		b, okB := known[strings.Join(words[i:], ",")]
		if okA && okB && a.Spec != b.Spec {
			return a, b, nil
		}
	}
	return a, b, usagef("--designs %q: want two different designs of the run, parted by a comma; it has %s", text, strings.Join(names, " "))
}

// makePairs writes the material.
func makePairs(c *cobra.Command, dir string, r *bench.Results, a, b bench.Design, seed uint64, out string, replace bool) error {
	var pairs []listening.Pair
	for _, clip := range r.Clips {
		ba, bb := matchOf(r, clip.File, a.Spec), matchOf(r, clip.File, b.Spec)
		if !(ba > 0 && bb > 0) {
			fmt.Fprintf(c.ErrOrStderr(), "fewbits: %s is left out: no frame in range to match levels on\n", clip.File)
			continue
		}
		at := func(d bench.Design) string { return filepath.Join(dir, "audio", clip.Name, d.Name+".wav") }
		pairs = append(pairs, listening.Pair{Clip: clip.File, PathA: at(a), PathB: at(b), B1: ba, B2: bb})
	}
	if len(pairs) == 0 {
		return errors.New("no clip has frames in range to match levels on: nothing to listen to")
	}
	f, err := folder.Open(out, replace, []string{dir})
	if err != nil {
		return err
	}
	defer f.Abort()
	place, err := f.Path("key.csv")
	if err != nil {
		return err
	}
	rep, err := listening.Write(filepath.Dir(place), a.Spec, b.Spec, pairs, seed)
	if err != nil {
		return err
	}
	if err := f.Commit(); err != nil {
		return err
	}
	w := c.OutOrStdout()
	fmt.Fprintf(w, "%d pairs written to %s, with an answer sheet; keep the key file from the listeners\n", len(pairs), f.Out())
	if rep.AttenuationDB > 0 {
		fmt.Fprintf(w, "all files were taken down by %.2f dB so that none clips\n", rep.AttenuationDB)
	}
	fmt.Fprintf(w, "set the playback level once, on %s, starting low, and keep it for all pairs\n", rep.Reference)
	fmt.Fprintln(w, "answers go to a CSV a listener (pair,preferred), then: fewbits score KEY.csv ANSWERS.csv...")
	return nil
}

// matchOf is b of a clip and design; 0 where it is undefined.
func matchOf(r *bench.Results, clip, design string) float64 {
	for _, x := range r.Results {
		if b := x.Figures["match_b"]; x.Clip == clip && x.Design == design && b.Defined() {
			return float64(b)
		}
	}
	return 0
}
