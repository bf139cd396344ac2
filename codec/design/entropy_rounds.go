package design

import (
	"slices"
	"sort"
)

// descend repeats nearest-by-price cells and centroids while that helps.
func (p *coded) descend(edges []int) ([]int, int) {
	rounds, now := 0, pathCost(p, edges)
	for rounds < 30 {
		rounds++
		next := p.reassign(edges)
		e := pathCost(p, next)
		if !(e < now*(1-1e-13)) {
			break
		}
		edges, now = next, e
	}
	return edges, rounds
}

// shift moves all ends together by ever smaller steps while that helps.
func (p *coded) shift(edges []int) ([]int, int) {
	rounds, now := 0, pathCost(p, edges)
	for shift := 4; shift < 20; {
		rounds++
		ends, finest := p.around(edges, shift)
		next := p.shortest(ends, 20, 0)
		if e := pathCost(p, next); e < now*(1-1e-10) && len(next)-1 <= p.most {
			edges, now = next, e
			continue
		}
		if finest {
			break
		}
		shift++
	}
	settle(p, edges)
	return edges, rounds
}

// around returns each end with two more on either side, apart by the two
// cells' bins divided by 2^shift, and whether no step was above one bin.
func (p *coded) around(edges []int, shift int) (ends []int, finest bool) {
	ends, finest = []int{0}, true
	bins := len(p.h.Values)
	for k := 1; k < len(edges)-1; k++ {
		step := max(1, (edges[k+1]-edges[k-1])>>shift)
		finest = finest && step == 1
		for o := -2; o <= 2; o++ {
			ends = append(ends, min(max(edges[k]+o*step, 1), bins-1))
		}
	}
	slices.Sort(ends)
	return append(slices.Compact(ends), bins), finest
}

// reassign gives every bin to the value of least squared error plus price,
// values without bins are dropped: the lower envelope of the lines
// y^2 - 2xy + lambda bits.
func (p *coded) reassign(edges []int) []int {
	values, _ := p.table(edges)
	var kept, first []int // cells on the envelope, and the bin each begins with
	for k := range values {
		start := 0
		for len(kept) > 0 {
			t := p.border(edges, values, kept[len(kept)-1], k)
			start = sort.SearchFloat64s(p.h.Values, t)
			if start > first[len(first)-1] {
				break
			}
			if p.pinned && len(kept) == 1 { // the middle cell stays
				start = 1
				break
			}
			kept, first = kept[:len(kept)-1], first[:len(first)-1]
			start = 0
		}
		if start < len(p.h.Values) {
			kept, first = append(kept, k), append(first, start)
		}
	}
	return append(first, len(p.h.Values))
}

// border is where cells j < k cost the same.
func (p *coded) border(edges []int, values []float64, j, k int) float64 {
	d := p.bits(edges[k], edges[k+1]) - p.bits(edges[j], edges[j+1])
	return values[j]/2 + values[k]/2 + p.lambda*d/(2*(values[k]-values[j]))
}

// table returns centroids and borders of the cells.
func (p *coded) table(edges []int) (values, thresholds []float64) {
	values = make([]float64, len(edges)-1)
	for k := range values {
		values[k] = centroid(p.h, edges[k], edges[k+1])
	}
	if p.pinned {
		values[0] = 0
	}
	thresholds = make([]float64, len(values)-1)
	for k := range thresholds {
		last, next := p.h.Values[edges[k+1]-1], p.h.Values[edges[k+1]]
		thresholds[k] = between(p.border(edges, values, k, k+1), last, next)
	}
	return values, thresholds
}
