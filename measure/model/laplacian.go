package model

import "math"

// Laplacian is exp(-|x|/b)/(2b), rms = b sqrt 2.
type Laplacian struct{ Scale float64 } // b

// Name is "laplacian".
func (Laplacian) Name() string { return "laplacian" }

// RMS is b sqrt 2.
func (m Laplacian) RMS() float64 { return m.Scale * sqrt2 }

// PDF is the density.
func (m Laplacian) PDF(x float64) float64 { return math.Exp(-math.Abs(x)/m.Scale) / (2 * m.Scale) }

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

// LogConcave is true.
func (Laplacian) LogConcave() bool { return true }

// Entropy is log2(2 e b).
func (m Laplacian) Entropy() float64 { return math.Log2(2 * math.E * m.Scale) }

// Cell integrates in closed form where the cell is wide, by quadrature where
// differences would cancel.
func (m Laplacian) Cell(a, b float64) (p, off, about float64) {
	return mirrorCell(a, b, m.half)
}

func (m Laplacian) half(a, b float64) (p, off, about float64) {
	w := (b - a) / m.Scale
	edge := math.Exp(-a/m.Scale) / 2
	if w < 4 {
		p, off, about = cellSum(0, w, 4, func(u float64) float64 { return math.Exp(-u) }, func(u float64) float64 { return u })
	} else {
		q, wq := math.Exp(-w), 0.0
		if q > 0 {
			wq = w * q
		}
		p = 1 - q
		off = 1 - wq/p
		// E x^2 = (2 - e^-w (w^2 + 2w + 2)) / p
		second := 2.0
		if q > 0 {
			second = 2 - q*(w*w+2*w+2)
		}
		about = second - p*off*off
	}
	return p * edge, off * m.Scale, about * edge * m.Scale * m.Scale
}

var _ Model = Laplacian{}
