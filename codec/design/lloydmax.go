package design

import (
	"fmt"
	"math"
	"slices"
)

// residualWanted is where a design counts as converged: max |value - centroid|
// over the cell's width.
const residualWanted = 1e-10

// newtonRounds bounds the rounds of one start; Newton needs about ten.
const newtonRounds = 200

// LloydMax returns the n-level quantizer of least mean squared error for d: the
// values are the centroids of their cells, the thresholds the midpoints of the
// values (S. P. Lloyd 1957/1982; J. Max, IRE Trans. IT-6, 1960, eqs. 4-6).
// Solved by Newton's method on the values, the Jacobian being tridiagonal,
// with Lloyd steps where Newton would disorder them. Mirror works on the half
// line and asks for a density even about 0; Free also tries tables whose
// middle lies off 0.
func LloydMax(d Density, n int, sym Symmetry) (Solution, error) {
	if n < 1 || n > 1<<16 {
		return Solution{}, fmt.Errorf("%d levels: want 1 to %d", n, 1<<16)
	}
	if sym == Mirror || d.LogConcave() {
		return lloydMirror(d, n)
	}
	return lloydFree(d, n)
}

// lloydMirror solves on the positive half line.
func lloydMirror(d Density, n int) (Solution, error) {
	half := &side{d: d, odd: n%2 == 1, n: n / 2}
	sol := Solution{Proof: Local, Starts: 1}
	if d.LogConcave() {
		sol.Proof, sol.Starts = Unique, 0
	}
	y, rounds, res := half.solve(half.start(n))
	if !(res < residualWanted) {
		return sol, fmt.Errorf("lloyd-max of %d levels did not settle: residual %.3g", n, res)
	}
	sol.Rounds, sol.Residual = rounds, res
	for k := range y {
		sol.Values = append(sol.Values, -y[len(y)-1-k])
	}
	if half.odd {
		sol.Values = append(sol.Values, 0)
	}
	sol.Values = append(sol.Values, y...)
	finish(d, &sol)
	return sol, nil
}

// lloydFree solves on the whole line from several starts: the mirror table and
// tables with 1 to 9 more levels above 0 than below.
func lloydFree(d Density, n int) (Solution, error) {
	mirror, err := lloydMirror(d, n)
	if err != nil {
		return mirror, err
	}
	best := mirror
	starts := 1
	for shift := range min(n, 5) {
		for _, straddle := range []bool{true, false} {
			start := splitStart(mirror.Values, shift, straddle)
			line := &side{d: d, whole: true, n: n}
			y, rounds, res := line.solve(start)
			starts++
			if !(res < residualWanted) {
				continue
			}
			sol := Solution{Values: y, Rounds: rounds, Residual: res, Proof: Local}
			finish(d, &sol)
			if sol.MSE < best.MSE*(1-1e-12) {
				best = sol
			}
		}
	}
	best.Proof, best.Starts = Local, starts
	if gain := 10 * math.Log10(mirror.MSE/best.MSE); gain > 1e-6 {
		best.Notes = append(best.Notes, fmt.Sprintf("free of symmetry gains %.3f dB over the mirror table", gain))
	}
	return best, nil
}

// splitStart moves a mirror table off centre: by shift levels and, with
// straddle, so that a level comes near 0.
func splitStart(y []float64, shift int, straddle bool) []float64 {
	out := slices.Clone(y)
	n := len(y)
	scale := 1 - 0.5*float64(shift)/float64(n)
	inner := math.Abs(y[n/2])
	for k := range out {
		out[k] = y[k]*scale + float64(shift)*inner
		if straddle {
			out[k] -= 0.9 * inner
		}
	}
	return out
}

// finish sets thresholds, MSE and entropy from the values.
func finish(d Density, s *Solution) {
	s.Thresholds = midpoints(s.Values)
	s.MSE, s.Entropy = EvaluateDensity(d, s.Thresholds, s.Values)
}

func midpoints(y []float64) []float64 {
	t := make([]float64, max(0, len(y)-1))
	for k := range t {
		t[k] = y[k] + (y[k+1]-y[k])/2
	}
	return t
}

// EvaluateDensity returns the mean squared error and the entropy in bits of a
// staircase under d.
func EvaluateDensity(d Density, thresholds, values []float64) (mse, entropy float64) {
	lo, hi := d.Support()
	for k, y := range values {
		a, b := lo, hi
		if k > 0 {
			a = max(a, thresholds[k-1])
		}
		if k < len(thresholds) {
			b = min(b, thresholds[k])
		}
		if !(a < b) {
			continue
		}
		p, off, about := d.Cell(a, b)
		if p > 0 {
			e := off - (y - anchor(a, b))
			mse += about + p*e*e
			entropy -= p * math.Log2(p)
		}
	}
	return mse, math.Abs(entropy)
}

// side is a half line (mirror tables) or the whole line being solved.
type side struct {
	d     Density
	whole bool
	odd   bool // half line only: a level is fixed at 0
	n     int
}

// cell gives the bounds of cell k for values y.
func (s *side) cell(y []float64, k int) (a, b float64) {
	lo, hi := s.d.Support()
	switch {
	case k > 0:
		a = y[k-1] + (y[k]-y[k-1])/2
	case s.whole:
		a = lo
	case s.odd:
		a = y[0] / 2
	}
	b = hi
	if k+1 < len(y) {
		b = y[k] + (y[k+1]-y[k])/2
	}
	return a, b
}

