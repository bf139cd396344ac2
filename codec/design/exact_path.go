package design

// penalised finds least-cost paths 0 = b_0 < b_1 < ... < b_k = bins where an
// edge (i, j) costs cost(i, j) + penalty. The costs obey the quadrangle
// inequality (concave Monge), so that of two last edges the later start, once
// it is better, stays better: a queue of the starts that will still matter,
// each with the end from which it leads, suffices. Source: Z. Galil, K. Park,
// Inform. Process. Lett. 33 (1990), here with a galloping search from the
// last take-over, which makes a pass almost linear. Memory: 20 bytes a bin.
type penalised struct {
	c     cellCost
	bins  int
	best  []float64 // least cost up to a bin edge
	from  []int32   // start of the last edge on that path
	start []int32   // queue of starts ...
	lead  []int32   // ... and of the end each leads from
}

func newPenalised(c cellCost, bins int) *penalised {
	return &penalised{
		c: c, bins: bins,
		best: make([]float64, bins+1), from: make([]int32, bins+1),
		start: make([]int32, bins+1), lead: make([]int32, bins+1),
	}
}

// run fills best and from.
func (p *penalised) run(penalty float64) {
	head, tail := 0, 0
	p.start[0], p.lead[0] = 0, 1
	for j := 1; j <= p.bins; j++ {
		for head < tail && int(p.lead[head+1]) <= j {
			head++
		}
		i := int(p.start[head])
		p.best[j] = p.best[i] + p.c.cost(i, j) + penalty
		p.from[j] = int32(i)
		if j == p.bins {
			return
		}
		for tail > head && p.beats(j, int(p.start[tail]), int(p.lead[tail])) {
			tail--
		}
		low := max(int(p.lead[tail]), j+1)
		if h := p.takeOver(j, int(p.start[tail]), low); h <= p.bins {
			tail++
			p.start[tail], p.lead[tail] = int32(j), int32(h)
		}
	}
}

// beats reports whether an edge from a to the end h is better than one from b.
func (p *penalised) beats(a, b, h int) bool {
	return p.best[a]+p.c.cost(a, h) <= p.best[b]+p.c.cost(b, h)
}

// takeOver returns the first end from low on where a beats b, bins+1 if none.
func (p *penalised) takeOver(a, b, low int) int {
	if p.beats(a, b, low) {
		return low
	}
	step := 1
	high := low + step
	for high <= p.bins && !p.beats(a, b, high) {
		low, step = high, 2*step
		high = low + step
	}
	if high > p.bins {
		if low == p.bins || !p.beats(a, b, p.bins) {
			return p.bins + 1
		}
		high = p.bins
	}
	for high-low > 1 {
		if mid := (low + high) / 2; p.beats(a, b, mid) {
			high = mid
		} else {
			low = mid
		}
	}
	return high
}

// path walks back from the last bin and returns b_0 ... b_k.
func (p *penalised) path() []int {
	k := 0
	for j := p.bins; j > 0; j = int(p.from[j]) {
		k++
	}
	b := make([]int, k+1)
	for j := p.bins; k > 0; k-- {
		b[k] = j
		j = int(p.from[j])
	}
	return b
}

// pathCost sums the edges of a path.
func pathCost(c cellCost, b []int) float64 {
	var sum, lost float64
	for k := range b[1:] {
		sum, lost = neumaier(sum, lost, c.cost(b[k], b[k+1]))
	}
	return sum + lost
}
