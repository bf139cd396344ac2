package bench

import (
	"math"
	"sync"

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

// stretch is what a chunk adds to a survey in order, a slot a channel; counts
// do not wait for their turn.
type stretch struct {
	levels []measure.Levels
	active []*measure.Activity
	faults []*fault.Order
}

// gathered is what a whole recording comes to, a slot a channel.
type gathered struct {
	levels []measure.Levels
	active []*measure.Activity
	mu     sync.Mutex // for the counts in faults
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
func (e *engine) readLevels(s *survey) (*gathered, error) {
	hists := gather{e: e}
	rate := s.clip.RateHz
	all := &gathered{levels: make([]measure.Levels, s.clip.Channels)}
	for range s.clip.Channels {
		all.active = append(all.active, measure.NewActivity(float64(rate)))
		all.faults = append(all.faults, e.part(rate, 0))
	}
	work := func(c chunk) (stretch, error) {
		warm := min(c.start, int64(measure.WarmUpSeconds*float64(rate)))
		p, err := read(s.rec, c.start-warm, c.samples+warm)
		if err != nil {
			return stretch{}, err
		}
		defer p.done()
		t := p.survey(int(warm), rate)
		t.faults = e.searchFaults(p.from(int(warm)), rate, c.start, all)
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
			all.faults[c].Follow(t.faults[c])
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

// survey sums a chunk whose first warm samples belong to the chunk before. The
// levels of words come from the counts of the fault parts, in the end.
func (p planes) survey(warm, rate int) (t stretch) {
	t.levels = make([]measure.Levels, max(len(p.words), len(p.reals)))
	for c := range t.levels {
		a := measure.NewActivity(float64(rate))
		t.active = append(t.active, a)
		if p.words != nil {
			a.WarmWords(p.words[c][:warm])
			a.AddWords(p.words[c][warm:])
			continue
		}
		a.Warm(p.reals[c][:warm])
		a.Add(p.reals[c][warm:])
		t.levels[c].Add(p.reals[c][warm:])
	}
	return t
}

// settleLevels turns the sums into the clip's figures and the channels' rules
// for what is in range. A clip's figures pool its channels.
func (e *engine) settleLevels(s *survey, all *gathered) {
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
