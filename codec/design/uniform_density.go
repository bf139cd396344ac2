package design

import (
	"fmt"
	"math"
)

// OptimalUniform returns the n-level uniform quantizer of least mean squared
// error for a density even about 0: mid-rise for even n, mid-tread for odd. The
// step solves sum m_k P_k (c_k - m_k s) = 0 with values m_k s (J. Max 1960,
// section IV); for the densities of this project it is the only stationary
// step, found by bisection to the last digits.
func OptimalUniform(d Density, n int) (Solution, error) {
	if n < 2 || n > 1<<16 {
		return Solution{}, fmt.Errorf("%d levels: want 2 to %d", n, 1<<16)
	}
	top := d.Quantile(1 - 1e-9)
	lo, hi := top/float64(n)*1e-3, 8*top/float64(n)*2
	sol := Solution{Proof: Local, Starts: 1}
	for hi-lo > 1e-15*hi && sol.Rounds < 200 {
		mid := lo + (hi-lo)/2
		if mid <= lo || mid >= hi {
			break
		}
		if uniformSlope(d, n, mid) > 0 {
			lo = mid
		} else {
			hi = mid
		}
		sol.Rounds++
	}
	step := lo + (hi-lo)/2
	sol.Residual = (hi - lo) / hi
	for k := range n {
		sol.Values = append(sol.Values, step*(float64(2*k+1-n)/2))
	}
	sol.Thresholds = midpoints(sol.Values)
	sol.MSE, sol.Entropy = EvaluateDensity(d, sol.Thresholds, sol.Values)
	return sol, nil
}

// uniformSlope is minus half the derivative of the error by the step, times a
// positive factor: above 0 where a larger step helps.
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
