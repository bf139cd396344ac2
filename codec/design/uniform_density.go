package design

import (
	"fmt"
	"math"
)

// uniformScan is how many steps are looked at for a change of sign.
const uniformScan = 48

// OptimalUniform returns the n-level uniform quantizer of least mean squared
// error for a density even about 0: mid-rise for even n, mid-tread for odd. The
// step s solves sum m_k P_k (c_k - m_k s) = 0 for values m_k s, P_k and c_k the
// cells' probabilities and centroids (J. Max 1960, section IV), to the last
// digits at any n. 48 steps over three decades and more are scanned, and the
// best of the stationary ones between them is kept; the densities of speech
// have one. Starts counts them; Residual is how far the last round moved the
// step, relative.
func OptimalUniform(d Density, n int) (Solution, error) {
	if n < 2 || n > 1<<16 {
		return Solution{}, fmt.Errorf("%d levels: want 2 to %d", n, 1<<16)
	}
	if !even(d) {
		return Solution{}, fmt.Errorf("the best uniform quantizer of a density that is not even about 0 is not supported: its table would have to be shifted")
	}
	lo, hi := stepRange(d, n)
	out := Solution{Proof: Local}
	slope := func(step float64) float64 {
		out.Rounds++
		return uniformSlope(d, n, step)
	}
	a, fa := lo, slope(lo)
	for k := 1; k <= uniformScan; k++ {
		b := lo * math.Pow(hi/lo, float64(k)/uniformScan)
		fb := slope(b)
		if fa > 0 && !(fb > 0) {
			step, moved := root(slope, a, b, fa, fb)
			out.Starts++
			if s := uniformTable(d, n, step); out.Values == nil || s.MSE < out.MSE {
				out.Values, out.Thresholds, out.MSE, out.Entropy, out.Residual = s.Values, s.Thresholds, s.MSE, s.Entropy, moved
			}
		}
		a, fa = b, fb
	}
	if out.Values == nil {
		return out, fmt.Errorf("no stationary step of %d levels between %g and %g", n, lo, hi)
	}
	return out, nil
}

// stepRange is where the step must lie: the overload point is beyond a fifth
// of the mean of |x|, and not far beyond where next to nothing is left.
func stepRange(d Density, n int) (lo, hi float64) {
	_, end := d.Support()
	p, mean, _ := d.Cell(0, end)
	top := end
	if math.IsInf(end, 1) {
		top = d.Quantile(1 - 1e-4/(float64(n)*float64(n)*float64(n)))
	}
	return 2 * p * mean * 0.4 / float64(n), 4 * 2 * top / float64(n)
}

// uniformTable is the table of a step.
func uniformTable(d Density, n int, step float64) (s Solution) {
	s.Values = make([]float64, n)
	for k := range s.Values {
		s.Values[k] = step * (float64(2*k+1-n) / 2)
	}
	s.Thresholds = midpoints(s.Values)
	s.MSE, s.Entropy = EvaluateDensity(d, s.Thresholds, s.Values)
	return s
}

// uniformSlope is minus a quarter of the derivative of the error by the step:
// above 0 where a larger step helps.
func uniformSlope(d Density, n int, step float64) (g float64) {
	_, end := d.Support()
	for k := (n + 1) / 2; k < n; k++ {
		m := float64(2*k+1-n) / 2
		a, b := step*(m-0.5), step*(m+0.5)
		if k == n-1 {
			b = end
		}
		if a >= end {
			break
		}
		p, off, _ := d.Cell(a, math.Min(b, end))
		g += m * p * (off - step*0.5)
	}
	return g
}

// root solves f = 0 between a and b, f(a) > 0 >= f(b), by false position with
// halved weights (the Illinois rule; M. Dowell, P. Jarratt, BIT 11, 1971). It
// returns the root and how far the last round moved it, relative.
func root(f func(float64) float64, a, b, fa, fb float64) (x, moved float64) {
	const tiny = 4e-16
	for range 100 {
		if fb == 0 {
			return b, 0
		}
		x = b - fb*(b-a)/(fb-fa)
		if !(x > math.Min(a, b) && x < math.Max(a, b)) {
			x = a + (b-a)/2
		}
		fx := f(x)
		if (fx > 0) != (fb > 0) {
			a, fa = b, fb
		} else {
			fa /= 2
		}
		last := b
		b, fb = x, fx
		moved = math.Abs(b-last) / math.Abs(b)
		if moved <= tiny || math.Abs(b-a) <= tiny*math.Abs(b) {
			break
		}
	}
	return b, moved
}
