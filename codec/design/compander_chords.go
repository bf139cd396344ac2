package design

import "math"

// chorded replaces the law by chords of equal rise; s is the smooth table.
func chorded(l *law, n, segments int, mirror bool, s Solution) (values, thresholds []float64) {
	c := chordLaw{x: make([]float64, segments+1), u: make([]float64, segments+1)}
	for i := range c.x {
		c.u[i] = float64(i) / float64(segments)
		if i > 0 && i < segments {
			c.x[i] = l.invert(c.u[i], true)
		}
	}
	lo, hi := l.d.Support()
	c.x[0], c.x[segments] = max(lo, 2*s.Values[0]-s.Thresholds[0]), min(hi, 2*s.Values[n-1]-s.Thresholds[n-2])
	if !math.IsInf(lo, -1) {
		c.x[0] = lo
	}
	if !math.IsInf(hi, 1) {
		c.x[segments] = hi
	}
	if !mirror {
		return c.wholeTable(n)
	}
	c.x[0] = 0
	table := func() ([]float64, []float64) {
		v, t := c.table(n)
		return unfold(v, t, n%2 == 1)
	}
	if math.IsInf(hi, 1) {
		from := c.x[segments-1]
		c.x[segments] = from + least(1e-3*(c.x[segments]-from), 4*(c.x[segments]-from), func(reach float64) float64 {
			c.x[segments] = from + reach
			v, t := table()
			mse, _ := EvaluateDensity(l.d, t, v)
			return mse
		})
	}
	return table()
}

// wholeTable is table for a law over the whole support.
func (l chordLaw) wholeTable(n int) (values, thresholds []float64) {
	for k := 1; k < 2*n; k++ {
		if x := l.expand(float64(k) / float64(2*n)); k%2 == 1 {
			values = append(values, x)
		} else {
			thresholds = append(thresholds, x)
		}
	}
	return values, thresholds
}

// least returns where f has its least value between lo and hi, both above 0,
// by golden section on the logarithm; f falls, then rises.
func least(lo, hi float64, f func(x float64) float64) float64 {
	const golden = 0.6180339887498949
	a, b := math.Log(lo), math.Log(hi)
	x, y := b-golden*(b-a), a+golden*(b-a)
	fx, fy := f(math.Exp(x)), f(math.Exp(y))
	for b-a > 1e-7 {
		if fx < fy {
			b, y, fy = y, x, fx
			x = b - golden*(b-a)
			fx = f(math.Exp(x))
		} else {
			a, x, fx = x, y, fy
			y = a + golden*(b-a)
			fy = f(math.Exp(y))
		}
	}
	return math.Exp((a + b) / 2)
}
