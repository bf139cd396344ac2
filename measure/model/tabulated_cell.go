package model

import (
	"math"
	"sort"
)

// Cell adds up the pieces of the table that the cell covers.
func (m *Tabulated) Cell(a, b float64) (prob, offset, about float64) {
	from := anchorOf(a, b)
	lo, hi := m.Support()
	if !(a < hi && b > lo) {
		return 0, math.Max(lo, math.Min(hi, a)) - from, 0
	}
	left, right := math.Max(a, lo), math.Min(b, hi)
	var sum moments
	first := m.find(left)
	last := max(first, min(sort.SearchFloat64s(m.x, right)-1, len(m.x)-2))
	for i := first; i <= last; i++ {
		p, q := math.Max(left, m.x[i]), math.Min(right, m.x[i+1])
		if c := m.piece(i, p, q); q > p {
			sum.add(c.p, (p-from)+c.off, c.about)
		}
	}
	if sum.p == 0 {
		return 0, left + (right-left)/2 - from, 0
	}
	return sum.p, sum.off, sum.about
}

// piece integrates over [a, b] within piece i, counted from a.
func (m *Tabulated) piece(i int, a, b float64) moments {
	p, q, h := m.f[i], m.f[i+1], m.x[i+1]-m.x[i]
	w := b - a
	if p > 0 && q > 0 {
		return exponential(p, q, h, a-m.x[i], m.x[i+1]-b, w)
	}
	// A straight line from one density to another.
	f, g := p+(a-m.x[i])/h*(q-p), p+(b-m.x[i])/h*(q-p)
	if p > 0 {
		f, g = p*((m.x[i+1]-a)/h), p*((m.x[i+1]-b)/h)
	}
	s := f + g
	if s == 0 {
		return moments{0, w / 2, 0}
	}
	area := s / 2 * w
	return moments{area, w * (1 + g/s) / 3, area * w * w * (1 + 2*(f/s)*(g/s)) / 18}
}

// exponential integrates p exp(-r u) over [before, before + w], r set by the
// fall to q after h; behind is what is left of the piece. The integral counts
// from the higher end, so that nothing overflows.
func exponential(p, q, h, before, behind, w float64) moments {
	r := lnRatio(p, q) / h
	if r >= 0 {
		area, centroid, variance := fallCell(r * w)
		mass := p * math.Exp(-r*before) * area * w
		return moments{mass, centroid * w, mass * variance * w * w}
	}
	area, centroid, variance := fallCell(-r * w)
	mass := q * math.Exp(r*behind) * area * w
	return moments{mass, (1 - centroid) * w, mass * variance * w * w}
}

// Kurtosis is the fourth moment about the mean over the squared variance.
func (m *Tabulated) Kurtosis() float64 {
	_, _, variance := m.Cell(m.Support())
	var fourth float64
	m.slices(func(x, weight float64) {
		d := x - m.mean
		fourth += weight * d * d * d * d
	})
	return fourth / (variance * variance)
}

// Entropy is -integral p log2 p.
func (m *Tabulated) Entropy() float64 {
	var nats float64
	for i := range m.x[1:] {
		c := m.piece(i, m.x[i], m.x[i+1])
		p, q, h := m.f[i], m.f[i+1], m.x[i+1]-m.x[i]
		switch {
		case p > 0 && q > 0: // ln f is straight: its mean is that at the centroid
			nats -= c.p * (ln(p) + c.off/h*lnRatio(q, p))
		case p+q > 0: // of u ln u over a triangle of height p+q
			nats -= h * (p + q) * (math.Log(p+q)/2 - 0.25)
		}
	}
	return nats / math.Ln2
}

// slices calls f with Gauss-Legendre nodes and their probabilities over the
// whole table, along each of which the density changes by exp(4) at most.
func (m *Tabulated) slices(f func(x, weight float64)) {
	r := &rules[2]
	for i := range m.x[1:] {
		n := 1.0
		if p, q := m.f[i], m.f[i+1]; p > 0 && q > 0 {
			n = math.Max(1, math.Min(1000, math.Ceil(math.Abs(lnRatio(p, q))/4)))
		}
		h := (m.x[i+1] - m.x[i]) / n
		for k := range int(n) {
			for j, z := range r.x {
				x := m.x[i] + h*(float64(k)+z)
				f(x, r.w[j]*h*m.PDF(x))
			}
		}
	}
}

// ln is the natural logarithm, of subnormal numbers too: math.Log is off by up
// to 36 there on amd64 (Go 1.26).
func ln(x float64) float64 {
	if x >= 0x1p-1022 {
		return math.Log(x)
	}
	f, e := math.Frexp(x)
	return math.Log(f) + float64(e)*math.Ln2
}

// lnRatio is ln(p/q), p and q above 0.
func lnRatio(p, q float64) float64 {
	if r := p / q; r >= 0x1p-1022 && r <= math.MaxFloat64 {
		return math.Log(r)
	}
	return ln(p) - ln(q)
}
