package design

import (
	"math"
	"math/rand/v2"
	"runtime"
	"sync"

	"fewbits/codec"
)

// segAim is a segmental aim on frames; for mirror tables everything, tables
// included, is on |x|.
type segAim struct {
	f      Frames
	cells  int // levels, of the upper half for mirror
	n      int
	pinned bool
	sym    Symmetry
	open   bool
	c      []float64 // error energy of each frame at the upper limit or floor
}

// some returns the aim on at most most frames, evenly taken.
func (a *segAim) some(most int) *segAim {
	stride := (a.f.Len() + most - 1) / most
	if stride == 1 {
		return a
	}
	b := *a
	b.f.Bins, b.f.Starts, b.f.Signal, b.f.Floor, b.c = nil, []int{0}, nil, nil, nil
	for i := 0; i < a.f.Len(); i += stride {
		b.f.Bins = append(b.f.Bins, a.f.Bins[a.f.Starts[i]:a.f.Starts[i+1]]...)
		b.f.Starts = append(b.f.Starts, len(b.f.Bins))
		b.f.Signal = append(b.f.Signal, a.f.Signal[i])
		b.f.Floor = append(b.f.Floor, a.f.Floor[i])
		b.c = append(b.c, a.c[i])
	}
	return &b
}

// segTable is a staircase with what it does to the frames.
type segTable struct {
	values, thresholds []float64
	errors             []float64 // error energy of each frame
	db                 float64   // the exact measure
}

func newSegAim(f Frames, n int, sym Symmetry, open bool) *segAim {
	a := &segAim{f: f, cells: n, n: n, sym: sym, open: open, c: make([]float64, f.Len())}
	if sym == Mirror {
		a.f, a.cells, a.pinned = f.folded(), (n+1)/2, n%2 == 1
	}
	for i, s := range f.Signal {
		a.c[i] = math.Max(f.Floor[i], s*math.Pow(10, -f.OpenUpper/10))
		if !open {
			a.c[i] = math.Max(a.c[i], s*math.Pow(10, -f.Upper/10))
		}
	}
	return a
}

// code measures a table on the frames.
func (a *segAim) code(values, thresholds []float64) segTable {
	t := segTable{values: values, thresholds: thresholds}
	t.errors = a.f.errors(a.f.loss(thresholds, values), nil)
	t.db = a.f.meanDB(t.errors, a.open)
	return t
}

// weights are 1/(E + soft c), 0 at the lower limit.
func (a *segAim) weights(errors []float64, soft float64) []float64 {
	w := make([]float64, len(errors))
	most := math.Pow(10, -a.f.Lower/10)
	for i, e := range errors {
		if e < most*a.f.Signal[i] {
			w[i] = 1 / (e + soft*a.c[i])
		}
	}
	return w
}

// optimum is the exact optimum for weighted frames.
func (a *segAim) optimum(w []float64) segTable {
	h := Histogram{Values: a.f.Grid, Weights: make([]float64, len(a.f.Grid))}
	for i, wi := range w {
		for _, b := range a.f.Bins[a.f.Starts[i]:a.f.Starts[i+1]] {
			h.Weights[b] += wi
		}
	}
	h.wholeWeights()
	if a.cells >= len(h.Values) {
		values := spread(h.Values, a.cells)
		return a.code(values, middles(values))
	}
	edges, _, _ := optimalEdges(h, a.cells, a.pinned)
	return a.code(placed(h, edges, a.pinned))
}

// wholeWeights scales the weights to integers of at least 1, with about 60
// bits for their second moment, so that they are summed without rounding.
func (h Histogram) wholeWeights() {
	var moment, total float64
	x0, x1 := h.Values[0], h.Values[len(h.Values)-1]
	for i, w := range h.Weights {
		total += w
		moment += w * math.Pow((h.Values[i]-x0)/(x1-x0), 2)
	}
	if !(moment > 0) {
		moment, total = 1, 1
	}
	unit := binaryUnit(h.Values)
	span := (x1 - x0) / unit
	scale := math.Min(math.Ldexp(1, 60)/(moment*span*span), math.Ldexp(1, 52)/total)
	for i, w := range h.Weights {
		h.Weights[i] = math.Max(1, math.Floor(w*scale))
	}
}

// starts are the tables the search sets out from.
func (a *segAim) starts() []segTable {
	var out []segTable
	shape := codec.MidRise
	if a.n%2 == 1 {
		shape = codec.MidTread
	}
	if s, err := codec.Companded(a.n, codec.MuLaw{Mu: 255}, 1, shape); err == nil {
		out = append(out, a.start(s.Values, s.Thresholds))
	}
	h := a.f.Histogram()
	for _, power := range [3]float64{1. / 3, 1. / 2, 0.7} {
		if s, err := CompanderData(h, a.n, power, 0); err == nil {
			out = append(out, a.start(s.Values, s.Thresholds))
		}
	}
	for _, power := range [3]float64{0, -0.5, -1} {
		w := make([]float64, a.f.Len())
		for i, s := range a.f.Signal {
			w[i] = math.Pow(s, power)
		}
		out = append(out, a.optimum(w))
	}
	return out
}

// shake returns the optimum for the weights of t times log-normal noise.
func (a *segAim) shake(t segTable, seed uint64) segTable {
	r := rand.New(rand.NewPCG(seed, 0x5e6))
	w := a.weights(t.errors, 1./3)
	for i := range w {
		w[i] *= math.Exp(r.NormFloat64() / 2)
	}
	return a.optimum(w)
}

// start codes with a whole table; for mirror aims with its upper half.
func (a *segAim) start(values, thresholds []float64) segTable {
	if a.sym == Mirror {
		values, thresholds = values[a.n/2:], thresholds[a.n/2:]
	}
	return a.code(values, thresholds)
}

// inParallel computes slot i by f(i) on all cores.
func inParallel[T any](n int, f func(int) T) []T {
	out := make([]T, n)
	var wg sync.WaitGroup
	next := make(chan int)
	for range min(n, runtime.GOMAXPROCS(0)) {
		wg.Go(func() {
			for i := range next {
				out[i] = f(i)
			}
		})
	}
	for i := range n {
		next <- i
	}
	close(next)
	wg.Wait()
	return out
}
