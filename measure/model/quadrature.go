package model

import "gonum.org/v1/gonum/integrate/quad"

// rule is a Gauss-Legendre rule on [0, 1].
type rule struct{ x, w []float64 }

// maxNodes is the size of the largest rule.
const maxNodes = 16

// The rules in use; wider panels take more nodes.
var rules = [...]rule{legendre(4), legendre(6), legendre(10), legendre(maxNodes)}

func legendre(n int) rule {
	r := rule{make([]float64, n), make([]float64, n)}
	quad.Legendre{}.FixedLocations(r.x, r.w, 0, 1)
	return r
}

// moments are those of a cell put together from panels: probability, centroid
// less the cell's anchor, second moment about the centroid. Every term is
// positive, so that no digits are lost.
type moments struct{ p, off, about float64 }

func (m *moments) add(p, off, about float64) {
	if p == 0 {
		return
	}
	t := m.p + p
	d := off - m.off
	m.about += about + m.p*(p/t)*d*d
	m.off += d * (p / t)
	m.p = t
}

// panel adds the integral over [at, at+h] of a density whose values at the
// rule's nodes are f; at counts from the cell's anchor.
func (m *moments) panel(r *rule, at, h float64, f *[maxNodes]float64) {
	var s0, s1, s2 float64
	for i, x := range r.x {
		f[i] *= r.w[i]
		s0 += f[i]
		s1 += f[i] * x
	}
	if s0 == 0 {
		return
	}
	mid := s1 / s0
	for i, x := range r.x {
		s2 += f[i] * (x - mid) * (x - mid)
	}
	m.add(s0*h, at+h*mid, s2*h*h*h)
}

// halfLine is the half x >= 0 of an even density of unit scale.
type halfLine interface {
	// cell integrates from a >= 0 over a width w that may be infinite; the
	// centroid counts from a.
	cell(a, w float64) moments
}

// mirrorCell evaluates a cell of an even density. One that straddles 0 is put
// together from its halves.
func mirrorCell(d halfLine, scale, a, b float64) (p, off, about float64) {
	var m moments
	switch {
	case a >= 0:
		m = d.cell(a/scale, (b-a)/scale)
	case b <= 0:
		m = d.cell(-b/scale, (b-a)/scale)
		m.off = -m.off
	default:
		m = d.cell(0, -a/scale)
		m.off = -m.off
		r := d.cell(0, b/scale)
		m.add(r.p, r.off, r.about)
	}
	return m.p, m.off * scale, m.about * scale * scale
}
