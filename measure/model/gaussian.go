package model

import "math"

// Gaussian is the normal density with standard deviation Scale, kurtosis 3.
type Gaussian struct{ Scale float64 }

// Name is "gaussian".
func (Gaussian) Name() string { return "gaussian" }

// Parameters are the shape, 2 by convention, and the standard deviation.
func (m Gaussian) Parameters() (shape, scale float64) { return 2, m.Scale }

// RMS is Scale.
func (m Gaussian) RMS() float64 { return m.Scale }

// Kurtosis is 3.
func (Gaussian) Kurtosis() float64 { return 3 }

// PDF is the density.
func (m Gaussian) PDF(x float64) float64 {
	z := x / m.Scale
	return math.Exp(-z*z/2) / (m.Scale * math.Sqrt(2*math.Pi))
}

// LogPDF is its natural logarithm.
func (m Gaussian) LogPDF(x float64) float64 {
	z := x / m.Scale
	return -z*z/2 - math.Log(m.Scale) - math.Log(2*math.Pi)/2
}

// CDF is the distribution function.
func (m Gaussian) CDF(x float64) float64 { return math.Erfc(-x/m.Scale/math.Sqrt2) / 2 }

// Quantile inverts CDF, 0 < p < 1.
func (m Gaussian) Quantile(p float64) float64 {
	return m.Scale * math.Sqrt2 * mirrorQuantile(0.5, 0.5, p)
}

// Support is the real line.
func (Gaussian) Support() (lo, hi float64) { return math.Inf(-1), math.Inf(1) }

// Even is true.
func (Gaussian) Even() bool { return true }

// LogConcave is true.
func (Gaussian) LogConcave() bool { return true }

// Entropy is log2(s sqrt(2 pi e)).
func (m Gaussian) Entropy() float64 { return math.Log2(m.Scale * math.Sqrt(2*math.Pi*math.E)) }

// Cell integrates by quadrature, by a series next to 0.
func (m Gaussian) Cell(a, b float64) (prob, offset, about float64) {
	return mirrorCell(&normalHalfLine, m.Scale*math.Sqrt2, a, b)
}

var _ Model = Gaussian{}
