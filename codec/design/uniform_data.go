package design

import (
	"fmt"
	"math"
)

// exactUniform is the largest number of levels whose search always ends.
const exactUniform = 256

// UniformData returns the n-level uniform staircase over [-v, v] whose
// overload point v makes the mean squared error on h least: mid-rise for even
// n, mid-tread (0 a level) for odd n. Solution.Aim is v.
//
// Up to 256 levels v is the exact optimum over all v > 0: between the points
// where some |x| meets a threshold the error is a parabola in v, so the least
// one in an interval is found by walking from parabola to parabola; and most
// intervals are ruled out by a bound: the root mean squared error is, in v,
// Lipschitz with the root mean square of c, the nearest level over v, and c
// is at most |x|/v + 1/n. Above 256 levels the search may stop after a fixed
// amount of work before that is through; the proof is then Local, and Notes
// say how much better (dB) any other overload point could be at most.
func UniformData(h Histogram, n int) (Solution, error) {
	if err := h.check(); err != nil {
		return Solution{}, err
	}
	if n < 2 || n > 1<<16 {
		return Solution{}, fmt.Errorf("%d levels: want 2 to 65536", n)
	}
	half := h.Fold()
	if half.Values[len(half.Values)-1] == 0 {
		return Solution{}, fmt.Errorf("all values are 0: no overload point serves best")
	}
	u := newOverload(half, n)
	rounds, gap := u.search()
	s := Solution{Proof: Exact, Rounds: rounds, Aim: u.best}
	if gap > 0 {
		s.Proof, s.Starts = Local, 1
		s.Notes = append(s.Notes, fmt.Sprintf("no overload point is more than %.2g dB better", gap))
	}
	values, thresholds := u.table(u.best)
	s.Values, s.Thresholds = unfold(values, thresholds, n%2 == 1)
	s.MSE, s.Entropy = EvaluateData(h, s.Thresholds, s.Values)
	return s, nil
}

// table returns values (0 included for odd n) and thresholds above 0.
func (u *overload) table(v float64) (values, thresholds []float64) {
	for _, c := range u.level {
		values = append(values, c*v)
	}
	for _, c := range u.edge {
		thresholds = append(thresholds, c*v)
	}
	return values, thresholds
}

// newOverload prepares the folded histogram for n levels.
func newOverload(half Histogram, n int) *overload {
	u := &overload{x: half.Values, w: half.Weights, n: n, least: math.Inf(1)}
	for k := 1 - n%2; k < n; k += 2 {
		u.level = append(u.level, float64(k)/float64(n))
		if k+1 < n {
			u.edge = append(u.edge, float64(k+1)/float64(n))
		}
	}
	bins := len(u.x)
	u.mass, u.sum, u.square = make([]float64, bins+1), make([]float64, bins+1), make([]float64, bins+1)
	for i, x := range u.x {
		u.mass[i+1] = u.mass[i] + u.w[i]
		u.sum[i+1] = u.sum[i] + u.w[i]*x
		u.square[i+1] = u.square[i] + u.w[i]*x*x
	}
	return u
}
