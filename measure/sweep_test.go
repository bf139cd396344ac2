package measure

import (
	"math"
	"math/rand/v2"
	"testing"
)

// TestSweepAgainstSamples: the walk along a histogram gives what scaling and
// coding every sample does; so does the table for the scaled design.
func TestSweepAgainstSamples(t *testing.T) {
	r := rand.New(rand.NewPCG(12, 12))
	words := everyKind(4000, r)
	var h Histogram
	h.AddWords(words)
	values, counts := h.Sparse()
	for _, tieOut := range []bool{true, false} {
		th, v := randomStairs(65, r)
		s := NewSearch(th, v, -0.5, 0.5, tieOut)
		for _, gain := range []float64{1, 0.001, 0.25, 2, 3.3} {
			x := toFloat(words)
			for i := range x {
				x[i] *= gain
			}
			var slow Tally
			want := s.Add(&slow, x)
			got := s.EnergiesAt(values, counts, gain)
			near(t, "error", got.Error, want.Error, 1e-11*want.Error)
			near(t, "signal", got.Signal, want.Signal, 1e-11*want.Signal)
			near(t, "cross", got.Cross, want.Cross, 1e-11*want.Output)
			near(t, "output", got.Output, want.Output, 1e-11*want.Output)
			l := s.LookupAt(gain)
			for i, w := range words {
				if int(l.Index[int(w)+32768]) != s.Index(x[i]) {
					t.Fatalf("gain %g: table and search differ at %d", gain, w)
				}
			}
			fast := TallyHistogram(&h, l)
			near(t, "error by table", fast.Error*gain*gain, want.Error, 1e-11*want.Error)
			near(t, "SNR", s.SNRAt(values, counts, 20*math.Log10(gain)), DB(slow.Signal/slow.Error), 1e-9)
			// At a gain of a power of two the scaled bounds are exact.
			if math.Trunc(math.Log2(gain)) == math.Log2(gain) && fast.Overloaded != slow.Overloaded {
				t.Errorf("gain %g: %d overloads by table, %d by samples", gain, fast.Overloaded, slow.Overloaded)
			}
		}
	}
}

// TestSixDBPerBit: uniform noise over the whole range of a uniform quantizer
// has SNR 20 log10 N: 6.0206 dB a bit (closed form).
func TestSixDBPerBit(t *testing.T) {
	var h Histogram
	for w := -32768; w < 32768; w++ {
		h.AddCount(int16(w), 1)
	}
	for bits := 1; bits <= 6; bits++ {
		n := math.Ldexp(1, bits)
		l := uniformLookup(1<<bits, 1)
		tally := TallyHistogram(&h, l)
		near(t, "SNR", snr.Of(&tally), 20*math.Log10(n), 0.01)
		near(t, "entropy", entropyBits.Of(&tally), float64(bits), 1e-12)
	}
}

func TestDynamicRange(t *testing.T) {
	nan, inf := math.NaN(), math.Inf(1)
	levels := []float64{-40, -30, -20, -10, 0, 10}
	for _, c := range []struct {
		name   string
		snr    []float64
		target float64
		lo, hi float64
		openLo bool
		openHi bool
	}{
		{"a hill", []float64{0, 10, 20, 30, 20, 10}, 15, -25, 5, false, false},
		{"up to the end", []float64{0, 10, 20, 30, 40, 50}, 30, -10, 10, false, true},
		{"everywhere", []float64{30, 30, 30, 30, 30, 31}, 30, -40, 10, true, true},
		{"nowhere", []float64{0, 1, 2, 3, 2, 1}, 30, nan, nan, false, false},
		{"without error in the middle", []float64{0, 10, inf, inf, 20, 10}, 15, -20, 5, false, false},
		{"undefined below", []float64{nan, nan, 20, 30, 20, 10}, 15, -20, 5, false, false},
		{"two hills: that of the best", []float64{20, 10, 40, 10, 20, 10}, 15, -20 - 10*25.0/30, -20 + 10*25.0/30, false, false},
	} {
		s := DynamicRange(levels, c.snr, c.target)
		if math.IsNaN(c.lo) {
			if !math.IsNaN(s.Width()) {
				t.Errorf("%s: %+v", c.name, s)
			}
			continue
		}
		near(t, c.name+": low end", s.Lo, c.lo, 1e-12)
		near(t, c.name+": high end", s.Hi, c.hi, 1e-12)
		if s.OpenLo != c.openLo || s.OpenHi != c.openHi {
			t.Errorf("%s: open %v %v", c.name, s.OpenLo, s.OpenHi)
		}
	}
}
