package report

import (
	"bytes"
	"encoding/csv"
	"encoding/json"
	"flag"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"unicode/utf8"

	"github.com/google/go-cmp/cmp"

	"fewbits/cmd/fewbits/internal/bench"
)

var update = flag.Bool("update", false, "rewrite the golden files")

// golden compares got with a file of testdata.
func golden(t *testing.T, name string, got []byte) {
	t.Helper()
	path := filepath.Join("testdata", name)
	if *update {
		if err := os.WriteFile(path, got, 0o666); err != nil {
			t.Fatal(err)
		}
	}
	want, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	if diff := cmp.Diff(string(want), string(got)); diff != "" {
		t.Errorf("%s (run with -update to accept):\n%s", name, diff)
	}
}

func TestTerminalGolden(t *testing.T) {
	r, _ := synthetic(5, 20)
	for _, c := range []struct {
		file  string
		width int
		color bool
	}{{"terminal_wide.txt", 0, false}, {"terminal_80.txt", 80, false}, {"terminal_50.txt", 50, false}, {"terminal_color.txt", 100, true}} {
		var out bytes.Buffer
		if err := Terminal(&out, r, c.width, c.color); err != nil {
			t.Fatal(err)
		}
		golden(t, c.file, out.Bytes())
	}
}

// TestTerminalWidth: no line is wider than the terminal as long as the columns
// that never go fit.
func TestTerminalWidth(t *testing.T) {
	r, _ := synthetic(5, 20)
	for width := 48; width < 140; width++ {
		var out bytes.Buffer
		if err := Terminal(&out, r, width, false); err != nil {
			t.Fatal(err)
		}
		for line := range strings.SplitSeq(out.String(), "\n") {
			if n := utf8.RuneCountInString(line); n > width {
				t.Fatalf("width %d: line of %d columns: %q", width, n, line)
			}
		}
	}
}

// TestTerminalHostileNames: a name cannot drive the terminal.
func TestTerminalHostileNames(t *testing.T) {
	r, _ := synthetic(2, 5)
	r.Clips[1].File = "evil\x1b[2J\r\n.wav"
	r.Refused[0].File = "worse\x07\x1b]0;x.wav"
	var out bytes.Buffer
	if err := Terminal(&out, r, 80, false); err != nil {
		t.Fatal(err)
	}
	if i := strings.IndexAny(out.String(), "\x1b\x07\r"); i >= 0 {
		t.Errorf("control character at byte %d", i)
	}
}

func TestTerminalNothing(t *testing.T) {
	var out bytes.Buffer
	if err := Terminal(&out, &bench.Results{}, 80, true); err != nil {
		t.Fatal(err)
	}
}

func TestSummaryGolden(t *testing.T) {
	r, _ := synthetic(2, 5)
	r.Results[0].Lossless, r.Results[0].Figures[snr] = true, bench.Num(nan)
	var out bytes.Buffer
	if err := Summary(&out, r); err != nil {
		t.Fatal(err)
	}
	golden(t, "summary.csv", out.Bytes())
	lines, err := csv.NewReader(&out).ReadAll()
	if err != nil || len(lines) != 1+len(r.Results) {
		t.Errorf("%d lines, %v", len(lines), err)
	}
}

// TestJSONRoundTrip: what is written reads back as the same results, and
// writing it again gives the same bytes.
func TestJSONRoundTrip(t *testing.T) {
	r, _ := synthetic(3, 5)
	var first, second bytes.Buffer
	if err := JSON(&first, r); err != nil {
		t.Fatal(err)
	}
	var back bench.Results
	if err := json.Unmarshal(first.Bytes(), &back); err != nil {
		t.Fatal(err)
	}
	if err := JSON(&second, &back); err != nil {
		t.Fatal(err)
	}
	if diff := cmp.Diff(first.String(), second.String()); diff != "" {
		t.Error(diff)
	}
	if v := back.Pooled[3].Figures[openSNR]; v != r.Pooled[3].Figures[openSNR] {
		t.Errorf("figure came back as %v", v)
	}
	if !strings.Contains(first.String(), "\n  \"schema\": \"fewbits/results/1\"") {
		t.Error("not indented")
	}
}
