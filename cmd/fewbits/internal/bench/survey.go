package bench

import (
	"math"

	"fewbits/measure"
	"fewbits/measure/fault"
	"fewbits/samples"
)

// survey is what is known of one recording before it is coded.
type survey struct {
	rec      *samples.Recording
	clip     Clip
	frame    int // samples
	levels   measure.Levels
	active   float64            // samples counted as active, all channels; 0 where undefined
	inRange  []float64          // per channel: mean square that a frame must exceed
	activeSq []float64          // per channel: mean square at the active level
	hist     *measure.Histogram // while surveyed, then nil
	in       *measure.Histogram // samples of whole frames in range
	all      measure.Occurrences
	ranged   measure.Occurrences // as in
	quiet    measure.Occurrences // of whole frames out of range
	fits     []fitted            // to the samples in range
	kept     [][]int16           // frames kept for designs that need them
	quietSq  float64
	quietLen int64
}

// stretch is what a chunk adds to a survey, a slot a channel.
type stretch struct {
	levels []measure.Levels
	active []*measure.Activity
	faults []*fault.Part
}

// survey reads a recording twice: levels, active speech level and faults, then
// which frames are in range.
func (e *engine) survey(rec *samples.Recording, file string) (*survey, error) {
	info := rec.Info()
	s := &survey{rec: rec, frame: frameSamples(info.Rate, e.plan.FrameSeconds), hist: e.histogram(), in: e.histogram()}
	s.clip = Clip{
		File: file, Format: info.Format(), RateHz: info.Rate, Channels: info.Channels, Samples: info.Frames,
		Seconds: float64(info.Frames) / float64(info.Rate), Warnings: append([]string{}, info.Warnings...),
		Preparation: []string{}, Fits: []Fit{},
	}
	all, err := e.readLevels(s)
	if err != nil {
		return nil, err
	}
	e.settleLevels(s, all)
	if err := e.readRanges(s); err != nil {
		return nil, err
	}
	return s, e.findFaults(s, all)
}

// readLevels is the first pass over one recording.
func (e *engine) readLevels(s *survey) (stretch, error) {
	hists := gather{e: e}
	rate := s.clip.RateHz
	all := newStretch(s.clip.Channels, rate, 0, e.part)
	work := func(c chunk) (stretch, error) {
		warm := min(c.start, int64(measure.WarmUpSeconds*float64(rate)))
		p, err := read(s.rec, c.start-warm, c.samples+warm)
		if err != nil {
			return stretch{}, err
		}
		defer p.done()
		t := newStretch(s.clip.Channels, rate, c.start, e.part)
		p.survey(int(warm), t)
		if p.reals != nil {
			hists.count(func(h *measure.Histogram) {
				for _, x := range p.reals {
					h.Add(x[warm:])
				}
			})
		}
		return t, nil
	}
	err := chunks(e, s, work, func(_ chunk, t stretch) error {
		for c := range t.levels {
			all.levels[c].Merge(&t.levels[c])
			all.active[c].Merge(t.active[c])
			all.faults[c].Join(t.faults[c])
			e.parts.put(t.faults[c])
		}
		return nil
	})
	hists.into(s.hist)
	if s.rec.Words() {
		for c, p := range all.faults {
			s.hist.AddCounts(p.Counts())
			all.levels[c] = measure.LevelsOf(p.Counts())
		}
	}
	return all, err
}

// newStretch is empty; part makes a fault part for a rate and a first sample.
func newStretch(channels, rate int, start int64, part func(rate int, start int64) *fault.Part) stretch {
	t := stretch{levels: make([]measure.Levels, channels)}
	for range channels {
		t.active = append(t.active, measure.NewActivity(float64(rate)))
		t.faults = append(t.faults, part(rate, start))
	}
	return t
}

// part borrows an empty part.
func (e *engine) part(rate int, start int64) *fault.Part {
	if p, ok := e.parts.take(); ok {
		p.Reset(rate, start)
		return p
	}
	return fault.NewPart(rate, start)
}

// survey sums a chunk whose first warm samples belong to the chunk before. The
// levels of words come from the counts of the fault parts, in the end.
func (p planes) survey(warm int, t stretch) {
	for c := range t.levels {
		if p.words != nil {
			w := p.words[c]
			t.active[c].WarmWords(w[:warm])
			t.active[c].AddWords(w[warm:])
			t.faults[c].AddWords(w[warm:])
			continue
		}
		x := p.reals[c]
		t.active[c].Warm(x[:warm])
		t.active[c].Add(x[warm:])
		t.levels[c].Add(x[warm:])
		t.faults[c].Add(x[warm:])
	}
}

// settleLevels turns the sums into the clip's figures and the channels' rules
// for what is in range. A clip's figures pool its channels.
func (e *engine) settleLevels(s *survey, all stretch) {
	var activeEnergy float64
	for c := range all.levels {
		s.levels.Merge(&all.levels[c])
		level, activity := all.active[c].Result()
		s.activeSq = append(s.activeSq, math.Pow(10, level/10))
		s.inRange = append(s.inRange, measure.RangeThreshold(level, e.plan.RangeDB))
		if !math.IsNaN(level) {
			s.active += activity * float64(all.levels[c].Samples)
			activeEnergy += all.levels[c].Energy()
		}
	}
	l, c := &s.levels, &s.clip
	c.LevelDBov, c.PeakDB, c.CrestDB = Num(l.LevelDBov()), Num(l.PeakDB()), Num(l.CrestDB())
	c.DC, c.LSB, c.EffectiveBits = Num(l.DC()), l.LSB(), l.EffectiveBits()
	c.ZeroShare = Num(l.ZeroShare())
	c.ActiveDBov, c.Activity = Num(math.NaN()), Num(math.NaN())
	if s.active > 0 {
		c.ActiveDBov = Num(measure.DB(activeEnergy / s.active))
		c.Activity = Num(s.active / float64(l.Samples))
	}
}

// pack keeps the histograms in little memory, once the models are fitted.
func (e *engine) pack(s *survey) {
	s.all, s.ranged = s.hist.Occurrences(), s.in.Occurrences()
	e.giveBack(s.hist)
	e.giveBack(s.in)
	s.hist, s.in = nil, nil
}
