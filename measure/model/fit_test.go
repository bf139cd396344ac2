package model_test

import (
	"encoding/json"
	"math"
	"math/rand/v2"
	"os"
	"slices"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"fewbits/measure/model"
)

// rounded is the histogram of x rounded to lsb.
func rounded(x []float64, lsb float64) model.Data {
	counts := map[float64]int64{}
	for _, v := range x {
		counts[math.Round(v/lsb)*lsb+0]++
	}
	d := model.Data{LSB: lsb}
	for v := range counts {
		d.Values = append(d.Values, v)
	}
	slices.Sort(d.Values)
	for _, v := range d.Values {
		d.Counts = append(d.Counts, counts[v])
	}
	return d
}

// draw returns n seeded samples of m.
func draw(m model.Model, n int, seed uint64) []float64 {
	r := rand.New(rand.NewPCG(seed, 1))
	x := make([]float64, n)
	for i := range x {
		x[i] = m.Quantile((r.Float64() + 0x1p-54))
	}
	return x
}

func fitted(t testing.TB, name string, d model.Data) model.Fitted {
	f, err := model.Fit(name, d)
	if err != nil {
		t.Fatal(err)
	}
	return f
}

// estimates are the maximum likelihood fits of continuous samples, by model.
type estimates struct{ Shape, Scale, LogLik, AIC, KS map[string]float64 }

// TestCheckSamples: on the samples x_i = F^-1((i - 1/2)/1000) of unit variance,
// with a tiny lsb, interval likelihood gives the maximum likelihood estimates,
// computed independently.
func TestCheckSamples(t *testing.T) {
	b, err := os.ReadFile("testdata/samples.json")
	if err != nil {
		t.Fatal(err)
	}
	var f struct{ Samples map[string]estimates }
	if err := json.Unmarshal(b, &f); err != nil {
		t.Fatal(err)
	}
	checked := 0
	for from, want := range f.Samples {
		m, err := model.OfRMS(from, 1)
		if err != nil {
			t.Fatal(err)
		}
		x := make([]float64, 1000)
		for i := range x {
			x[i] = m.Quantile((float64(i) + 0.5) / 1000)
		}
		for _, name := range model.FitNames() {
			got := fitted(t, name, rounded(x, 0x1p-40))
			for figure, c := range map[string][2]float64{
				"shape": {got.Shape, want.Shape[name]}, "scale": {got.Scale, want.Scale[name]},
				"ln L": {got.LogLik * 1000, want.LogLik[name]}, "aic": {got.AIC, want.AIC[name]}, "ks": {got.KS, want.KS[name]},
			} {
				if c[1] == 0 {
					continue
				}
				checked++
				if !near(c[0], c[1], 1e-6) {
					t.Errorf("%s on %s samples: %s %.10g, want %.10g %s", name, from, figure, c[0], c[1], got.Undefined)
				}
			}
		}
	}
	if checked != 63 {
		t.Errorf("%d figures checked: want 63", checked)
	}
}

// TestFitRecovers: seeded samples give back the parameters within five
// standard errors, and the rms within 5 %; no other model is likelier.
func TestFitRecovers(t *testing.T) {
	for _, c := range []struct {
		name       string
		shape, rms float64
	}{
		{"laplacian", 0, 0.05}, {"gaussian", 0, 0.1}, {"gamma", 0, 0.05}, {"free-gamma", 0.2, 0.03}, {"free-gamma", 0.8, 0.003},
		{"free-gamma", 2, 0.1}, {"generalized-gaussian", 0.4, 0.05}, {"generalized-gaussian", 0.9, 0.0005}, {"generalized-gaussian", 3, 0.1},
	} {
		m, err := model.OfShape(c.name, c.shape, c.rms)
		if err != nil {
			t.Fatal(err)
		}
		shape, scale := m.Parameters()
		d := rounded(draw(m, 20000, 7), 0x1p-15)
		f := fitted(t, c.name, d)
		if f.Undefined != "" || math.Abs(f.Shape-shape) > 5*f.ShapeError || math.Abs(f.Scale-scale) > 5*f.ScaleError || !near(f.RMS, c.rms, 0.05) || !(f.KS < 0.015) {
			t.Errorf("%s: %+v", label(m), f)
		}
		if !(f.ScaleError > 0 && f.ScaleError < 0.1*scale) || f.Parameters == 2 && !(f.ShapeError > 0 && f.ShapeError < 0.1*shape) {
			t.Errorf("%s: standard errors %g, %g", label(m), f.ShapeError, f.ScaleError)
		}
		all, err := model.FitAll(d)
		if err != nil {
			t.Fatal(err)
		}
		for i, name := range model.FitNames() {
			if all[i].Name != name || all[i].LogLik > f.LogLik+15e-5 {
				t.Errorf("%s samples: %s is likelier, %g > %g", label(m), name, all[i].LogLik, f.LogLik)
			}
		}
	}
}