// start places values by the companding solution of Panter and Dite (Proc. IRE
// 39, 1951): density of levels after p^(1/3), found on a grid of quantiles of
// the stretched density.
func (s *side) start(n int) []float64 {
	y := compandedHalf(s.d, n)
	return y
}

// compandedHalf spreads n levels over the whole line after p^(1/3) and returns
// those above 0.
func compandedHalf(d Density, n int) []float64 {
	const grid = 4096
	_, hi := d.Support()
	if math.IsInf(hi, 1) {
		hi = d.Quantile(1 - 1e-4/(float64(n)*float64(n)*float64(n)))
	}
	edges := make([]float64, grid+1)
	mass := make([]float64, grid+1)
	for i := 1; i <= grid; i++ {
		u := float64(i) / grid
		edges[i] = hi * u * u * u
		mid := (edges[i] + edges[i-1]) / 2
		mass[i] = mass[i-1] + math.Cbrt(d.PDF(mid))*(edges[i]-edges[i-1])
	}
	var y []float64
	for k := range n {
		want := (2*float64(k) + 1 - float64(n)) / float64(n) * mass[grid]
		if want <= 1e-12*mass[grid] {
			continue
		}
		i, _ := slices.BinarySearch(mass, want)
		i = min(max(i, 1), grid)
		w := (want - mass[i-1]) / (mass[i] - mass[i-1])
		y = append(y, edges[i-1]+w*(edges[i]-edges[i-1]))
	}
	return y
}


// solve runs Newton with Lloyd steps as a safeguard. It returns the values,
// the rounds and the residual reached.
func (s *side) solve(y []float64) ([]float64, int, float64) {
	n := len(y)
	w := &work{g: make([]float64, n), lower: make([]float64, n), diag: make([]float64, n), upper: make([]float64, n), p: make([]float64, n)}
	if n == 0 {
		return y, 0, 0
	}
	best, bestRes := slices.Clone(y), math.Inf(1)
	stale := 0
	for round := 1; round <= newtonRounds; round++ {
		res := s.conditions(y, w)
		if res < bestRes {
			if res < bestRes/2 {
				stale = 0
			}
			copy(best, y)
			bestRes = res
		} else {
			stale++
		}
		if res < 1e-14 || bestRes < residualWanted && stale > 3 {
			return best, round, bestRes
		}
		next := w.newton(y)
		if !ascends(next, s.whole) {
			for k := range y {
				next[k] = y[k] + w.g[k]
			}
		}
		y = next
	}
	return best, newtonRounds, bestRes
}

// ascends reports whether values are in order (and above 0 on the half line).
func ascends(y []float64, whole bool) bool {
	for k := range y {
		if !(math.Abs(y[k]) <= math.MaxFloat64) || k == 0 && !whole && !(y[0] > 0) || k > 0 && !(y[k] > y[k-1]) {
			return false
		}
	}
	return true
}

// work holds one round's conditions g = centroid - value and their Jacobian.
type work struct{ g, lower, diag, upper, p []float64 }

// conditions fills in g and the Jacobian of g; returns the residual.
func (s *side) conditions(y []float64, w *work) float64 {
	worst := 0.0
	for k := range y {
		a, b := s.cell(y, k)
		p, off, _ := s.d.Cell(a, b)
		at := anchor(a, b)
		w.g[k] = off - (y[k] - at)
		w.lower[k], w.upper[k], w.diag[k] = 0, 0, -1
		c := at + off
		if p > 0 {
			// dc/db = p(b)(b-c)/P, dc/da = p(a)(c-a)/P; each midpoint moves by
			// half of either neighbour.
			if k+1 < len(y) {
				db := s.d.PDF(b) * (b - c) / p / 2
				w.diag[k] += db
				w.upper[k] = db
			}
			switch {
			case k > 0:
				da := s.d.PDF(a) * (c - a) / p / 2
				w.diag[k] += da
				w.lower[k] = da
			case s.odd && !s.whole:
				w.diag[k] += s.d.PDF(a) * (c - a) / p / 2
			}
		}
		width := b - a
		if math.IsInf(a, -1) {
			width = 2 * (b - y[k])
		} else if math.IsInf(b, 1) {
			width = 2 * (y[k] - a)
		}
		worst = math.Max(worst, math.Abs(w.g[k])/width)
	}
	return worst
}

// newton solves the tridiagonal system J step = -g (Thomas algorithm).
func (w *work) newton(y []float64) []float64 {
	n := len(y)
	c, d := make([]float64, n), make([]float64, n)
	c[0], d[0] = w.upper[0]/w.diag[0], -w.g[0]/w.diag[0]
	for k := 1; k < n; k++ {
		m := w.diag[k] - w.lower[k]*c[k-1]
		c[k] = w.upper[k] / m
		d[k] = (-w.g[k] - w.lower[k]*d[k-1]) / m
	}
	next := make([]float64, n)
	for k := n - 1; k >= 0; k-- {
		step := d[k]
		if k+1 < n {
			step -= c[k] * (next[k+1] - y[k+1])
		}
		next[k] = y[k] + step
	}
	return next
}
