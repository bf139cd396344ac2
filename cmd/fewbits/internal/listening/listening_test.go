package listening

import (
	"encoding/csv"
	"math"
	"os"
	"path/filepath"
	"testing"

	"fewbits/samples"
)

// tone writes a stereo sine of an amplitude and returns its path.
func tone(t *testing.T, dir, name string, amplitude float64) string {
	t.Helper()
	const rate, frames = 8000, 4000
	path := filepath.Join(dir, name)
	w, err := samples.Create(path, rate, 2, frames, samples.Depth16)
	if err != nil {
		t.Fatal(err)
	}
	planes := [][]float64{make([]float64, frames), make([]float64, frames)}
	for i := range frames {
		planes[0][i] = amplitude * math.Sin(2*math.Pi*441*float64(i)/rate)
		planes[1][i] = -planes[0][i]
	}
	if _, err := w.WriteAt(planes, 0); err != nil {
		t.Fatal(err)
	}
	if err := w.Commit(); err != nil {
		t.Fatal(err)
	}
	return path
}

func TestOrderIsBalancedAndSeeded(t *testing.T) {
	for n := range 20 {
		for seed := range uint64(20) {
			got, again, swapped := order(n, seed), order(n, seed), 0
			for i := range got {
				if got[i] != again[i] {
					t.Fatal("one seed gives two orders")
				}
				if got[i] {
					swapped++
				}
			}
			if d := 2*swapped - n; d < -1 || d > 1 {
				t.Fatalf("%d of %d pairs are swapped", swapped, n)
			}
		}
	}
}

// TestPairsAreMatched measures the written files again: both sides at 1/b, all
// down together where one would clip.
func TestPairsAreMatched(t *testing.T) {
	dir := t.TempDir()
	pairs := []Pair{
		{Clip: "one", PathA: tone(t, dir, "a1.wav", 0.2), PathB: tone(t, dir, "b1.wav", 0.1), B1: 1, B2: 0.5},
		{Clip: "two", PathA: tone(t, dir, "a2.wav", 0.9), PathB: tone(t, dir, "b2.wav", 0.9), B1: 0.8, B2: 1},
	}
	out := t.TempDir()
	rep, err := Write(out, "A", "B", pairs, 3)
	if err != nil {
		t.Fatal(err)
	}
	want := 20 * math.Log10(0.9/0.8)
	if math.Abs(rep.AttenuationDB-want) > 0.01 {
		t.Errorf("attenuation %.4f dB, want %.4f", rep.AttenuationDB, want)
	}
	f, err := os.Open(filepath.Join(out, "key.csv"))
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	key, err := csv.NewReader(f).ReadAll()
	if err != nil || len(key) != 3 {
		t.Fatalf("key of %d lines, %v", len(key), err)
	}
	scale := math.Pow(10, -rep.AttenuationDB/20)
	r, err := samples.Open(filepath.Join(out, "pair-01.wav"))
	if err != nil {
		t.Fatal(err)
	}
	defer r.Close()
	if n := r.Info().Frames; n != 4000+4000+4000 {
		t.Fatalf("%d frames: want both sides and half a second", n)
	}
	for _, start := range []int64{0, 8000} {
		p := [][]float64{make([]float64, 4000), make([]float64, 4000)}
		if err := r.Read(p, start); err != nil {
			t.Fatal(err)
		}
		peak := 0.0
		for _, x := range p[0] {
			peak = math.Max(peak, math.Abs(x))
		}
		if math.Abs(peak-0.2*scale) > 2e-4 {
			t.Errorf("side at %d peaks at %.5f, want %.5f", start, peak, 0.2*scale)
		}
	}
	if p, _ := peakOf(filepath.Join(out, "pair-02.wav")); p > 1-1e-7 {
		t.Errorf("peak %g: clipped", p)
	}
}
