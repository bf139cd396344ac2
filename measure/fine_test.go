package measure_test

import (
	"math"
	"math/rand/v2"
	"slices"
	"testing"

	"fewbits/measure"
)

// TestFineKeepsMoments: counts, mean and mean square of all samples are those
// of the bins, whatever the way the samples were split; 24-bit samples with a
// peak below 2^-6 are the bins themselves, louder ones and floats are not.
func TestFineKeepsMoments(t *testing.T) {
	r := rand.New(rand.NewPCG(3, 4))
	for _, c := range []struct {
		name  string
		grid  float64 // 0: none
		peak  float64
		exact bool
	}{
		{"24 bits, faint", 1 << 23, 1. / 64, true},
		{"24 bits, loud", 1 << 23, 1, false},
		{"16 bits", 1 << 15, 1, true},
		{"float", 0, 1, false},
		{"float beyond full scale", 0, 3.7, false},
		{"silence", 1 << 23, 0, true},
	} {
		x := make([]float64, 50000)
		for i := range x {
			x[i] = c.peak * math.Pow(r.Float64(), 3) * float64(2*r.IntN(2)-1)
			if c.grid > 0 {
				x[i] = math.Round(x[i]*c.grid) / c.grid
			}
		}
		x[0], x[1] = c.peak, -c.peak
		whole, left, right := measure.NewFine(c.peak), measure.NewFine(c.peak), measure.NewFine(c.peak)
		whole.Add(x)
		left.Add(x[:123])
		right.Add(x[123:])
		right.Merge(left)
		y, n, within := whole.Bins()
		y2, n2, within2 := right.Bins()
		if !slices.Equal(y, y2) || !slices.Equal(n, n2) || !slices.Equal(within, within2) || !slices.IsSorted(y) {
			t.Errorf("%s: split and merged differs from whole, or bins do not ascend", c.name)
		}
		if whole.Exact() != c.exact || right.Exact() != c.exact {
			t.Errorf("%s: exact %v and %v, want %v", c.name, whole.Exact(), right.Exact(), c.exact)
		}
		var mean, sq, wantMean, wantSq float64
		for i := range y {
			mean += n[i] * y[i]
			sq += n[i] * (y[i]*y[i] + within[i])
		}
		for _, v := range x {
			wantMean += v
			wantSq += v * v
		}
		w := whole.Width()
		if math.Abs(mean-wantMean) > float64(len(x))*w*1e-5 || math.Abs(sq-wantSq) > float64(len(x))*w*1e-5 {
			t.Errorf("%s: sums %g and %g, want %g and %g", c.name, mean, sq, wantMean, wantSq)
		}
	}
}
