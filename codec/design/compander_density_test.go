package design_test

import (
	"math"
	"testing"

	"fewbits/codec/design"
)

// TestCompanderLaplacian: p^q of a Laplacian is a Laplacian of scale b/q, so
// that levels and thresholds are -(b/q) ln(1-u) (closed form).
func TestCompanderLaplacian(t *testing.T) {
	m := unit(t, "laplacian")
	b := 1 / math.Sqrt2
	for _, q := range []float64{1. / 3, 0.5, 0.7, 1} {
		for _, n := range []int{2, 7, 64, 1001} {
			s, err := design.Compander(m, n, q, 0)
			if err != nil {
				t.Fatal(err)
			}
			for k, y := range s.Values {
				u := float64(2*k+1-n) / float64(n)
				want := math.Copysign(b/q*-math.Log1p(-math.Abs(u)), u)
				if math.Abs(y-want) > 1e-10*(1+math.Abs(want)) {
					t.Errorf("power %g, level %d of %d: %.14g, want %.14g", q, k, n, y, want)
				}
			}
		}
	}
}

// TestCompanderPrediction: Bennett's integral is what many levels reach. Power
// 1/3 of the Gaussian, Laplacian and gamma is Panter and Dite's constant; the
// Laplacian's closed form at power q < 1/2 is b^2 / (3 n^2 q^2 (1 - 2q)).
func TestCompanderPrediction(t *testing.T) {
	for _, name := range []string{"laplacian", "gaussian", "gamma"} {
		m := unit(t, name)
		if got, want := design.CompanderPrediction(m, 100, 1./3), design.PanterDite(m)/1e4; !near(got, want, 1e-9) {
			t.Errorf("%s: %g, want %g", name, got, want)
		}
		for _, q := range []float64{1. / 3, 0.25} {
			s, err := design.Compander(m, 2048, q, 0)
			if want := design.CompanderPrediction(m, 2048, q); err != nil || !near(s.MSE, want, 0.02) || len(s.Notes) != 1 {
				t.Errorf("%s power %g: error %g, prediction %g, notes %q, %v", name, q, s.MSE, want, s.Notes, err)
			}
		}
	}
	m := unit(t, "laplacian")
	if got, want := design.CompanderPrediction(m, 10, 0.4), 0.5/(3*100*0.16*0.2); !near(got, want, 1e-9) {
		t.Errorf("laplacian, power 0.4: %.12g, want %.12g", got, want)
	}
	if got := design.CompanderPrediction(m, 10, 0.5); !math.IsInf(got, 1) {
		t.Errorf("power 1/2: %g, want +Inf", got)
	}
}

// TestCompanderNearOptimum: no compander beats the optimum, and power 1/3 comes
// within 0.3 dB of it at 64 levels.
func TestCompanderNearOptimum(t *testing.T) {
	for name, m := range fiveModels(t) {
		best, err := design.LloydMax(m, 64, design.Mirror)
		if err != nil {
			t.Fatal(err)
		}
		for _, q := range []float64{0.2, 1. / 3, 0.5} {
			s, err := design.Compander(m, 64, q, 0)
			if err != nil || s.MSE < best.MSE || q == 1./3 && design.Decibels(s.MSE, best.MSE) > 0.3 {
				t.Errorf("%s power %g: %.3f dB above the optimum, %v", name, q, design.Decibels(s.MSE, best.MSE), err)
			}
		}
	}
}

// TestCompanderChords: the table is even within a chord, has K slopes a side,
// and many chords come back to the smooth law.
func TestCompanderChords(t *testing.T) {
	m := unit(t, "laplacian")
	s, err := design.Compander(m, 128, 1./3, 8)
	if err != nil {
		t.Fatal(err)
	}
	for k := range 64 {
		if s.Values[63-k] != -s.Values[64+k] {
			t.Fatalf("level %d has no mirror image", k)
		}
	}
	slopes := 0
	for k := 64; k < 126; k++ {
		first, next := s.Thresholds[k]-s.Thresholds[k-1], s.Thresholds[k+1]-s.Thresholds[k]
		if math.Abs(next-first) > 1e-12 {
			slopes++
			if (k-63)%8 != 0 {
				t.Errorf("the slope changes within a chord, at threshold %d", k)
			}
		}
	}
	if slopes != 7 {
		t.Errorf("%d changes of slope above 0: want 7", slopes)
	}
	smooth, _ := design.Compander(m, 128, 1./3, 0)
	fine, _ := design.Compander(m, 128, 1./3, 64)
	if loss := design.Decibels(s.MSE, smooth.MSE); !(loss > 0 && loss < 0.5) {
		t.Errorf("8 chords lose %.3f dB", loss)
	}
	if math.Abs(design.Decibels(fine.MSE, smooth.MSE)) > 0.05 {
		t.Errorf("64 chords: %g, smooth %g", fine.MSE, smooth.MSE)
	}
}

// TestCompanderAnySupport: on a uniform density every law is uniform.
func TestCompanderAnySupport(t *testing.T) {
	m := tabulated(t, []float64{2, 3}, []float64{1, 1})
	for _, segments := range []int{0, 4} {
		s, err := design.Compander(m, 8, 0.7, segments)
		if err != nil || !near(s.MSE, 1.0/(12*64), 1e-9) || !near(s.Values[0], 2+1.0/16, 1e-12) {
			t.Errorf("%d segments: mse %g, first level %g: %v", segments, s.MSE, s.Values[0], err)
		}
	}
	for _, bad := range []struct {
		n        int
		power    float64
		segments int
	}{{1, 0.3, 0}, {8, 0, 0}, {8, math.NaN(), 0}, {8, 1.1, 0}, {8, 0.3, -1}, {8, 0.3, 9}, {1 << 17, 0.3, 0}} {
		if _, err := design.Compander(m, bad.n, bad.power, bad.segments); err == nil {
			t.Errorf("%+v: no error", bad)
		}
	}
}

func BenchmarkCompander(b *testing.B) {
	m := unit(b, "gaussian")
	for b.Loop() {
		if _, err := design.Compander(m, 256, 1./3, 0); err != nil {
			b.Fatal(err)
		}
	}
}
