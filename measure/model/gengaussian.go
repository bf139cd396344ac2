package model

import "math"

// GeneralizedGaussian is B/(2 a Gamma(1/B)) exp(-(|x|/a)^B): shape 1 is the
// Laplacian, 2 the Gaussian (a = rms sqrt 2), below 1 peaked and heavy-tailed.
// rms = a sqrt(Gamma(3/B)/Gamma(1/B)). Source: M. K. Varanasi, B. Aazhang, J.
// Acoust. Soc. Am. 86 (1989).
type GeneralizedGaussian struct {
	Shape, Scale float64 // B, a
	d            stacy
}

// newGeneralized wants parameters in range.
func newGeneralized(shape, scale float64) GeneralizedGaussian {
	return GeneralizedGaussian{shape, scale, generalHalfLine(shape)}
}

// Name is "generalized-gaussian".
func (GeneralizedGaussian) Name() string { return "generalized-gaussian" }

// Parameters are B and a.
func (m GeneralizedGaussian) Parameters() (shape, scale float64) { return m.Shape, m.Scale }

// RMS is a sqrt(Gamma(3/B)/Gamma(1/B)).
func (m GeneralizedGaussian) RMS() float64 {
	return m.Scale * math.Exp((lgamma(3/m.Shape)-lgamma(1/m.Shape))/2)
}

// Kurtosis is Gamma(5/B) Gamma(1/B) / Gamma(3/B)^2.
func (m GeneralizedGaussian) Kurtosis() float64 {
	return math.Exp(lgamma(5/m.Shape) + lgamma(1/m.Shape) - 2*lgamma(3/m.Shape))
}

func lgamma(x float64) float64 {
	l, _ := math.Lgamma(x)
	return l
}

// PDF is the density.
func (m GeneralizedGaussian) PDF(x float64) float64 { return m.d.pdf(math.Abs(x)/m.Scale) / m.Scale }

// LogPDF is its natural logarithm.
func (m GeneralizedGaussian) LogPDF(x float64) float64 {
	return m.d.logPDF(math.Abs(x)/m.Scale) - math.Log(m.Scale)
}

// CDF is the distribution function, by the incomplete gamma function.
func (m GeneralizedGaussian) CDF(x float64) float64 {
	return mirrorCDF(1/m.Shape, m.d.power(math.Abs(x)/m.Scale), x)
}

// Quantile inverts CDF, 0 < p < 1.
func (m GeneralizedGaussian) Quantile(p float64) float64 {
	return m.Scale * mirrorQuantile(1/m.Shape, 1/m.Shape, p)
}

// Support is the real line.
func (GeneralizedGaussian) Support() (lo, hi float64) { return math.Inf(-1), math.Inf(1) }

// Even is true.
func (GeneralizedGaussian) Even() bool { return true }

// LogConcave is true for B >= 1.
func (m GeneralizedGaussian) LogConcave() bool { return m.Shape >= 1 }

// Entropy is 1/B - ln(B/(2 a Gamma(1/B))) nats, in bits.
func (m GeneralizedGaussian) Entropy() float64 {
	return (1/m.Shape - math.Log(m.d.c) + math.Log(m.Scale)) / math.Ln2
}

// Cell integrates by quadrature, by a series next to 0.
func (m GeneralizedGaussian) Cell(a, b float64) (prob, offset, about float64) {
	return mirrorCell(&m.d, m.Scale, a, b)
}

var _ Model = GeneralizedGaussian{}
