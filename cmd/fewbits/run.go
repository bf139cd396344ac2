package main

import (
	"context"
	"errors"
	"fmt"
	"io"
	"os"
	"os/signal"
	"runtime/debug"
	"slices"
	"strings"
	"syscall"

	"github.com/spf13/cobra"
	"github.com/spf13/pflag"

	"fewbits/cmd/fewbits/internal/bench"
)

// Exit statuses, as documented in the README.
const (
	statusDone    = 0
	statusFailed  = 1
	statusUsage   = 2
	statusRefused = 3 // done, but some recordings were refused
)

// usageError is a mistake in the command line.
type usageError struct{ error }

func (u usageError) Unwrap() error { return u.error }

func usagef(format string, a ...any) error { return usageError{fmt.Errorf(format, a...)} }

// errRefused ends a run that finished without some of its recordings; they
// have been named already.
var errRefused = errors.New("some recordings were refused")

// run is the whole program but for the process around it.
func run(args []string, stdin io.Reader, stdout, stderr io.Writer) int {
	ctx, stop := signal.NotifyContext(context.Background(), os.Interrupt, syscall.SIGTERM)
	defer stop()
	root := rootCommand()
	root.SetArgs(args)
	root.SetIn(stdin)
	root.SetOut(stdout)
	root.SetErr(stderr)
	bench.Version = version()
	return status(root.ExecuteContext(context.WithValue(ctx, typed{}, args)), stderr)
}

// typed is the context key of the command line.
type typed struct{}

// commandLine is what was typed, program name first.
func commandLine(c *cobra.Command) []string {
	args, _ := c.Context().Value(typed{}).([]string)
	return append([]string{"fewbits"}, args...)
}

// status prints what went wrong and turns it into an exit status.
func status(err error, stderr io.Writer) int {
	if err == nil {
		return statusDone
	}
	if errors.Is(err, errRefused) {
		return statusRefused
	}
	if errors.Is(err, context.Canceled) {
		err = errors.New("interrupted: nothing was written")
	}
	fmt.Fprintf(stderr, "fewbits: %v\n", err)
	var usage usageError
	if errors.As(err, &usage) {
		return statusUsage
	}
	return statusFailed
}

// rootCommand assembles the commands: one file each.
func rootCommand() *cobra.Command {
	root := &cobra.Command{
		Use:   "fewbits",
		Short: "settle how speech samples are quantized, measured on your own recordings",
		Long: `fewbits codes speech recordings with every quantizer you consider (uniform,
mu-law, A-law, G.711, Lloyd-Max and more), gives back the audio, and measures
what each choice costs: segmental SNR with its uncertainty, SNR, overload,
entropy.

Exit status: 0 done, 1 failed, 2 usage, 3 done but some recordings refused.`,
		Example: "  fewbits demo\n  fewbits compare --out first-look recordings/",
		Version: version(),
		Args: func(c *cobra.Command, args []string) error {
			if len(args) == 0 {
				return nil
			}
			return usagef("no command %q; see fewbits --help", args[0])
		},
		RunE:          func(c *cobra.Command, _ []string) error { return c.Help() },
		SilenceErrors: true,
		SilenceUsage:  true,
	}
	root.SetVersionTemplate("fewbits {{.Version}}\n")
	root.SetFlagErrorFunc(func(c *cobra.Command, err error) error {
		return usagef("%w; see %s --help", err, c.CommandPath())
	})
	root.AddCommand(commands()...)
	return root
}

// version is the module's own, or the revision it was built from.
func version() string {
	info, ok := debug.ReadBuildInfo()
	if !ok {
		return "unknown"
	}
	if v := info.Main.Version; v != "" && v != "(devel)" {
		return v
	}
	for _, s := range info.Settings {
		if s.Key == "vcs.revision" {
			return "devel-" + s.Value[:min(12, len(s.Value))]
		}
	}
	return "devel"
}

// exactly and atLeast are argument rules whose failure is a usage error.
func exactly(n int) cobra.PositionalArgs { return usage(cobra.ExactArgs(n)) }

func atLeast(n int) cobra.PositionalArgs { return usage(cobra.MinimumNArgs(n)) }

func usage(rule cobra.PositionalArgs) cobra.PositionalArgs {
	return func(c *cobra.Command, args []string) error {
		if err := rule(c, args); err != nil {
			return usagef("%w; see %s --help", err, c.CommandPath())
		}
		return nil
	}
}

// choice is a flag that takes one of a few words.
type choice struct {
	value string
	words []string
}

func (c *choice) String() string { return c.value }
func (c *choice) Type() string   { return strings.Join(c.words, "|") }

func (c *choice) Set(v string) error {
	if slices.Contains(c.words, v) {
		c.value = v
		return nil
	}
	return fmt.Errorf("want one of %s", strings.Join(c.words, ", "))
}

// choose adds a choice flag; its first word is the default. The shell
// completes the words.
func choose(c *cobra.Command, name, help string, words ...string) *choice {
	v := &choice{value: words[0], words: words}
	c.Flags().Var(v, name, help)
	c.RegisterFlagCompletionFunc(name, cobra.FixedCompletions(words, cobra.ShellCompDirectiveNoFileComp))
	return v
}

var _ pflag.Value = (*choice)(nil)
