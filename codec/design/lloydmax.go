package design

import (
	"fmt"
	"math"
)

// residualWanted is where a design counts as converged: max |value - centroid|
// over the cell's width.
const residualWanted = 1e-10

// Option changes how LloydMax works.
type Option func(*lloydOptions)

type lloydOptions struct {
	trace bool
	start []float64
}

// WithTrace fills Solution.Trace with the mean squared error before each round
// of the start that won.
func WithTrace() Option { return func(o *lloydOptions) { o.trace = true } }

// WithStart starts from values (n, ascending) only, without symmetry.
func WithStart(values []float64) Option { return func(o *lloydOptions) { o.start = values } }

// LloydMax returns the n-level quantizer of least mean squared error for d: the
// values are the centroids of their cells, the thresholds the midpoints of the
// values (S. P. Lloyd 1957/1982; J. Max, IRE Trans. IT-6, 1960, eqs. 4-6).
// Solved by Newton's method on the values, the Jacobian being tridiagonal,
// mixed with Lloyd steps where it would not lower the error, from companding
// solutions. Mirror works on the half line and wants a density even about 0;
// Free takes any density and also tries tables off centre where the theorem
// for log-concave densities does not rule them out.
func LloydMax(d Density, n int, sym Symmetry, opts ...Option) (Solution, error) {
	var o lloydOptions
	for _, set := range opts {
		set(&o)
	}
	if n < 1 || n > 1<<16 {
		return Solution{}, fmt.Errorf("%d levels: want 1 to %d", n, 1<<16)
	}
	if o.start != nil && (len(o.start) != n || !ascends(o.start, math.Inf(-1))) {
		return Solution{}, fmt.Errorf("a start of %d values: want %d, finite and ascending", len(o.start), n)
	}
	isEven := even(d)
	if sym == Mirror && !isEven {
		return Solution{}, fmt.Errorf("a mirror table for a density that is not even about 0: use symmetry free")
	}
	switch {
	case o.start != nil:
		return best(d, n, o, []attempt{{whole(d), o.start}})
	case sym == Mirror || isEven && d.LogConcave():
		return best(d, n, o, mirrorStarts(d, n))
	case isEven:
		return lloydFree(d, n, o)
	}
	return best(d, n, o, wholeStarts(d, n))
}

// lloydFree tries the mirror tables and those off centre of an even density.
func lloydFree(d Density, n int, o lloydOptions) (Solution, error) {
	mirror, err := best(d, n, o, mirrorStarts(d, n))
	if err != nil {
		return mirror, err
	}
	free, err := best(d, n, o, splitStarts(d, n))
	starts := mirror.Starts + len(splitStarts(d, n))
	if err != nil || !(free.MSE < mirror.MSE*(1-1e-12)) {
		mirror.Starts = starts
		return mirror, nil
	}
	free.Starts = starts
	free.Notes = append(free.Notes, fmt.Sprintf("free of symmetry gains %.3f dB over the mirror table", Decibels(mirror.MSE, free.MSE)))
	return free, nil
}

// attempt is one start on one domain.
type attempt struct {
	on    domain
	start []float64
}

// best runs all attempts and keeps the least error.
func best(d Density, n int, o lloydOptions, tries []attempt) (Solution, error) {
	var out Solution
	worst := math.Inf(1)
	for _, try := range tries {
		w := newWork(try.on, len(try.start), o.trace)
		y, rounds, res := w.solve(try.start)
		worst = math.Min(worst, res)
		if !(res < residualWanted) {
			continue
		}
		s := Solution{Values: try.on.unfold(y), Rounds: rounds, Residual: res, Trace: w.trace}
		if o.trace {
			s.TraceOf = "mean squared error"
		}
		s.Thresholds = midpoints(s.Values)
		s.MSE, s.Entropy = EvaluateDensity(d, s.Thresholds, s.Values)
		if out.Values == nil || s.MSE < out.MSE*(1-1e-12) {
			out = s
		}
	}
	if out.Values == nil {
		return out, fmt.Errorf("lloyd-max of %d levels did not settle from %d starts: residual %.3g, want %g", n, len(tries), worst, residualWanted)
	}
	out.Proof, out.Starts = Local, len(tries)
	if d.LogConcave() {
		out.Proof, out.Starts = Unique, 0
	}
	return out, nil
}

func midpoints(y []float64) []float64 {
	t := make([]float64, max(0, len(y)-1))
	for k := range t {
		t[k] = y[k] + (y[k+1]-y[k])/2
	}
	return t
}
