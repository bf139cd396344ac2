package design

import (
	"math"
	"slices"
)

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
