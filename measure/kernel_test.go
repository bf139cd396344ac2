package measure

import (
	"math"
	"math/rand/v2"
	"sort"
	"testing"
)

// randomStairs is a quantizer with n cells, some shared values, thresholds
// partly on the 16-bit grid.
func randomStairs(n int, r *rand.Rand) (thresholds, values []float64) {
	seen := map[float64]bool{}
	for len(thresholds) < n-1 {
		x := r.Float64()*2 - 1
		switch r.IntN(3) {
		case 0:
			x = math.Round(x*32768) / 32768
		case 1:
			x *= x * x * x // crowded near zero
		}
		if !seen[x] {
			seen[x] = true
			thresholds = append(thresholds, x)
		}
	}
	for range n {
		values = append(values, r.Float64()*2-1)
	}
	sort.Float64s(thresholds)
	sort.Float64s(values)
	return thresholds, values
}

// slowIndex is the definition of a cell.
func slowIndex(thresholds []float64, tieOut bool, x float64) int {
	k := 0
	for _, t := range thresholds {
		if t < x || t == x && !(tieOut && x < 0) {
			k++
		}
	}
	return k
}

// tabulate makes a Lookup by the slow way.
func tabulate(thresholds, values []float64, lo, hi float64, tieOut bool) Lookup {
	l := Lookup{Index: make([]uint16, words16), Values: values, Lo: lo, Hi: hi}
	for i := range l.Index {
		l.Index[i] = uint16(slowIndex(thresholds, tieOut, float64(i-32768)/32768))
	}
	return l
}

// everyKind are words with zeros, both full scales and noise at all levels.
func everyKind(n int, r *rand.Rand) []int16 {
	out := make([]int16, n)
	for i := range out {
		switch r.IntN(8) {
		case 0:
			out[i] = 32767
		case 1:
			out[i] = -32768
		case 2:
		default:
			out[i] = int16(uint16(r.Uint32()) >> r.IntN(15))
		}
	}
	return out
}

// TestKernelAgainstSlowPath: bit for bit, for every number of designs that
// takes another set of tiles.
func TestKernelAgainstSlowPath(t *testing.T) {
	r := rand.New(rand.NewPCG(5, 5))
	for _, d := range []int{0, 1, 4, 7, 8, 12, 13, 17, 20, 41} {
		designs := make([]Lookup, d)
		for i := range designs {
			th, v := randomStairs(2+r.IntN(40), r)
			designs[i] = tabulate(th, v, -0.9, 0.9, i%2 == 0)
		}
		k := NewKernel(designs)
		frame := 1 + r.IntN(300)
		words := everyKind(7*frame+r.IntN(frame), r)
		signal, errs := make([]float64, 7), make([]float64, 7*d)
		if n := k.Frames(words, frame, signal, errs); n != 7 {
			t.Fatalf("%d frames, want 7", n)
		}
		for f := range 7 {
			block := words[f*frame : (f+1)*frame]
			checkFrame(t, block, designs, signal[f], errs[f*d:(f+1)*d])
		}
	}
}

func checkFrame(t *testing.T, block []int16, designs []Lookup, signal float64, errs []float64) {
	t.Helper()
	var want float64
	for _, w := range block {
		x := float64(w) / 32768
		want += x * x // exact: below 2^53 units
	}
	if signal != want {
		t.Errorf("signal energy %v, want %v", signal, want)
	}
	for j := range designs {
		var want float64
		for _, w := range block {
			e := float64(w)/32768 - designs[j].Values[designs[j].Index[int(w)+32768]]
			want += e * e
		}
		if errs[j] != want {
			t.Errorf("%d designs: error energy of design %d is %v, want %v", len(designs), j, errs[j], want)
		}
	}
}

func TestHistogramCounts(t *testing.T) {
	r := rand.New(rand.NewPCG(8, 8))
	var a, b Histogram
	var want [words16]int64
	var all []int16
	for n := range 60 {
		words := everyKind(n*7, r)
		all = append(all, words...)
		for _, w := range words {
			want[int(w)+32768]++
		}
		if n%2 == 0 {
			a.AddWords(words)
		} else {
			b.Add(toFloat(words))
		}
		a.Counts()
	}
	a.Merge(&b)
	for i, n := range a.Counts() {
		if n != want[i] {
			t.Fatalf("word %d counted %d times, want %d", i-32768, n, want[i])
		}
	}
	var direct Levels
	direct.AddWords(all)
	if got := a.Levels(); got != direct {
		t.Errorf("levels from the histogram %+v, from the samples %+v", got, direct)
	}
	if values, counts := a.Sparse(); len(values) != len(counts) || values[0] != -1 || a.Total() != int64(len(all)) {
		t.Errorf("sparse form starts at %g, total %d of %d", values[0], a.Total(), len(all))
	}
	a.Subtract(&b)
	if a.Total() != int64(len(all))-b.Total() {
		t.Errorf("subtracting left %d", a.Total())
	}
}

