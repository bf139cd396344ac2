package bench

import (
	"fmt"
	"math"
	"slices"

	"fewbits/measure"
)

// intervals says, at each bit rate, how sure the leading figure is and which
// differences from the leader are real.
func (e *engine) intervals(r *Results, outcomes []*outcome) {
	few := len(outcomes) < measure.FewClips
	r.units = func(members []int, figure string) measure.Units {
		switch {
		case figure == SNR:
			return energyUnits(r, members)
		case few:
			return blockUnits(outcomes, members, figure)
		}
		return clipUnits(r, members, figure)
	}
	for _, members := range byBits(r.Designs) {
		cmp := measure.Compare(r.units(members, r.Leading), e.plan.Seed)
		for k, i := range members {
			p := &r.Pooled[i]
			p.Lead = cmp.Lead[k]
			p.Interval = [2]Num{Num(cmp.Interval[k][0]), Num(cmp.Interval[k][1])}
			p.Behind = [2]Num{Num(cmp.Behind[k][0]), Num(cmp.Behind[k][1])}
		}
		r.IntervalMethod = methodWords(r, r.Leading, cmp.Method, cmp.Observations)
	}
	if few {
		r.Warnings = append(r.Warnings, fmt.Sprintf(
			"these recordings only: with fewer than %d clips the intervals come from blocks of frames and say nothing about other talkers", measure.FewClips))
	}
}

// byBits groups designs by bit rate, ascending.
func byBits(designs []Design) [][]int {
	groups := map[int][]int{}
	var rates []int
	for i, d := range designs {
		if groups[d.Bits] == nil {
			rates = append(rates, d.Bits)
		}
		groups[d.Bits] = append(groups[d.Bits], i)
	}
	slices.Sort(rates)
	var out [][]int
	for _, b := range rates {
		out = append(out, groups[b])
	}
	return out
}

// traces gathers what pictures need.
func (e *engine) traces(r *Results, surveys []*survey, outcomes []*outcome, sets [][]made) (*Traces, error) {
	t := &Traces{Schema: "fewbits/traces/1", Clips: []ClipTrace{}, Sweep: []Curve{}, Sine: []Curve{}, Models: []ModelCurve{}, Bounds: []Bound{}}
	var all measure.Histogram
	for i, o := range outcomes {
		if i < mostTraces {
			t.Clips = append(t.Clips, o.trace)
		}
		surveys[i].all.AddTo(&all)
	}
	t.Spread = e.spread.rows(r.Designs, r.Pooled)
	t.Edges, t.Negative, t.Positive = logHistogram(all.Counts())
	if p := newPool(surveys); p.energy > 0 {
		t.curvesOf(p.fits())
	}
	return t, e.curves(t, r.Designs, e.amountsOf(surveys, sets))
}

// mostTraces is how many clips have curves over time.
const mostTraces = 200

// logHistogram bins amplitudes by magnitude: zero alone, then six bins an
// octave of the 16-bit grid where it is fine enough.
func logHistogram(counts []int64) (edges, negative, positive []float64) {
	edges = []float64{0}
	last := 0.0
	for k := 0; last < 32768; k++ {
		if at := math.Floor(math.Pow(2, float64(k)/6)) - 0.5; at > last {
			edges, last = append(edges, at/32768), at
		}
	}
	negative, positive = make([]float64, len(edges)-1), make([]float64, len(edges)-1)
	var total float64
	for _, n := range counts {
		total += float64(n)
	}
	for i, n := range counts {
		x := float64(i-32768) / 32768
		bin := binOf(edges, math.Abs(x))
		if x < 0 {
			negative[bin] += float64(n) / total
		} else {
			positive[bin] += float64(n) / total
		}
	}
	return edges, negative, positive
}

// binOf finds the bin of a magnitude; beyond the last edge, the last bin.
func binOf(edges []float64, x float64) int {
	i, exact := slices.BinarySearch(edges, x)
	if !exact {
		i--
	}
	return min(i, len(edges)-2)
}
