package model

import (
	"fmt"
	"math"
	"slices"
	"sort"
)

// Tabulated is a density known at points: between two of them it runs
// exponentially (a straight line where density is drawn on a log scale), but
// straight where one end is 0; outside the table it is 0. So a table of a
// log-concave density stays log-concave, and exponential tails are exact. It
// may have any support.
type Tabulated struct {
	x, f []float64 // f scaled to integral 1
	sum  []float64 // probability left of x[i]
	mean float64
}

// NewTabulated takes points (values ascending, densities at least 0, all
// finite); the densities need not integrate to 1.
func NewTabulated(values, densities []float64) (*Tabulated, error) {
	if len(values) != len(densities) || len(values) < 2 {
		return nil, fmt.Errorf("table of %d values and %d densities: want as many, at least 2", len(values), len(densities))
	}
	top := 0.0
	for i, x := range values {
		if !(math.Abs(x) <= 1e150) || i > 0 && !(x > values[i-1]) {
			return nil, fmt.Errorf("value %g at point %d: want ascending finite values", x, i+1)
		}
		if f := densities[i]; !(f >= 0 && f <= math.MaxFloat64) {
			return nil, fmt.Errorf("density %g at point %d: want a finite number, at least 0", f, i+1)
		}
		top = math.Max(top, densities[i])
	}
	if top == 0 {
		return nil, fmt.Errorf("all %d densities are 0", len(values))
	}
	m := &Tabulated{x: slices.Clone(values), f: slices.Clone(densities)}
	return m, m.normalize(top)
}

// normalize scales the densities, largest first to 1 so that nothing
// overflows, and sums up.
func (m *Tabulated) normalize(top float64) error {
	for i := range m.f {
		m.f[i] /= top
	}
	m.sum = make([]float64, len(m.x))
	for i := range m.x[1:] {
		m.sum[i+1] = m.sum[i] + m.piece(i, m.x[i], m.x[i+1]).p
	}
	total := m.sum[len(m.sum)-1]
	if !(total > 0 && total <= math.MaxFloat64) {
		return fmt.Errorf("the density integrates to %g: too narrow or too wide a table", total)
	}
	for i := range m.f {
		m.f[i] /= total
		m.sum[i] /= total
	}
	m.sum[len(m.sum)-1] = 1
	lo, hi := m.Support()
	_, off, _ := m.Cell(lo, hi)
	m.mean = anchorOf(lo, hi) + off
	return nil
}

// anchorOf is the point a cell's offset counts from.
func anchorOf(a, b float64) float64 {
	switch {
	case a >= 0:
		return a
	case b <= 0:
		return b
	}
	return 0
}

// Name is "tabulated".
func (*Tabulated) Name() string { return "tabulated" }

// Parameters are 0 and the rms: a table has no shape to set.
func (m *Tabulated) Parameters() (shape, scale float64) { return 0, m.RMS() }

// Points returns a copy of the table, scaled to integral 1.
func (m *Tabulated) Points() (values, densities []float64) {
	return slices.Clone(m.x), slices.Clone(m.f)
}

// Stretched returns the density of factor times X, factor > 0.
func (m *Tabulated) Stretched(factor float64) (*Tabulated, error) {
	if !(factor > 0 && factor <= math.MaxFloat64) {
		return nil, fmt.Errorf("stretch by %g: want a finite number above 0", factor)
	}
	x := slices.Clone(m.x)
	for i := range x {
		x[i] *= factor
	}
	return NewTabulated(x, m.f)
}

// Support is the table's extent.
func (m *Tabulated) Support() (lo, hi float64) { return m.x[0], m.x[len(m.x)-1] }

// Knots are the points between which the density is smooth.
func (m *Tabulated) Knots() []float64 { return m.x }

// RMS is the root mean square about 0.
func (m *Tabulated) RMS() float64 {
	_, _, about := m.Cell(m.Support())
	return math.Hypot(m.mean, math.Sqrt(about))
}

