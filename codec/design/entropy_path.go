package design

import (
	"math"
)

// grid returns bins at least step apart, the ends included.
func (p *coded) grid(step float64) []int {
	g := []int{0}
	for i := 1; i < len(p.h.Values); i++ {
		if p.h.Values[i]-p.h.Values[g[len(g)-1]] >= step {
			g = append(g, i)
		}
	}
	return append(g, len(p.h.Values))
}

// shortest returns the cheapest cells with ends on the grid, at most window
// ends apart; penalty is a further cost of each.
func (p *coded) shortest(grid []int, window int, penalty float64) []int {
	m := len(grid) - 1
	best, from := make([]float64, m+1), make([]int32, m+1)
	for j := 1; j <= m; j++ {
		best[j] = math.Inf(1)
		for i := j - 1; i >= max(0, j-window); i-- {
			if e := best[i] + p.cost(grid[i], grid[j]) + penalty; e < best[j] {
				best[j], from[j] = e, int32(i)
			}
		}
	}
	var back []int
	for j := m; j > 0; j = int(from[j]) {
		back = append(back, grid[j])
	}
	edges := []int{0}
	for k := len(back) - 1; k >= 0; k-- {
		edges = append(edges, back[k])
	}
	return edges
}

// fewer bisects the penalty until the cells are no more than allowed.
func (p *coded) fewer(grid []int, window int) []int {
	if len(grid)-1 > 4*p.most+2000 { // more ends than so few cells can use
		grid = thinned(grid, 4*p.most+2000)
		window = len(grid)
	}
	low, high := 0.0, p.c.cost(0, len(p.h.Values))*p.unit
	best := []int{0, len(p.h.Values)}
	for range 40 {
		mid := math.Sqrt(math.Max(low, high*1e-6) * high)
		if e := p.shortest(grid, window, mid); len(e)-1 > p.most {
			low = mid
		} else if best, high = e, mid; len(e)-1 == p.most {
			break
		}
	}
	return best
}

// thinned keeps about n of the ends, the first and the last included.
func thinned(grid []int, n int) []int {
	out := []int{0}
	for k := 1; k <= n; k++ {
		if e := grid[k*(len(grid)-1)/n]; e > out[len(out)-1] {
			out = append(out, e)
		}
	}
	return out
}
