package measure

import (
	"math"
	"math/rand/v2"
	"runtime"
	"slices"
	"sync"
)

// spread is what the max statistic needs of the observations: their residuals
// about each design's mean, unit by unit.
type spread struct {
	n, designs int
	resid      []float64 // [unit*designs+design]
	centred    []float64 // the same less the unit's mean over designs
	differ     []bool    // [i*designs+j], i < j: the pair differs by more than a constant
}

func newSpread(values [][]float64) *spread {
	s := &spread{n: len(values[0]), designs: len(values)}
	m := s.designs
	s.resid, s.centred = make([]float64, s.n*m), make([]float64, s.n*m)
	s.differ = make([]bool, m*m)
	for d, row := range values {
		var mean float64
		for _, v := range row {
			mean += v / float64(s.n)
		}
		for u, v := range row {
			s.resid[u*m+d] = v - mean
		}
		for j := d + 1; j < m; j++ {
			s.differ[d*m+j] = standardError(row, values[j]) > 0
		}
	}
	for u := range s.n {
		var mean float64
		for _, v := range s.resid[u*m : (u+1)*m] {
			mean += v / float64(m)
		}
		for d := range m {
			s.centred[u*m+d] = s.resid[u*m+d] - mean
		}
	}
	return s
}

// pairs counts the pairs that differ.
func (s *spread) pairs() (n int) {
	for _, d := range s.differ {
		if d {
			n++
		}
	}
	return n
}

// sample is one drawn data set, as sums over its units.
type sample struct {
	mean []float64 // of each design
	gram []float64 // [i*m+j], i <= j: sum of products about zero
	row  []float64
}

func (s *spread) newSample() *sample {
	m := s.designs
	return &sample{mean: make([]float64, m), gram: make([]float64, m*m), row: make([]float64, m)}
}

func (p *sample) reset() {
	clear(p.mean)
	clear(p.gram)
}

// add adds weight times the products of row.
func (p *sample) add(row []float64, weight float64) {
	m := len(row)
	for i, v := range row {
		v *= weight
		g := p.gram[i*m+i : (i+1)*m]
		for j, w := range row[i:] {
			g[j] += float64(v * w)
		}
	}
}

// maxT is the largest |t| over the pairs, for means with variance (gram of the
// pair less n mean^2 where about is set)/(n-1)/n.
func (s *spread) maxT(p *sample, about float64) float64 {
	m, n := s.designs, float64(s.n)
	var worst float64
	for i := range m {
		for j := i + 1; j < m; j++ {
			if !s.differ[i*m+j] {
				continue
			}
			d := p.mean[i] - p.mean[j]
			v := p.gram[i*m+i] + p.gram[j*m+j] - 2*p.gram[i*m+j] - about*n*d*d
			worst = max(worst, d*d*(n-1)*n/max(v, 1e-300))
		}
	}
	return math.Sqrt(worst)
}

// shrinkage is how far a covariance estimated from n units is drawn towards
// independence: 2/(n-1). By simulation (3 and 10 designs, 5 to 29 units) it
// keeps joint coverage at 95 % for independent designs, where the plain
// estimate falls to 92 % at 5 units, and errs above 95 % for dependent ones.
func shrinkage(n int) float64 { return min(1, 2/float64(n-1)) }

// simulate returns the 95 % point of the largest |t| over all pairs of
// designs when the observations are normal with the covariance seen, itself
// uncertain and therefore drawn towards independence: (1-k) C + k diag C with
// k = shrinkage. Student's t of the pairs share the units, as in the data.
func (s *spread) simulate(seed uint64, draws int) float64 {
	k := shrinkage(s.n)
	own := make([]float64, s.designs)
	for i, v := range s.centred {
		own[i%s.designs] += v * v
	}
	for d := range own {
		own[d] = math.Sqrt(own[d] * k / float64(s.n-1))
	}
	common := math.Sqrt((1 - k) / float64(s.n-1))
	return quantile(each(draws, func() func(int) float64 {
		p := s.newSample()
		return func(draw int) float64 {
			r := rand.New(rand.NewPCG(seed, uint64(draw)))
			p.reset()
			s.normal(p.mean, common, own, r)
			for d := range p.mean {
				p.mean[d] /= math.Sqrt(float64(s.n))
			}
			for range s.n - 1 {
				s.normal(p.row, common, own, r)
				p.add(p.row, 1)
			}
			return s.maxT(p, 0)
		}
	}))
}

// normal draws a vector of the simulated covariance.
func (s *spread) normal(out []float64, common float64, own []float64, r *rand.Rand) {
	for d := range out {
		out[d] = own[d] * r.NormFloat64()
	}
	if common == 0 {
		return
	}
	for u := range s.n {
		g := common * r.NormFloat64()
		for d, v := range s.centred[u*s.designs : (u+1)*s.designs] {
			out[d] += float64(g * v)
		}
	}
}

// each computes work(0) to work(n-1) on all cores; every worker gets its own
// function, so results depend on the number of the draw alone.
func each(n int, worker func() func(int) float64) []float64 {
	out := make([]float64, n)
	workers := runtime.GOMAXPROCS(0)
	var group sync.WaitGroup
	for w := range workers {
		group.Go(func() {
			work := worker()
			for i := w; i < n; i += workers {
				out[i] = work(i)
			}
		})
	}
	group.Wait()
	return out
}

// quantile is the 95 % point of the draws: the ceil(0.95 (n+1))-th smallest.
func quantile(x []float64) float64 {
	slices.Sort(x)
	return x[min(len(x)-1, int(math.Ceil(confidence*float64(len(x)+1)))-1)]
}
