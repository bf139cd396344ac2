package design_test

import (
	"math"
	"testing"

	"fewbits/codec/design"
)

// TestConstants: high-rate constants and Shannon bound of unit variance. The
// Gaussian's sqrt(3) pi/2 and the Laplacian's 9/2 are in print (Panter, Dite
// 1951; Jayant, Noll 1984, from memory); the others are closed forms computed
// independently.
func TestConstants(t *testing.T) {
	for _, c := range []struct {
		name            string
		panter, shannon float64
	}{
		{"gaussian", math.Sqrt(3) * math.Pi / 2, 1},
		{"laplacian", 4.5, math.E / math.Pi},
		{"gamma", 5.621881849504, 0.374306322378},
	} {
		m := unit(t, c.name)
		if got := design.PanterDite(m); !near(got, c.panter, 1e-11) {
			t.Errorf("%s: Panter-Dite %.13g, want %.13g", c.name, got, c.panter)
		}
		if got := design.ShannonBound(m, 3); !near(got, c.shannon/64, 1e-11) {
			t.Errorf("%s: Shannon bound at 3 bits %.13g, want %.13g", c.name, got, c.shannon/64)
		}
		if got := design.Power(m); !near(got, 1, 1e-13) {
			t.Errorf("%s: power %.15g", c.name, got)
		}
		if h := design.DifferentialEntropy(bare{m}); !near(h, m.Entropy(), 1e-9) {
			t.Errorf("%s: entropy by quadrature %.13g, closed form %.13g", c.name, h, m.Entropy())
		}
	}
}

// bare hides everything but the interface.
type bare struct{ design.Density }

// TestSNRAt: without overload and with fine steps a uniform quantizer loses a
// dB a dB (the step error stays step^2/12); at 0 dB the SNR is the design's.
func TestSNRAt(t *testing.T) {
	m := unit(t, "gaussian")
	values := make([]float64, 4001)
	for k := range values {
		values[k] = float64(k-2000) / 100
	}
	thresholds := mids(values)
	whole := 10 * math.Log10(12/1e-4)
	for _, db := range []float64{0, 6, -6, -12} {
		if got := design.SNRAt(m, thresholds, values, db); math.Abs(got-whole-db) > 1e-6 {
			t.Errorf("%g dB: SNR %.9g, want %.9g", db, got, whole+db)
		}
	}
	s, _ := design.LloydMax(m, 8, design.Mirror)
	if got := design.SNRAt(m, s.Thresholds, s.Values, 0); math.Abs(got-14.6158) > 1e-4 { // J. Max 1960, N = 8
		t.Errorf("SNR %.6g dB of 8 levels", got)
	}
	if up, down := design.SNRAt(m, s.Thresholds, s.Values, 6), design.SNRAt(m, s.Thresholds, s.Values, -6); !(up < 14.6158 && down < 14.6158) {
		t.Errorf("off level: %g and %g dB, want below the design's", up, down)
	}
}

// TestEvaluate: one bit on a Laplacian of scale 1; values +-1, overload points
// +-2: the probability beyond is exp(-2), the error there exp(-2) (1+1+1).
func TestEvaluate(t *testing.T) {
	m := unit(t, "laplacian")
	k := math.Sqrt2 // unit variance is scale 1/sqrt 2
	f := design.Evaluate(m, []float64{0}, []float64{-1 / k, 1 / k})
	e2 := math.Exp(-2)
	if !near(f.MSE, 0.5, 1e-14) || f.Entropy != 1 || !near(f.Overloaded, e2, 1e-13) || !near(f.Overload, e2*(2+2+1)/2, 1e-13) || !near(f.Granular, f.MSE-f.Overload, 1e-14) {
		t.Errorf("%+v; want overload %g of probability %g", f, e2*2.5, e2)
	}
}
