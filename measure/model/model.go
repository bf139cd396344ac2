// Package model holds the amplitude models of speech, their cells, quantiles
// and moments, and how they are fitted to recordings. The parametric ones are
// even about 0; a table may have any support. Amplitudes are in units of full
// scale = 1.0 when the scale is.
//
// Sources: M. D. Paez, T. H. Glisson, IEEE Trans. Commun. COM-20 (1972) for the
// Laplacian and gamma densities of speech; N. S. Jayant, P. Noll, Digital
// Coding of Waveforms (1984), ch. 2; M. K. Varanasi, B. Aazhang, J. Acoust.
// Soc. Am. 86 (1989) for the generalized Gaussian.
package model

import "fmt"

// Model is an amplitude density.
type Model interface {
	Name() string
	// Parameters are the shape and the scale, as New takes them.
	Parameters() (shape, scale float64)
	// RMS is the root mean square about 0.
	RMS() float64
	// Kurtosis is the fourth moment about the mean over the squared variance.
	Kurtosis() float64
	// PDF is p(x), 0 outside the support; it may be +Inf at 0.
	PDF(x float64) float64
	// LogPDF is ln p(x).
	LogPDF(x float64) float64
	// CDF is P(X <= x).
	CDF(x float64) float64
	// Quantile inverts CDF, 0 < p < 1.
	Quantile(p float64) float64
	// Cell integrates over (a, b), a < b, infinite ends allowed: prob is the
	// probability; offset the centroid less a where a >= 0, less b where
	// b <= 0, and as it is where the cell straddles 0; about the second moment
	// about the centroid, not divided by prob. All three keep their digits in
	// narrow and in remote cells (relative error about 1e-13).
	Cell(a, b float64) (prob, offset, about float64)
	// Support is where p may be above 0.
	Support() (lo, hi float64)
	// Even reports p(-x) = p(x).
	Even() bool
	// LogConcave reports whether ln p is concave.
	LogConcave() bool
	// Entropy is the differential entropy in bits.
	Entropy() float64
}

// Names lists the models that a bare rms settles.
func Names() []string { return []string{"laplacian", "gaussian", "gamma"} }

// FitNames lists the models that Fit takes: Names and those with a shape.
func FitNames() []string { return append(Names(), "free-gamma", "generalized-gaussian") }

// The shapes that New takes: beyond them the densities leave the range of
// double precision.
const (
	minGammaShape, maxGammaShape             = 1e-6, 100.0
	minGeneralizedShape, maxGeneralizedShape = 0.1, 100.0
)

// New returns the model of that name with the given shape and scale, in the
// notation of the model's type. The shape of a model that has none must be 0
// or the one it has by convention (1, 2, 1/2).
func New(name string, shape, scale float64) (Model, error) {
	if !(scale > 0 && scale < 1e300) {
		return nil, fmt.Errorf("scale %g: want a finite number above 0", scale)
	}
	switch name {
	case "laplacian":
		return Laplacian{scale}, fixed(name, shape, 1)
	case "gaussian":
		return Gaussian{scale}, fixed(name, shape, 2)
	case "gamma":
		return newGamma(0.5, scale), fixed(name, shape, 0.5)
	case "free-gamma":
		return newGamma(shape, scale), within(name, shape, minGammaShape, maxGammaShape)
	case "generalized-gaussian":
		return newGeneralized(shape, scale), within(name, shape, minGeneralizedShape, maxGeneralizedShape)
	}
	return nil, fmt.Errorf("no model %q; models are %v", name, FitNames())
}

func fixed(name string, shape, own float64) error {
	if shape == 0 || shape == own {
		return nil
	}
	return fmt.Errorf("shape %g: a %s has none to set", shape, name)
}

func within(name string, shape, lo, hi float64) error {
	if shape >= lo && shape <= hi {
		return nil
	}
	return fmt.Errorf("shape %g: want %g to %g for a %s", shape, lo, hi, name)
}

// OfRMS returns the model of that name, one of Names, with the given rms (> 0,
// finite).
func OfRMS(name string, rms float64) (Model, error) { return OfShape(name, 0, rms) }

// OfShape returns the model of that name with the given shape (as New takes
// it) and rms.
func OfShape(name string, shape, rms float64) (Model, error) {
	if !(rms > 0 && rms < 1e300) {
		return nil, fmt.Errorf("rms %g: want a finite number above 0", rms)
	}
	unit, err := New(name, shape, 1)
	if err != nil {
		return nil, err
	}
	return New(name, shape, rms/unit.RMS())
}
