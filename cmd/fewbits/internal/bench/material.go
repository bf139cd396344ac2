package bench

import (
	"errors"
	"fmt"
	"math"
	"sync"

	"fewbits/codec/design"
	"fewbits/codec/family"
	"fewbits/measure"
)

// pool is what several recordings amount to as material for designs.
type pool struct {
	fits     func() []fitted // to the samples in range, made once
	surveys  []*survey
	hist     measure.Histogram
	in       measure.Histogram
	energy   float64
	samples  int64
	active   float64 // samples
	activeSq float64
	exact    bool
	fine     *measure.Fine // where the recordings are finer than 16 bits
	lsb      float64
}

// newPool adds up surveys in order.
func newPool(surveys []*survey) *pool {
	p := &pool{surveys: surveys, exact: true}
	for _, s := range surveys {
		s.all.AddTo(&p.hist)
		s.ranged.AddTo(&p.in)
		p.energy += s.levels.Energy()
		p.samples += s.levels.Samples
		if s.active > 0 {
			p.active += s.active
			p.activeSq += s.active * math.Pow(10, float64(s.clip.ActiveDBov)/10)
		}
		p.exact = p.exact && s.rec.Words()
		p.lsb = max(p.lsb, s.clip.LSB)
	}
	p.fits = sync.OnceValue(func() []fitted { return fitModels(&p.in, p.lsb, "in-range") })
	if len(surveys) == 1 {
		p.fits = func() []fitted { return surveys[0].fits }
	}
	return p
}

// material is the pool as families want it.
func (p *pool) material() (family.Material, error) {
	m := family.Material{RMS: math.NaN(), ActiveRMS: math.NaN(), Density: p.density, Frames: p.frames}
	if p.energy == 0 {
		return m, errors.New("the recordings that fitted designs are made on hold no signal at all: name fixed designs with --design, or give other recordings")
	}
	m.RMS = math.Sqrt(p.energy / float64(p.samples))
	if p.active > 0 {
		m.ActiveRMS = math.Sqrt(p.activeSq / p.active)
	}
	if p.fine != nil {
		m.Histogram.Values, m.Histogram.Weights, m.Within = p.fine.Bins()
		if p.fine.Exact() {
			m.Within = nil
		}
		return m, nil
	}
	values, counts := p.hist.Sparse()
	m.Histogram = histogramOf(values, counts)
	return m, nil
}

// rms is the rms that a scaling rule asks for, and how it is called.
func (p *pool) rms(scale string) (float64, string, error) {
	switch scale {
	case "rms":
		return math.Sqrt(p.energy / float64(p.samples)), "at the rms of all samples", nil
	case "active":
		if p.active == 0 {
			return 0, "", errors.New("scale=active: the recordings have no active speech level; use scale=rms")
		}
		return math.Sqrt(p.activeSq / p.active), "at the active speech level", nil
	}
	return 0, "", fmt.Errorf("scale=%q is not a rule", scale)
}

// frames gathers the kept frames of all recordings, also up to spread dB louder
// and softer.
func (p *pool) frames(spread float64) (*design.Frames, error) {
	var takes []design.Take
	for _, s := range p.surveys {
		if len(s.kept) > 0 {
			takes = append(takes, design.Take{Frames: s.kept, LSB: s.clip.LSB, Unit: wordUnit(s.rec.Words(), s.levels.Peak()), Gains: design.SpreadGains(spread)})
		}
	}
	f, err := design.NewFrames(takes...)
	return &f, err
}
