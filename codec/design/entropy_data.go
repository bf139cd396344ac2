package design

import (
	"math"
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
	power, _ := EvaluateData(h, nil, []float64{0})
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
