package design

import (
	"fmt"
	"math"
)

// ExactData returns the n-level staircase of least mean squared error on h, the
// global optimum among all staircases (Free) or among those that are their
// own mirror image (Mirror: threshold at 0 for even n, a level fixed at 0 for
// odd n). Values on a threshold go to the upper cell; in an optimum no datum
// lies on one.
//
// Method: cells of an optimum are intervals, and the squared error of an
// interval about its centroid obeys the quadrangle inequality, so the optimum
// is a least-cost path of n edges, found by bisection on a penalty per edge
// (see searchPath). Mirror folds h to |x|; the error about 0 of a first cell
// pinned there obeys the inequality as well, for moving its end up to y adds
// (at x >= 0) x^2, never less than the squared distance to any centroid below
// 2x. Time O(bins log bins) per penalty, memory linear in the bins.
//
// Where h has no more distinct values than levels the error is 0: every value
// is a level, and spare levels cut the widest gaps between them evenly, so
// that the table keeps n distinct thresholds (see spread).
func ExactData(h Histogram, n int, sym Symmetry) (Solution, error) {
	if err := h.check(); err != nil {
		return Solution{}, err
	}
	if n < 1 || n > 1<<16 {
		return Solution{}, fmt.Errorf("%d levels: want 1 to 65536", n)
	}
	return exactData(h, n, sym), nil
}

func exactData(h Histogram, n int, sym Symmetry) Solution {
	half, cells, pinned := h, n, false
	if sym == Mirror {
		half, cells, pinned = h.Fold(), (n+1)/2, n%2 == 1
		if pinned && half.Values[0] != 0 {
			half = Histogram{append([]float64{0}, half.Values...), append([]float64{0}, half.Weights...)}
		}
	}
	var values, thresholds []float64
	s := Solution{Proof: Exact}
	if cells >= len(half.Values) {
		values = spread(half.Values, cells)
		thresholds = middles(values)
		if spare := cells - len(half.Values); spare > 0 {
			s.Notes = append(s.Notes, spareNote(len(half.Values), cells, sym))
		}
	} else {
		var edges []int
		var proven bool
		edges, s.Trace, proven = optimalEdges(half, cells, pinned)
		s.Rounds, s.TraceOf = len(s.Trace), cellsTried[sym]
		if !proven { // rounding ate the proof: never seen
			s.Proof, s.Starts = Local, 1
		}
		values, thresholds = placed(half, edges, pinned)
	}
	if sym == Mirror {
		values, thresholds = unfold(values, thresholds, pinned)
	}
	s.Values, s.Thresholds = values, thresholds
	s.MSE, s.Entropy = EvaluateData(h, thresholds, values)
	return s
}

func spareNote(distinct, cells int, sym Symmetry) string {
	what, side := "values", ""
	if sym == Mirror {
		what, side = "magnitudes", " a side"
	}
	return fmt.Sprintf("%d distinct %s for %d levels%s: no error, %d spare levels%s lie in the widest gaps",
		distinct, what, cells, side, cells-distinct, side)
}

// cellsTried is what an exact search leaves as its trace.
var cellsTried = map[Symmetry]string{
	Free: "cells of the optimum at each penalty tried", Mirror: "cells a side of the optimum at each penalty tried",
}

// optimalEdges returns the bin edges of the optimal cells (see searchPath).
func optimalEdges(h Histogram, cells int, pinned bool) (edges []int, tried []float64, proven bool) {
	var c cellCost
	unit := 1.0
	if w := newWordSums(h, pinned); w != nil {
		c, unit = w, w.unit
	} else {
		c = newRealSums(h, pinned)
	}
	edges, tried, proven = searchPath(c, len(h.Values), cells, panterDitePenalty(h, cells)/unit)
	settle(c, edges)
	return edges, tried, proven
}

// panterDitePenalty is -dD/dn of the high-resolution law D = (integral of
// p^(1/3))^3 / (12 n^2), with a weight spread over the distance to the
// neighbours. Source: P. F. Panter, W. Dite, Proc. IRE 39 (1951).
func panterDitePenalty(h Histogram, n int) float64 {
	var sum float64
	last := len(h.Values) - 1
	for i, w := range h.Weights {
		d := (h.Values[min(i+1, last)] - h.Values[max(i-1, 0)]) / 2
		sum += math.Cbrt(w * d * d)
	}
	return sum * sum * sum / (6 * float64(n) * float64(n) * float64(n))
}

// placed returns the centroid of each cell (0 for a pinned first one) and the
// thresholds midway between them.
func placed(h Histogram, edges []int, pinned bool) (values, thresholds []float64) {
	values = make([]float64, len(edges)-1)
	for k := range values {
		values[k] = centroid(h, edges[k], edges[k+1])
	}
	if pinned {
		values[0] = 0
	}
	thresholds = make([]float64, len(values)-1)
	for k := range thresholds {
		last, next := h.Values[edges[k+1]-1], h.Values[edges[k+1]]
		thresholds[k] = between(values[k]/2+values[k+1]/2, last, next)
	}
	return values, thresholds
}

// between returns t, moved strictly between lo and hi where rounding has
// pushed it out (hi itself where they are neighbouring floats).
func between(t, lo, hi float64) float64 {
	if t >= hi {
		t = math.Nextafter(hi, lo)
	}
	if t <= lo {
		t = math.Nextafter(lo, hi)
	}
	return t
}

// centroid of bins [i, j), relative to the first, compensated.
func centroid(h Histogram, i, j int) float64 {
	var mass, sum, lost float64
	for b := i; b < j; b++ {
		mass += h.Weights[b]
		sum, lost = neumaier(sum, lost, h.Weights[b]*(h.Values[b]-h.Values[i]))
	}
	if mass == 0 {
		return h.Values[i]
	}
	return h.Values[i] + (sum+lost)/mass
}

// unfold mirrors a half table. Not pinned: the threshold between the halves
// is 0. Pinned: values[0] is 0 and stands alone.
func unfold(values, thresholds []float64, pinned bool) (v, t []float64) {
	skip := 0
	if pinned {
		skip = 1
	}
	for k := len(values) - 1; k >= skip; k-- {
		v = append(v, 0-values[k])
	}
	for k := len(thresholds) - 1; k >= 0; k-- {
		t = append(t, -thresholds[k])
	}
	if !pinned {
		t = append(t, 0)
	}
	return append(v, values...), append(t, thresholds...)
}
