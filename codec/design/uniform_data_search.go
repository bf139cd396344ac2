package design

import (
	"cmp"
	"container/heap"
	"math"
	"slices"
	"sort"
)

// overload searches the overload point v of a uniform quantizer on |x|.
type overload struct {
	x, w              []float64 // folded histogram
	mass, sum, square []float64 // of w, wx, wx^2 before each bin
	level, edge       []float64 // levels and thresholds above 0, over v
	n                 int
	best, least       float64 // least error met, weight times amplitude^2, and its v
}

// span is an interval of v with the root mean squared errors at its ends and
// a bound below them all.
type span struct{ a, b, ra, rb, bound float64 }

// search returns the number of errors computed and, where it stopped before
// the end, by how many dB the error could still fall (0: not at all).
func (u *overload) search() (rounds int, gap float64) {
	far := float64(u.n) * u.x[len(u.x)-1] // beyond, everything is in the first cells
	spans := &spanHeap{}
	last, rl := 0.0, u.root(0)
	for v := far / (1 << 16) / float64(u.n); last < far; v *= 1.25 {
		v = math.Min(v, far)
		r := u.root(v)
		*spans = append(*spans, u.span(last, v, rl, r))
		last, rl = v, r
		rounds++
	}
	heap.Init(spans)
	work := 0
	for spans.Len() > 0 {
		s := heap.Pop(spans).(span)
		best := math.Sqrt(u.least / u.mass[len(u.x)])
		if s.bound >= best*(1-1e-13) {
			return rounds, 0
		}
		if u.n > exactUniform && work > 1<<26 {
			return rounds, 20 * math.Log10(best/math.Max(s.bound, best*1e-9))
		}
		work += min(len(u.level), len(u.x))
		if m := u.meetings(s.a, s.b); m <= 8192 {
			u.walk(s.a, s.b)
			work += 20 * m
			continue
		}
		mid := math.Sqrt(s.a * s.b)
		if s.a == 0 {
			mid = s.b / 2
		}
		r := u.root(mid)
		rounds++
		heap.Push(spans, u.span(s.a, mid, s.ra, r))
		heap.Push(spans, u.span(mid, s.b, r, s.rb))
	}
	return rounds, 0
}

// span bounds an interval: both ends less the Lipschitz constant's share.
func (u *overload) span(a, b, ra, rb float64) span {
	return span{a, b, ra, rb, math.Max(0, (ra+rb-u.lipschitz(a)*(b-a))/2)}
}

// lipschitz is the root mean square of min(largest level, |x|/a + 1/n).
func (u *overload) lipschitz(a float64) float64 {
	c, d := u.level[len(u.level)-1], 1/float64(u.n)
	i := sort.SearchFloat64s(u.x, (c-d)*a)
	if a == 0 {
		i = 0
	}
	all := u.mass[len(u.x)]
	e := c * c * (all - u.mass[i])
	if i > 0 {
		e += u.square[i]/(a*a) + 2*d*u.sum[i]/a + d*d*u.mass[i]
	}
	return math.Sqrt(e / all)
}

// parabola returns B, C of the error sum w x^2 - 2 B v + C v^2 around v and
// the first bin of each cell above the first.
func (u *overload) parabola(v float64) (b, c float64, edges []int) {
	i := 0
	edges = make([]int, len(u.edge))
	for k, y := range u.level {
		j := len(u.x)
		if k < len(u.edge) {
			j = i + sort.SearchFloat64s(u.x[i:], u.edge[k]*v)
			edges[k] = j
		}
		b += y * (u.sum[j] - u.sum[i])
		c += y * y * (u.mass[j] - u.mass[i])
		i = j
	}
	return b, c, edges
}

// root is the root mean squared error at v; it notes the least.
func (u *overload) root(v float64) float64 {
	b, c, _ := u.parabola(v)
	return math.Sqrt(u.note(v, b, c) / u.mass[len(u.x)])
}

func (u *overload) note(v, b, c float64) float64 {
	e := math.Max(0, u.square[len(u.x)]-2*v*b+v*v*c)
	if e < u.least && v > 0 {
		u.best, u.least = v, e
	}
	return e
}

// meetings counts the points in (a, b] where some |x| meets a threshold.
func (u *overload) meetings(a, b float64) (n int) {
	i, j := 0, 0
	for _, t := range u.edge {
		i += sort.SearchFloat64s(u.x[i:], t*a)
		j += sort.SearchFloat64s(u.x[j:], t*b)
		n += j - i
	}
	return n
}

// meeting says that at v bin i passes down through edge k.
type meeting struct {
	v    float64
	i, k int
}

// walk notes the least error in [a, b]: one parabola after the other.
func (u *overload) walk(a, b float64) {
	pb, pc, from := u.parabola(a)
	_, _, to := u.parabola(b)
	var all []meeting
	for k := range u.edge {
		for i := from[k]; i < to[k]; i++ {
			all = append(all, meeting{u.x[i] / u.edge[k], i, k})
		}
	}
	slices.SortFunc(all, func(p, q meeting) int {
		return cmp.Or(cmp.Compare(p.v, q.v), cmp.Compare(p.i, q.i), cmp.Compare(p.k, q.k))
	})
	last := a
	for _, m := range all {
		u.lowest(last, m.v, pb, pc)
		low, high := u.level[m.k], u.level[m.k+1]
		pb += u.w[m.i] * u.x[m.i] * (low - high)
		pc += u.w[m.i] * (low*low - high*high)
		last = m.v
	}
	u.lowest(last, b, pb, pc)
}

// lowest notes the vertex of a parabola, or the end of [a, b] next to it.
func (u *overload) lowest(a, b, pb, pc float64) {
	v := b
	if pc > 0 {
		v = math.Max(a, math.Min(b, pb/pc))
	}
	u.note(v, pb, pc)
}

// spanHeap has the span with the lowest bound on top.
type spanHeap []span

func (h spanHeap) Len() int           { return len(h) }
func (h spanHeap) Less(i, j int) bool { return h[i].bound < h[j].bound }
func (h spanHeap) Swap(i, j int)      { h[i], h[j] = h[j], h[i] }

// Push adds a span.
func (h *spanHeap) Push(x any) { *h = append(*h, x.(span)) }

// Pop removes the last span.
func (h *spanHeap) Pop() any {
	old := *h
	s := old[len(old)-1]
	*h = old[:len(old)-1]
	return s
}
