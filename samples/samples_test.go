package samples

import (
	"math"
	"path/filepath"
	"testing"

	"github.com/google/go-cmp/cmp"
)

// TestWriteRead: what is written at each depth comes back on that depth's grid.
func TestWriteRead(t *testing.T) {
	for _, c := range []struct {
		depth  Depth
		grid   float64
		format string
		words  bool
	}{{Depth16, 1 << 15, "WAV, PCM 16-bit", true}, {Depth24, 1 << 23, "WAV, PCM 24-bit", false}, {Depth32F, 0, "WAV, float 32", false}} {
		path := filepath.Join(t.TempDir(), "a.wav")
		planes := [][]float64{{0, 0.1, -0.1, 0.99}, {-1, 0.5, -0.5, 1e-6}, {0.25, -0.25, 0.75, 0.3}}
		w, err := Create(path, 8000, 3, 4, c.depth)
		if err != nil {
			t.Fatal(err)
		}
		if _, err := w.WriteAt(planes, 0); err != nil {
			t.Fatal(err)
		}
		if err := w.Commit(); err != nil {
			t.Fatal(err)
		}
		r, err := Open(path)
		if err != nil {
			t.Fatal(err)
		}
		defer r.Close()
		if i := r.Info(); i.Format() != c.format || i.Rate != 8000 || i.Channels != 3 || i.Frames != 4 || len(i.Warnings) > 0 || r.Words() != c.words {
			t.Errorf("%s: %+v", c.depth, i)
		}
		got := [][]float64{make([]float64, 4), make([]float64, 4), make([]float64, 4)}
		if err := r.Read(got, 0); err != nil {
			t.Fatal(err)
		}
		for k := range planes {
			for i, x := range planes[k] {
				want := math.Round(x*c.grid) / c.grid
				if c.grid == 0 {
					want = float64(float32(x))
				}
				planes[k][i] = want
			}
		}
		if d := cmp.Diff(planes, got); d != "" {
			t.Errorf("%s: %s", c.depth, d)
		}
	}
}
