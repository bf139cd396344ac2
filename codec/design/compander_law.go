package design

import (
	"math"
	"slices"

	"gonum.org/v1/gonum/integrate/quad"
)

// law is the running integral of g(p(x)) over the support of a density, or
// over the part above 0, in panels fine enough for Gauss-Legendre quadrature.
type law struct {
	d     Density
	g     func(p float64) float64
	edges []float64 // ascending
	sum   []float64 // integral left of each edge
	left  int       // panels that may still be halved
}

// gl is a Gauss-Legendre rule on [0, 1].
type gl struct{ x, w []float64 }

var coarse, fine = newGL(4), newGL(8)

func newGL(n int) gl {
	r := gl{make([]float64, n), make([]float64, n)}
	quad.Legendre{}.FixedLocations(r.x, r.w, 0, 1)
	return r
}

// newLaw integrates g over the support: between the knots of d, in octaves
// outwards where the support has no end, halving panels until rules of 4 and 8
// nodes agree to 1e-10 of the whole (the finer one is then far better) and no
// panel holds more than 1/32 of it; at most 16384 times. With half it starts at
// 0.
func newLaw(d Density, half bool, g func(p float64) float64) *law {
	l := &law{d: d, g: g, left: 1 << 14}
	cuts := l.octaves(half)
	var scale float64
	for i := range cuts[1:] {
		scale += math.Abs(l.panel(fine, cuts[i], cuts[i+1]))
	}
	l.edges, l.sum = append(l.edges, cuts[0]), append(l.sum, 0)
	for i := range cuts[1:] {
		l.refine(cuts[i], cuts[i+1], scale, 60)
	}
	return l
}

// total is the integral over the whole support.
func (l *law) total() float64 { return l.sum[len(l.sum)-1] }

// refine appends the panels of [a, b].
func (l *law) refine(a, b, scale float64, depth int) {
	s := l.panel(fine, a, b)
	mid := split(a, b)
	rough := math.Abs(s-l.panel(coarse, a, b)) > 1e-10*scale || math.Abs(s) > scale/32
	if rough && l.left > 0 && depth > 0 && mid > a && mid < b {
		l.left--
		l.refine(a, mid, scale, depth-1)
		l.refine(mid, b, scale, depth-1)
		return
	}
	l.edges, l.sum = append(l.edges, b), append(l.sum, l.total()+s)
}

// split halves a panel in the variable it is integrated in.
func split(a, b float64) float64 {
	switch {
	case a == 0:
		return b / 16
	case b == 0:
		return a / 16
	}
	return a + (b-a)/2
}

// panel integrates over [a, b]. Next to 0, where p may be infinite or have a
// cusp, x = b v^4 flattens it.
func (l *law) panel(r gl, a, b float64) (s float64) {
	h := b - a
	for i, z := range r.x {
		switch {
		case a == 0:
			s += r.w[i] * 4 * z * z * z * l.g(l.d.PDF(h*z*z*z*z))
		case b == 0:
			s += r.w[i] * 4 * z * z * z * l.g(l.d.PDF(-h*z*z*z*z))
		default:
			s += r.w[i] * l.g(l.d.PDF(a+h*z))
		}
	}
	return s * h
}

// octaves returns the breaks of d, an endless side cut into octaves until g
// has died away.
func (l *law) octaves(half bool) []float64 {
	at := breaks(l.d)
	if i := slices.Index(at, 0); half && i >= 0 {
		at = at[i:]
	}
	unit := (l.d.Quantile(0.75) - l.d.Quantile(0.25)) / 2
	n := len(at)
	left, right := math.IsInf(at[0], -1), math.IsInf(at[n-1], 1)
	var before, behind []float64
	if left {
		before = l.outwards(at[1], -unit)
		slices.Reverse(before)
		at = at[1:]
	}
	if right {
		at = at[:len(at)-1]
		behind = l.outwards(at[len(at)-1], unit)
	}
	return slices.Concat(before, at, behind)
}

// outwards steps from x0 by unit, twice that, and so on.
func (l *law) outwards(x0, unit float64) (cuts []float64) {
	var sum float64
	last := x0
	for k := range 1100 {
		x := x0 + math.Ldexp(unit, k)
		s := math.Abs(l.panel(fine, last, x))
		sum += s
		cuts = append(cuts, x)
		if last = x; k > 2 && !(s > 1e-17*sum) {
			break
		}
	}
	return cuts
}

// invert returns x where the integral reaches u of the whole, 0 < u < 1: a
// cubic through the panel's ends and slopes, polished on wish by Newton's
// method on the integral itself.
func (l *law) invert(u float64, polish bool) float64 {
	want := u * l.total()
	i, _ := slices.BinarySearch(l.sum, want)
	i = max(1, min(i, len(l.sum)-1))
	a, b, rest := l.edges[i-1], l.edges[i], want-l.sum[i-1]
	x := l.between(a, b, rest, l.sum[i]-l.sum[i-1])
	for lo, hi, round := a, b, 0; polish && round < 40; round++ {
		gap := rest - l.panel(fine, a, x)
		if b == 0 && a != 0 { // count from the far end, where x = 0 is smooth
			gap = l.panel(fine, x, 0) - (l.sum[i] - want)
		}
		if gap > 0 {
			lo = x
		} else {
			hi = x
		}
		next := x + gap/l.g(l.d.PDF(x))
		if !(next > lo && next < hi) {
			next = lo + (hi-lo)/2
		}
		done := math.Abs(next-x) <= 1e-15*math.Max(math.Abs(x), b-a)
		if x = next; done {
			break
		}
	}
	return x
}

// between solves for the rest of a panel's integral s over [a, b].
func (l *law) between(a, b, rest, s float64) float64 {
	t := rest / s
	switch {
	case a == 0: // g goes as x^c, so that x g(x) is 1+c times the integral
		return b * math.Pow(t, s/(b*l.g(l.d.PDF(b))))
	case b == 0:
		return a * math.Pow(1-t, s/(-a*l.g(l.d.PDF(a))))
	}
	h := b - a
	// dx/ds at the ends, in units of the panel
	p, q := s/h/l.g(l.d.PDF(a)), s/h/l.g(l.d.PDF(b))
	if !(p <= 3 && q <= 3) { // the cubic would not ascend
		return a + h*t
	}
	return a + h*t*(p+t*((3-2*p-q)+t*(p+q-2)))
}