// TestStandardErrors: of a Laplacian, scale/sqrt n; of a Gaussian, scale/sqrt
// 2n (textbook).
func TestStandardErrors(t *testing.T) {
	for name, k := range map[string]float64{"laplacian": 1, "gaussian": math.Sqrt(0.5)} {
		m, _ := model.OfRMS(name, 0.1)
		f := fitted(t, name, rounded(draw(m, 10000, 3), 0x1p-20))
		if !near(f.ScaleError, f.Scale*k/100, 1e-4) || f.ShapeError != 0 {
			t.Errorf("%s: standard errors %g and %g", name, f.ShapeError, f.ScaleError)
		}
	}
}

// TestLogLikIsTheCells: the likelihood reported is that of the cells of all
// bins, none grouped, the end cells endless; KS is over all edges.
func TestLogLikIsTheCells(t *testing.T) {
	m, _ := model.OfShape("generalized-gaussian", 0.5, 0.2)
	d := limited(rounded(draw(m, 50000, 11), 0x1p-15), -1, 1-0x1p-15)
	for _, name := range model.FitNames() {
		f := fitted(t, name, d)
		var sum float64
		for i, x := range d.Values {
			a, b := x-d.LSB/2, x+d.LSB/2
			if x <= d.Lo {
				a = math.Inf(-1)
			}
			if x >= d.Hi {
				b = math.Inf(1)
			}
			p, _, _ := f.Model.Cell(a, b)
			sum += float64(d.Counts[i]) * math.Log(p/d.LSB)
		}
		if got := sum / float64(f.Samples); math.Abs(got-f.LogLik) > 1e-8 {
			t.Errorf("%s: ln L a sample %.12g, cells give %.12g", name, f.LogLik, got)
		}
		if ks := slowKS(d, f.Model); math.Abs(ks-f.KS) > 1e-12 {
			t.Errorf("%s: KS %.12g, over all edges %.12g", name, f.KS, ks)
		}
	}
}

// limited moves what lies beyond the ends to them.
func limited(d model.Data, lo, hi float64) model.Data {
	out := model.Data{LSB: d.LSB, Lo: lo, Hi: hi}
	for i, x := range d.Values {
		x = math.Max(lo, math.Min(hi, x))
		if last := len(out.Values) - 1; last >= 0 && out.Values[last] == x {
			out.Counts[last] += d.Counts[i]
			continue
		}
		out.Values, out.Counts = append(out.Values, x), append(out.Counts, d.Counts[i])
	}
	return out
}

func slowKS(d model.Data, m model.Model) (worst float64) {
	n, below := float64(d.Samples()), int64(0)
	for i, x := range d.Values {
		if x > d.Lo {
			worst = math.Max(worst, math.Abs(float64(below)/n-m.CDF(x-d.LSB/2)))
		}
		if below += d.Counts[i]; x < d.Hi {
			worst = math.Max(worst, math.Abs(float64(below)/n-m.CDF(x+d.LSB/2)))
		}
	}
	return worst
}

