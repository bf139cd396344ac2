package design_test

import (
	"fmt"
	"math"
	"math/rand/v2"
	"slices"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"fewbits/codec/design"
	"fewbits/measure/model"
)

func tabulated(t testing.TB, x, f []float64) *model.Tabulated {
	m, err := model.NewTabulated(x, f)
	if err != nil {
		t.Fatal(err)
	}
	return m
}

// TestUniformDensity: on [0, 1] the levels end at (2k-1)/(2N) and the error at
// 1/(12 N^2) from any start (closed form: every cell is 1/N wide).
func TestUniformDensity(t *testing.T) {
	m := tabulated(t, []float64{0, 1}, []float64{1, 1})
	r := rand.New(rand.NewPCG(1, 2))
	for _, n := range []int{1, 2, 3, 5, 16, 100, 257} {
		for try := range 5 {
			var opts []design.Option
			if try > 0 {
				start := make([]float64, n)
				for k := range start {
					start[k] = math.Pow(r.Float64(), float64(try))
				}
				slices.Sort(start)
				opts = append(opts, design.WithStart(start))
			}
			s, err := design.LloydMax(m, n, design.Free, opts...)
			if err != nil {
				t.Fatal(err)
			}
			for k, y := range s.Values {
				if want := float64(2*k+1) / float64(2*n); math.Abs(y-want) > 1e-11 {
					t.Errorf("%d levels, start %d: level %d at %.15g, want %.15g", n, try, k, y, want)
				}
			}
			if !near(s.MSE, 1/(12*float64(n*n)), 1e-12) || s.Proof != design.Unique {
				t.Errorf("%d levels: mse %g, %s", n, s.MSE, s.Proof)
			}
		}
	}
}

// TestCutExponential: exp(-x) on [0, 2], three levels; computed independently.
func TestCutExponential(t *testing.T) {
	m := tabulated(t, []float64{0, 2}, []float64{1, math.Exp(-2)})
	s, err := design.LloydMax(m, 3, design.Free)
	if err != nil {
		t.Fatal(err)
	}
	for k, want := range []float64{0.52940247, 1.17409579} {
		if math.Abs(s.Thresholds[k]-want) > 5e-9 {
			t.Errorf("threshold %.12g, want %.9g", s.Thresholds[k], want)
		}
	}
	for k, want := range []float64{0.2414540294, 0.8173509200, 1.5308406560} {
		if math.Abs(s.Values[k]-want) > 6e-11 {
			t.Errorf("level %.12g, want %.11g", s.Values[k], want)
		}
	}
	if s.Proof != design.Unique {
		t.Errorf("%q: want unique, the density is log-concave", s.Proof)
	}
	if _, err := design.LloydMax(m, 3, design.Mirror); err == nil || !strings.Contains(err.Error(), "not even about 0") {
		t.Errorf("mirror: %v", err)
	}
}

// fiveModels are those that recordings are fitted by.
func fiveModels(t testing.TB) map[string]model.Model {
	out := map[string]model.Model{}
	for _, c := range []struct {
		name  string
		shape float64
	}{{"laplacian", 0}, {"gaussian", 0}, {"gamma", 0}, {"free-gamma", 0.35}, {"generalized-gaussian", 0.6}} {
		m, err := model.OfShape(c.name, c.shape, 1)
		if err != nil {
			t.Fatal(err)
		}
		out[c.name] = m
	}
	return out
}

// TestResidual: all models settle up to 4096 levels, the proof is that of the
// theorem, and the error nears Panter and Dite's from below.
func TestResidual(t *testing.T) {
	for name, m := range fiveModels(t) {
		c := design.PanterDite(m)
		for _, n := range []int{1, 2, 3, 31, 32, 255, 1000, 4096} {
			s, err := design.LloydMax(m, n, design.Mirror)
			if err != nil {
				t.Error(name, err)
				continue
			}
			if proof := map[bool]design.Proof{true: design.Unique, false: design.Local}[m.LogConcave()]; s.Proof != proof {
				t.Errorf("%s: proof %q, want %q", name, s.Proof, proof)
			}
			if ratio := s.MSE * float64(n*n) / c; !(s.Residual < 1e-10) || !(ratio < 1) || n == 4096 && !(ratio > 0.999) {
				t.Errorf("%s %d: residual %.2g, N^2 D / c = %.6f", name, n, s.Residual, ratio)
			}
			if f := design.Evaluate(m, s.Thresholds, s.Values); !near(f.MSE, s.MSE, 1e-15) || !(f.Granular <= f.MSE) {
				t.Errorf("%s %d: %+v", name, n, f)
			}
		}
	}
}

