package design

import (
	"fmt"
	"math"
	"sort"
)

// FineHistogram is data finer than the grid it is binned on: the moments of
// the samples that fell into each bin, bins ascending and not overlapping.
type FineHistogram struct {
	Weights   []float64 // > 0
	Centroids []float64 // ascending, amplitude (full scale = 1.0)
	Within    []float64 // mean squared distance to the bin's centroid, >= 0
}

// ExactFine returns the best staircase whose thresholds do not cut a bin: the
// exact optimum on the bins' centroids, its MSE raised by what lies within
// them. On the samples themselves it is a start, therefore called Local with
// one start; RefineData continues from it.
func ExactFine(f FineHistogram, n int, sym Symmetry) (Solution, error) {
	if len(f.Within) != len(f.Weights) {
		return Solution{}, fmt.Errorf("%d moments within for %d bins: want as many", len(f.Within), len(f.Weights))
	}
	h := Histogram{Values: f.Centroids, Weights: f.Weights}
	s, err := ExactData(h, n, sym)
	if err != nil {
		return s, err
	}
	var within float64
	for i, v := range f.Within {
		if !(v >= 0 && v <= math.MaxFloat64) {
			return Solution{}, fmt.Errorf("moment %d within its bin (%g) is not finite and at least 0", i, v)
		}
		within += v * f.Weights[i]
	}
	s.MSE += within / h.Total()
	s.Proof, s.Starts = Local, 1
	return s, nil
}

// RefineData improves the staircase start on h (the samples themselves, or
// any finer histogram) by rounds of midpoints and centroids until none helps,
// at most rounds. The error never rises. Where n or the symmetry of start do
// not fit its values, it returns an error. Proof: Local; Starts as in start,
// at least 1. Source: S. P. Lloyd, IEEE Trans. Inform. Theory IT-28 (1982).
func RefineData(h Histogram, start Solution, sym Symmetry, rounds int) (Solution, error) {
	if err := h.check(); err != nil {
		return Solution{}, err
	}
	n := len(start.Values)
	if n == 0 || len(start.Thresholds) != n-1 {
		return Solution{}, fmt.Errorf("a start of %d values and %d thresholds: want one threshold fewer", n, len(start.Thresholds))
	}
	half, values, pinned := h, append([]float64(nil), start.Values...), false
	if sym == Mirror {
		half, pinned = h.Fold(), n%2 == 1
		values = values[n/2:]
	}
	done := lloyd(half, newRealSums(half, pinned), values, pinned, rounds)
	thresholds := midpoints(values)
	s := Solution{Rounds: done, Proof: Local, Starts: max(1, start.Starts)}
	s.Residual = residualData(half, values, pinned)
	if sym == Mirror {
		values, thresholds = unfold(values, thresholds, pinned)
	}
	s.Values, s.Thresholds = values, thresholds
	s.MSE, s.Entropy = EvaluateData(h, thresholds, values)
	return s, nil
}

// lloyd alternates midpoints and centroids in place until the cells stay the
// same; a cell without data keeps its value.
func lloyd(h Histogram, c *realSums, values []float64, pinned bool, rounds int) (done int) {
	edges := make([]int, len(values)+1)
	edges[len(values)] = len(h.Values)
	for done < rounds {
		moved := cut(h, values, edges)
		if !moved && done > 0 {
			break
		}
		done++
		for k := range values {
			if edges[k] < edges[k+1] && !(k == 0 && pinned) {
				values[k] = c.centroid(edges[k], edges[k+1])
			}
		}
	}
	return done
}

// cut sets the inner edges to the bins from the midpoints on and reports
// whether any moved.
func cut(h Histogram, values []float64, edges []int) (moved bool) {
	for k := range values[1:] {
		t := values[k]/2 + values[k+1]/2
		if e := sort.SearchFloat64s(h.Values, t); e != edges[k+1] {
			edges[k+1], moved = e, true
		}
	}
	return moved
}

// centroid of bins [i, j).
func (c *realSums) centroid(i, j int) float64 {
	w := c.w[j].add(c.w[i].neg())
	s := c.s[j].add(c.s[i].neg())
	return c.x[i] + s.add(w.times(-c.x[i])).hi/w.hi
}

// residualData is max |value - centroid| / cell width over cells with data.
func residualData(h Histogram, values []float64, pinned bool) float64 {
	var worst float64
	n := len(values)
	edges := make([]int, n+1)
	edges[n] = len(h.Values)
	cut(h, values, edges)
	for k, y := range values {
		if edges[k] == edges[k+1] || k == 0 && pinned || n < 2 {
			continue
		}
		width := values[min(k+1, n-1)]/2 - values[max(k-1, 0)]/2
		if k == 0 || k == n-1 {
			width *= 2
		}
		if width > 0 {
			worst = math.Max(worst, math.Abs(y-centroid(h, edges[k], edges[k+1]))/width)
		}
	}
	return worst
}
