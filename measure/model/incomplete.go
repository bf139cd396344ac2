package model

import (
	"math"

	"gonum.org/v1/gonum/mathext"
)

// mirrorCDF is the distribution function at x of a density whose |X| is below
// |x| with probability P(s, y), the regularized incomplete gamma function.
func mirrorCDF(s, y, x float64) float64 {
	switch {
	case math.IsInf(y, 1) && x < 0:
		return 0
	case math.IsInf(y, 1):
		return 1
	case s == 0.5:
		return math.Erfc(math.Copysign(math.Sqrt(y), -x)) / 2
	case x < 0:
		return mathext.GammaIncRegComp(s, y) / 2
	}
	return 0.5 + mathext.GammaIncReg(s, y)/2
}

// mirrorQuantile returns y^power with the sign of p - 1/2, where Q(s, y) is
// twice the smaller of p and 1 - p: the library's inverse, polished by Newton
// steps on ln y.
func mirrorQuantile(s, power, p float64) float64 {
	q := 2 * math.Min(p, 1-p)
	if q == 1 || !(p > 0 && p < 1) {
		return quantileEdge(p)
	}
	y := invertGamma(s, q)
	return math.Copysign(math.Pow(y, power), p-0.5)
}

// quantileEdge: 0 at the middle, infinite at the ends, NaN outside.
func quantileEdge(p float64) float64 {
	switch p {
	case 0:
		return math.Inf(-1)
	case 0.5:
		return 0
	case 1:
		return math.Inf(1)
	}
	return math.NaN()
}

// invertGamma solves Q(s, y) = q, 0 < q < 1, by Newton's method on ln Q over
// ln y, kept within a bracket.
func invertGamma(s, q float64) float64 {
	if s == 0.5 {
		u := invertErfc(q)
		return u * u
	}
	lo, hi := math.Inf(-1), math.Log(s+40+10*math.Sqrt(s)-2*math.Log(q))
	z := math.Min(hi, (math.Log1p(-q)+lgamma(s+1))/s) // P(s, y) is about y^s/Gamma(s+1)
	for range 200 {
		y := math.Exp(z)
		g, below := gammaGap(s, y, q)
		if below {
			lo = z
		} else {
			hi = z
		}
		// dP/d(ln y) = y^s e^-y / Gamma(s)
		step := g / math.Exp(s*z-y-lgamma(s))
		next := z + step
		if !(next > lo && next < hi) {
			next = z - 1
			if !math.IsInf(lo, -1) {
				next = (lo + hi) / 2
			}
		}
		if math.Abs(next-z) <= 1e-16*math.Max(1, math.Abs(z)) {
			break
		}
		z = next
	}
	return math.Exp(z)
}

// digamma is the logarithmic derivative of the gamma function, x > 0: its
// recurrence up to 10, then the asymptotic series (Abramowitz, Stegun 6.3.5,
// 6.3.18). The library's keeps 11 digits only.
func digamma(x float64) float64 {
	var sum float64
	for ; x < 10; x++ {
		sum -= 1 / x
	}
	q := 1 / (x * x)
	series := q * (1./12 - q*(1./120-q*(1./252-q*(1./240-q*(1./132-q*(691./32760-q/12))))))
	return sum + math.Log(x) - 0.5/x - series
}

// invertErfc solves erfc(u) = q, 0 < q < 1: the library's inverse keeps 5 digits
// in the tails, Newton steps the rest.
func invertErfc(q float64) float64 {
	u := math.Erfcinv(q)
	for range 3 {
		gap := math.Erfc(u) - q
		if q > 0.5 {
			gap = (1 - q) - math.Erf(u)
		}
		u += gap * math.Sqrt(math.Pi) / 2 * math.Exp(u*u)
	}
	return u
}

// gammaGap is Q(s, y) - q, taken on the side that keeps digits, and whether y
// lies below the solution.
func gammaGap(s, y, q float64) (gap float64, below bool) {
	if q < 0.5 {
		gap = mathext.GammaIncRegComp(s, y) - q
	} else {
		gap = (1 - q) - mathext.GammaIncReg(s, y)
	}
	return gap, gap > 0
}
