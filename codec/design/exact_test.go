package design

import (
	"math"
	"math/rand/v2"
	"slices"
	"testing"

	"pgregory.net/rapid"
)

// bruteForce tries every way to cut h into at most n cells (the definition:
// cells of an optimum are intervals). Mirror: folded, the first cell about 0
// for odd n.
func bruteForce(h Histogram, n int, sym Symmetry) float64 {
	cells, pinned := n, false
	if sym == Mirror {
		h, cells, pinned = foldSlowly(h), (n+1)/2, n%2 == 1
	}
	var from func(i, left int) float64
	from = func(i, left int) float64 {
		if i == len(h.Values) {
			return 0
		}
		if left == 0 {
			return math.Inf(1)
		}
		best := math.Inf(1)
		for j := i + 1; j <= len(h.Values); j++ {
			best = math.Min(best, aboutCentroid(h, i, j)+from(j, left-1))
		}
		return best
	}
	if !pinned {
		return from(0, cells)
	}
	best, zero := math.Inf(1), 0.0
	for j := 0; ; j++ {
		best = math.Min(best, zero+from(j, cells-1))
		if j == len(h.Values) {
			return best
		}
		zero += h.Weights[j] * h.Values[j] * h.Values[j]
	}
}

func foldSlowly(h Histogram) Histogram {
	at := map[float64]float64{}
	for i, x := range h.Values {
		at[math.Abs(x)] += h.Weights[i]
	}
	var out Histogram
	for x := range at {
		out.Values = append(out.Values, x)
	}
	slices.Sort(out.Values)
	for _, x := range out.Values {
		out.Weights = append(out.Weights, at[x])
	}
	return out
}

func aboutCentroid(h Histogram, i, j int) float64 {
	var w, s, e float64
	for b := i; b < j; b++ {
		w += h.Weights[b]
		s += h.Weights[b] * h.Values[b]
	}
	for b := i; b < j; b++ {
		e += h.Weights[b] * (h.Values[b] - s/w) * (h.Values[b] - s/w)
	}
	return e
}

// smallHistogram is a random one; whole: on a grid with counts, ties abound.
func smallHistogram(r *rand.Rand, whole bool) Histogram {
	var h Histogram
	x := float64(r.IntN(16)) - 8
	for range 1 + r.IntN(9) {
		h.Values = append(h.Values, x)
		w := float64(1 + r.IntN(4))
		if whole {
			x += float64(1 + r.IntN(3))
		} else {
			x += r.ExpFloat64() + 1e-9
			w = r.ExpFloat64() + 1e-9
		}
		h.Weights = append(h.Weights, w)
	}
	if whole {
		for i := range h.Values {
			h.Values[i] /= 32768
		}
	}
	return h
}

func TestExactIsBruteForce(t *testing.T) {
	r := rand.New(rand.NewPCG(1, 2))
	for trial := range 10000 {
		h := smallHistogram(r, trial%2 == 0)
		n, sym := 1+r.IntN(6), Symmetry(r.IntN(2))
		s, err := ExactData(h, n, sym)
		if err != nil {
			t.Fatal(err)
		}
		want := bruteForce(h, n, sym) / h.Total()
		tol := 1e-12 * bruteForce(h, 1, Mirror) / h.Total()
		if !(math.Abs(s.MSE-want) <= tol) {
			t.Fatalf("trial %d: %v, n = %d, symmetry %d: mse %g, brute force %g", trial, h, n, sym, s.MSE, want)
		}
		wellFormed(t, h, n, sym, s)
	}
}

