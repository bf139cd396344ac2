package design

import (
	"math"
	"math/rand/v2"
	"slices"
	"testing"

	"pgregory.net/rapid"
)

// clumps is invented: 40 narrow clumps of unequal weight. Which clumps share
// a level is settled by the start of a Lloyd iteration.
func clumps() Histogram {
	r := rand.New(rand.NewPCG(40, 1))
	at := map[int]float64{}
	for range 40 {
		centre, weight := r.IntN(60000)-30000, 1+r.IntN(1000)
		for d := -3; d <= 3; d++ {
			at[centre+d] += float64(weight)
		}
	}
	var words []int
	for w := range at {
		words = append(words, w)
	}
	slices.Sort(words)
	var h Histogram
	for _, w := range words {
		h.push(float64(w)/32768, at[w])
	}
	return h
}

// TestLloydLosesToExact: from 100 random starts (n data, any of them) a plain
// Lloyd iteration never finds the optimum.
func TestLloydLosesToExact(t *testing.T) {
	h, n := clumps(), 24
	exact, err := ExactData(h, n, Free)
	if err != nil {
		t.Fatal(err)
	}
	r := rand.New(rand.NewPCG(100, 1))
	best := math.Inf(1)
	for range 100 {
		values := make([]float64, n)
		for k, i := range r.Perm(len(h.Values))[:n] {
			values[k] = h.Values[i]
		}
		slices.Sort(values)
		s, err := RefineData(h, Solution{Values: values, Thresholds: middles(values)}, Free, 1e6)
		if err != nil {
			t.Fatal(err)
		}
		if s.Residual > 1e-10 {
			t.Fatalf("Lloyd ended with residual %g", s.Residual)
		}
		best = math.Min(best, s.MSE)
	}
	t.Logf("best of 100 Lloyd iterations: %.2f dB above the optimum", 10*math.Log10(best/exact.MSE))
	if best < exact.MSE*1.01 {
		t.Errorf("Lloyd found %g, the optimum is %g: no loss to show", best, exact.MSE)
	}
}

func TestRefineDataNeverRaisesTheError(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		h, sym := anyHistogram(t), anySymmetry(t)
		n := rapid.IntRange(1, 30).Draw(t, "n")
		thresholds, values := anyTable(t, h, n, sym)
		before, _ := EvaluateData(h, thresholds, values)
		exact, err := ExactData(h, n, sym)
		if err != nil {
			t.Fatal(err)
		}
		s, err := RefineData(h, Solution{Values: values, Thresholds: thresholds}, sym, 1000)
		if err != nil {
			t.Fatal(err)
		}
		if s.MSE > before*(1+1e-12) || s.MSE < exact.MSE*(1-1e-9)-1e-18 {
			t.Fatalf("mse %g from %g, the optimum is %g", s.MSE, before, exact.MSE)
		}
		again, err := RefineData(h, exact, sym, 1000)
		if err != nil || math.Abs(again.MSE-exact.MSE) > 1e-12*exact.MSE+1e-20 {
			t.Fatalf("from the optimum %g it goes to %g (%v)", exact.MSE, again.MSE, err)
		}
	})
}

// TestExactFineOnSamples bins float samples, designs on the bins and refines
// on the samples; the error on the samples is what was predicted, and the
// exact optimum on the samples is not far.
func TestExactFineOnSamples(t *testing.T) {
	r := rand.New(rand.NewPCG(9, 9))
	x := make([]float64, 20000)
	for i := range x {
		x[i] = 0.1 * r.NormFloat64()
	}
	slices.Sort(x)
	var all Histogram
	var f FineHistogram
	for i := 0; i < len(x); {
		j, sum := i, 0.0
		for ; j < len(x) && math.Floor(x[j]*512) == math.Floor(x[i]*512); j++ {
			all.push(x[j], 1)
			sum += x[j]
		}
		c, within := sum/float64(j-i), 0.0
		for _, v := range x[i:j] {
			within += (v - c) * (v - c) / float64(j-i)
		}
		f.Weights, f.Centroids, f.Within = append(f.Weights, float64(j-i)), append(f.Centroids, c), append(f.Within, within)
		i = j
	}
	coarse, err := ExactFine(f, 16, Mirror)
	if err != nil {
		t.Fatal(err)
	}
	if mse, _ := EvaluateData(all, coarse.Thresholds, coarse.Values); math.Abs(mse/coarse.MSE-1) > 1e-3 {
		t.Errorf("predicts %g, samples give %g", coarse.MSE, mse)
	}
	fine, err := RefineData(all, coarse, Mirror, 1000)
	if err != nil {
		t.Fatal(err)
	}
	best, err := ExactData(all, 16, Mirror)
	if err != nil {
		t.Fatal(err)
	}
	if fine.Proof != Local || fine.MSE < best.MSE*(1-1e-12) || fine.MSE > best.MSE*(1+1e-4) {
		t.Errorf("refined to %g (%s), the optimum on the samples is %g", fine.MSE, fine.Proof, best.MSE)
	}
}
