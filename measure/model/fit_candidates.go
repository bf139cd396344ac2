package model

import "math"

// place is where a search is: ln shape and a logarithmic size for models with
// a shape, ln scale alone in [0] otherwise.
type place [2]float64

// candidate is how a model is searched for. Amplitudes are in LSBs.
type candidate struct {
	parameters int
	// start is a first guess from the moments.
	start func(b *bins) place
	// half returns ln of the probability from a >= 0 over a width w.
	half func(at place) func(a, w float64) float64
	// natural returns shape and scale.
	natural func(at place) (shape, scale float64)
	// slope is d ln scale / d at.
	slope func(at place) place
	// least and most bound the shape.
	least, most float64
}

var candidates = map[string]candidate{
	"laplacian": scaled(1, func(b *bins) float64 { return b.mean }, func(scale float64) func(a, w float64) float64 {
		return func(a, w float64) float64 {
			return -a/scale - math.Ln2 + math.Log(-math.Expm1(-w/scale))
		}
	}),
	"gaussian": scaled(2, func(b *bins) float64 { return math.Sqrt(b.square) }, func(scale float64) func(a, w float64) float64 {
		return unitHalf(normalHalfLine, scale*math.Sqrt2)
	}),
	"gamma": scaled(0.5, func(b *bins) float64 { return 2 * b.mean }, func(scale float64) func(a, w float64) float64 {
		return unitHalf(gammaHalfLine(0.5), scale)
	}),
	"free-gamma":           freeGammaCandidate,
	"generalized-gaussian": generalizedCandidate,
}

// scaled is a candidate with a scale only.
func scaled(shape float64, start func(b *bins) float64, half func(scale float64) func(a, w float64) float64) candidate {
	return candidate{
		parameters: 1,
		start:      func(b *bins) place { return place{math.Log(start(b))} },
		half:       func(at place) func(a, w float64) float64 { return half(math.Exp(at[0])) },
		natural:    func(at place) (float64, float64) { return shape, math.Exp(at[0]) },
		slope:      func(place) place { return place{1, 0} },
	}
}

// unitHalf stretches d.
func unitHalf(d stacy, scale float64) func(a, w float64) float64 {
	return func(a, w float64) float64 { return d.logMass(a/scale, w/scale) }
}

// freeGammaCandidate searches over ln k and the logarithm of the mean k t,
// which hardly depend on one another. Start: k from ln mean - mean ln, the
// usual closed form close to the solution of ln k - psi(k) = z.
var freeGammaCandidate = candidate{
	parameters: 2, least: minGammaShape, most: maxGammaShape,
	start: func(b *bins) place {
		z := math.Max(1e-3, math.Log(b.mean)-b.log)
		k := (3 - z + math.Sqrt((z-3)*(z-3)+24*z)) / (12 * z)
		return place{math.Log(math.Max(0.01, math.Min(k, 50))), math.Log(b.mean)}
	},
	half: func(at place) func(a, w float64) float64 {
		k := math.Exp(at[0])
		return unitHalf(gammaHalfLine(k), math.Exp(at[1])/k)
	},
	natural: func(at place) (shape, scale float64) { return math.Exp(at[0]), math.Exp(at[1] - at[0]) },
	slope:   func(place) place { return place{-1, 1} },
}

// generalizedCandidate searches over ln B and ln of a B^(-1/B), where |x|^B
// has its mean, for the same reason. Start: the shape whose E|x|/rms is that
// of the data (S. G. Mallat, IEEE Trans. PAMI 11, 1989).
var generalizedCandidate = candidate{
	parameters: 2, least: minGeneralizedShape, most: maxGeneralizedShape,
	start: func(b *bins) place {
		shape := momentShape(b.mean / math.Sqrt(b.square))
		a := math.Sqrt(b.square) * math.Exp((lgamma(1/shape)-lgamma(3/shape))/2)
		return place{math.Log(shape), math.Log(a) - math.Log(shape)/shape}
	},
	half: func(at place) func(a, w float64) float64 {
		shape, scale := generalizedNatural(at)
		return unitHalf(generalHalfLine(shape), scale)
	},
	natural: generalizedNatural,
	slope:   func(at place) place { return place{(1 - at[0]) * math.Exp(-at[0]), 1} },
}

func generalizedNatural(at place) (shape, scale float64) {
	return math.Exp(at[0]), math.Exp(at[1] + at[0]*math.Exp(-at[0]))
}

// momentShape solves Gamma(2/B) / sqrt(Gamma(1/B) Gamma(3/B)) = ratio for B,
// within what is a sensible start.
func momentShape(ratio float64) float64 {
	lo, hi := 0.2, 10.0
	for range 40 {
		mid := math.Sqrt(lo * hi)
		if math.Exp(lgamma(2/mid)-(lgamma(1/mid)+lgamma(3/mid))/2) < ratio {
			lo = mid
		} else {
			hi = mid
		}
	}
	return math.Sqrt(lo * hi)
}

// logLik is the mean ln of the cells' probabilities.
func (b *bins) logLik(half func(a, w float64) float64) float64 {
	var sum float64
	for i, x := range b.x {
		if x >= 0.5 {
			sum += b.share[i] * half(x-0.5, 1)
			continue
		}
		// The cell straddles 0.
		l, r := half(0, 0.5-x), half(0, 0.5+x)
		sum += b.share[i] * (r + math.Log1p(math.Exp(l-r)))
	}
	for i, x := range b.end {
		sum += b.endShare[i] * half(math.Max(0, x-0.5), math.Inf(1))
	}
	return sum
}