// TestHistogramFolds: lanes are folded before they overflow.
func TestHistogramFolds(t *testing.T) {
	var h Histogram
	h.queued = foldAt - 3
	h.AddWords([]int16{1, 1, 1, 1, 1, 1, 1, 1})
	if h.queued != 5 || h.Counts()[32769] != 8 {
		t.Errorf("queued %d, counted %d", h.queued, h.counts[32769])
	}
}

// TestSearchExact: at every threshold, its neighbours and anywhere, the
// bucketed search finds the cell of the definition.
func TestSearchExact(t *testing.T) {
	r := rand.New(rand.NewPCG(6, 6))
	for _, n := range []int{1, 2, 3, 15, 16, 255, 256, 1000} {
		for _, tieOut := range []bool{false, true} {
			th, v := randomStairs(n, r)
			if n > 2 {
				th[n/2-1] = 0
				sort.Float64s(th)
			}
			s := NewSearch(th, v, -1, 1, tieOut)
			probes := []float64{0, math.Copysign(0, -1), 1, -1, 1e300, -1e300, 5e-324, -5e-324}
			for _, x := range th {
				probes = append(probes, x, math.Nextafter(x, 2), math.Nextafter(x, -2))
			}
			for range 2000 {
				probes = append(probes, r.NormFloat64())
			}
			for _, x := range probes {
				if got, want := s.Index(x), slowIndex(th, tieOut, x); got != want {
					t.Fatalf("%d cells, tieOut %v: cell of %g is %d, want %d", n, tieOut, x, got, want)
				}
			}
		}
	}
}

// TestSearchAgainstKernel: 16-bit samples through the general path give the
// fast path's figures; frame energies bit for bit.
func TestSearchAgainstKernel(t *testing.T) {
	r := rand.New(rand.NewPCG(9, 9))
	words := everyKind(8000, r)
	x := toFloat(words)
	var h Histogram
	h.AddWords(words)
	for i := range 10 {
		th, v := randomStairs(2+r.IntN(200), r)
		l := tabulate(th, v, -0.7, 0.6, i%2 == 0)
		s := NewSearch(th, v, -0.7, 0.6, i%2 == 0)
		var slow Tally
		k := NewKernel([]Lookup{l})
		signal, errs := make([]float64, 50), make([]float64, 50)
		k.Frames(words, 160, signal, errs)
		var sum Energies
		for f := range 50 {
			b := s.Add(&slow, x[f*160:(f+1)*160])
			if b.Signal != signal[f] || b.Error != errs[f] {
				t.Fatalf("frame %d: energies %v %v, fast path %v %v", f, b.Signal, b.Error, signal[f], errs[f])
			}
			sum.Cross += b.Cross
			sum.Output += b.Output
		}
		compareTallies(t, TallyHistogram(&h, l), slow)
		fast := EnergiesOf(&h, l)
		near(t, "cross energy", fast.Cross, sum.Cross, 1e-9*sum.Output)
		near(t, "output energy", fast.Output, sum.Output, 1e-12*sum.Output)
		near(t, "identity x^2+y^2-2xy", fast.Signal+fast.Output-2*fast.Cross, fast.Error, 1e-9*fast.Error)
	}
}

func compareTallies(t *testing.T, fast, slow Tally) {
	t.Helper()
	if fast.Samples != slow.Samples || fast.Overloaded != slow.Overloaded || fast.Signal != slow.Signal {
		t.Errorf("samples, overloads, signal %d %d %v, want %d %d %v",
			fast.Samples, fast.Overloaded, fast.Signal, slow.Samples, slow.Overloaded, slow.Signal)
	}
	for i := range slow.Indices {
		if fast.Indices[i] != slow.Indices[i] {
			t.Fatalf("index %d counted %d times, want %d", i, fast.Indices[i], slow.Indices[i])
		}
	}
	near(t, "error", fast.Error, slow.Error, 1e-12*slow.Error)
	near(t, "granular error", fast.GranularErr, slow.GranularErr, 1e-12*slow.Error)
	near(t, "overload error", fast.OverloadErr, slow.OverloadErr, 1e-12*slow.Error)
}

// FuzzSearch: any thresholds, any sample, both tie rules.
func FuzzSearch(f *testing.F) {
	f.Add(-0.5, 0.0, 0.5, 0.25, true)
	f.Add(0.0, 5e-324, 1e-300, 0.0, false)
	f.Add(-1e308, 0.0, 1e308, 3.0, true)
	f.Fuzz(func(t *testing.T, a, b, c, x float64, tieOut bool) {
		th := []float64{a, b, c}
		sort.Float64s(th)
		for i, v := range th {
			if math.IsNaN(v) || math.IsInf(v, 0) || i > 0 && v == th[i-1] {
				t.Skip("thresholds not ascending and finite")
			}
		}
		if math.IsNaN(x) {
			t.Skip("recordings that hold one are refused")
		}
		s := NewSearch(th, []float64{0, 1, 2, 3}, 0, 0, tieOut)
		for _, x := range append(th, x, -x) {
			if got, want := s.Index(x), slowIndex(th, tieOut, x); got != want {
				t.Fatalf("cell of %g among %v is %d, want %d", x, th, got, want)
			}
		}
	})
}
