package design

import (
	"fmt"
	"math"
	"sort"
)

// check reports the first broken promise of h: lengths, order, finiteness.
// Range checks are written so that NaN fails.
func (h Histogram) check() error {
	if len(h.Values) == 0 || len(h.Values) != len(h.Weights) {
		return fmt.Errorf("histogram of %d values and %d weights: want as many, at least one", len(h.Values), len(h.Weights))
	}
	var total float64
	for i, x := range h.Values {
		if !(math.Abs(x) <= math.MaxFloat64) || i > 0 && !(x > h.Values[i-1]) {
			return fmt.Errorf("value %d (%g) of the histogram is not finite and above its neighbour", i, x)
		}
		if w := h.Weights[i]; !(w > 0 && w <= math.MaxFloat64) {
			return fmt.Errorf("weight %d (%g) of the histogram is not finite and above 0", i, w)
		}
		total += h.Weights[i]
	}
	if x := math.Max(-h.Values[0], h.Values[len(h.Values)-1]); !(total*x*x <= math.MaxFloat64) {
		return fmt.Errorf("histogram reaches %g with a weight of %g in all: its energy overflows", x, total)
	}
	return nil
}

// Fold returns the histogram of |x|.
func (h Histogram) Fold() Histogram {
	n := len(h.Values)
	out := Histogram{Values: make([]float64, 0, n), Weights: make([]float64, 0, n)}
	right := sort.SearchFloat64s(h.Values, 0)
	left := right - 1
	for left >= 0 || right < n {
		switch {
		case left < 0 || right < n && h.Values[right] < -h.Values[left]:
			out.push(h.Values[right], h.Weights[right])
			right++
		case right == n || -h.Values[left] < h.Values[right]:
			out.push(-h.Values[left], h.Weights[left])
			left--
		default:
			out.push(h.Values[right], h.Weights[right]+h.Weights[left])
			left, right = left-1, right+1
		}
	}
	return out
}

func (h *Histogram) push(x, w float64) {
	h.Values = append(h.Values, x+0) // -0 becomes 0
	h.Weights = append(h.Weights, w)
}

// Total returns the sum of the weights.
func (h Histogram) Total() float64 {
	var sum float64
	for _, w := range h.Weights {
		sum += w
	}
	return sum
}

// EvaluateData codes h with a staircase given by thresholds (N-1) and values
// (N), a value on a threshold going to the upper cell, and returns the mean
// squared error (squared amplitude units) and the first-order entropy of the
// indices (bits). An empty histogram gives NaN for both.
func EvaluateData(h Histogram, thresholds, values []float64) (mse, entropy float64) {
	total := h.Total()
	if total == 0 {
		return math.NaN(), math.NaN()
	}
	i := 0
	for k, y := range values {
		var mass, sum, lost float64
		for i < len(h.Values) && (k == len(thresholds) || h.Values[i] < thresholds[k]) {
			d := h.Values[i] - y
			term := float64(d*d) * h.Weights[i]
			mass += h.Weights[i]
			sum, lost = neumaier(sum, lost, term)
			i++
		}
		mse += sum + lost
		entropy -= plogp(mass / total)
	}
	return mse / total, entropy + 0
}

// neumaier adds x to the compensated sum (sum, lost). Source: A. Neumaier,
// ZAMM 54 (1974), from memory.
func neumaier(sum, lost, x float64) (float64, float64) {
	t := sum + x
	if math.Abs(sum) >= math.Abs(x) {
		return t, lost + ((sum - t) + x)
	}
	return t, lost + ((x - t) + sum)
}

// plogp is p log2 p, 0 at 0.
func plogp(p float64) float64 {
	if p == 0 {
		return 0
	}
	return p * math.Log2(p)
}