// TestGammaOffCentre: at even N the gamma's best table is off centre, by these
// dB (computed independently in 60-digit arithmetic; no published table).
func TestGammaOffCentre(t *testing.T) {
	m := unit(t, "gamma")
	for n, gain := range map[int]float64{2: 0.465, 4: 0.375, 6: 0.310, 8: 0.264, 10: 0.229, 12: 0.202, 14: 0.181, 16: 0.164, 32: 0.093, 64: 0.050, 128: 0.026, 256: 0.013} {
		free, err := design.LloydMax(m, n, design.Free)
		if err != nil {
			t.Fatal(err)
		}
		mirror, _ := design.LloydMax(m, n, design.Mirror)
		if got := design.Decibels(mirror.MSE, free.MSE); math.Abs(got-gain) > 6e-4 || free.Proof != design.Local || free.Starts < 2 || len(free.Notes) == 0 {
			t.Errorf("%d levels: gain %.4f dB, want %.3f; %q of %d, notes %q", n, got, gain, free.Proof, free.Starts, free.Notes)
		}
	}
}

func TestTraceFalls(t *testing.T) {
	m := unit(t, "gamma")
	s, err := design.LloydMax(m, 64, design.Free, design.WithTrace())
	if err != nil || len(s.Trace) != s.Rounds+1 || !near(s.Trace[s.Rounds], s.MSE, 1e-9) {
		t.Fatalf("%d rounds, trace of %d ends at %v for %g: %v", s.Rounds, len(s.Trace), s.Trace, s.MSE, err)
	}
	for i := range s.Trace[1:] {
		if s.Trace[i+1] > s.Trace[i]*(1+1e-12) {
			t.Errorf("error rises in round %d: %v", i+1, s.Trace)
		}
	}
}

// randomTable draws a density of 2 to 8 points, support anywhere.
func randomTable(t *rapid.T) (x, f []float64) {
	n := rapid.IntRange(2, 8).Draw(t, "points")
	at := rapid.Float64Range(-3, 3).Draw(t, "from")
	for i := range n {
		x = append(x, at)
		at += rapid.Float64Range(0.01, 2).Draw(t, "gap")
		p := rapid.Float64Range(0, 1).Draw(t, "density")
		if i == 0 {
			p += 0.01
		}
		f = append(f, p)
	}
	return x, f
}

// TestLloydMaxProperties over random densities: the conditions hold, scaling
// and mirroring the density does the same to the table, and no random
// staircase is better.
func TestLloydMaxProperties(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		x, f := randomTable(t)
		m, err := model.NewTabulated(x, f)
		if err != nil {
			t.Skip(err)
		}
		n := rapid.IntRange(1, 12).Draw(t, "levels")
		s, err := design.LloydMax(m, n, design.Free)
		if err != nil {
			t.Fatal(err)
		}
		conditions(t, m, s)
		for i := range 20 {
			values := make([]float64, n)
			for k := range values {
				values[k] = m.Quantile((float64(k) + rapid.Float64Range(0.01, 0.99).Draw(t, "u")) / float64(n))
			}
			if mse, _ := design.EvaluateDensity(m, mids(values), values); s.Proof == design.Unique && mse < s.MSE*(1-1e-10) {
				t.Fatalf("random staircase %d: %v has %g, below %g", i, values, mse, s.MSE)
			}
		}
		mirrored, err := model.NewTabulated(negated(x), reversed(f))
		if err != nil {
			t.Fatal(err)
		}
		if r, err := design.LloydMax(mirrored, n, design.Free); err != nil || s.Proof == design.Unique && !near(r.MSE, s.MSE, 1e-9) {
			t.Fatalf("mirrored: %g, want %g: %v", r.MSE, s.MSE, err)
		}
		scaled, _ := m.Stretched(0.003)
		if r, err := design.LloydMax(scaled, n, design.Free); err != nil || !near(r.MSE, s.MSE*0.003*0.003, 1e-9) {
			t.Fatalf("scaled: %g, want %g: %v", r.MSE, s.MSE*9e-6, err)
		}
	})
}

func reversed(x []float64) []float64 {
	out := slices.Clone(x)
	slices.Reverse(out)
	return out
}

func negated(x []float64) []float64 {
	out := reversed(x)
	for i := range out {
		out[i] = -out[i]
	}
	return out
}

func mids(y []float64) (t []float64) {
	for k := range y[1:] {
		t = append(t, (y[k]+y[k+1])/2)
	}
	return t
}