// TestSilence: digital silence alone is no fit, and a lot of it runs to no
// bound; where zeros make the generalized Gaussian a spike with endless tails,
// it says so.
func TestSilence(t *testing.T) {
	silent := model.Data{Values: []float64{0}, Counts: []int64{8000}, LSB: 0x1p-15}
	for _, d := range []model.Data{silent, {LSB: 1}, {Values: []float64{-1, 1}, Counts: []int64{5, 5}, LSB: 0x1p-15, Lo: -1, Hi: 1}} {
		all, err := model.FitAll(d)
		if err != nil {
			t.Fatal(err)
		}
		for _, f := range all {
			if f.Undefined == "" || f.Model != nil || !math.IsNaN(f.Scale) || !math.IsNaN(f.LogLik) {
				t.Errorf("%v: %+v", d, f)
			}
		}
	}
	m, _ := model.OfShape("laplacian", 0, 0.05)
	speech := rounded(draw(m, 20000, 5), 0x1p-15)
	for _, share := range []float64{0.1, 0.5, 0.9, 0.99, 0.999} {
		d := withZeros(speech, int64(20000*share/(1-share)))
		all, err := model.FitAll(d)
		if err != nil {
			t.Fatal(err)
		}
		for _, f := range all {
			t.Logf("%4.1f %% zeros: %-20s shape %.4g +- %.2g, scale %.4g, rms %.4g, ln L %.5f %s", 100*share, f.Name, f.Shape, f.ShapeError, f.Scale, f.RMS, f.LogLik, f.Undefined)
			if share >= 0.5 && f.Name == "generalized-gaussian" {
				if !strings.Contains(f.Undefined, "are exact zeros, more than any shape") {
					t.Errorf("%g of zeros: %+v", share, f)
				}
				continue
			}
			if f.Undefined != "" || !(f.ShapeError < f.Shape) || !(f.RMS < 0.1) {
				t.Errorf("%g of zeros: %+v", share, f)
			}
		}
	}
}

func withZeros(d model.Data, n int64) model.Data {
	d.Counts = slices.Clone(d.Counts)
	i, found := slices.BinarySearch(d.Values, 0)
	if !found {
		d.Values = slices.Insert(slices.Clone(d.Values), i, 0)
		d.Counts = slices.Insert(d.Counts, i, 0)
	}
	d.Counts[i] += n
	return d
}

// TestFitInvariance over random histograms: mirroring changes nothing, scaling
// values and lsb scales the scale, shuffling the samples changes nothing.
func TestFitInvariance(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		m, err := model.OfShape("generalized-gaussian", rapid.Float64Range(0.4, 2.5).Draw(t, "shape"), rapid.Float64Range(0.001, 0.2).Draw(t, "rms"))
		if err != nil {
			t.Fatal(err)
		}
		x := draw(m, 1000, rapid.Uint64().Draw(t, "seed"))
		d := rounded(x, 0x1p-15)
		mirror, scaled := model.Data{LSB: d.LSB}, model.Data{LSB: 3.7 * d.LSB}
		for i := range d.Values {
			k := len(d.Values) - 1 - i
			mirror.Values, mirror.Counts = append(mirror.Values, -d.Values[k]+0), append(mirror.Counts, d.Counts[k])
			scaled.Values, scaled.Counts = append(scaled.Values, 3.7*d.Values[i]), append(scaled.Counts, d.Counts[i])
		}
		rand.New(rand.NewPCG(1, 1)).Shuffle(len(x), func(i, j int) { x[i], x[j] = x[j], x[i] })
		name := rapid.SampledFrom(model.FitNames()).Draw(t, "model")
		f, _ := model.Fit(name, d)
		g, _ := model.Fit(name, mirror)
		h, _ := model.Fit(name, scaled)
		p, _ := model.Fit(name, rounded(x, 0x1p-15))
		if f.Undefined != "" {
			t.Fatalf("%s undefined: %s", name, f.Undefined)
		}
		if g.Shape != f.Shape || g.Scale != f.Scale || g.LogLik != f.LogLik || math.Abs(g.KS-f.KS) > 1e-12 || p.Shape != f.Shape || p.Scale != f.Scale {
			t.Fatalf("%s: %+v, mirrored %+v, shuffled %+v", name, f, g, p)
		}
		if !near(h.Shape, f.Shape, 1e-7) || !near(h.Scale, 3.7*f.Scale, 1e-6) || math.Abs(h.LogLik-f.LogLik+math.Log(3.7)) > 1e-9 || math.Abs(h.KS-f.KS) > 1e-7 {
			t.Fatalf("%s: %+v, scaled %+v", name, f, h)
		}
	})
}

