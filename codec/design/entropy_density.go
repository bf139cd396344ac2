package design

import (
	"fmt"
	"math"
	"slices"
)

// EntropyDensity is EntropyData for a density: first on its probabilities in
// 32,768 bins, then with the thresholds set free, by Newton on the conditions
// (t - y_k)^2 + lambda bits_k = (t - y_(k+1))^2 + lambda bits_(k+1), y the
// centroids and bits the lengths of the indices, until no threshold is off by
// 1e-10 of a cell (Solution.Residual); a rate is met to 1e-9 bit. Mirror takes
// d as symmetric about 0. Endless tails get cells until what lies beyond is
// 1e-12 likely. Aim is lambda; Proof: Local, with the number of starts.
func EntropyDensity(d Density, opt EntropyOptions) (Solution, error) {
	if err := opt.check(); err != nil {
		return Solution{}, err
	}
	h, err := binned(d, opt.Symmetry)
	if err != nil {
		return Solution{}, err
	}
	s := codedStart(h, opt)
	c := codedDensity{d: d, half: opt.Symmetry == Mirror, lambda: s.Aim}
	c.pinned = c.half && len(s.Values)%2 == 1
	t := s.Thresholds
	if c.half {
		t = t[len(t)-(len(s.Values)-1)/2:]
	}
	best := c.solution(slices.Clone(t))
	if opt.Rate > 0 {
		best = c.atRate(best, t, opt.Rate)
	}
	best.Starts, best.Rounds = s.Starts, best.Rounds+s.Rounds
	return best, nil
}

// codedStart designs on the bins, for a rate within 0.1 bit of it if it can.
func codedStart(h Histogram, opt EntropyOptions) Solution {
	solve := codedSolver(h, opt, false)
	if opt.Rate == 0 {
		return solve(opt.Lambda)
	}
	power, _ := EvaluateData(h, nil, []float64{centroid(h, 0, len(h.Values))})
	lambda := 2 * math.Ln2 * power * math.Exp2(-2*opt.Rate)
	s := solve(lambda)
	for round := 0; round < 6 && math.Abs(s.Entropy-opt.Rate) > 0.1; round++ {
		lambda *= math.Pow(4, s.Entropy-opt.Rate)
		s = solve(lambda)
	}
	return s
}

// binned gives probabilities and centroids of 32,768 bins; for mirror designs
// of the upper half line and its mirror image.
func binned(d Density, sym Symmetry) (Histogram, error) {
	const bins, tail = 1 << 15, 1e-12
	lo, hi := d.Support()
	from, to := lo, hi
	if math.IsInf(lo, -1) {
		from = d.Quantile(tail)
	}
	if math.IsInf(hi, 1) {
		to = d.Quantile(1 - tail)
	}
	n := bins
	if sym == Mirror {
		from, n = 0, bins/2
	}
	if !(from < to && to-from <= math.MaxFloat64) {
		return Histogram{}, fmt.Errorf("density from %g to %g: want a finite stretch", from, to)
	}
	var h Histogram
	for i := range n {
		a := from + (to-from)*float64(i)/float64(n)
		b := from + (to-from)*float64(i+1)/float64(n)
		if i == 0 && sym == Free {
			a = lo
		}
		if i == n-1 {
			b = hi
		}
		if p, off, _ := d.Cell(a, b); p > 0 {
			if x := anchor(a, b) + off; len(h.Values) == 0 || x > h.Values[len(h.Values)-1] {
				h.push(x, p)
			}
		}
	}
	if sym == Mirror {
		for i := range slices.Clone(h.Values) {
			h.push(-h.Values[i], h.Weights[i])
		}
		m := len(h.Values) / 2
		slices.Reverse(h.Values[m:])
		slices.Reverse(h.Weights[m:])
		h.Values = slices.Concat(h.Values[m:], h.Values[:m])
		h.Weights = slices.Concat(h.Weights[m:], h.Weights[:m])
	}
	return h, h.check()
}

// codedDensity holds the conditions for thresholds t: all, or those above 0.
type codedDensity struct {
	d            Density
	half, pinned bool
	lambda       float64
}

// codedCells are the cells between thresholds: ends, probability, value, bits.
type codedCells struct{ a, b, p, y, bits []float64 }

func (c *codedDensity) cells(t []float64) (codedCells, bool) {
	lo, hi := c.d.Support()
	if c.half {
		lo = 0
	}
	a := slices.Concat([]float64{lo}, t)
	b := slices.Concat(t, []float64{hi})
	m := codedCells{a, b, make([]float64, len(a)), make([]float64, len(a)), make([]float64, len(a))}
	for k := range a {
		if !(a[k] < b[k]) {
			return m, false
		}
		p, off, _ := c.d.Cell(a[k], b[k])
		if !(p > 0) {
			return m, false
		}
		m.p[k], m.y[k], m.bits[k] = p, anchor(a[k], b[k])+off, -math.Log2(p)
	}
	if c.pinned {
		m.y[0], m.bits[0] = 0, m.bits[0]-1
	}
	return m, true
}

