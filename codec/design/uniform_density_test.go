package design_test

import (
	"math"
	"testing"

	"fewbits/codec/design"
)

// TestOptimalUniformPrinted: Max 1960, Table II (steps for N = 2 to 16 and 32;
// the MSE he prints for 32, .003490, lies 0.15 % below the true minimum), and
// from memory Jayant and Noll 1984 for 4 bits, Laplacian and gamma.
func TestOptimalUniformPrinted(t *testing.T) {
	for n, want := range map[int]float64{2: 1.596, 3: 1.224, 4: 0.9957, 5: 0.8430, 6: 0.7334, 7: 0.6508, 8: 0.5860, 9: 0.5338, 16: 0.3352, 32: 0.1881} {
		s, err := design.OptimalUniform(unit(t, "gaussian"), n)
		if err != nil || math.Abs(s.Values[1]-s.Values[0]-want) > 6e-5*math.Pow(10, math.Floor(1+math.Log10(want))) {
			t.Errorf("%d levels: step %.6g, printed %g: %v", n, s.Values[1]-s.Values[0], want, err)
		}
	}
	for name, want := range map[string]float64{"gaussian": 19.38, "laplacian": 15.96, "gamma": 13.00} {
		s, _ := design.OptimalUniform(unit(t, name), 16)
		if snr := design.Decibels(1, s.MSE); math.Abs(snr-want) > 6e-3 {
			t.Errorf("%s, 4 bits: %.4f dB, printed %g", name, snr, want)
		}
	}
}

// TestOptimalUniformIsLeast: no other step is better, at any number of levels
// and for models far from Gaussian.
func TestOptimalUniformIsLeast(t *testing.T) {
	for name, m := range fiveModels(t) {
		for _, n := range []int{2, 3, 15, 64, 1000, 65536} {
			s, err := design.OptimalUniform(m, n)
			if err != nil {
				t.Error(name, err)
				continue
			}
			step := s.Values[1] - s.Values[0]
			for _, k := range []float64{0.2, 0.5, 0.9, 0.9999, 1.0001, 1.1, 2, 5} {
				if n == 65536 && math.Abs(k-1) > 0.01 {
					continue
				}
				values := make([]float64, n)
				for i := range values {
					values[i] = k * s.Values[i]
				}
				if mse, _ := design.EvaluateDensity(m, mids(values), values); mse < s.MSE {
					t.Errorf("%s %d: step %g has %g, %g times that %g", name, n, step, s.MSE, k, mse)
				}
			}
		}
	}
}

// TestOptimalUniformOfUniform: the step of a uniform density over [-1, 1] is
// 2/n, its error 1/(3 n^2) (closed form).
func TestOptimalUniformOfUniform(t *testing.T) {
	m := tabulated(t, []float64{-1, 1}, []float64{1, 1})
	for _, n := range []int{2, 3, 8, 255} {
		s, err := design.OptimalUniform(m, n)
		if err != nil || !near(s.Values[1]-s.Values[0], 2/float64(n), 1e-12) || !near(s.MSE, 1/(3*float64(n*n)), 1e-12) {
			t.Errorf("%d levels: %v, mse %g: %v", n, s.Values, s.MSE, err)
		}
	}
	if _, err := design.OptimalUniform(tabulated(t, []float64{0, 1}, []float64{1, 1}), 4); err == nil {
		t.Error("a density off centre: no error")
	}
	for _, n := range []int{-1, 1, 1 << 17} {
		if _, err := design.OptimalUniform(m, n); err == nil {
			t.Errorf("%d levels: no error", n)
		}
	}
}

func BenchmarkOptimalUniform(b *testing.B) {
	for b.Loop() {
		if _, err := design.OptimalUniform(unit(b, "gamma"), 256); err != nil {
			b.Fatal(err)
		}
	}
}
