package bench

import (
	"context"
	"os"
	"os/exec"
	"path/filepath"
	"regexp"
	"strconv"
	"testing"
	"time"
)

const (
	peakOf   = "FEWBITS_TEST_PEAK_OF"   // recording that the child measures
	tenHours = "FEWBITS_TEST_TEN_HOURS" // set: test that length too
)

// TestMemoryDoesNotGrow compares an hour with ten minutes, each in a process of
// its own, and ten hours where FEWBITS_TEST_TEN_HOURS is set (580 MB in the
// temporary folder): the peak stays below 150 MB and within 10 %. When memory
// is collected is chance, so the least of a few runs counts.
func TestMemoryDoesNotGrow(t *testing.T) {
	if testing.Short() {
		t.Skip("writes long recordings")
	}
	lengths := []time.Duration{10 * time.Minute, time.Hour}
	if os.Getenv(tenHours) != "" {
		lengths = append(lengths, 10*time.Hour)
	}
	var first float64
	for _, length := range lengths {
		path := filepath.Join(t.TempDir(), "long.wav")
		longRecording(t, path, length)
		peak := peakMB(t, path)
		for range 3 {
			peak = min(peak, peakMB(t, path))
		}
		t.Logf("%v: peak %.1f MB", length, peak)
		if first == 0 {
			first = peak
		}
		if peak > 150 || peak > 1.1*first {
			t.Errorf("%v: peak %.1f MB, ten minutes %.1f MB", length, peak, first)
		}
	}
}

// peakMB runs a comparison in another process and returns its peak resident
// size.
func peakMB(t *testing.T, path string) float64 {
	t.Helper()
	child := exec.Command(os.Args[0], "-test.run=^TestPeakChild$", "-test.v")
	child.Env = append(os.Environ(), peakOf+"="+path)
	out, err := child.CombinedOutput()
	if err != nil {
		t.Fatalf("%v\n%s", err, out)
	}
	kb := regexp.MustCompile(`VmHWM:\s+(\d+) kB`).FindSubmatch(out)
	if kb == nil {
		t.Fatalf("no peak in %s", out)
	}
	n, err := strconv.ParseFloat(string(kb[1]), 64)
	if err != nil {
		t.Fatal(err)
	}
	return n / 1024
}

// TestPeakChild is the other process of TestMemoryDoesNotGrow.
func TestPeakChild(t *testing.T) {
	path := os.Getenv(peakOf)
	if path == "" {
		t.Skip("run by TestMemoryDoesNotGrow")
	}
	plan := planFor(t, t.TempDir(), []string{path}, twelve()...)
	plan.Audio = false
	if _, _, err := Run(context.Background(), plan); err != nil {
		t.Fatal(err)
	}
	status, err := os.ReadFile("/proc/self/status")
	if err != nil {
		t.Fatal(err)
	}
	t.Logf("%s", status)
}
