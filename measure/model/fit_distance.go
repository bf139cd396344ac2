package model

import "math"

// steps is the distribution function of data at both edges of every cell:
// edges 2i and 2i+1 are those of value i.
type steps struct {
	Data
	below []int64 // samples below value i; all at the end
	m     Model
	worst float64
}

// ksDistance is the largest distance between the distribution functions of
// data and model at the cells' edges. Both ascend, so that stretches whose
// ends leave no room for more than what was found are passed over.
func ksDistance(d Data, m Model) float64 {
	s := steps{Data: d, m: m, below: make([]int64, len(d.Values)+1)}
	for i, c := range d.Counts {
		s.below[i+1] = s.below[i] + c
	}
	const coarse = 64
	last := 2*len(d.Values) - 1
	at, f := 0, s.look(0)
	for k := 1; k <= coarse; k++ {
		if next := last * k / coarse; next > at {
			g := s.look(next)
			s.search(at, next, f, g)
			at, f = next, g
		}
	}
	return s.worst
}

// edge is where edge j lies.
func (s *steps) edge(j int) float64 {
	x := s.Values[j/2]
	switch end := s.ended(x); {
	case end && x <= s.Lo && j%2 == 0:
		return math.Inf(-1)
	case end && x >= s.Hi && j%2 == 1:
		return math.Inf(1)
	case j%2 == 0:
		return x - s.LSB/2
	}
	return x + s.LSB/2
}

// share is that of the samples left of edge j.
func (s *steps) share(j int) float64 {
	return float64(s.below[(j+1)/2]) / float64(s.below[len(s.below)-1])
}

// look evaluates the model at edge j.
func (s *steps) look(j int) float64 {
	f := s.m.CDF(s.edge(j))
	s.worst = math.Max(s.worst, math.Abs(f-s.share(j)))
	return f
}

// search looks between edges i and j, where the model has f and g.
func (s *steps) search(i, j int, f, g float64) {
	if j-i < 2 || math.Max(s.share(j-1)-f, g-s.share(i+1)) <= s.worst {
		return
	}
	mid := (i + j) / 2
	h := s.look(mid)
	s.search(i, mid, f, h)
	s.search(mid, j, h, g)
}
