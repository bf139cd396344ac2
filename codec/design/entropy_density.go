package design

import (
	"fmt"
	"math"
	"slices"
)

// EntropyDensity is EntropyData for a density: first on its probabilities in
// 32,768 bins, then with the thresholds set free, by Newton on the conditions
// (t - y_k)^2 + lambda bits_k = (t - y_(k+1))^2 + lambda bits_(k+1), y the
// centroids and bits the lengths of the indices, until no threshold is off by
// 1e-10 of a cell (Solution.Residual); a rate is met to 1e-9 bit. Mirror takes
// d as symmetric about 0. Endless tails get cells until what lies beyond is
// 1e-12 likely. Aim is lambda; Proof: Local, with the number of starts.
func EntropyDensity(d Density, opt EntropyOptions) (Solution, error) {
	if err := opt.check(); err != nil {
		return Solution{}, err
	}
	h, err := binned(d, opt.Symmetry)
	if err != nil {
		return Solution{}, err
	}
	s := codedStart(h, opt)
	c := codedDensity{d: d, half: opt.Symmetry == Mirror, lambda: s.Aim}
	c.pinned = c.half && len(s.Values)%2 == 1
	t := s.Thresholds
	if c.half {
		t = t[len(t)-(len(s.Values)-1)/2:]
	}
	best := c.solution(slices.Clone(t))
	if opt.Rate > 0 {
		best = c.atRate(best, t, opt.Rate)
	}
	best.Starts, best.Rounds = s.Starts, best.Rounds+s.Rounds
	return best, nil
}

// codedStart designs on the bins, for a rate within 0.1 bit of it if it can.
func codedStart(h Histogram, opt EntropyOptions) Solution {
	solve := codedSolver(h, opt, false)
	if opt.Rate == 0 {
		return solve(opt.Lambda)
	}
	power, _ := EvaluateData(h, nil, []float64{centroid(h, 0, len(h.Values))})
	lambda := 2 * math.Ln2 * power * math.Exp2(-2*opt.Rate)
	s := solve(lambda)
	for round := 0; round < 6 && math.Abs(s.Entropy-opt.Rate) > 0.1; round++ {
		lambda *= math.Pow(4, s.Entropy-opt.Rate)
		s = solve(lambda)
	}
	return s
}

// binned gives probabilities and centroids of 32,768 bins; for mirror designs
// of the upper half line and its mirror image.
func binned(d Density, sym Symmetry) (Histogram, error) {
	const bins, tail = 1 << 15, 1e-12
	lo, hi := d.Support()
	from, to := lo, hi
	if math.IsInf(lo, -1) {
		from = d.Quantile(tail)
	}
	if math.IsInf(hi, 1) {
		to = d.Quantile(1 - tail)
	}
	n := bins
	if sym == Mirror {
		from, n = 0, bins/2
	}
	if !(from < to && to-from <= math.MaxFloat64) {
		return Histogram{}, fmt.Errorf("density from %g to %g: want a finite stretch", from, to)
	}
	var h Histogram
	for i := range n {
		a := from + (to-from)*float64(i)/float64(n)
		b := from + (to-from)*float64(i+1)/float64(n)
		if i == 0 && sym == Free {
			a = lo
		}
		if i == n-1 {
			b = hi
		}
		if p, off, _ := d.Cell(a, b); p > 0 {
			if x := anchor(a, b) + off; len(h.Values) == 0 || x > h.Values[len(h.Values)-1] {
				h.push(x, p)
			}
		}
	}
	if sym == Mirror {
		for i := range slices.Clone(h.Values) {
			h.push(-h.Values[i], h.Weights[i])
		}
		m := len(h.Values) / 2
		slices.Reverse(h.Values[m:])
		slices.Reverse(h.Weights[m:])
		h.Values = slices.Concat(h.Values[m:], h.Values[:m])
		h.Weights = slices.Concat(h.Weights[m:], h.Weights[:m])
	}
	return h, h.check()
}

// solution frees t and makes a table of it.
func (c *codedDensity) solution(t []float64) Solution {
	t, rounds, residual := c.free(t)
	m, _ := c.cells(t)
	s := Solution{Thresholds: t, Values: m.y, Rounds: rounds, Residual: residual, Proof: Local, Aim: c.lambda}
	if c.half {
		s.Values, s.Thresholds = unfold(m.y, t, c.pinned)
	}
	s.MSE, s.Entropy = EvaluateDensity(c.d, s.Thresholds, s.Values)
	return s
}

// atRate moves lambda until the entropy is rate less at most 1e-9 bit, from
// the table s and thresholds t; the best entropy not above the rate is kept.
func (c *codedDensity) atRate(s Solution, t []float64, rate float64) Solution {
	best, found := s, s.Entropy <= rate
	slope := -0.5 / math.Ln2 // bits per unit of ln lambda, high-resolution law
	rounds := s.Rounds
	tried := append(s.Trace, s.Entropy)
	for range 40 {
		off := rate - 4e-10 - s.Entropy
		if math.Abs(off) < 4e-10 {
			break
		}
		step := math.Max(-1, math.Min(1, off/slope))
		before := s
		c.lambda *= math.Exp(step)
		s = c.solution(t)
		rounds += s.Rounds
		tried = append(tried, s.Entropy)
		if s.Entropy <= rate && (!found || s.MSE < best.MSE) {
			best, found = s, true
		}
		if now := (s.Entropy - before.Entropy) / step; now < 0 {
			slope = now
		}
	}
	best.Rounds, best.Trace, best.TraceOf = rounds, tried, "entropy in bits at each price tried"
	return best
}
