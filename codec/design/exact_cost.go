package design

import (
	"math"
	"math/bits"
)

// cellCost gives the weighted squared error of bins [i, j) about their best
// value: their centroid, or 0 where the first cell (i = 0) is pinned to 0.
type cellCost interface {
	cost(i, j int) float64
}

// wordSums are prefix sums for values and weights that are integers in some
// power-of-two unit, as histograms of audio words are. The sums wrap modulo
// 2^64 and so do the moments about the cell's first value that cost derives
// from them; as those moments themselves fit, they are exact, and nothing is
// lost to cancellation before the last subtraction.
type wordSums struct {
	at     []wordSum // one more than bins
	pinned bool
	unit   float64 // cost 1 in amplitude^2 times weight
}

// wordSum holds the sums of w, wx, wx^2 over the bins before, and the bin's
// own value.
type wordSum struct{ w, s, q, x int64 }

func (c *wordSums) cost(i, j int) float64 {
	a, b := &c.at[i], &c.at[j]
	w, s, q := b.w-a.w, b.s-a.s, b.q-a.q
	if i == 0 && c.pinned {
		return float64(q)
	}
	first := s - a.x*w
	second := q - a.x*(s+first)
	f := float64(first)
	return float64(second) - f*f/float64(w)
}

// newWordSums returns nil where h does not fit: values or weights off any
// common binary grid, or moments of 63 bits and more.
func newWordSums(h Histogram, pinned bool) *wordSums {
	ux, uw := binaryUnit(h.Values), binaryUnit(h.Weights)
	origin := h.Values[0]
	if pinned {
		origin = 0
	}
	if !fitsWords(h, origin, ux, uw) {
		return nil
	}
	c := &wordSums{at: make([]wordSum, len(h.Values)+1), pinned: pinned, unit: ux * ux * uw}
	var sum wordSum
	for i, x := range h.Values {
		sum.x = int64((x - origin) / ux)
		c.at[i] = sum
		w := int64(h.Weights[i] / uw)
		sum.w += w
		sum.s += w * sum.x
		sum.q += w * sum.x * sum.x
	}
	c.at[len(h.Values)] = sum
	return c
}

// fitsWords reports whether all sums are below 2^62: the second moment about
// the origin bounds that of every cell about its own first value.
func fitsWords(h Histogram, origin, ux, uw float64) bool {
	var total, moment float64
	for i, x := range h.Values {
		d, w := (x-origin)/ux, h.Weights[i]/uw
		total += w
		moment += d * d * w
	}
	reach := (h.Values[len(h.Values)-1] - origin) / ux
	return total < 1<<53 && reach < 1<<53 && moment < 1<<62
}

// binaryUnit returns the largest power of two that all v are multiples of.
func binaryUnit(v []float64) float64 {
	low := math.MaxInt
	for _, x := range v {
		if x == 0 {
			continue
		}
		b := math.Float64bits(x)
		mantissa, exponent := b&(1<<52-1), int(b>>52&0x7FF)
		if exponent == 0 {
			exponent = 1
		} else {
			mantissa |= 1 << 52
		}
		low = min(low, exponent+bits.TrailingZeros64(mantissa))
	}
	if low == math.MaxInt {
		return 1
	}
	return math.Ldexp(1, low-1075)
}

// realSums are prefix sums of pairs of floats (106 bits) for any values and
// weights; slower, just as safe against cancellation. Error-free sums and
// products after T. J. Dekker, Numer. Math. 18 (1971), the product by a fused
// multiply-add.
type realSums struct {
	w, s, q []pair
	x       []float64
	pinned  bool
}

// pair is an unevaluated sum of two floats, |lo| below half an ulp of hi.
type pair struct{ hi, lo float64 }

func twoSum(a, b float64) pair {
	s := a + b
	t := s - a
	return pair{s, (a - (s - t)) + (b - t)}
}

func twoProd(a, b float64) pair {
	p := float64(a * b)
	return pair{p, math.FMA(a, b, -p)}
}

func (p pair) add(q pair) pair {
	s := twoSum(p.hi, q.hi)
	return twoSum(s.hi, s.lo+(p.lo+q.lo))
}

func (p pair) neg() pair { return pair{-p.hi, -p.lo} }

func (p pair) times(x float64) pair {
	r := twoProd(p.hi, x)
	return twoSum(r.hi, r.lo+float64(p.lo*x))
}

func (c *realSums) cost(i, j int) float64 {
	q := c.q[j].add(c.q[i].neg())
	if i == 0 && c.pinned {
		return q.hi
	}
	w := c.w[j].add(c.w[i].neg())
	s := c.s[j].add(c.s[i].neg())
	first := s.add(w.times(-c.x[i]))
	second := q.add(s.add(first).times(-c.x[i]))
	if e := second.hi - float64(first.hi*first.hi)/w.hi; e > 0 {
		return e
	}
	return 0
}

func newRealSums(h Histogram, pinned bool) *realSums {
	n := len(h.Values)
	c := &realSums{
		w: make([]pair, n+1), s: make([]pair, n+1), q: make([]pair, n+1),
		x: make([]float64, n+1), pinned: pinned,
	}
	for i, x := range h.Values {
		w := h.Weights[i]
		wx := twoProd(w, x)
		c.x[i] = x
		c.w[i+1] = c.w[i].add(pair{w, 0})
		c.s[i+1] = c.s[i].add(wx)
		c.q[i+1] = c.q[i].add(wx.times(x))
	}
	return c
}
