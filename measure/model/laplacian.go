package model

import "math"

// Laplacian is exp(-|x|/b)/(2b), rms = b sqrt 2, kurtosis 6.
type Laplacian struct{ Scale float64 } // b

// Name is "laplacian".
func (Laplacian) Name() string { return "laplacian" }

// Parameters are the shape, 1 by convention, and b.
func (m Laplacian) Parameters() (shape, scale float64) { return 1, m.Scale }

// RMS is b sqrt 2.
func (m Laplacian) RMS() float64 { return m.Scale * math.Sqrt2 }

// Kurtosis is 6.
func (Laplacian) Kurtosis() float64 { return 6 }

// PDF is the density.
func (m Laplacian) PDF(x float64) float64 { return math.Exp(-math.Abs(x)/m.Scale) / (2 * m.Scale) }

// LogPDF is its natural logarithm.
func (m Laplacian) LogPDF(x float64) float64 {
	return -math.Abs(x)/m.Scale - math.Ln2 - math.Log(m.Scale)
}

// CDF is the distribution function.
func (m Laplacian) CDF(x float64) float64 {
	if x < 0 {
		return math.Exp(x/m.Scale) / 2
	}
	return 1 - math.Exp(-x/m.Scale)/2
}

// Quantile inverts CDF, 0 < p < 1.
func (m Laplacian) Quantile(p float64) float64 {
	if p < 0.5 {
		return m.Scale * math.Log(2*p)
	}
	return -m.Scale * math.Log(2*(1-p))
}

// Support is the real line.
func (Laplacian) Support() (lo, hi float64) { return math.Inf(-1), math.Inf(1) }

// Even is true.
func (Laplacian) Even() bool { return true }

// LogConcave is true.
func (Laplacian) LogConcave() bool { return true }

// Entropy is log2(2 e b).
func (m Laplacian) Entropy() float64 { return math.Log2(2 * math.E * m.Scale) }

// Cell is in closed form.
func (m Laplacian) Cell(a, b float64) (prob, offset, about float64) {
	return mirrorCell(exponentialHalf{}, m.Scale, a, b)
}

// exponentialHalf is exp(-x)/2, x >= 0.
type exponentialHalf struct{}

func (exponentialHalf) cell(a, w float64) moments {
	edge := math.Exp(-a) / 2
	if math.IsInf(w, 1) {
		return moments{edge, 1, edge}
	}
	area, centroid, variance := fallCell(w)
	p := edge * area * w
	return moments{p, centroid * w, p * variance * w * w}
}

var _ Model = Laplacian{}
