package design_test

import (
	"encoding/json"
	"math"
	"os"
	"testing"

	"fewbits/codec/design"
	"fewbits/measure/model"
)

// row is one number of levels of testdata/optimal.json: computed
// independently in 60-digit arithmetic for unit variance.
type row struct {
	N              int
	MirrorMSE      float64   `json:"mirror_mse"`
	MirrorEntropy  float64   `json:"mirror_entropy"`
	MirrorValues   []float64 `json:"mirror_values"`
	MSE            float64   `json:"mse"` // without the mirror constraint
	UniformStep    float64   `json:"uniform_step"`
	UniformMSE     float64   `json:"uniform_mse"`
	UniformEntropy float64   `json:"uniform_entropy"`
}

func optimal(t *testing.T) map[string][]row {
	b, err := os.ReadFile("testdata/optimal.json")
	if err != nil {
		t.Fatal(err)
	}
	var f struct {
		PDFs map[string]struct{ Rows []row }
	}
	if err := json.Unmarshal(b, &f); err != nil {
		t.Fatal(err)
	}
	out := map[string][]row{}
	for name, p := range f.PDFs {
		out[name] = p.Rows
	}
	if len(out) != 3 {
		t.Fatalf("%d densities in the table: want 3", len(out))
	}
	return out
}

func unit(t testing.TB, name string) model.Model {
	m, err := model.OfRMS(name, 1)
	if err != nil {
		t.Fatal(err)
	}
	return m
}

func near(got, want, rel float64) bool { return math.Abs(got-want) <= rel*math.Abs(want) }

func TestLloydMaxMirrorAgainstComputed(t *testing.T) {
	for name, rows := range optimal(t) {
		for _, r := range rows {
			s, err := design.LloydMax(unit(t, name), r.N, design.Mirror)
			if err != nil {
				t.Errorf("%s %d: %v", name, r.N, err)
				continue
			}
			if !near(s.MSE, r.MirrorMSE, 1e-9) || !near(s.Entropy, r.MirrorEntropy, 1e-9) || !(s.Residual < 1e-10) {
				t.Errorf("%s %d: mse %.12g want %.12g, entropy %.12g want %.12g, residual %.2g",
					name, r.N, s.MSE, r.MirrorMSE, s.Entropy, r.MirrorEntropy, s.Residual)
			}
			upper := s.Values[r.N-len(r.MirrorValues):]
			for k, want := range r.MirrorValues {
				if !near(upper[k], want, 1e-9) {
					t.Errorf("%s %d: value %.12g, want %.12g", name, r.N, upper[k], want)
				}
			}
		}
	}
}

// TestLloydMaxFree: for even N the gamma density has better tables off centre;
// for the others the mirror table is the optimum.
func TestLloydMaxFree(t *testing.T) {
	for name, rows := range optimal(t) {
		for _, r := range rows {
			if r.N > 36 {
				continue
			}
			s, err := design.LloydMax(unit(t, name), r.N, design.Free)
			if err != nil {
				t.Errorf("%s %d: %v", name, r.N, err)
				continue
			}
			if !near(s.MSE, r.MSE, 1e-9) {
				t.Errorf("%s %d: mse %.12g, want %.12g", name, r.N, s.MSE, r.MSE)
			}
		}
	}
}

func TestOptimalUniformAgainstComputed(t *testing.T) {
	for name, rows := range optimal(t) {
		for _, r := range rows {
			s, err := design.OptimalUniform(unit(t, name), r.N)
			if err != nil {
				t.Errorf("%s %d: %v", name, r.N, err)
				continue
			}
			step := s.Values[1] - s.Values[0]
			if !near(step, r.UniformStep, 1e-9) || !near(s.MSE, r.UniformMSE, 1e-9) || !near(s.Entropy, r.UniformEntropy, 1e-9) {
				t.Errorf("%s %d: step %.12g want %.12g, mse %.12g want %.12g", name, r.N, step, r.UniformStep, s.MSE, r.UniformMSE)
			}
		}
	}
}

// TestPrinted compares with tables in print. J. Max, "Quantizing for minimum
// distortion", IRE Trans. IT-6 (1960), Table I, N = 2, 4 (second-hand) and 8:
// his 0.03454, 0.009497 (16) and 0.002499 (32) lie below the true minimum,
// which no quantizer can, so those are his numerical integration's error. M.
// D. Paez, T. H. Glisson, IEEE Trans. COM-20 (1972), from memory: the printed
// Laplacian levels are 0.2 to 1 % off the optimum; their gamma N = 2 value
// 0.6680 is exactly 2/3.
func TestPrinted(t *testing.T) {
	for _, r := range []struct {
		model   string
		n       int
		printed float64
		off     float64 // how far the print is from the truth, relative
	}{
		{"gaussian", 2, 0.3634, 1e-4}, {"gaussian", 4, 0.1175, 2e-4}, {"gaussian", 8, 0.03454, 3e-4},
		{"gaussian", 16, 0.009497, 5e-4}, {"gaussian", 32, 0.002499, 3e-3},
		{"laplacian", 2, 0.5, 1e-9}, {"laplacian", 4, 0.1765, 3e-3}, {"laplacian", 8, 0.0548, 7e-3},
		{"laplacian", 16, 0.0154, 5e-3}, {"laplacian", 32, 0.00414, 1.1e-2},
		{"gamma", 2, 0.6680, 2.1e-3}, {"gamma", 4, 0.2318, 5e-4}, {"gamma", 8, 0.0712, 1.1e-2}, {"gamma", 16, 0.0196, 1e-3},
		{"gamma", 32, 0.0052, 3e-3},
	} {
		s, err := design.LloydMax(unit(t, r.model), r.n, design.Mirror)
		if err != nil {
			t.Fatal(err)
		}
		if !near(s.MSE, r.printed, r.off) {
			t.Errorf("%s %d: mse %.6g, printed %g", r.model, r.n, s.MSE, r.printed)
		}
	}
}

// TestPanterDite: N^2 D approaches the constant of P. F. Panter and W. Dite
// (Proc. IRE 39, 1951) from below: sqrt(3) pi/2, 9/2 and 5.62188 for unit
// variance.
func TestPanterDite(t *testing.T) {
	for name, c := range map[string]float64{"gaussian": math.Sqrt(3) * math.Pi / 2, "laplacian": 4.5, "gamma": 5.621881849504} {
		last := 0.0
		for _, n := range []int{256, 1024, 4096} {
			s, err := design.LloydMax(unit(t, name), n, design.Mirror)
			if err != nil {
				t.Fatal(err)
			}
			got := s.MSE * float64(n) * float64(n)
			if !(s.Residual < 1e-10) || !(got > last && got < c) {
				t.Errorf("%s %d: N^2 D = %.6f, residual %.2g; limit %.6f", name, n, got, s.Residual, c)
			}
			last = got
		}
		if !near(last, c, 2e-3) {
			t.Errorf("%s: N^2 D = %.6f at 4096 levels, limit %.6f", name, last, c)
		}
	}
}

func BenchmarkLloydMax(b *testing.B) {
	for _, n := range []int{256, 4096} {
		for _, name := range model.Names() {
			m := unit(b, name)
			b.Run(name+"/"+map[int]string{256: "256", 4096: "4096"}[n], func(b *testing.B) {
				for b.Loop() {
					if _, err := design.LloydMax(m, n, design.Mirror); err != nil {
						b.Fatal(err)
					}
				}
			})
		}
	}
}
