package main

import (
	"errors"
	"io"
	"os"
	"path/filepath"
	"sync"

	"github.com/spf13/cobra"
	"golang.org/x/term"

	"fewbits/cmd/fewbits/internal/bench"
	"fewbits/cmd/fewbits/internal/folder"
	"fewbits/cmd/fewbits/internal/report"
)

// writeOutputs fills the output folder with everything but the audio, which
// is there already.
func writeOutputs(out *folder.Folder, r *bench.Results, t *bench.Traces, pictures string, audio bool) error {
	files := []struct {
		name  string
		write func(io.Writer) error
	}{
		{"report.html", func(w io.Writer) error { return report.HTML(w, r, t, report.Options{Audio: audio}) }},
		{"results.json", func(w io.Writer) error { return report.JSON(w, r) }},
		{"traces.json", func(w io.Writer) error { return report.TracesJSON(w, t) }},
		{"summary.csv", func(w io.Writer) error { return report.Summary(w, r) }},
	}
	errs := make([]error, len(files))
	var group sync.WaitGroup
	for i, f := range files {
		group.Go(func() { errs[i] = writeFile(out, f.name, f.write) })
	}
	group.Wait()
	if err := errors.Join(errs...); err != nil {
		return err
	}
	if pictures == "none" {
		return nil
	}
	place, err := out.Path("pictures", "all")
	if err != nil {
		return err
	}
	return report.Pictures(filepath.Dir(place), r, t, pictures)
}

func writeFile(out *folder.Folder, name string, write func(io.Writer) error) error {
	path, err := out.Path(name)
	if err != nil {
		return err
	}
	f, err := os.Create(path)
	if err != nil {
		return err
	}
	defer f.Close()
	if err := write(f); err != nil {
		return err
	}
	return f.Close()
}

// printResults prints the pooled table in the form asked for.
func printResults(c *cobra.Command, r *bench.Results, format string) error {
	w := c.OutOrStdout()
	switch format {
	case "json":
		return report.JSON(w, r)
	case "csv":
		return report.Summary(w, r)
	}
	width, color := terminal(w)
	return report.Terminal(w, r, width, color)
}

// terminal tells the width and whether colour helps; 0 and no off a terminal.
func terminal(w io.Writer) (width int, color bool) {
	f, ok := w.(*os.File)
	if !ok || !term.IsTerminal(int(f.Fd())) {
		return 0, false
	}
	width, _, _ = term.GetSize(int(f.Fd()))
	return width, os.Getenv("NO_COLOR") == ""
}
