package design

import (
	"math"
	"math/rand/v2"
	"testing"

	"fewbits/codec"
	"pgregory.net/rapid"
)

// bruteCoded tries every way to cut h into cells.
func bruteCoded(h Histogram, lambda float64) float64 {
	total := h.Total()
	var from func(i int) float64
	from = func(i int) float64 {
		if i == len(h.Values) {
			return 0
		}
		best, mass := math.Inf(1), 0.0
		for j := i + 1; j <= len(h.Values); j++ {
			mass += h.Weights[j-1] / total
			best = math.Min(best, aboutCentroid(h, i, j)/total-lambda*mass*math.Log2(mass)+from(j))
		}
		return best
	}
	return from(0)
}

func TestEntropyDataIsNearBruteForce(t *testing.T) {
	r := rand.New(rand.NewPCG(8, 8))
	missed := 0
	for trial := range 1000 {
		h := smallHistogram(r, trial%2 == 0)
		power, _ := EvaluateData(h, nil, []float64{centroid(h, 0, len(h.Values))})
		lambda := (power + 1e-12) * math.Pow(10, -3*r.Float64())
		s, err := EntropyData(h, EntropyOptions{Lambda: lambda, Symmetry: Free})
		if err != nil {
			t.Fatal(err)
		}
		got, want := s.MSE+lambda*s.Entropy, bruteCoded(h, lambda)
		if got < want*(1-1e-9)-1e-15 {
			t.Fatalf("trial %d: %g is below brute force %g", trial, got, want)
		}
		if got > want*(1+1e-9)+1e-15 {
			missed++
		}
		if got > want*1.05+1e-15 {
			t.Errorf("trial %d: %v, lambda %g: %g, brute force %g", trial, h, lambda, got, want)
		}
	}
	t.Logf("%d of 1000 above brute force", missed)
	if missed > 50 {
		t.Errorf("%d of 1000 above brute force", missed)
	}
}

func TestEntropyDataProperties(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		h, sym := anyHistogram(t), anySymmetry(t)
		opt := EntropyOptions{Symmetry: sym, Levels: rapid.SampledFrom([]int{0, 1, 2, 7, 16}).Draw(t, "levels")}
		byRate := rapid.Bool().Draw(t, "by rate")
		if byRate {
			opt.Rate = rapid.Float64Range(0.1, 8).Draw(t, "rate")
		} else {
			opt.Lambda = math.Pow(10, rapid.Float64Range(-10, 1).Draw(t, "log lambda"))
		}
		s, err := EntropyData(h, opt)
		if err != nil {
			t.Fatal(err)
		}
		c := codec.Staircase{Thresholds: s.Thresholds, Values: s.Values}
		c.MirrorBounds()
		if err := c.Check(); err != nil {
			t.Fatal(err)
		}
		if opt.Levels > 0 && len(s.Values) > opt.Levels || sym == Mirror && !c.IsMirror(0) {
			t.Fatalf("%d levels, at most %d; mirror %v", len(s.Values), opt.Levels, c.IsMirror(0))
		}
		if byRate && s.Entropy > opt.Rate {
			t.Fatalf("entropy %g above the rate %g", s.Entropy, opt.Rate)
		}
	})
}

// At high rates entropy coding loses 1.53 dB, or 0.2546 bit, to the Shannon
// lower bound (H. Gish, J. N. Pierce, IEEE Trans. Inform. Theory IT-14, 1968:
// pi e / 6); the step to the limit falls by four a bit. Laplacian of scale b: differential entropy log2(2 e b).
func TestEntropyDataLosesTheHighRateGap(t *testing.T) {
	const scale = 2000
	h := laplacianCounts(scale)
	b := scale / 32768.0
	for _, rate := range []float64{4, 5} {
		s, err := EntropyData(h, EntropyOptions{Rate: rate})
		if err != nil {
			t.Fatal(err)
		}
		bound := math.Exp2(2*(math.Log2(2*math.E*b)-s.Entropy)) / (2 * math.Pi * math.E)
		gap := 10 * math.Log10(s.MSE/bound)
		t.Logf("rate %.6f: %d levels, %.4f dB, %.4f bit above the bound", s.Entropy, len(s.Values), gap, gap/20*math.Log2(10))
		if rate-s.Entropy > 2e-3 {
			t.Errorf("rate %g reached %g only", rate, s.Entropy)
		}
		if off := 10*math.Log10(math.Pi*math.E/6) - gap; !(off > 0 && off < 0.022*math.Exp2(-2*(rate-4))) {
			t.Errorf("rate %g: gap %.4f dB, want 1.53", rate, gap)
		}
	}
}

func TestEntropyRefuses(t *testing.T) {
	h := Histogram{[]float64{0, 1}, []float64{1, 1}}
	for _, opt := range []EntropyOptions{
		{}, {Lambda: -1}, {Lambda: math.NaN()}, {Rate: math.NaN()}, {Rate: -1},
		{Rate: 17}, {Rate: 1, Lambda: 1}, {Rate: 1, Levels: -1},
	} {
		if _, err := EntropyData(h, opt); err == nil {
			t.Errorf("%+v: accepted", opt)
		}
	}
}

func BenchmarkEntropyData3Bits(b *testing.B) {
	h := benchHistogram(1e4)
	for b.Loop() {
		if _, err := EntropyData(h, EntropyOptions{Rate: 3}); err != nil {
			b.Fatal(err)
		}
	}
}
