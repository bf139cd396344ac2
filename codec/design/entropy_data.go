package design

import (
	"math"
	"slices"
	"sort"
)

// EntropyData returns an entropy-constrained staircase on h: thresholds are
// shifted from the midpoints towards the value whose index takes more bits.
// Solution.Entropy is the rate achieved, MSE the error; Aim is the price of a
// bit, lambda. Proof: Local, with the number of starts at each lambda.
//
// Method: a cell's error and its share of the entropy depend on that cell
// alone, so the best cells with ends on a grid of an eighth of the step that
// suits lambda are a shortest path (dynamic programming over cells of up to
// 20 steps); it starts rounds on all data of the conditions of P. A. Chou,
// T. Lookabaugh, R. M. Gray, IEEE Trans. ASSP 37 (1989), and moves of single
// ends until none helps. Mirror tables are designed on |x|, for a level and
// for a threshold at 0.
func EntropyData(h Histogram, opt EntropyOptions) (Solution, error) {
	if err := h.check(); err != nil {
		return Solution{}, err
	}
	if err := opt.check(); err != nil {
		return Solution{}, err
	}
	solve := codedSolver(h, opt, true)
	if opt.Rate == 0 {
		return solve(opt.Lambda), nil
	}
	mean := centroid(h, 0, len(h.Values))
	power, _ := EvaluateData(h, nil, []float64{mean})
	if power == 0 {
		return solve(1), nil
	}
	return atRate(opt.Rate, power, solve), nil
}

// codedSolver returns the design for a price; fine: ends moved until none
// helps, otherwise rounds from the shortest path only.
func codedSolver(h Histogram, opt EntropyOptions, fine bool) func(lambda float64) Solution {
	shapes := codedShapes(h, opt)
	starts := len(shapes)
	return func(lambda float64) Solution {
		var best Solution
		won := 0
		for i, c := range shapes {
			if s := c.solve(h, lambda, fine); i == 0 || s.MSE+lambda*s.Entropy < best.MSE+lambda*best.Entropy {
				best, won = s, i
			}
		}
		if len(best.Values) > 64 { // the shapes hardly differ: go on with one
			shapes = shapes[won : won+1]
		}
		best.Starts, best.Proof, best.Aim = starts, Local, lambda
		return best
	}
}

// codedShapes prepares the problem, for mirror tables once with a level and
// once with a threshold at 0.
func codedShapes(h Histogram, opt EntropyOptions) []*coded {
	if opt.Symmetry == Free {
		return []*coded{newCoded(h, 1, false, opt.Levels)}
	}
	half := h.Fold()
	odd := half
	if half.Values[0] != 0 {
		odd = Histogram{append([]float64{0}, half.Values...), append([]float64{0}, half.Weights...)}
	}
	shapes := []*coded{newCoded(odd, 2, true, (opt.Levels+1)/2)}
	if opt.Levels > 1 {
		shapes = append(shapes, newCoded(half, 2, false, opt.Levels/2))
	}
	return shapes
}

// coded is an entropy-constrained problem on a histogram, or on its half.
type coded struct {
	h      Histogram
	c      cellCost
	unit   float64   // of c, over the total weight
	mass   []float64 // share of the weight before each bin
	sides  float64   // cells that a cell stands for: 2 for halves
	pinned bool      // the first cell's value is 0, and it is its own mirror image
	most   int       // cells
	lambda float64
}

func newCoded(h Histogram, sides float64, pinned bool, most int) *coded {
	p := &coded{h: h, sides: sides, pinned: pinned, most: most, unit: 1}
	if w := newWordSums(h, pinned); w != nil {
		p.c, p.unit = w, w.unit
	} else {
		p.c = newRealSums(h, pinned)
	}
	total := h.Total()
	p.unit /= total
	p.mass = make([]float64, len(h.Values)+1)
	for i, w := range h.Weights {
		p.mass[i+1] = p.mass[i] + w/total
	}
	return p
}

// bits is the length of the index of cell [i, j).
func (p *coded) bits(i, j int) float64 {
	m := p.mass[j] - p.mass[i]
	if m <= 0 {
		return 1074
	}
	if i == 0 && p.pinned {
		return -math.Log(m) / math.Ln2
	}
	return -math.Log(m/p.sides) / math.Ln2
}

// cost is the error plus lambda times the entropy that cell [i, j) brings.
func (p *coded) cost(i, j int) float64 {
	return p.c.cost(i, j)*p.unit + p.lambda*(p.mass[j]-p.mass[i])*p.bits(i, j)
}

// solve designs for one lambda; whole is the histogram before folding.
func (p *coded) solve(whole Histogram, lambda float64, fine bool) Solution {
	p.lambda = lambda
	grid := p.grid(math.Sqrt(6*lambda/math.Ln2) / 8)
	window := 160
	if len(grid) < 800 {
		window = len(grid)
	}
	edges := p.shortest(grid, window, 0)
	if len(edges)-1 > p.most {
		edges = p.fewer(grid, window)
	}
	edges, rounds := p.descend(edges)
	if fine {
		var more int
		edges, more = p.shift(edges)
		rounds += more
	}
	s := Solution{Rounds: rounds}
	s.Values, s.Thresholds = p.table(edges)
	if p.sides == 2 {
		s.Values, s.Thresholds = unfold(s.Values, s.Thresholds, p.pinned)
	}
	s.MSE, s.Entropy = EvaluateData(whole, s.Thresholds, s.Values)
	return s
}

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
