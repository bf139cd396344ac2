package bench

import (
	"math"
	"slices"
	"sync"

	"fewbits/codec/family"
	"fewbits/measure"
)

// refine reads recordings finer than 16 bits once more, into bins as fine as
// their peak allows, where a design is made from their amplitudes.
func (e *engine) refine(p *pool) error {
	wanted := slices.ContainsFunc(e.plan.Specs, func(s family.Spec) bool { return s.Need() == family.Data })
	if p.exact || !wanted || p.energy == 0 {
		return nil
	}
	peak, total := 0.0, int64(0)
	for _, s := range p.surveys {
		peak = max(peak, s.levels.Peak())
		total += s.levels.Samples
	}
	e.begin("reading", total)
	p.fine = measure.NewFine(peak)
	spare := sync.Pool{New: func() any { return measure.NewFine(peak) }}
	for _, s := range p.surveys {
		work := func(c chunk) (*measure.Fine, error) {
			x, err := read(s.rec, c.start, c.samples)
			if err != nil {
				return nil, err
			}
			defer x.done()
			f := spare.Get().(*measure.Fine)
			f.Reset()
			for ch := range s.clip.Channels {
				f.Add(x.asReals(ch))
			}
			return f, nil
		}
		err := chunks(e, s, work, func(_ chunk, f *measure.Fine) error {
			p.fine.Merge(f)
			spare.Put(f)
			return nil
		})
		if err != nil {
			return err
		}
	}
	return nil
}

// asReals are the samples of a channel, full scale = 1.0.
func (p planes) asReals(ch int) []float64 {
	if p.words == nil {
		return p.reals[ch]
	}
	out := make([]float64, len(p.words[ch]))
	for i, w := range p.words[ch] {
		out[i] = float64(w) / (1 << 15)
	}
	return out
}

// wordUnit is the amplitude of one word of kept frames: 2^-15 for recordings
// on the 16-bit grid, otherwise the power of two that just holds the peak.
func wordUnit(words bool, peak float64) float64 {
	if words || !(peak > 0) {
		return math.Ldexp(1, -15)
	}
	return math.Exp2(math.Ceil(math.Log2(peak / math.MaxInt16)))
}