func TestFitRefuses(t *testing.T) {
	nan, inf := math.NaN(), math.Inf(1)
	one := []int64{1}
	for _, d := range []model.Data{
		{Values: []float64{1}, LSB: 1}, {Values: []float64{1, 1}, Counts: []int64{1, 1}, LSB: 1}, {Values: []float64{nan}, Counts: one, LSB: 1},
		{Values: []float64{inf}, Counts: one, LSB: 1}, {Values: []float64{1}, Counts: []int64{-1}, LSB: 1}, {Values: []float64{1}, Counts: one},
		{Values: []float64{1}, Counts: one, LSB: nan}, {Values: []float64{1}, Counts: one, LSB: 1, Lo: 1, Hi: -1}, {Values: []float64{1}, Counts: one, LSB: 1e-30},
	} {
		if _, err := model.FitAll(d); err == nil {
			t.Errorf("%+v: no error", d)
		}
	}
	if _, err := model.Fit("cauchy", model.Data{LSB: 1}); err == nil {
		t.Error("cauchy: no error")
	}
}

// BenchmarkFit fits 65,536 bins, all of them occupied.
func BenchmarkFit(b *testing.B) {
	m, _ := model.OfShape("generalized-gaussian", 0.7, 0.1)
	d := model.Data{LSB: 0x1p-15, Lo: -1, Hi: 1 - 0x1p-15}
	for w := -32768; w < 32768; w++ {
		x := float64(w) / 32768
		p, _, _ := m.Cell(x-d.LSB/2, x+d.LSB/2)
		d.Values, d.Counts = append(d.Values, x), append(d.Counts, 1+int64(p*1e7))
	}
	for _, name := range model.FitNames() {
		b.Run(name, func(b *testing.B) {
			for b.Loop() {
				if f, err := model.Fit(name, d); err != nil || f.Undefined != "" {
					b.Fatal(f.Undefined, err)
				}
			}
		})
	}
}

// TestNoShape: data that no finite shape suits, or that say too little about
// two parameters, are not fitted at a bound.
func TestNoShape(t *testing.T) {
	lsb := 0x1p-15
	for what, d := range map[string]model.Data{
		"square wave":   {Values: []float64{-0.5, 0.5}, Counts: []int64{4000, 4000}, LSB: lsb},
		"one lsb":       {Values: []float64{-lsb, 0, lsb}, Counts: []int64{10, 980, 10}, LSB: lsb},
		"one sample":    {Values: []float64{0.25}, Counts: []int64{1}, LSB: lsb},
		"zeros, a peak": {Values: []float64{0, 0.9}, Counts: []int64{1000, 1}, LSB: lsb},
	} {
		all, err := model.FitAll(d)
		if err != nil {
			t.Fatal(err)
		}
		for _, f := range all {
			t.Logf("%s: %s %g %g %s", what, f.Name, f.Shape, f.Scale, f.Undefined)
			if (f.Undefined == "") != (f.Model != nil) || f.Parameters == 1 && f.Undefined != "" {
				t.Errorf("%s: %+v", what, f)
			}
			if f.Undefined == "" && f.Parameters == 2 && !(f.ShapeError < f.Shape) {
				t.Errorf("%s: shape %g +- %g of a %s", what, f.Shape, f.ShapeError, f.Name)
			}
		}
	}
}
