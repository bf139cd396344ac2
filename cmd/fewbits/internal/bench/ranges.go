package bench

import (
	"math"

	"fewbits/codec/family"
	"fewbits/measure"
)

// ranged is what a chunk of the second pass found.
type ranged struct {
	frames, in int64
	quietSq    float64
	quietLen   int64
	kept       []keptFrame
}

// readRanges is the second pass: which frames are in range.
func (e *engine) readRanges(s *survey) error {
	hists := gather{e: e}
	var keep *keeper
	if e.needs(family.FramedData) {
		keep = &keeper{file: s.clip.File, most: e.share, unit: wordUnit(s.rec.Words(), s.levels.Peak())}
	}
	work := func(c chunk) (ranged, error) {
		p, err := read(s.rec, c.start, c.samples)
		if err != nil {
			return ranged{}, err
		}
		defer p.done()
		var r ranged
		hists.count(func(in *measure.Histogram) { r = p.ranges(s, c, in, keep) })
		return r, nil
	}
	err := chunks(e, s, work, func(_ chunk, r ranged) error {
		s.clip.Frames += r.frames
		s.clip.FramesInRange += r.in
		s.quietSq += r.quietSq
		s.quietLen += r.quietLen
		keep.take(r.kept)
		return nil
	})
	hists.into(s.in)
	if err != nil {
		return err
	}
	s.kept = keep.words()
	s.clip.NoiseDBov = Num(math.NaN())
	if s.quietLen > 0 {
		s.clip.NoiseDBov = Num(measure.DB(s.quietSq / float64(s.quietLen)))
	}
	return e.countOut(s)
}

// countOut takes the histogram of the frames out of range from what is left
// of all samples: without those in range and without the last partial frame.
func (e *engine) countOut(s *survey) error {
	out, tail := e.histogram(), e.histogram()
	defer e.giveBack(out)
	defer e.giveBack(tail)
	if part := s.clip.Samples % int64(s.frame); part > 0 {
		p, err := read(s.rec, s.clip.Samples-part, part)
		if err != nil {
			return err
		}
		defer p.done()
		for c := range s.clip.Channels {
			p.countInto(tail, c, 0, int(part))
		}
	}
	out.Merge(s.hist)
	out.Subtract(s.in)
	out.Subtract(tail)
	s.quiet = out.Occurrences()
	return nil
}

// countInto counts samples a to b of a channel.
func (p planes) countInto(h *measure.Histogram, ch, a, b int) {
	if p.words != nil {
		h.AddWords(p.words[ch][a:b])
	} else {
		h.Add(p.reals[ch][a:b])
	}
}

// ranges sorts a chunk's whole frames.
func (p planes) ranges(s *survey, c chunk, in *measure.Histogram, keep *keeper) (r ranged) {
	for ch := range s.clip.Channels {
		for f := range int(c.samples) / s.frame {
			a, b := f*s.frame, (f+1)*s.frame
			r.frames++
			sq := p.energy(ch, a, b)
			if !measure.InRange(sq, s.frame, s.inRange[ch]) {
				r.quietSq += sq
				r.quietLen += int64(s.frame)
				continue
			}
			r.in++
			r.kept = keep.consider(r.kept, ch, c.start+int64(a), p, a, b)
			p.countInto(in, ch, a, b)
		}
	}
	return r
}

// energy is sum x^2 of samples a to b of a channel.
func (p planes) energy(ch, a, b int) float64 {
	if p.words != nil {
		return measure.WordEnergy(p.words[ch][a:b])
	}
	var sq float64
	for _, x := range p.reals[ch][a:b] {
		sq += float64(x * x)
	}
	return sq
}
