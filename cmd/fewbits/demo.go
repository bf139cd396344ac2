package main

import (
	"path/filepath"

	"github.com/spf13/cobra"

	"fewbits/cmd/fewbits/internal/folder"
	"fewbits/samples/demo"
)

// demoCommand is the main job on the embedded clips.
func demoCommand() *cobra.Command {
	var f runFlags
	c := &cobra.Command{
		Use:   "demo",
		Short: "run the main job on embedded, invented harbour messages",
		Long: `Runs compare on a few short invented messages of a harbour's traffic intercom,
made by speech synthesis and embedded in the program. Needs no input and no
network. The clips are left in the output folder under recordings/.`,
		Example: "  fewbits demo\n  fewbits demo --bits 3..8 --out harbour",
		Args:    exactly(0),
	}
	f.register(c, "fewbits-demo")
	c.RunE = func(c *cobra.Command, _ []string) error { return runDemo(c, &f) }
	return c
}

// runDemo writes the clips beside the output and compares them.
func runDemo(c *cobra.Command, f *runFlags) error {
	plan, err := f.plan(nil)
	if err != nil {
		return err
	}
	out, err := folder.Open(f.out, f.replace, nil)
	if err != nil {
		return err
	}
	defer out.Abort()
	place, err := out.Path("recordings", "all")
	if err != nil {
		return err
	}
	dir := filepath.Dir(place)
	if plan.Inputs, err = demo.WriteTo(dir); err != nil {
		return err
	}
	plan.Shown = func(path string) string { return "recordings/" + filepath.Base(path) }
	return runInto(c, plan, f, out)
}