// wellFormed checks what any optimum must satisfy: order, mirror image,
// midpoints, centroids (0 in the middle cell of an odd mirror table).
func wellFormed(t interface{ Fatalf(string, ...any) }, h Histogram, n int, sym Symmetry, s Solution) {
	if s.Proof != Exact {
		t.Fatalf("%v, n = %d: %s", h, n, s.Proof)
	}
	if len(s.Values) != n || len(s.Thresholds) != n-1 {
		t.Fatalf("%d values, %d thresholds for %d levels", len(s.Values), len(s.Thresholds), n)
	}
	scale := math.Max(math.Abs(h.Values[0]), math.Abs(h.Values[len(h.Values)-1]))
	for k, y := range s.Thresholds {
		if k > 0 && !(y > s.Thresholds[k-1]) || !(s.Values[k] <= y && y <= s.Values[k+1]) {
			t.Fatalf("%v, n = %d: threshold %d = %g out of order in %v / %v", h, n, k, y, s.Thresholds, s.Values)
		}
		if mid := (s.Values[k] + s.Values[k+1]) / 2; math.Abs(y-mid) > 1e-12*scale {
			t.Fatalf("threshold %d = %g is not midway, %g", k, y, mid)
		}
	}
	for k, y := range s.Values {
		if sym == Mirror && y != -s.Values[n-1-k] {
			t.Fatalf("values %d and %d are no mirror images: %g, %g", k, n-1-k, y, s.Values[n-1-k])
		}
		c, mass := cellCentroid(h, s, k, sym)
		if mass > 0 && math.Abs(c-y) > 1e-12*scale {
			t.Fatalf("%v, n = %d: value %d = %g, centroid %g", h, n, k, y, c)
		}
	}
}

func cellCentroid(h Histogram, s Solution, k int, sym Symmetry) (c, mass float64) {
	n := len(s.Values)
	var sum float64
	for i, x := range h.Values {
		cell := 0
		for cell < n-1 && x >= s.Thresholds[cell] {
			cell++
		}
		if cell == k {
			mass += h.Weights[i]
			sum += h.Weights[i] * x
		} else if sym == Mirror && cell == n-1-k {
			mass += h.Weights[i]
			sum -= h.Weights[i] * x
		}
	}
	if sym == Mirror && n%2 == 1 && k == n/2 {
		return 0, mass
	}
	return sum / mass, mass
}

// plainDP is the quadratic dynamic programme over bins and cells.
func plainDP(h Histogram, n int) float64 {
	bins := len(h.Values)
	best := make([]float64, bins+1)
	for j := range best {
		best[j] = math.Inf(1)
	}
	best[0] = 0
	for range n {
		next := make([]float64, bins+1)
		for j := range next {
			next[j] = math.Inf(1)
			var w, mean, e float64
			for i := j - 1; i >= 0; i-- { // running moments (West)
				d := h.Values[i] - h.Values[j-1] - mean
				e += d * d * h.Weights[i] * w / (w + h.Weights[i])
				w += h.Weights[i]
				mean += d * h.Weights[i] / w
				next[j] = math.Min(next[j], best[i]+e)
			}
		}
		best = next
	}
	return best[bins]
}

// TestExactIsPlainDP: hundreds of bins, weights over twelve decades, values
// far from 0, equal weights (every length tied with its neighbours).
func TestExactIsPlainDP(t *testing.T) {
	r := rand.New(rand.NewPCG(2, 1))
	for trial := range 24 {
		var h Histogram
		x := []float64{0, -0.5, 1e6}[trial%3]
		for range 50 + r.IntN(200) {
			w := 1.0
			switch trial % 4 {
			case 1:
				w = math.Pow(10, -12*r.Float64())
			case 2:
				w = float64(1 + r.IntN(1000))
			}
			x += []float64{1.0 / 32768, r.ExpFloat64() + 1e-6}[trial%2]
			h.push(x, w)
		}
		for _, n := range []int{2, 3, 7, 16, 41} {
			s, err := ExactData(h, n, Free)
			if err != nil {
				t.Fatal(err)
			}
			if s.Proof != Exact {
				t.Errorf("trial %d, n = %d: %s", trial, n, s.Proof)
			}
			want := plainDP(h, n) / h.Total()
			if !(math.Abs(s.MSE-want) <= 1e-11*want) {
				t.Errorf("trial %d, n = %d: mse %g, plain dynamic programme %g", trial, n, s.MSE, want)
			}
		}
	}
}