// Mean is the centroid.
func (m *Tabulated) Mean() float64 { return m.mean }

// Even reports whether the table is its own mirror image, to 1e-12.
func (m *Tabulated) Even() bool {
	n := len(m.x)
	for i, x := range m.x {
		if math.Abs(x+m.x[n-1-i]) > 1e-12*m.x[n-1] || math.Abs(m.f[i]-m.f[n-1-i]) > 1e-12*m.f[i] {
			return false
		}
	}
	return true
}

// LogConcave reports whether d ln p/dx never rises from point to point, and p
// has no gap.
func (m *Tabulated) LogConcave() bool {
	last := math.Inf(1)
	for i := range m.x[1:] {
		p, q, h := m.f[i], m.f[i+1], m.x[i+1]-m.x[i]
		var first, next float64 // slopes of ln p at the piece's ends
		switch {
		case p > 0 && q > 0:
			first = lnRatio(q, p) / h
			next = first
		case p > 0:
			first, next = -1/h, math.Inf(-1)
		case q > 0:
			first, next = math.Inf(1), 1/h
		default: // a gap is fine at either end only
			first, next = math.Inf(-1), math.Inf(-1)
			if m.sum[i+1] == 0 {
				first, next = math.Inf(1), math.Inf(1)
			}
		}
		if first > last && !(math.Abs(first-last) <= 1e-9*math.Min(math.Abs(first), math.MaxFloat64)) {
			return false
		}
		last = next
	}
	return true
}

// find returns the piece that holds x.
func (m *Tabulated) find(x float64) int {
	return max(0, min(sort.SearchFloat64s(m.x, x)-1, len(m.x)-2))
}

// PDF is the density, 0 outside the table.
func (m *Tabulated) PDF(x float64) float64 {
	if lo, hi := m.Support(); !(x >= lo && x <= hi) {
		return 0
	}
	i := m.find(x)
	p, q := m.f[i], m.f[i+1]
	t := (x - m.x[i]) / (m.x[i+1] - m.x[i])
	switch { // from the higher end, so that nothing overflows
	case p >= q && q > 0:
		return p * math.Exp(t*lnRatio(q, p))
	case p > 0 && q > 0:
		return q * math.Exp((m.x[i+1]-x)/(m.x[i+1]-m.x[i])*lnRatio(p, q))
	}
	return p + t*(q-p)
}

// LogPDF is its natural logarithm.
func (m *Tabulated) LogPDF(x float64) float64 { return ln(m.PDF(x)) }

// CDF is the distribution function.
func (m *Tabulated) CDF(x float64) float64 {
	lo, hi := m.Support()
	switch {
	case x <= lo:
		return 0
	case x >= hi:
		return 1
	}
	i := m.find(x)
	return m.sum[i] + m.piece(i, m.x[i], x).p
}

// Quantile inverts CDF, 0 < p < 1.
func (m *Tabulated) Quantile(p float64) float64 {
	if !(p > 0 && p < 1) {
		return quantileEdge(p)
	}
	i := max(0, min(sort.SearchFloat64s(m.sum, p)-1, len(m.x)-2))
	rest, h := p-m.sum[i], m.x[i+1]-m.x[i]
	a, b := m.f[i], m.f[i+1]
	var u float64
	switch {
	case a > 0 && b > 0:
		w := lnRatio(a, b) // f = a exp(-w u)
		u = rest / (a * h)
		if w != 0 {
			u = -math.Log1p(-rest*w/(a*h)) / w
		}
	case a > 0: // falls to 0: the rest of the triangle is as (1-u)^2
		u = 1 - math.Sqrt(math.Max(0, 1-rest/(a*h/2)))
	default:
		u = math.Sqrt(rest / (b * h / 2))
	}
	return m.x[i] + h*math.Min(u, 1)
}

var _ Model = (*Tabulated)(nil)
