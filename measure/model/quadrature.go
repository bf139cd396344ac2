package model

import "math"

// Gauss-Legendre nodes and weights on [-1, 1], 20 points, positive half.
// Source: M. Abramowitz, I. Stegun, Handbook of Mathematical Functions,
// Table 25.4; recomputed at start-up by Newton's method on the recurrence.
var nodes, weights = legendre(20)

// legendre computes the nodes and weights of n points.
func legendre(n int) (x, w []float64) {
	for i := range n {
		z := math.Cos(math.Pi * (float64(i) + 0.75) / (float64(n) + 0.5))
		var d float64
		for range 100 {
			p0, p1 := 1.0, z
			for k := 2; k <= n; k++ {
				p0, p1 = p1, (float64(2*k-1)*z*p1-float64(k-1)*p0)/float64(k)
			}
			d = float64(n) * (z*p1 - p0) / (z*z - 1)
			step := p1 / d
			z -= step
			if math.Abs(step) < 1e-16 {
				break
			}
		}
		x, w = append(x, z), append(w, 2/((1-z*z)*d*d))
	}
	return x, w
}

// cellSum integrates over [a, b], in panels no wider than width, the weight
// f(x, x-a) given per node as the position u in the panel's own variable. to
// maps u to the distance from the cell's edge; it returns probability,
// centroid less edge and second moment about the centroid. All terms are
// positive but for the centring, so that no digits are lost.
func cellSum(a, b, width float64, density func(u float64) float64, to func(u float64) float64) (p, off, about float64) {
	panels := max(1, int(math.Ceil((b-a)/width)))
	h := (b - a) / float64(panels) / 2
	var s0, s1, s2 float64
	for i := range panels {
		mid := a + h*float64(2*i+1)
		for j, z := range nodes {
			u := mid + h*z
			f := weights[j] * density(u)
			x := to(u)
			s0 += f
			s1 += f * x
			s2 += f * x * x
		}
	}
	if s0 == 0 {
		return 0, to((a + b) / 2), 0
	}
	off = s1 / s0
	for i := range panels {
		mid := a + h*float64(2*i+1)
		for j, z := range nodes {
			u := mid + h*z
			x := to(u) - off
			about += weights[j] * density(u) * x * x
		}
	}
	return s0 * h, off, about * h
}