// conditions checks midpoints and centroids apart from the solver.
func conditions(t *rapid.T, m *model.Tabulated, s design.Solution) {
	lo, hi := m.Support()
	edges := slices.Concat([]float64{lo}, s.Thresholds, []float64{hi})
	for k, y := range s.Values {
		a, b := edges[k], edges[k+1]
		if k > 0 && math.Abs(a-(s.Values[k-1]+y)/2) > 1e-14*(hi-lo) {
			t.Fatalf("threshold %d off the midpoint", k)
		}
		p, off, _ := m.Cell(a, b)
		if c := off + anchorOf(a, b); p > 0 && math.Abs(c-y) > 1e-10*(b-a) {
			t.Fatalf("level %d at %.15g, centroid %.15g", k, y, c)
		}
	}
}

func anchorOf(a, b float64) float64 { return max(a, min(b, 0)) }

func TestLloydMaxRefuses(t *testing.T) {
	m := unit(t, "gaussian")
	for _, n := range []int{0, -1, 1<<16 + 1} {
		if _, err := design.LloydMax(m, n, design.Mirror); err == nil {
			t.Errorf("%d levels: no error", n)
		}
	}
	for _, start := range [][]float64{{1}, {1, 1}, {2, 1}, {math.NaN(), 1}, {0, math.Inf(1)}} {
		if _, err := design.LloydMax(m, 2, design.Free, design.WithStart(start)); err == nil {
			t.Errorf("start %v: no error", start)
		}
	}
}

// BenchmarkFiveModels designs for all five models.
func BenchmarkFiveModels(b *testing.B) {
	models := fiveModels(b)
	for _, n := range []int{256, 4096} {
		b.Run(fmt.Sprint(n), func(b *testing.B) {
			for b.Loop() {
				for _, m := range models {
					if _, err := design.LloydMax(m, n, design.Mirror); err != nil {
						b.Fatal(err)
					}
				}
			}
		})
	}
}

// BenchmarkPlainLloyd is the rival: rounds of midpoints and closed-form
// centroids for the Laplacian of unit scale, on the half line (symmetry known,
// which spares it half the work), from the same start, until the residual is
// below 1e-10.
func BenchmarkPlainLloyd(b *testing.B) {
	for _, n := range []int{16, 64, 256} {
		b.Run(fmt.Sprint(n), func(b *testing.B) {
			var rounds int
			for b.Loop() {
				_, rounds = plainLloyd(n)
			}
			b.ReportMetric(float64(rounds), "rounds")
		})
	}
}

// BenchmarkLaplacian is ours beside it.
func BenchmarkLaplacian(b *testing.B) {
	m, err := model.New("laplacian", 0, 1)
	if err != nil {
		b.Fatal(err)
	}
	for _, n := range []int{16, 64, 256} {
		b.Run(fmt.Sprint(n), func(b *testing.B) {
			for b.Loop() {
				if _, err := design.LloydMax(m, n, design.Mirror); err != nil {
					b.Fatal(err)
				}
			}
		})
	}
}

// plainLloyd returns the upper levels of an even n.
func plainLloyd(n int) (y []float64, rounds int) {
	for k := n/2 + 1; k <= n; k++ {
		y = append(y, -3*math.Log(1-float64(2*k-1-n)/float64(n)))
	}
	tails := make([]float64, len(y)+1) // exp(-t)
	t := make([]float64, len(y)+1)
	tails[0] = 1
	for rounds = 1; ; rounds++ {
		for k := 1; k < len(y); k++ {
			t[k] = (y[k-1] + y[k]) / 2
			tails[k] = math.Exp(-t[k])
		}
		worst := 0.0
		for k := range y {
			c := t[k] + 1
			width := 2 * (y[k] - t[k])
			if k+1 < len(y) {
				width = t[k+1] - t[k]
				c = t[k] + 1 - width*tails[k+1]/(tails[k]-tails[k+1])
			}
			worst = math.Max(worst, math.Abs(c-y[k])/width)
			y[k] = c
		}
		if worst < 1e-10 {
			return y, rounds
		}
	}
}

// TestPlainLloyd: the rival ends at the same table.
func TestPlainLloyd(t *testing.T) {
	y, rounds := plainLloyd(64)
	m, _ := model.New("laplacian", 0, 1)
	s, err := design.LloydMax(m, 64, design.Mirror)
	if err != nil {
		t.Fatal(err)
	}
	for k, v := range s.Values[32:] {
		if math.Abs(v-y[k]) > 1e-6 {
			t.Errorf("level %d: %.12g, %.12g after %d rounds of Lloyd", k, v, y[k], rounds)
		}
	}
}
