package design

import (
	"math"
	"slices"
	"testing"
)

func TestSpreadGains(t *testing.T) {
	for _, c := range []struct {
		db   float64
		want []float64
	}{
		{0, nil}, {6, []float64{-6, 0, 6}}, {7, []float64{-7, 0, 7}},
		{12, []float64{-12, -6, 0, 6, 12}}, {14, []float64{-14, -7, 0, 7, 14}},
	} {
		if got := SpreadGains(c.db); !slices.Equal(got, c.want) {
			t.Errorf("%g dB: %v, want %v", c.db, got, c.want)
		}
	}
}

// TestTakesOnOneGrid: the same audio in words of another unit gives the same
// frames; a finer take is brought to the coarser one's grid.
func TestTakesOnOneGrid(t *testing.T) {
	words := []int16{4, -8, 12, 400, -300, 1000}
	loud := make([]int16, len(words))
	for i, w := range words {
		loud[i] = 4 * w
	}
	coarse, err := NewFrames(Take{Frames: [][]int16{words}, LSB: wordUnit})
	if err != nil {
		t.Fatal(err)
	}
	fine, err := NewFrames(Take{Frames: [][]int16{loud}, Unit: wordUnit / 4, LSB: wordUnit})
	if err != nil {
		t.Fatal(err)
	}
	both, err := NewFrames(Take{Frames: [][]int16{loud}, Unit: wordUnit / 4, LSB: wordUnit}, Take{Frames: [][]int16{words}, LSB: wordUnit})
	if err != nil {
		t.Fatal(err)
	}
	if !slices.Equal(coarse.Grid, fine.Grid) || !slices.Equal(coarse.Grid, both.Grid) {
		t.Errorf("grids %v, %v, %v", coarse.Grid, fine.Grid, both.Grid)
	}
	if coarse.Signal[0] != fine.Signal[0] || both.Signal[0] != both.Signal[1] || both.Signal[0] != fine.Signal[0] {
		t.Errorf("energies %v, %v, %v", coarse.Signal, fine.Signal, both.Signal)
	}
}

// TestGainsReachFullScale: a faint take's words are not cut by a gain that
// stays below full scale, a full one's are.
func TestGainsReachFullScale(t *testing.T) {
	words := []int16{-32768, 100, 32767, 5}
	for _, c := range []struct{ unit, peak float64 }{{wordUnit / 64, 4. / 64}, {wordUnit, 1}, {0, 1}} {
		f, err := NewFrames(Take{Frames: [][]int16{words}, Unit: c.unit, LSB: wordUnit, Gains: []float64{20 * math.Log10(4)}})
		if err != nil {
			t.Fatal(err)
		}
		if got := -f.Grid[0]; math.Abs(got-c.peak) > 1e-9 {
			t.Errorf("unit %g: peak %g, want %g", c.unit, got, c.peak)
		}
	}
}
