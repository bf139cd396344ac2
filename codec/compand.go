package codec

import (
	"fmt"
	"math"
)

// Law is a smooth companding law on [0, 1]: Compress is increasing with
// Compress(0) = 0 and Compress(1) = 1, Expand its inverse.
type Law interface {
	Compress(x float64) float64
	Expand(u float64) float64
}

// MuLaw is ln(1+mu x)/ln(1+mu) with Mu > 0 (255 is customary). Source: B.
// Smith, Bell Syst. Tech. J. 36 (1957).
type MuLaw struct{ Mu float64 }

// Compress maps an amplitude in [0, 1] to [0, 1].
func (l MuLaw) Compress(x float64) float64 { return math.Log1p(l.Mu*x) / math.Log1p(l.Mu) }

// Expand is the inverse of Compress.
func (l MuLaw) Expand(u float64) float64 { return math.Expm1(u*math.Log1p(l.Mu)) / l.Mu }

// ALaw is Ax/(1+ln A) up to 1/A and (1+ln Ax)/(1+ln A) above, with A >= 1
// (87.6 is customary). Source: K. W. Cattermole, Principles of Pulse Code
// Modulation (1969), from memory; the smooth law ITU-T G.711 approximates.
type ALaw struct{ A float64 }

// Compress maps an amplitude in [0, 1] to [0, 1].
func (l ALaw) Compress(x float64) float64 {
	d := 1 + math.Log(l.A)
	if x*l.A < 1 {
		return l.A * x / d
	}
	return (1 + math.Log(l.A*x)) / d
}

// Expand is the inverse of Compress.
func (l ALaw) Expand(u float64) float64 {
	d := 1 + math.Log(l.A)
	if u*d < 1 {
		return u * d / l.A
	}
	return math.Exp(u*d-1) / l.A
}

// Companded returns n cells that are even in the compressed domain over
// [-peak, peak]; the reconstruction value is the expansion of the compressed
// cell's middle. peak is the overload point (full scale = 1.0). A value on a
// threshold goes outwards.
func Companded(n int, l Law, peak float64, s Shape) (*Staircase, error) {
	if err := checkShape(n, s); err != nil {
		return nil, err
	}
	if !(peak > 0 && peak <= math.MaxFloat64) {
		return nil, fmt.Errorf("peak %g: want a finite number above 0", peak)
	}
	out := mirrored(n, func(u float64) float64 { return peak * l.Expand(u) })
	out.Lo, out.Hi = -peak, peak
	return out, out.Check()
}

var (
	_ Law = MuLaw{}
	_ Law = ALaw{}
)
