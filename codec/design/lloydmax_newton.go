package design

import "math"

// newtonRounds bounds the rounds of one start; Newton needs about ten.
const newtonRounds = 100

// work holds a table being solved, its conditions g = centroid - value, their
// tridiagonal Jacobian, and the error; twice, for a step on trial.
type work struct {
	domain
	now, next state
	c, r      []float64 // scratch of the elimination
	trace     []float64
	traced    bool
}

type state struct {
	y, g, lower, diag, upper []float64
	res, mse                 float64
}

func newState(n int) state {
	f := func() []float64 { return make([]float64, n) }
	return state{y: f(), g: f(), lower: f(), diag: f(), upper: f()}
}

func newWork(on domain, n int, traced bool) *work {
	return &work{domain: on, now: newState(n), next: newState(n), c: make([]float64, n), r: make([]float64, n), traced: traced}
}

// solve returns the values, the rounds and the residual reached.
func (w *work) solve(start []float64) (y []float64, rounds int, res float64) {
	if len(start) == 0 {
		return nil, 0, 0
	}
	copy(w.now.y, start)
	w.conditions(&w.now)
	best, stale := w.now.res, 0
	y = append(y, w.now.y...)
	for rounds < newtonRounds && best > 1e-13 && !(best < residualWanted && stale > 1) {
		if w.traced {
			w.trace = append(w.trace, w.now.mse)
		}
		w.step()
		rounds++
		if stale++; w.now.res < best/2 {
			stale = 0
		}
		if w.now.res < best {
			best = w.now.res
			copy(y, w.now.y)
		}
	}
	if w.traced {
		w.trace = append(w.trace, w.now.mse)
	}
	return y, rounds, best
}

// step moves by Newton's step if that lowers the error, else by steps ever
// nearer to Lloyd's, which always lowers it. Rounding is forgiven.
func (w *work) step() {
	for _, lloyd := range []float64{0, 0.1, 0.4, 0.8, 1} {
		w.newton(lloyd)
		if lloyd < 1 && !ascends(w.next.y, w.floor()) {
			continue
		}
		w.conditions(&w.next)
		if w.next.mse <= w.now.mse*(1+1e-12) || lloyd == 1 {
			break
		}
	}
	w.now, w.next = w.next, w.now
}

// floor is what values must lie above.
func (w *work) floor() float64 {
	if w.mirror {
		return 0
	}
	return w.lo
}

// ascends reports whether values are finite, in order and above floor.
func ascends(y []float64, floor float64) bool {
	for _, v := range y {
		if !(v > floor && v <= math.MaxFloat64) {
			return false
		}
		floor = v
	}
	return true
}

// cell gives the bounds of cell k for values y.
func (s *domain) cell(y []float64, k int) (a, b float64) {
	a, b = s.lo, s.hi
	switch {
	case k > 0:
		a = y[k-1] + (y[k]-y[k-1])/2
	case s.odd:
		a = y[0] / 2
	}
	if k+1 < len(y) {
		b = y[k] + (y[k+1]-y[k])/2
	}
	return a, b
}

// conditions fills in g, its Jacobian, the residual and the error.
func (w *work) conditions(s *state) {
	n := len(s.y)
	s.res, s.mse = 0, 0
	if w.odd {
		_, e := About(w.d, 0, s.y[0]/2, 0)
		s.mse += e
	}
	var before float64 // density at a
	if a, _ := w.cell(s.y, 0); w.odd {
		before = w.density(a)
	}
	for k, y := range s.y {
		a, b := w.cell(s.y, k)
		p, off, about := w.d.Cell(a, b)
		g := off - (y - anchor(a, b))
		s.g[k], s.lower[k], s.diag[k], s.upper[k] = g, 0, -1, 0
		s.mse += about + p*g*g
		width := b - a
		if math.IsInf(a, -1) {
			width = 2 * (b - y)
		} else if math.IsInf(b, 1) {
			width = 2 * (y - a)
		}
		s.res = math.Max(s.res, math.Abs(g)/width)
		// The centroid c moves with the thresholds, dc/db = p(b) (b-c)/P and
		// dc/da = p(a) (c-a)/P, and each midpoint with half of either value.
		c := anchor(a, b) + off
		if k > 0 || w.odd {
			da := before * (c - a) / p / 2
			if p > 0 {
				s.diag[k] += da
				s.lower[k] = da
			}
		}
		if before = 0; k+1 < n {
			before = w.density(b)
			if p > 0 {
				db := before * (b - c) / p / 2
				s.diag[k] += db
				s.upper[k] = db
			}
		}
	}
	if w.mirror {
		s.mse *= 2
	}
}

// density is p(x), 0 where it is infinite: there Newton has nothing to go by.
func (w *work) density(x float64) float64 {
	if p := w.d.PDF(x); p <= math.MaxFloat64 {
		return p
	}
	return 0
}

// newton sets next.y: it solves J step = -g for the Jacobian drawn towards
// Lloyd's, -1 on the diagonal, by the share lloyd (Thomas algorithm).
func (w *work) newton(lloyd float64) {
	s, c, r := &w.now, w.c, w.r
	n := len(s.y)
	keep := 1 - lloyd
	diag := func(k int) float64 { return keep*s.diag[k] - lloyd }
	c[0], r[0] = keep*s.upper[0]/diag(0), -s.g[0]/diag(0)
	for k := 1; k < n; k++ {
		m := diag(k) - keep*s.lower[k]*c[k-1]
		c[k] = keep * s.upper[k] / m
		r[k] = (-s.g[k] - keep*s.lower[k]*r[k-1]) / m
	}
	step := 0.0
	for k := n - 1; k >= 0; k-- {
		step = r[k] - c[k]*step
		w.next.y[k] = s.y[k] + step
	}
}
