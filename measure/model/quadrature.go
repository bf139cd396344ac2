package model

import "gonum.org/v1/gonum/integrate/quad"

// rule is a Gauss-Legendre rule on [0, 1].
type rule struct{ x, w []float64 }

// The rules in use; wider panels take more nodes.
var rules = [...]rule{legendre(4), legendre(6), legendre(10), legendre(16)}

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

// panel adds the integral of f over [at, at+h] to m; f takes the distance from
// the cell's anchor, as at does.
func (m *moments) panel(r *rule, at, h float64, f func(u float64) float64) {
	var w [16]float64
	var s0, s1 float64
	for i, x := range r.x {
		w[i] = r.w[i] * f(at+h*x)
		s0 += w[i]
		s1 += w[i] * x
	}
	if s0 == 0 {
		return
	}
	mid := s1 / s0
	var s2 float64
	for i, x := range r.x {
		s2 += w[i] * (x - mid) * (x - mid)
	}
	m.add(s0*h, at+h*mid, s2*h*h*h)
}

// mirrorCell evaluates a cell of an even density by the moments of half, those
// of the stretch from a >= 0 of width w, counted from a. A cell that straddles
// 0 is put together from its halves.
func mirrorCell(a, b float64, half func(a, w float64) moments) (p, off, about float64) {
	switch {
	case a >= 0:
		m := half(a, b-a)
		return m.p, m.off, m.about
	case b <= 0:
		m := half(-b, b-a)
		return m.p, -m.off, m.about
	}
	m, r := half(0, -a), half(0, b)
	m.off = -m.off
	m.add(r.p, r.off, r.about)
	return m.p, m.off, m.about
}
