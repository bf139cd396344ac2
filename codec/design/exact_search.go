package design

import "math"

// support is an optimal path of some length for the penalty it was found at.
type support struct {
	edges   []int // b_0 ... b_k
	cost    float64
	penalty float64
}

func (s support) len() int { return len(s.edges) - 1 }

// unless returns s if it is inside the bracket, otherwise (a tie) the same
// path at the penalty of s.
func (f support) unless(s support, inside bool) support {
	if inside {
		return s
	}
	f.penalty = s.penalty
	return f
}

// searchPath returns a least-cost path of exactly n edges, the lengths of the
// paths at the penalties tried, and whether the path is proven to cost the least: no path
// of n edges costs less than the cheapest of any length with a penalty, less
// n penalties. Under the quadrangle inequality the least cost F(k) of k
// edges is convex in k, so every n has a penalty at which it is among the
// optimal lengths; where several lengths share that penalty, swap makes the
// path of n edges out of a shorter and a longer one. Source: A. Aggarwal,
// B. Schieber, T. Tokuyama, Discrete Comput. Geom. 12 (1994), theorem and
// lemma from memory, proofs redone in swap.
func searchPath(c cellCost, bins, n int, guess float64) (edges []int, tried []float64, proven bool) {
	p := newPenalised(c, bins)
	few := support{[]int{0, bins}, c.cost(0, bins), math.Inf(1)}
	many := support{everyBin(bins), 0, 0}
	if n == 1 || n == bins {
		return map[bool][]int{true: few.edges, false: many.edges}[n == 1], nil, true
	}
	penalty, line := guess, math.Inf(1)
	for {
		p.run(penalty)
		s := support{edges: p.path(), penalty: penalty}
		k := s.len()
		tried = append(tried, float64(k))
		if k == n {
			return s.edges, tried, true
		}
		inside := k > few.len() && k < many.len()
		if p.best[bins] >= line*(1-1e-14) || len(tried) >= 200 || !inside && !math.IsInf(line, 1) {
			break
		}
		s.cost = pathCost(c, s.edges)
		if k < n {
			few = few.unless(s, inside)
		} else {
			many = many.unless(s, inside)
		}
		penalty, line = nextPenalty(few, many, n, len(tried))
	}
	edges = swap(few.edges, many.edges, n)
	gap := pathCost(c, edges) + penalty*float64(n) - p.best[bins]
	return edges, tried, gap <= 1e-12*p.best[bins]
}

// nextPenalty returns the penalty to try next: now the one at which few and
// many cost the same, line (where no path is cheaper, n lies on the straight
// piece between them), now the log-log interpolation towards n, which closes
// in faster on smooth data.
func nextPenalty(few, many support, n, round int) (penalty, line float64) {
	tied := (few.cost - many.cost) / float64(many.len()-few.len())
	line = few.cost + tied*float64(few.len())
	if many.len()-few.len() <= 2 || round%4 == 0 {
		return tied, line
	}
	lf, lm, ln := math.Log(float64(few.len())), math.Log(float64(many.len())), math.Log(float64(n))
	switch {
	case many.penalty == 0:
		penalty = few.penalty * math.Exp(-3.2*(ln-lf)-0.02)
	case math.IsInf(few.penalty, 1):
		penalty = many.penalty * math.Exp(3.2*(lm-ln)+0.02)
	default:
		t := (ln - lf) / (lm - lf)
		penalty = math.Exp((1-t)*math.Log(few.penalty) + t*math.Log(many.penalty))
	}
	if !(penalty > many.penalty && penalty < few.penalty) {
		return tied, line
	}
	return penalty, math.Inf(1)
}

func everyBin(bins int) []int {
	b := make([]int, bins+1)
	for i := range b {
		b[i] = i
	}
	return b
}

// swap joins two optimal paths for the same penalty, p shorter and q longer
// than n edges, to one of exactly n. With x = n - len(p) there is a first r
// with q[r+x+1] <= p[r+1]; then p[r] <= q[r+x], the edge of q lies inside the
// edge of p, and by the quadrangle inequality crossing over from q to p there
// costs no more than both paths together, so both results are optimal too.
func swap(p, q []int, n int) []int {
	x := n - (len(p) - 1)
	r := 0
	for q[r+x+1] > p[r+1] {
		r++
	}
	out := make([]int, 0, n+1)
	out = append(out, q[:r+x+1]...)
	return append(out, p[r+1:]...)
}

// settle moves single bin edges while that lowers the cost: it removes what
// rounding left of a tie, and never raises the cost.
func settle(c cellCost, b []int) {
	for moved := true; moved; {
		moved = false
		for k := 1; k < len(b)-1; k++ {
			now := c.cost(b[k-1], b[k]) + c.cost(b[k], b[k+1])
			for _, j := range [2]int{b[k] - 1, b[k] + 1} {
				if j <= b[k-1] || j >= b[k+1] {
					continue
				}
				if e := c.cost(b[k-1], j) + c.cost(j, b[k+1]); e < now*(1-1e-15) {
					b[k], now, moved = j, e, true
				}
			}
		}
	}
}
