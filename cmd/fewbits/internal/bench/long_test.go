package bench

import (
	"fmt"
	"path/filepath"
	"testing"
	"time"

	"fewbits/samples"
	"fewbits/samples/demo"
)

// twelve are the designs of the speed and memory figures.
func twelve() (specs []string) {
	for _, bits := range []int{4, 6} {
		for _, family := range []string{"uniform:%d", "uniform:%d,overload=optimal", "mu-law:%d", "a-law:%d", "lloyd-max:%d,from=laplacian", "lloyd-max:%d,from=gamma"} {
			specs = append(specs, fmt.Sprintf(family, bits))
		}
	}
	return specs
}

// longRecording makes a recording of any length, 8 kHz, 16 bits, of the demo
// clips, over and over.
func longRecording(t testing.TB, path string, length time.Duration) {
	t.Helper()
	clips, err := demo.WriteTo(t.TempDir())
	if err != nil {
		t.Fatal(err)
	}
	var words []int16
	for _, clip := range clips {
		rec, err := samples.Open(clip)
		if err != nil {
			t.Fatal(err)
		}
		part := make([]int16, rec.Info().Frames)
		if err := rec.ReadWords([][]int16{part}, 0); err != nil {
			t.Fatal(err)
		}
		words = append(words, part...)
		rec.Close()
	}
	total := int64(length.Seconds() * 8000)
	w, err := samples.Create(path, 8000, 1, total, samples.Depth16)
	if err != nil {
		t.Fatal(err)
	}
	for at := int64(0); at < total; at += int64(len(words)) {
		if err := w.WriteWordsAt([][]int16{words[:min(int64(len(words)), total-at)]}, at); err != nil {
			t.Fatal(err)
		}
	}
	if err := w.Commit(); err != nil {
		t.Fatal(err)
	}
}

// hour makes a folder of n recordings that last an hour together.
func hour(t testing.TB, n int) string {
	dir := t.TempDir()
	for i := range n {
		longRecording(t, filepath.Join(dir, fmt.Sprintf("%02d.wav", i)), time.Hour/time.Duration(n))
	}
	return dir
}
