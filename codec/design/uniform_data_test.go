package design

import (
	"math"
	"math/rand/v2"
	"testing"

	"fewbits/codec"
)

// uniformMSE is the definition, by way of codec's own uniform staircase.
func uniformMSE(t testing.TB, h Histogram, n int, v float64) float64 {
	s, err := codec.Uniform(n, v, codec.Shape(n%2))
	if err != nil {
		t.Fatal(err)
	}
	mse, _ := EvaluateData(h, s.Thresholds, s.Values)
	return mse
}

// TestUniformDataIsTheOptimum compares with 20,000 overload points over the
// whole range and with the neighbourhood of the one found.
func TestUniformDataIsTheOptimum(t *testing.T) {
	r := rand.New(rand.NewPCG(4, 4))
	for trial := range 60 {
		h := smallHistogram(r, trial%2 == 0)
		if len(h.Values) == 1 {
			continue
		}
		n := 2 + r.IntN(9)
		s, err := UniformData(h, n)
		if err != nil {
			t.Fatal(err)
		}
		power, _ := EvaluateData(h, nil, []float64{0})
		if got := uniformMSE(t, h, n, s.Aim); math.Abs(got-s.MSE) > 1e-12*power {
			t.Fatalf("mse %g, at %g it is %g", s.MSE, s.Aim, got)
		}
		far := float64(n) * math.Max(-h.Values[0], h.Values[len(h.Values)-1])
		for i := range 20000 {
			v := far * math.Pow(10, -3*float64(i)/20000)
			if i%2 == 1 {
				v = s.Aim * (1 + 0.2*r.NormFloat64()*math.Pow(10, -6*r.Float64()))
			}
			if v <= 0 {
				continue
			}
			if mse := uniformMSE(t, h, n, v); mse < s.MSE-1e-12*power {
				t.Fatalf("%v, n = %d: v = %g gives %g, less than %g at %g", h, n, v, mse, s.MSE, s.Aim)
			}
		}
	}
}

// Uniform density: the overload point is the edge of the support, the error
// v^2/(3 n^2) (closed form).
func TestUniformDataOfUniform(t *testing.T) {
	var h Histogram
	for w := -1000; w < 1000; w++ {
		h.push((float64(w)+0.5)/1000, 1)
	}
	for _, n := range []int{2, 5, 16} {
		s, err := UniformData(h, n)
		if err != nil {
			t.Fatal(err)
		}
		if math.Abs(s.Aim-1) > 0.002 || math.Abs(s.MSE*3*float64(n*n)-1) > 0.01 || s.Proof != Exact {
			t.Errorf("n = %d: overload %g, mse %g (%s)", n, s.Aim, s.MSE, s.Proof)
		}
	}
}

// TestUniformDataAgainstPublished: best step of a uniform quantizer for the
// unit-variance Gaussian. Source: J. Max, IRE Trans. Inform. Theory IT-6
// (1960), Table II: 1.596, 0.9957, 0.3352 at n = 2, 4, 16 (from memory),
// and error 0.01154 at n = 16.
func TestUniformDataAgainstPublished(t *testing.T) {
	var h Histogram
	for w := -6000; w <= 6000; w++ {
		x := float64(w) / 1000
		h.push(x, math.Exp(-x*x/2))
	}
	for n, step := range map[int]float64{2: 1.596, 4: 0.9957, 16: 0.3352} {
		s, err := UniformData(h, n)
		if err != nil {
			t.Fatal(err)
		}
		if got := 2 * s.Aim / float64(n); math.Abs(got-step) > 6e-4 {
			t.Errorf("n = %d: step %.4f, Max prints %.4f", n, got, step)
		}
		if n == 16 && math.Abs(s.MSE-0.01154) > 6e-6 {
			t.Errorf("mse %.6f, Max prints 0.01154", s.MSE)
		}
	}
}

func TestUniformDataManyLevels(t *testing.T) {
	h := laplacianCounts(1500)
	for _, n := range []int{256, 4096} {
		s, err := UniformData(h, n)
		if err != nil {
			t.Fatal(err)
		}
		t.Logf("n = %d: v = %g, mse %g, %d rounds, %s %v", n, s.Aim, s.MSE, s.Rounds, s.Proof, s.Notes)
		for i := range 100 {
			v := s.Aim * (0.8 + 0.004*float64(i))
			if mse := uniformMSE(t, h, n, v); mse < s.MSE*(1-1e-9) {
				t.Errorf("n = %d: v = %g gives %g, less than %g", n, v, mse, s.MSE)
			}
		}
		if n <= exactUniform && s.Proof != Exact {
			t.Errorf("n = %d: proof %q", n, s.Proof)
		}
	}
}

func BenchmarkUniformData256(b *testing.B) {
	h := benchHistogram(1e4)
	for b.Loop() {
		if _, err := UniformData(h, 256); err != nil {
			b.Fatal(err)
		}
	}
}