func anyHistogram(t *rapid.T) Histogram {
	seed := rapid.Uint64().Draw(t, "seed")
	r := rand.New(rand.NewPCG(seed, 7))
	bins := rapid.IntRange(1, 300).Draw(t, "bins")
	grid := rapid.Bool().Draw(t, "grid")
	at := map[float64]float64{}
	for range bins {
		x := 0.05 * r.ExpFloat64() * float64(1-2*r.IntN(2))
		w := r.ExpFloat64()
		if grid {
			x, w = math.Round(x*32768)/32768, float64(1+r.IntN(50))
		}
		at[x] += w
	}
	var h Histogram
	for x := range at {
		h.Values = append(h.Values, x)
	}
	slices.Sort(h.Values)
	for _, x := range h.Values {
		h.Weights = append(h.Weights, at[x])
	}
	return h
}

func anySymmetry(t *rapid.T) Symmetry {
	return rapid.SampledFrom([]Symmetry{Mirror, Free}).Draw(t, "symmetry")
}

func TestExactProperties(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		h, sym := anyHistogram(t), anySymmetry(t)
		n := rapid.IntRange(1, 40).Draw(t, "n")
		s, err := ExactData(h, n, sym)
		if err != nil {
			t.Fatal(err)
		}
		wellFormed(t, h, n, sym, s)
		scale := rapid.SampledFrom([]float64{-3, -1, 0.1, 7, 1024}).Draw(t, "scale")
		moved, err := ExactData(scaled(h, scale), n, sym)
		if err != nil {
			t.Fatal(err)
		}
		power, _ := EvaluateData(h, nil, []float64{0})
		if math.Abs(moved.MSE/(scale*scale)-s.MSE) > 1e-12*power {
			t.Fatalf("scaled by %g: mse %g, want %g", scale, moved.MSE, s.MSE*scale*scale)
		}
		thresholds, values := anyTable(t, h, n, sym)
		if mse, _ := EvaluateData(h, thresholds, values); mse < s.MSE*(1-1e-12) {
			t.Fatalf("a random table has mse %g, the optimum %g", mse, s.MSE)
		}
	})
}

func scaled(h Histogram, by float64) Histogram {
	out := Histogram{Values: slices.Clone(h.Values), Weights: slices.Clone(h.Weights)}
	for i := range out.Values {
		out.Values[i] *= by
	}
	if by < 0 {
		slices.Reverse(out.Values)
		slices.Reverse(out.Weights)
	}
	return out
}

// anyTable draws a random staircase of the asked symmetry.
func anyTable(t *rapid.T, h Histogram, n int, sym Symmetry) (thresholds, values []float64) {
	reach := math.Max(math.Abs(h.Values[0]), math.Abs(h.Values[len(h.Values)-1])) + 0.01
	level := rapid.Float64Range(-reach, reach)
	for range n {
		values = append(values, level.Draw(t, "level"))
	}
	if sym == Mirror {
		for k := range n {
			values[n-1-k] = -values[k]
		}
		if n%2 == 1 {
			values[n/2] = 0
		}
	}
	slices.Sort(values)
	for k := range n - 1 {
		thresholds = append(thresholds, (values[k]+values[k+1])/2)
	}
	return thresholds, values
}

func TestExactRefuses(t *testing.T) {
	good := Histogram{[]float64{0, 1}, []float64{1, 1}}
	for name, row := range map[string]struct {
		h Histogram
		n int
	}{
		"empty":      {Histogram{}, 2},
		"unequal":    {Histogram{[]float64{1}, nil}, 2},
		"descending": {Histogram{[]float64{1, 0}, []float64{1, 1}}, 2},
		"NaN":        {Histogram{[]float64{0, math.NaN()}, []float64{1, 1}}, 2},
		"infinite":   {Histogram{[]float64{0, math.Inf(1)}, []float64{1, 1}}, 2},
		"no weight":  {Histogram{[]float64{0, 1}, []float64{1, 0}}, 2},
		"overflow":   {Histogram{[]float64{0, 1e200}, []float64{1, 1}}, 2},
		"no level":   {good, 0},
		"too many":   {good, 1<<16 + 1},
	} {
		if _, err := ExactData(row.h, row.n, Free); err == nil {
			t.Errorf("%s: accepted", name)
		}
	}
	if _, err := ExactData(good, 2, Free); err != nil {
		t.Error(err)
	}
}
