package design

import (
	"math"
	"testing"

	"fewbits/codec"
	"pgregory.net/rapid"
)

func TestCompanderDataIsAStaircase(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		h := anyHistogram(t)
		n := rapid.IntRange(2, 300).Draw(t, "n")
		power := rapid.SampledFrom([]float64{1. / 3, 0.5, 0.7, 1}).Draw(t, "power")
		segments := rapid.IntRange(0, n/2).Draw(t, "segments")
		if len(h.Values) == 1 && h.Values[0] == 0 {
			t.Skip("silence")
		}
		s, err := CompanderData(h, n, power, segments)
		if err != nil {
			t.Fatal(err)
		}
		c := codec.Staircase{Thresholds: s.Thresholds, Values: s.Values}
		c.MirrorBounds()
		if err := c.Check(); err != nil {
			t.Fatal(err)
		}
		if !c.IsMirror(0) || len(c.Values) != n {
			t.Fatalf("%d values, mirror %v", len(c.Values), c.IsMirror(0))
		}
		best, err := ExactData(h, n, Mirror)
		if err != nil || s.MSE < best.MSE*(1-1e-12) {
			t.Fatalf("mse %g, the optimum %g (%v)", s.MSE, best.MSE, err)
		}
	})
}

// On a uniform density every power gives the uniform quantizer: closed form.
func TestCompanderDataOfUniformIsUniform(t *testing.T) {
	var h Histogram
	for w := -32000; w <= 32000; w += 2 {
		h.push(float64(w+1)/32768, 1)
	}
	s, err := CompanderData(h, 16, 1./3, 0)
	if err != nil {
		t.Fatal(err)
	}
	for k, y := range s.Values {
		if want := (float64(2*k+1)/16 - 1) * 32001 / 32768; math.Abs(y-want) > 1e-3 {
			t.Errorf("value %d = %g, want %g", k, y, want)
		}
	}
}

// Panter and Dite (1951): a cube-root compander on a Laplacian has the error
// of the optimum, 9/(2 n^2) of the variance, at many levels.
func TestCompanderDataReachesPanterDite(t *testing.T) {
	h, n := laplacianCounts(2000), 64
	power, _ := EvaluateData(h, nil, []float64{0})
	s, err := CompanderData(h, n, 1./3, 0)
	if err != nil {
		t.Fatal(err)
	}
	want := 4.5 / float64(n*n)
	if got := s.MSE / power; got > want*1.08 {
		t.Errorf("mse %g of the variance, Panter-Dite %g", got, want)
	}
	chords, err := CompanderData(h, n, 1./3, 8)
	if err != nil {
		t.Fatal(err)
	}
	loss := 10 * math.Log10(chords.MSE/s.MSE)
	t.Logf("8 chords a side cost %.2f dB", loss)
	if !(loss > -0.3 && loss < 0.8) {
		t.Errorf("8 chords a side cost %.2f dB", loss)
	}
}

// laplacianCounts is a Laplacian with the given mean magnitude in words.
func laplacianCounts(scale float64) Histogram {
	var h Histogram
	for w := -32768; w < 32768; w++ {
		if c := math.Floor(1e7 * math.Exp(-math.Abs(float64(w))/scale)); c > 0 {
			h.push(float64(w)/32768, c)
		}
	}
	return h
}
