// Package model holds the amplitude models of speech: densities that are even
// about 0, their cells, quantiles and moments. Amplitudes are in units of full
// scale = 1.0 when the rms is.
//
// Sources: M. D. Paez, T. H. Glisson, IEEE Trans. Commun. COM-20 (1972) for the
// Laplacian and gamma densities of speech; N. S. Jayant, P. Noll, Digital
// Coding of Waveforms (1984), ch. 2.
package model

import "fmt"

// Model is an amplitude density, even about 0.
type Model interface {
	Name() string
	RMS() float64
	PDF(x float64) float64
	CDF(x float64) float64
	Quantile(p float64) float64
	Cell(a, b float64) (prob, offset, about float64)
	Support() (lo, hi float64)
	LogConcave() bool
	// Entropy is the differential entropy in bits.
	Entropy() float64
}

// Names lists the models that a bare rms settles.
func Names() []string { return []string{"laplacian", "gaussian", "gamma"} }

// OfRMS returns the model of that name with the given rms (> 0, finite).
func OfRMS(name string, rms float64) (Model, error) {
	if !(rms > 0 && rms < 1e300) {
		return nil, fmt.Errorf("rms %g: want a finite number above 0", rms)
	}
	switch name {
	case "laplacian":
		return Laplacian{Scale: rms / sqrt2}, nil
	case "gaussian":
		return Gaussian{Sigma: rms}, nil
	case "gamma":
		return Gamma{Scale: rms * 2 / sqrt3}, nil
	}
	return nil, fmt.Errorf("no model %q; models are %v", name, Names())
}

const (
	sqrt2 = 1.4142135623730950488016887242097
	sqrt3 = 1.7320508075688772935274463415059
)

// mirrorCell evaluates a cell of an even density from one on the half line
// 0 <= a < b. A cell that straddles 0 is put together from its halves.
func mirrorCell(a, b float64, half func(a, b float64) (p, off, about float64)) (p, off, about float64) {
	switch {
	case a >= 0:
		return half(a, b)
	case b <= 0:
		p, off, about = half(-b, -a)
		return p, -off, about
	}
	p1, o1, m1 := half(0, -a)
	p2, o2, m2 := half(0, b)
	p = p1 + p2
	if p == 0 {
		return 0, 0, 0
	}
	off = (p2*o2 - p1*o1) / p
	about = m1 + m2 + p1*p2/p*(o1+o2)*(o1+o2)
	return p, off, about
}
