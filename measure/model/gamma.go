package model

import "math"

// Gamma is the two-sided gamma density |x|^(k-1) exp(-|x|/t) / (2 Gamma(k)
// t^k), rms = t sqrt(k(k+1)), infinite at 0 for k < 1. Shape 1/2 is the speech
// trade's gamma (Paez, Glisson 1972), 1 the Laplacian.
type Gamma struct {
	Shape, Scale float64 // k, t
	d            stacy
}

// newGamma wants parameters in range.
func newGamma(shape, scale float64) Gamma { return Gamma{shape, scale, gammaHalfLine(shape)} }

// Name is "gamma" for shape 1/2, else "free-gamma".
func (m Gamma) Name() string {
	if m.Shape == 0.5 {
		return "gamma"
	}
	return "free-gamma"
}

// Parameters are k and t.
func (m Gamma) Parameters() (shape, scale float64) { return m.Shape, m.Scale }

// RMS is t sqrt(k(k+1)).
func (m Gamma) RMS() float64 { return m.Scale * math.Sqrt(m.Shape*(m.Shape+1)) }

// Kurtosis is (k+2)(k+3)/(k(k+1)).
func (m Gamma) Kurtosis() float64 { return (m.Shape + 2) * (m.Shape + 3) / (m.Shape * (m.Shape + 1)) }

// PDF is the density; +Inf at 0 for k < 1.
func (m Gamma) PDF(x float64) float64 { return m.d.pdf(math.Abs(x)/m.Scale) / m.Scale }

// LogPDF is its natural logarithm.
func (m Gamma) LogPDF(x float64) float64 {
	return m.d.logPDF(math.Abs(x)/m.Scale) - math.Log(m.Scale)
}

// CDF is the distribution function, by the incomplete gamma function.
func (m Gamma) CDF(x float64) float64 { return mirrorCDF(m.Shape, math.Abs(x)/m.Scale, x) }

// Quantile inverts CDF, 0 < p < 1.
func (m Gamma) Quantile(p float64) float64 { return m.Scale * mirrorQuantile(m.Shape, 1, p) }

// Support is the real line.
func (Gamma) Support() (lo, hi float64) { return math.Inf(-1), math.Inf(1) }

// Even is true.
func (Gamma) Even() bool { return true }

// LogConcave is true for k = 1 only: below it the density is infinite at 0,
// above it has two peaks.
func (m Gamma) LogConcave() bool { return m.Shape == 1 }

// Entropy is that of the one-sided gamma density plus one bit for the sign.
func (m Gamma) Entropy() float64 {
	k := m.Shape
	l, _ := math.Lgamma(k)
	return (k+math.Log(m.Scale)+l+(1-k)*digamma(k))/math.Ln2 + 1
}

// Cell integrates by quadrature, by a series next to 0.
func (m Gamma) Cell(a, b float64) (prob, offset, about float64) {
	return mirrorCell(&m.d, m.Scale, a, b)
}

var _ Model = Gamma{}
