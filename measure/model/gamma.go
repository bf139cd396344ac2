package model

import "math"

// Gamma is the speech trade's gamma density, shape 1/2: exp(-|x|/t) /
// (2 sqrt(pi t |x|)), rms = t sqrt(3)/2. Infinite at 0. Source: Paez and
// Glisson 1972.
type Gamma struct{ Scale float64 } // t

// Name is "gamma".
func (Gamma) Name() string { return "gamma" }

// RMS is t sqrt(3)/2.
func (m Gamma) RMS() float64 { return m.Scale * sqrt3 / 2 }

// PDF is the density; +Inf at 0.
func (m Gamma) PDF(x float64) float64 {
	x = math.Abs(x)
	return math.Exp(-x/m.Scale) / (2 * math.Sqrt(math.Pi*m.Scale*x))
}

// CDF is the distribution function: with x = t u^2 the half line is that of a
// Gaussian in u, so that P(|X| > x) = erfc(sqrt(x/t)).
func (m Gamma) CDF(x float64) float64 {
	if x < 0 {
		return math.Erfc(math.Sqrt(-x/m.Scale)) / 2
	}
	return 1 - math.Erfc(math.Sqrt(x/m.Scale))/2
}

// Quantile inverts CDF, 0 < p < 1.
func (m Gamma) Quantile(p float64) float64 {
	if p < 0.5 {
		u := math.Erfcinv(2 * p)
		return -m.Scale * u * u
	}
	u := math.Erfcinv(2 * (1 - p))
	return m.Scale * u * u
}

// Support is the real line.
func (Gamma) Support() (lo, hi float64) { return math.Inf(-1), math.Inf(1) }

// LogConcave is false: the density is infinite at 0.
func (Gamma) LogConcave() bool { return false }

// Entropy is that of the gamma density of shape 1/2 plus one bit for the sign.
func (m Gamma) Entropy() float64 {
	const psiHalf = -1.9635100260214234794 // digamma(1/2) = -gamma - 2 ln 2
	nats := 0.5 + math.Log(m.Scale) + math.Log(math.Sqrt(math.Pi)) + 0.5*psiHalf + math.Ln2
	return nats / math.Ln2
}

// Cell integrates in u = sqrt(x/t), where the density is smooth.
func (m Gamma) Cell(a, b float64) (p, off, about float64) { return mirrorCell(a, b, m.half) }

func (m Gamma) half(a, b float64) (p, off, about float64) {
	ua := math.Sqrt(a / m.Scale)
	far := ua + 45/(ua+math.Sqrt(ua*ua+45))
	w := far - ua
	if !math.IsInf(b, 1) {
		w = math.Min(w, (b-a)/m.Scale/(math.Sqrt(b/m.Scale)+ua))
	}
	edge := math.Exp(-ua*ua) / math.Sqrt(math.Pi)
	p, off, about = cellSum(0, w, 2/(1+ua/2),
		func(u float64) float64 { return math.Exp(-u * (2*ua + u)) },
		func(u float64) float64 { return u * (2*ua + u) })
	return p * edge, off * m.Scale, about * edge * m.Scale * m.Scale
}

var _ Model = Gamma{}
