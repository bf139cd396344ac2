package model

import "math"

// Gaussian is the normal density with standard deviation Sigma.
type Gaussian struct{ Sigma float64 }

// Name is "gaussian".
func (Gaussian) Name() string { return "gaussian" }

// RMS is Sigma.
func (m Gaussian) RMS() float64 { return m.Sigma }

// PDF is the density.
func (m Gaussian) PDF(x float64) float64 {
	z := x / m.Sigma
	return math.Exp(-z*z/2) / (m.Sigma * math.Sqrt(2*math.Pi))
}

// CDF is the distribution function.
func (m Gaussian) CDF(x float64) float64 { return math.Erfc(-x/m.Sigma/sqrt2) / 2 }

// Quantile inverts CDF, 0 < p < 1.
func (m Gaussian) Quantile(p float64) float64 {
	if p > 0.5 {
		return m.Sigma * sqrt2 * math.Erfcinv(2*(1-p))
	}
	return -m.Sigma * sqrt2 * math.Erfcinv(2*p)
}

// Support is the real line.
func (Gaussian) Support() (lo, hi float64) { return math.Inf(-1), math.Inf(1) }

// LogConcave is true.
func (Gaussian) LogConcave() bool { return true }

// Entropy is log2(sigma sqrt(2 pi e)).
func (m Gaussian) Entropy() float64 { return math.Log2(m.Sigma * math.Sqrt(2*math.Pi*math.E)) }

// Cell integrates by quadrature from the edge outwards; a tail is cut where
// the density has fallen by exp(-45) from its edge.
func (m Gaussian) Cell(a, b float64) (p, off, about float64) { return mirrorCell(a, b, m.half) }

func (m Gaussian) half(a, b float64) (p, off, about float64) {
	za := a / m.Sigma
	w := math.Min((b-a)/m.Sigma, 90/(za+math.Sqrt(za*za+90)))
	edge := math.Exp(-za*za/2) / math.Sqrt(2*math.Pi)
	p, off, about = cellSum(0, w, 3/(1+za/3), func(u float64) float64 { return math.Exp(-u * (za + u/2)) }, func(u float64) float64 { return u })
	return p * edge, off * m.Sigma, about * edge * m.Sigma * m.Sigma
}

var _ Model = Gaussian{}
