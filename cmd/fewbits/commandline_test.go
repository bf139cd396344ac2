package main

import (
	"fmt"
	"os"
	"path/filepath"
	"strconv"
	"testing"

	"github.com/rogpeppe/go-internal/testscript"

	"fewbits/samples/demo"
)

// TestMain lets the scripts run the program itself.
func TestMain(m *testing.M) {
	testscript.Main(m, map[string]func(){
		"fewbits": func() { os.Exit(run(os.Args[1:], os.Stdin, os.Stdout, os.Stderr)) },
	})
}

// TestCommandLine runs the scripts under testdata/script: stdout, stderr, exit
// status and what is left on the disk.
func TestCommandLine(t *testing.T) {
	testscript.Run(t, testscript.Params{
		Dir: "testdata/script",
		Cmds: map[string]func(ts *testscript.TestScript, neg bool, args []string){
			"clips":    writeClips,
			"status":   wantStatus,
			"leftover": wantNoLeftovers,
		},
	})
}

// writeClips writes the demo clips into a folder: clips DIR.
func writeClips(ts *testscript.TestScript, _ bool, args []string) {
	dir := ts.MkAbs(args[0])
	ts.Check(os.MkdirAll(dir, 0o777))
	_, err := demo.WriteTo(dir)
	ts.Check(err)
}

// wantStatus runs the program and compares its exit status: status N ARG...
func wantStatus(ts *testscript.TestScript, _ bool, args []string) {
	want, err := strconv.Atoi(args[0])
	ts.Check(err)
	err = ts.Exec("fewbits", args[1:]...)
	got := 0
	if err != nil {
		if _, e := fmt.Sscanf(err.Error(), "exit status %d", &got); e != nil {
			ts.Fatalf("%v", err)
		}
	}
	if got != want {
		ts.Fatalf("exit status %d, want %d: %v", got, want, args[1:])
	}
}

// wantNoLeftovers fails if an unfinished output folder stayed behind.
func wantNoLeftovers(ts *testscript.TestScript, _ bool, args []string) {
	found, err := filepath.Glob(filepath.Join(ts.MkAbs("."), ".fewbits-unfinished-*"))
	ts.Check(err)
	if len(found) > 0 {
		ts.Fatalf("left behind: %v", found)
	}
}
