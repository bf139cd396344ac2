package model

import (
	"fmt"
	"math"
)

// summit is a maximum: the value, its place and the negated second
// derivatives there.
type summit struct {
	at    place
	value float64
	curve [2][2]float64
}

// local is a function's value, gradient and negated second derivatives.
type local struct {
	value float64
	grad  place
	curve [2][2]float64
}

// climb maximises the likelihood by Newton's method, its second derivatives
// made positive where they are not (Levenberg, Marquardt). why is not empty
// where there is no maximum.
func (c candidate) climb(b *bins) (top summit, why string) {
	at := c.start(b)
	f := func(at place) float64 { return b.logLik(c.half(at)) }
	here := c.look(f, at)
	damp := 0.0
	for range 100 {
		step := c.step(here, damp)
		next := place{at[0] + step[0], at[1] + step[1]}
		c.bound(&next)
		moved := math.Max(math.Abs(next[0]-at[0]), math.Abs(next[1]-at[1]))
		if moved < 1e-10 {
			break
		}
		value := f(next)
		if !(value >= here.value-1e-13*math.Abs(here.value)) { // downhill, or NaN
			if damp = math.Max(4*damp, 0.01); damp > 1e9 {
				break
			}
			continue
		}
		at, here, damp = next, c.look(f, next), damp/10
		if c.outside(at, here) {
			break
		}
		if damp < 1e-3 {
			damp = 0
		}
	}
	return summit{at, here.value, here.curve}, c.unsettled(b, at, here)
}

// outside reports that the shape is at a bound and the likelihood rises beyond.
func (c candidate) outside(at place, here local) bool {
	pushed := place{at[0] + math.Copysign(1, here.grad[0])}
	if c.bound(&pushed); c.parameters != 2 {
		return false
	}
	return pushed[0] == at[0]
}

// bound keeps the shape where densities can be computed.
func (c candidate) bound(at *place) {
	if c.parameters == 2 {
		at[0] = math.Max(math.Log(c.least*1.01), math.Min(at[0], math.Log(c.most/1.01)))
	}
}

// unsettled says why at is no maximum, "" where it is one.
func (c candidate) unsettled(b *bins, at place, here local) string {
	shape, scale := c.natural(at)
	slope := math.Max(math.Abs(here.grad[0]), math.Abs(here.grad[1]))
	switch {
	case !(slope < 1e-6) && c.parameters == 2 && b.zeros > 0.05 && shape < 1:
		return fmt.Sprintf("%.0f %% of the samples are exact zeros, more than any shape down to %g suits: leave digital silence out", 100*b.zeros, c.least)
	case !(slope < 1e-6) && c.parameters == 2:
		return fmt.Sprintf("the likelihood still rises at shape %.3g: no finite shape suits these data", shape)
	case !(slope < 1e-6):
		return fmt.Sprintf("the likelihood still rises at a scale of %.3g lsb", scale)
	case !(here.curve[0][0] > 0) || c.parameters == 2 && !(here.curve[0][0]*here.curve[1][1] > here.curve[0][1]*here.curve[1][0]):
		return "the likelihood has no single maximum: too few distinct values"
	}
	return ""
}

// look takes value, gradient and second derivatives by differences of fourth
// order.
func (c candidate) look(f func(place) float64, at place) (l local) {
	const h = 2e-3
	l.value = f(at)
	for i := range c.parameters {
		var v [5]float64
		for k := range v {
			v[k] = l.value
			if k != 2 {
				p := at
				p[i] += h * float64(k-2)
				v[k] = f(p)
			}
		}
		l.grad[i] = (8*(v[3]-v[1]) - (v[4] - v[0])) / (12 * h)
		l.curve[i][i] = -(16*(v[1]+v[3]) - (v[0] + v[4]) - 30*v[2]) / (12 * h * h)
	}
	if c.parameters == 2 {
		g := func(x, y float64) float64 { return f(place{at[0] + x*h, at[1] + y*h}) }
		l.curve[0][1] = -(g(1, 1) - g(1, -1) - g(-1, 1) + g(-1, -1)) / (4 * h * h)
		l.curve[1][0] = l.curve[0][1]
	}
	return l
}

// step solves (curve + damp) step = grad, damp raised until the matrix is
// positive; no coordinate moves by more than 1.
func (c candidate) step(l local, damp float64) (s place) {
	a, b, d := l.curve[0][0], l.curve[0][1], l.curve[1][1]
	if c.parameters == 1 {
		b, d = 0, 1
	}
	least := (a+d)/2 - math.Hypot((a-d)/2, b) // the smaller eigenvalue
	if least < 1e-6 {
		damp += 1e-3 - 2*math.Min(least, 0)
	}
	a, d = a+damp, d+damp
	det := a*d - b*b
	s = place{(d*l.grad[0] - b*l.grad[1]) / det, (a*l.grad[1] - b*l.grad[0]) / det}
	if size := math.Max(math.Abs(s[0]), math.Abs(s[1])); size > 1 {
		s[0], s[1] = s[0]/size, s[1]/size
	}
	return s
}

// errors are the standard errors of shape and scale by the inverse of the
// observed information of n samples.
func (c candidate) errors(top summit, n int64) (shape, scale float64) {
	k, s := c.natural(top.at)
	j := c.slope(top.at)
	a, b, d := top.curve[0][0], top.curve[0][1], top.curve[1][1]
	if c.parameters == 1 {
		return 0, s * math.Abs(j[0]) / math.Sqrt(float64(n)*a)
	}
	det := float64(n) * (a*d - b*b)
	vk, vm, cov := d/det, a/det, -b/det
	return k * math.Sqrt(vk), s * math.Sqrt(j[0]*j[0]*vk+2*j[0]*j[1]*cov+j[1]*j[1]*vm)
}
