package measure

import (
	"math"

	"gonum.org/v1/gonum/stat/distuv"
)

// What a design's place in a comparison is called.
const (
	LeadClear  = "clear"  // the leader, ahead of every other beyond doubt
	LeadOpen   = "open"   // not distinguishable from the leader (or the leader of such)
	LeadShared = "shared" // not distinguishable, and at most SameDB apart
	LeadBehind = "behind" // behind the leader beyond doubt
)

const (
	// SameDB: designs whose interval of difference lies within this are as
	// good as each other (a convention of this project).
	SameDB = 0.1
	// BootstrapFrom is the number of observations from which intervals are by
	// bootstrap rather than by Student's t.
	BootstrapFrom = 30
	// FewClips: below this many clips, blocks of frames are the units and the
	// intervals hold for these recordings only.
	FewClips = 5

	confidence = 0.95
	// draws are the simulated samples or resamples: draws+1 times 0.95 is
	// whole, so that the drawing itself costs no coverage.
	draws = 4999
)

// Comparison says which differences between designs are real.
type Comparison struct {
	Method       string // in words
	TheseOnly    bool   // intervals hold for these recordings only (blocks of frames)
	Observations int    // clips, talkers or blocks that counted
	Leader       int    // design of the largest mean; -1 where none is defined
	Means        []float64
	// Interval is each design's own 95 % interval, Behind that of the
	// leader's mean less the design's: simultaneous over all pairs of designs,
	// so that the leader may be chosen by the same data. NaN below two
	// observations; the leader's own Behind is NaN.
	Interval, Behind [][2]float64
	Lead             []string // LeadClear ... for each design; "" where undefined
	Set              []int    // designs not distinguishable from the best, leader included
	// Critical is the factor on the standard error of a difference.
	Critical float64
}

// Compare compares designs over units. Below 30 observations intervals are
// paired Student's t, from 30 on the studentised bootstrap (B. Efron, R.
// Tibshirani, An Introduction to the Bootstrap, 1993, ch. 12, from memory);
// differences are simultaneous by the max statistic over all pairs of
// designs. seed fixes all that is drawn.
func Compare(u Units, seed uint64) Comparison { return compare(u, seed, draws) }

func compare(u Units, seed uint64, draws int) Comparison {
	means, values := u.observations()
	c := blank(means)
	c.TheseOnly = u.Blocks
	if len(means) == 0 || len(values[0]) == 0 {
		c.Method = "nothing to compare"
		return c
	}
	c.Observations = len(values[0])
	for d, m := range means {
		if m > means[c.Leader] {
			c.Leader = d
		}
	}
	if c.Observations < 2 {
		c.Method = "one observation: no interval"
		return c
	}
	own := c.factors(newSpread(values), seed, draws)
	for d := range values {
		half := own[d] * standardError(values[d], nil)
		c.Interval[d] = [2]float64{means[d] - half, means[d] + half}
		if d != c.Leader {
			diff := means[c.Leader] - means[d]
			half := 0.0
			if se := standardError(values[c.Leader], values[d]); se > 0 {
				half = c.Critical * se
			}
			c.Behind[d] = [2]float64{diff - half, diff + half}
		}
	}
	c.settle()
	return c
}

// blank is a comparison where nothing is known yet.
func blank(means []float64) Comparison {
	c := Comparison{Means: means, Critical: math.NaN(), Leader: -1}
	nan := [2]float64{math.NaN(), math.NaN()}
	for d := range means {
		c.Interval = append(c.Interval, nan)
		c.Behind = append(c.Behind, nan)
		c.Lead = append(c.Lead, "")
		if !math.IsNaN(means[d]) {
			c.Leader = 0
		}
	}
	return c
}

// factors sets the method and the critical value and returns the factor on
// each design's own standard error.
func (c *Comparison) factors(s *spread, seed uint64, draws int) (own []float64) {
	if c.Observations >= BootstrapFrom {
		c.Method = "studentised bootstrap"
		own, c.Critical = s.bootstrap(seed, draws)
		return own
	}
	c.Method = "Student's t"
	t := studentFactor(c.Observations)
	c.Critical = t
	if s.pairs() > 1 {
		c.Critical = max(t, s.simulate(seed, draws))
	}
	own = make([]float64, s.designs)
	for d := range own {
		own[d] = t
	}
	return own
}

// studentFactor is the two-sided 95 % quantile of Student's t for n
// observations.
func studentFactor(n int) float64 {
	return distuv.StudentsT{Mu: 0, Sigma: 1, Nu: float64(n - 1)}.Quantile((1 + confidence) / 2)
}

// standardError is that of the mean of a, or of a-b; 0 where all differences
// are equal but for rounding.
func standardError(a, b []float64) float64 {
	n := float64(len(a))
	at := func(i int) float64 {
		if b == nil {
			return a[i]
		}
		return a[i] - b[i]
	}
	var mean, sum, size float64
	for i := range a {
		mean += at(i) / n
		size = max(size, math.Abs(a[i]))
	}
	for i := range a {
		e := at(i) - mean
		sum += float64(e * e)
	}
	se := math.Sqrt(sum / (n - 1) / n)
	if se <= 1e-13*size {
		return 0
	}
	return se
}

// settle derives Lead and Set from the intervals.
func (c *Comparison) settle() {
	c.Lead[c.Leader] = LeadClear
	for d, b := range c.Behind {
		switch {
		case d == c.Leader:
		case b[0] > 0:
			c.Lead[d] = LeadBehind
		case max(-b[0], b[1]) <= SameDB:
			c.Lead[d] = LeadShared
			if c.Lead[c.Leader] == LeadClear {
				c.Lead[c.Leader] = LeadShared
			}
		default:
			c.Lead[d] = LeadOpen
			c.Lead[c.Leader] = LeadOpen
		}
	}
	for d, lead := range c.Lead {
		if lead != LeadBehind {
			c.Set = append(c.Set, d)
		}
	}
}
