package main

import (
	"encoding/json"
	"errors"
	"io"
	"os/exec"
	"slices"
	"strings"
	"testing"
)

// house says what each package may import from this module. A package that is
// not listed may import nothing from it.
var house = map[string][]string{
	"samples":         {"samples/wave", "samples/flac"},
	"samples/flac":    {"samples/wave"},
	"samples/prepare": {"samples", "samples/wave"},
	"samples/demo":    {"samples"},
	"measure/model":   {"measure"},
	"measure/fault":   {"measure"},
	"codec/design":    {"codec"},
	"codec/family":    {"codec", "codec/design"},
	"codec/firmware":  {"codec"},
	"cmd/fewbits/internal/bench": {
		"samples", "samples/prepare", "measure", "measure/model", "measure/fault", "codec", "codec/design", "codec/family",
	},
	"cmd/fewbits/internal/report":    {"cmd/fewbits/internal/bench", "cmd/fewbits/internal/report/drawing", "samples"},
	"cmd/fewbits/internal/listening": {"cmd/fewbits/internal/bench", "samples"},
}

// TestHouse keeps the data flow one-way: samples, measure and codec never
// import one another, and only cmd imports across.
func TestHouse(t *testing.T) {
	out, err := exec.Command("go", "list", "-json=ImportPath,Imports", "fewbits/...").Output()
	if err != nil {
		t.Fatalf("go list: %v", err)
	}
	seen := 0
	for d := json.NewDecoder(strings.NewReader(string(out))); ; seen++ {
		var p struct {
			ImportPath string
			Imports    []string
		}
		if err := d.Decode(&p); errors.Is(err, io.EOF) {
			break
		} else if err != nil {
			t.Fatal(err)
		}
		for _, breach := range breaches(p.ImportPath, p.Imports) {
			t.Error(breach)
		}
	}
	if seen < len(house) {
		t.Errorf("only %d packages listed", seen)
	}
}

// breaches lists the imports that a package may not have.
func breaches(pkg string, imports []string) (out []string) {
	pkg = strings.TrimPrefix(pkg, "fewbits/")
	for _, i := range imports {
		i, ours := strings.CutPrefix(i, "fewbits/")
		if ours && pkg != "cmd/fewbits" && !slices.Contains(house[pkg], i) {
			out = append(out, pkg+" imports "+i)
		}
		outside := strings.HasPrefix(pkg, "codec") || strings.HasPrefix(pkg, "measure")
		if outside && slices.Contains([]string{"os", "flag", "log"}, i) {
			out = append(out, pkg+" imports "+i+": kernels know no files and no flags")
		}
	}
	return out
}

// TestHouseSeesABreach: the check itself can fail.
func TestHouseSeesABreach(t *testing.T) {
	if got := breaches("fewbits/measure", []string{"math", "fewbits/codec"}); len(got) != 1 {
		t.Errorf("measure importing codec is not seen: %v", got)
	}
	if got := breaches("fewbits/codec/design", []string{"os", "fewbits/codec"}); len(got) != 1 {
		t.Errorf("codec/design importing os is not seen: %v", got)
	}
}
