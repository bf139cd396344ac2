package design

import (
	"math"
	"testing"
)

// flat is the uniform density on [0, 1]; twoSided the Laplacian of mean
// magnitude 1. Closed forms, for tests.
type (
	flat     struct{}
	twoSided struct{}
)

func (flat) Cell(a, b float64) (prob, offset, about float64) {
	d := b - a
	return d, d / 2, d * d * d / 12
}
func (flat) PDF(float64) float64        { return 1 }
func (flat) Quantile(p float64) float64 { return p }
func (flat) Support() (lo, hi float64)  { return 0, 1 }
func (flat) LogConcave() bool           { return true }

func (l twoSided) Cell(a, b float64) (prob, offset, about float64) {
	switch {
	case b <= 0:
		prob, offset, about = l.Cell(-b, -a)
		return prob, -offset, about
	case a < 0:
		p1, o1, v1 := l.Cell(0, -a)
		p2, o2, v2 := l.Cell(0, b)
		prob = p1 + p2
		offset = (p2*o2 - p1*o1) / prob
		return prob, offset, v1 + v2 + p1*(o1+offset)*(o1+offset) + p2*(o2-offset)*(o2-offset)
	}
	d := b - a
	q := -math.Expm1(-d)
	prob = math.Exp(-a) / 2 * q
	if math.IsInf(d, 1) {
		return prob, 1, prob
	}
	r := d * math.Exp(-d) / q
	return prob, 1 - r, prob * (1 - r*d - r*r)
}
func (twoSided) PDF(x float64) float64 { return math.Exp(-math.Abs(x)) / 2 }
func (twoSided) Quantile(p float64) float64 {
	if p < 0.5 {
		return math.Log(2 * p)
	}
	return -math.Log(2 * (1 - p))
}
func (twoSided) Support() (lo, hi float64) { return math.Inf(-1), math.Inf(1) }
func (twoSided) LogConcave() bool          { return true }

// For exponential tails all steps but the middle one are equal. Source: G. J.
// Sullivan, IEEE Trans. Inform. Theory IT-42 (1996), section on uniform
// thresholds with a dead zone (from memory).
func TestEntropyDensityLaplacianHasEqualSteps(t *testing.T) {
	for _, rate := range []float64{0.5, 1, 2, 3} {
		s, err := EntropyDensity(twoSided{}, EntropyOptions{Rate: rate})
		if err != nil {
			t.Fatal(err)
		}
		n := len(s.Thresholds)
		t.Logf("rate %.10f: %d levels, mse %.8f, residual %.1e, %d rounds", s.Entropy, len(s.Values), s.MSE, s.Residual, s.Rounds)
		if !(s.Entropy <= rate && s.Entropy > rate-1e-8) || s.Residual > 1e-10 {
			t.Errorf("rate %g: entropy %.12f, residual %g", rate, s.Entropy, s.Residual)
		}
		first := (n + 1) / 2
		step := s.Thresholds[first+1] - s.Thresholds[first]
		for k := first + 1; k+1 < n && s.Thresholds[k+1] < 12; k++ { // further out the cut tail shows
			if d := s.Thresholds[k+1] - s.Thresholds[k]; math.Abs(d/step-1) > 1e-4 {
				t.Errorf("rate %g: step %d is %g, the first %g", rate, k, d, step)
			}
		}
	}
}

// The high-rate gap to the Shannon lower bound (Gish, Pierce 1968).
func TestEntropyDensityLosesTheHighRateGap(t *testing.T) {
	s, err := EntropyDensity(twoSided{}, EntropyOptions{Rate: 6})
	if err != nil {
		t.Fatal(err)
	}
	bound := math.Exp2(2*(math.Log2(2*math.E)-s.Entropy)) / (2 * math.Pi * math.E)
	gap := 10 * math.Log10(s.MSE/bound)
	t.Logf("%d levels, %.5f dB above the bound", len(s.Values), gap)
	if math.Abs(gap-1.5329) > 0.002 || math.Abs(gap*math.Log2(10)/20-0.2546) > 0.0004 {
		t.Errorf("gap %.5f dB, want 1.5329", gap)
	}
}

// A uniform density at log2 N bits has N equal cells (closed form).
func TestEntropyDensityUniform(t *testing.T) {
	for _, n := range []int{2, 5, 16} {
		s, err := EntropyDensity(flat{}, EntropyOptions{Rate: math.Log2(float64(n)) + 1e-9, Symmetry: Free})
		if err != nil {
			t.Fatal(err)
		}
		if want := 1 / (12 * float64(n*n)); len(s.Values) != n || math.Abs(s.MSE/want-1) > 1e-6 {
			t.Errorf("n = %d: %d levels, mse %g, want %g", n, len(s.Values), s.MSE, want)
		}
	}
}

// From data made of the density the table is nearly the same.
func TestEntropyDensityAgreesWithData(t *testing.T) {
	s, err := EntropyDensity(twoSided{}, EntropyOptions{Lambda: 0.05})
	if err != nil {
		t.Fatal(err)
	}
	var h Histogram
	for w := -20000; w <= 20000; w++ {
		h.push(float64(w)/1000, math.Exp(-math.Abs(float64(w))/1000))
	}
	data, err := EntropyData(h, EntropyOptions{Lambda: 0.05})
	if err != nil {
		t.Fatal(err)
	}
	a, b := s.MSE+0.05*s.Entropy, data.MSE+0.05*data.Entropy
	if math.Abs(a/b-1) > 1e-4 {
		t.Errorf("cost %g from the density, %g from data", a, b)
	}
}
