package design

import (
	"fmt"
	"math"
)

// Compander returns the n-level compander whose slope follows p^power: power
// 1/3 is least mean squared error at many levels (Panter, Dite, Proc. IRE 39,
// 1951), larger powers serve loud samples less. Even n: mid-rise; odd n of an
// even density: mid-tread. Values are the expansion of the compressed cells'
// middles, not centroids.
//
// segments > 0 replaces the law by that many chords with an equal share of the
// levels each, the form hardware uses: on either side of 0 for an even
// density, else over the whole support. An endless side then ends at an
// overload point, for an even density that of least error. 0 keeps the law. A
// note gives the high-rate prediction.
func Compander(d Density, n int, power float64, segments int) (Solution, error) {
	if n < 2 || n > 1<<16 {
		return Solution{}, fmt.Errorf("%d levels: want 2 to %d", n, 1<<16)
	}
	if !(power > 0 && power <= 1) {
		return Solution{}, fmt.Errorf("power %g: want above 0, at most 1", power)
	}
	mirror := even(d)
	if most := chordsAtMost(n, mirror); segments < 0 || segments > most {
		return Solution{}, fmt.Errorf("%d segments for %d levels: want 0 (smooth) to %d", segments, n, most)
	}
	l := newLaw(d, mirror, toThe(power))
	s := Solution{Proof: Closed}
	s.Values, s.Thresholds = smooth(l, n, mirror)
	if segments > 0 {
		s.Values, s.Thresholds = chorded(l, n, segments, mirror, s)
	}
	s.MSE, s.Entropy = EvaluateDensity(d, s.Thresholds, s.Values)
	if v := CompanderPrediction(d, n, power); v <= math.MaxFloat64 && segments == 0 {
		s.Notes = append(s.Notes, fmt.Sprintf("the high-rate prediction is %.3f dB from this error", 10*math.Log10(v/s.MSE)))
	}
	return s, nil
}

func chordsAtMost(n int, mirror bool) int {
	if mirror {
		return n / 2
	}
	return n
}

// toThe is p^power.
func toThe(power float64) func(float64) float64 {
	switch power {
	case 1. / 3:
		return math.Cbrt
	case 0.5:
		return math.Sqrt
	}
	return func(p float64) float64 { return math.Pow(p, power) }
}

// smooth cuts the law into n equal parts: values at their middles.
func smooth(l *law, n int, mirror bool) (values, thresholds []float64) {
	if !mirror {
		return at(l, n, 1), at(l, n, 2)
	}
	if n%2 == 1 {
		values = append(values, 0)
	}
	values = append(values, upper(l, n, 1, true)...)
	return unfold(values, upper(l, n, 2, true), n%2 == 1)
}

// at returns x at (first, first+2, ...)/(2n) of the law.
func at(l *law, n, first int) (out []float64) {
	for k := first; k < 2*n; k += 2 {
		out = append(out, l.invert(float64(k)/float64(2*n), true))
	}
	return out
}

// upper returns what of at lies above 0, l being the half of an even law.
func upper(l *law, n, first int, polish bool) (out []float64) {
	for k := first; k < 2*n; k += 2 {
		if k > n {
			out = append(out, l.invert(float64(k-n)/float64(n), polish))
		}
	}
	return out
}
