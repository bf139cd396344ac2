package main

import "github.com/spf13/cobra"

// commands lists every command; each has a file of its own.
func commands() []*cobra.Command {
	return []*cobra.Command{
		demoCommand(),
		compareCommand(),
		designCommand(),
		inspectCommand(),
		bitsCommand(),
		sweepCommand(),
		exportCommand(),
		reportCommand(),
		abCommand(),
		scoreCommand(),
	}
}