// shifts are how far each threshold is from where its cells cost the same,
// and the largest of them over a cell's width; +Inf where a cell is empty.
func (c *codedDensity) shifts(t []float64) (m codedCells, g []float64, worst float64) {
	m, ok := c.cells(t)
	if !ok {
		return m, nil, math.Inf(1)
	}
	g = make([]float64, len(t))
	for k, x := range t {
		gap := m.y[k+1] - m.y[k]
		g[k] = m.y[k]/2 + m.y[k+1]/2 + c.lambda*(m.bits[k+1]-m.bits[k])/(2*gap) - x
		worst = math.Max(worst, math.Abs(g[k])/gap)
	}
	return m, g, worst
}

// newton solves the linearised conditions for the step of t; the Jacobian has
// three diagonals, for a cell knows only its two ends.
func (c *codedDensity) newton(t []float64, m codedCells, g []float64) []float64 {
	n := len(t)
	lower, diag, upper := make([]float64, n), make([]float64, n), make([]float64, n)
	for k, x := range t {
		gap := m.y[k+1] - m.y[k]
		price := c.lambda * (m.bits[k+1] - m.bits[k]) / (2 * gap * gap)
		bit := c.lambda / (2 * gap * math.Ln2)
		own, next := c.d.PDF(x)/m.p[k], c.d.PDF(x)/m.p[k+1]
		diag[k] = (0.5+price)*own*(x-m.y[k]) + (0.5-price)*next*(m.y[k+1]-x) + bit*(own+next) - 1
		if c.pinned && k == 0 {
			diag[k] -= (0.5 + price) * own * x
		}
		if k > 0 {
			before := c.d.PDF(t[k-1]) / m.p[k]
			lower[k] = (0.5+price)*before*(m.y[k]-t[k-1]) - bit*before
		}
		if k < n-1 {
			after := c.d.PDF(t[k+1]) / m.p[k+1]
			upper[k] = (0.5-price)*after*(t[k+1]-m.y[k+1]) - bit*after
		}
	}
	step := make([]float64, n)
	for k := range step { // elimination; g + J step = 0
		step[k] = -g[k]
		if k > 0 {
			f := lower[k] / diag[k-1]
			diag[k] -= f * upper[k-1]
			step[k] -= f * step[k-1]
		}
	}
	for k := n - 1; k >= 0; k-- {
		if k < n-1 {
			step[k] -= upper[k] * step[k+1]
		}
		step[k] /= diag[k]
	}
	return step
}

// free moves t to meet the conditions: Newton steps, shortened until they
// help, else the thresholds' own shifts.
func (c *codedDensity) free(t []float64) (out []float64, rounds int, residual float64) {
	m, g, worst := c.shifts(t)
	for rounds < 200 && worst > 1e-13 && len(t) > 0 && g != nil {
		rounds++
		step := c.newton(t, m, g)
		scale := 1.0
		better := false
		for try := 0; try < 24 && !better; try++ {
			if try == 12 {
				step, scale = g, 1
			}
			next := make([]float64, len(t))
			for k := range next {
				next[k] = t[k] + scale*step[k]
			}
			if mm, gg, w := c.shifts(next); w < worst {
				t, m, g, worst, better = next, mm, gg, w, true
			}
			scale /= 2
		}
		if !better {
			break
		}
	}
	return t, rounds, worst
}

// solution frees t and makes a table of it.
func (c *codedDensity) solution(t []float64) Solution {
	t, rounds, residual := c.free(t)
	m, _ := c.cells(t)
	s := Solution{Thresholds: t, Values: m.y, Rounds: rounds, Residual: residual, Proof: Local, Aim: c.lambda}
	if c.half {
		s.Values, s.Thresholds = unfold(m.y, t, c.pinned)
	}
	s.MSE, s.Entropy = EvaluateDensity(c.d, s.Thresholds, s.Values)
	return s
}

// atRate moves lambda until the entropy is rate less at most 1e-9 bit, from
// the table s and thresholds t; the best entropy not above the rate is kept.
func (c *codedDensity) atRate(s Solution, t []float64, rate float64) Solution {
	best, found := s, s.Entropy <= rate
	slope := -0.5 / math.Ln2 // bits per unit of ln lambda, high-resolution law
	rounds := s.Rounds
	for range 40 {
		off := rate - 4e-10 - s.Entropy
		if math.Abs(off) < 4e-10 {
			break
		}
		step := math.Max(-1, math.Min(1, off/slope))
		before := s
		c.lambda *= math.Exp(step)
		s = c.solution(t)
		rounds += s.Rounds
		if s.Entropy <= rate && (!found || s.MSE < best.MSE) {
			best, found = s, true
		}
		if now := (s.Entropy - before.Entropy) / step; now < 0 {
			slope = now
		}
	}
	best.Rounds = rounds
	return best
}
