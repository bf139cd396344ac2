package design

import (
	"container/heap"
	"math"
)

// spread returns cells levels that hold every datum of x (ascending, no more
// than cells): spare levels go where an unseen value would miss most, evenly
// into the gap whose pieces are widest at the time. Where no gap is left that
// floats can split (a single datum, above all), they go upwards from the last
// datum in steps of its magnitude divided by cells (silence: 1/cells).
func spread(x []float64, cells int) []float64 {
	gaps := make(gapHeap, 0, len(x))
	for i := range x[1:] {
		gaps = append(gaps, gap{low: i, width: x[i+1] - x[i], pieces: 1})
	}
	heap.Init(&gaps)
	spare := cells - len(x)
	pieces := make([]int, len(x))
	for ; spare > 0 && len(gaps) > 0; spare-- {
		g := &gaps[0]
		far := math.Max(math.Abs(x[g.low]), math.Abs(x[g.low+1]))
		if g.piece() < 16*(math.Nextafter(far, math.Inf(1))-far) {
			break
		}
		g.pieces++
		pieces[g.low] = g.pieces
		heap.Fix(&gaps, 0)
	}
	out := make([]float64, 0, cells)
	for i, v := range x {
		out = append(out, v)
		for k := 1; k < pieces[i]; k++ {
			out = append(out, v+(x[i+1]-v)*float64(k)/float64(pieces[i]))
		}
	}
	last := x[len(x)-1]
	step := math.Abs(last) / float64(cells)
	if last == 0 {
		step = 1 / float64(cells)
	}
	for k := 1; k <= spare; k++ {
		out = append(out, last+float64(k)*step)
	}
	return out
}

// middles returns the thresholds midway between neighbours.
func middles(values []float64) []float64 {
	t := make([]float64, len(values)-1)
	for k := range t {
		t[k] = between(values[k]/2+values[k+1]/2, values[k], values[k+1])
	}
	return t
}

// gap is the stretch above x[low], cut into pieces.
type gap struct {
	low, pieces int
	width       float64
}

func (g gap) piece() float64 { return g.width / float64(g.pieces) }

// gapHeap has the gap with the widest pieces on top, of equal ones the lowest.
type gapHeap []gap

func (h gapHeap) Len() int { return len(h) }
func (h gapHeap) Less(i, j int) bool {
	if a, b := h[i].piece(), h[j].piece(); a != b {
		return a > b
	}
	return h[i].low < h[j].low
}
func (h gapHeap) Swap(i, j int) { h[i], h[j] = h[j], h[i] }

// Push and Pop complete heap.Interface; the heap never changes its size.
func (h *gapHeap) Push(x any) { *h = append(*h, x.(gap)) }

// Pop removes the last gap.
func (h *gapHeap) Pop() any {
	old := *h
	g := old[len(old)-1]
	*h = old[:len(old)-1]
	return g
}
