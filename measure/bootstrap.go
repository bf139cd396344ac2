package measure

import (
	"math"
	"math/rand/v2"
)

// bootstrap resamples whole units, the same for all designs (paired), and
// returns the 95 % points of |mean* - mean| / se* for each design and of its
// largest over all pairs of designs.
func (s *spread) bootstrap(seed uint64, resamples int) (own []float64, pairs float64) {
	m := s.designs
	perDesign := make([][]float64, m)
	for d := range perDesign {
		perDesign[d] = make([]float64, resamples)
	}
	worst := each(resamples, func() func(int) float64 {
		p, times := s.newSample(), make([]int, s.n)
		return func(draw int) float64 {
			s.resample(p, times, rand.New(rand.NewPCG(seed, uint64(draw))))
			for d := range m {
				perDesign[d][draw] = s.ownT(p, d)
			}
			return s.maxT(p, 1)
		}
	})
	own = make([]float64, m)
	for d := range own {
		own[d] = quantile(perDesign[d])
	}
	return own, quantile(worst)
}

// resample draws n units with replacement.
func (s *spread) resample(p *sample, times []int, r *rand.Rand) {
	clear(times)
	for range s.n {
		times[r.IntN(s.n)]++
	}
	p.reset()
	m := s.designs
	for u, n := range times {
		if n == 0 {
			continue
		}
		row := s.resid[u*m : (u+1)*m]
		p.add(row, float64(n))
		for d, v := range row {
			p.mean[d] += float64(float64(n)*v) / float64(s.n)
		}
	}
}

// ownT is a design's |t| about its mean in the original data.
func (s *spread) ownT(p *sample, d int) float64 {
	n, mean := float64(s.n), p.mean[d]
	v := p.gram[d*s.designs+d] - n*mean*mean
	if mean == 0 {
		return 0
	}
	return math.Abs(mean) / math.Sqrt(max(v, 1e-300)/(n-1)/n)
}
