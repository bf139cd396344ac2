package main

import (
	"encoding/json"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"github.com/spf13/cobra"

	"fewbits/samples/demo"
)

// readmeCommands are the lines of README.md's code blocks that run fewbits.
func readmeCommands(t *testing.T) (lines [][]string) {
	t.Helper()
	text, err := os.ReadFile("../../README.md")
	if err != nil {
		t.Fatal(err)
	}
	for line := range strings.Lines(string(text)) {
		line, _, _ = strings.Cut(line, "   #")
		line = strings.Replace(line, "go run ./cmd/fewbits", "fewbits", 1)
		if rest, ok := strings.CutPrefix(line, "    fewbits "); ok {
			lines = append(lines, shellWords(rest))
		}
	}
	return lines
}

// shellWords splits at blanks outside double quotes.
func shellWords(line string) (words []string) {
	for i, part := range strings.Split(line, `"`) {
		if i%2 == 1 {
			words = append(words, part)
			continue
		}
		words = append(words, strings.Fields(part)...)
	}
	return words
}

// TestReadmeCommands runs each command of the README, in order, in a folder
// that holds recordings under the names it uses.
func TestReadmeCommands(t *testing.T) {
	if underRace {
		t.Skip("minutes under the race detector; .ci/run runs it without")
	}
	lines := readmeCommands(t)
	if len(lines) < 5 {
		t.Fatalf("only %d commands found in README.md", len(lines))
	}
	t.Chdir(readmeFolder(t))
	for _, args := range lines {
		if args[0] == "score" {
			continue // needs answers of listeners; a script has some
		}
		if c := commandOf(args[0]); c != nil && c.Flags().Lookup("replace") != nil {
			args = append(args, "--replace")
		}
		program(t, 0, args...)
	}
	var r struct{ Schema string }
	if b, err := os.ReadFile("fewbits-out/results.json"); err != nil || json.Unmarshal(b, &r) != nil || r.Schema == "" {
		t.Errorf("fewbits-out/results.json after the README's commands: %v", err)
	}
}

// TestReadmeShowsRealRuns: each line that the README shows of a run is one that
// the command above it prints.
func TestReadmeShowsRealRuns(t *testing.T) {
	if underRace {
		t.Skip("minutes under the race detector; .ci/run runs it without")
	}
	text, err := os.ReadFile("../../README.md")
	if err != nil {
		t.Fatal(err)
	}
	_, part, _ := strings.Cut(string(text), "## What to decide from\n")
	part, _, _ = strings.Cut(part, "\n## ")
	t.Chdir(t.TempDir())
	printed, lines := map[string]bool{}, 0
	for line := range strings.SplitSeq(part, "\n") {
		line, shown := strings.CutPrefix(line, "    ")
		if args, ok := strings.CutPrefix(line, "fewbits "); ok && shown {
			out, _ := program(t, 0, shellWords(args)...)
			clear(printed)
			for l := range strings.SplitSeq(out, "\n") {
				printed[l] = true
			}
		} else if shown {
			if lines++; !printed[line] {
				t.Errorf("the README shows %q, which is not printed", line)
			}
		}
	}
	if lines < 25 {
		t.Errorf("only %d lines found", lines)
	}
}

func commandOf(name string) *cobra.Command {
	for _, c := range commands() {
		if c.Name() == name {
			return c
		}
	}
	return nil
}

// readmeFolder holds talk.wav, recordings/ and others/.
func readmeFolder(t *testing.T) string {
	t.Helper()
	dir := t.TempDir()
	clips := demo.Clips()
	for i, name := range []string{"talk.wav", "recordings/one.wav", "recordings/two.wav", "others/three.wav"} {
		path := filepath.Join(dir, filepath.FromSlash(name))
		if err := os.MkdirAll(filepath.Dir(path), 0o777); err != nil {
			t.Fatal(err)
		}
		if err := os.WriteFile(path, clips[i].Data, 0o666); err != nil {
			t.Fatal(err)
		}
	}
	return dir
}
