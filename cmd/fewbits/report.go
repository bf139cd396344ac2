package main

import (
	"encoding/json"
	"fmt"
	"io"
	"os"
	"path/filepath"

	"github.com/spf13/cobra"

	"fewbits/cmd/fewbits/internal/bench"
	"fewbits/cmd/fewbits/internal/report"
	"fewbits/samples"
)

// reportCommand renders a run again without measuring.
func reportCommand() *cobra.Command {
	c := &cobra.Command{
		Use:   "report RESULTS_DIR",
		Short: "render a run's page and pictures again without measuring",
		Long: `Reads results.json and traces.json of a run and writes report.html beside them
anew, and with --pictures each picture as a file under pictures/.`,
		Example: "  fewbits report fewbits-out\n  fewbits report fewbits-out --pictures png",
		Args:    exactly(1),
	}
	pictures := choose(c, "pictures", "also write each picture as a file", "none", "svg", "png")
	c.RunE = func(c *cobra.Command, args []string) error { return renderAgain(c, args[0], pictures.value) }
	return c
}

func renderAgain(c *cobra.Command, dir, pictures string) error {
	r, err := readResults(dir)
	if err != nil {
		return err
	}
	t, err := readTraces(dir)
	if err != nil {
		return err
	}
	_, err = os.Stat(filepath.Join(dir, "audio"))
	page := filepath.Join(dir, "report.html")
	if err := samples.WriteFile(page, func(w io.Writer) error {
		return report.HTML(w, r, t, report.Options{Audio: err == nil})
	}); err != nil {
		return err
	}
	fmt.Fprintf(c.OutOrStdout(), "written: %s\n", page)
	if pictures == "none" {
		return nil
	}
	place := filepath.Join(dir, "pictures")
	if err := os.MkdirAll(place, 0o777); err != nil {
		return err
	}
	fmt.Fprintf(c.OutOrStdout(), "written: pictures under %s\n", place)
	return report.Pictures(place, r, t, pictures)
}

// readTraces loads a run's traces.json.
func readTraces(dir string) (*bench.Traces, error) {
	path := filepath.Join(dir, "traces.json")
	b, err := os.ReadFile(path)
	if err != nil {
		return nil, fmt.Errorf("%w; make it anew with fewbits compare", err)
	}
	var t bench.Traces
	if err := json.Unmarshal(b, &t); err != nil {
		return nil, fmt.Errorf("%s: %w; make it anew with fewbits compare", path, err)
	}
	return &t, nil
}
