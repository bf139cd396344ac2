package bench

import (
	"fmt"

	"fewbits/measure"
	"fewbits/measure/fault"
)

// searchFaults scans a chunk, channel by channel, so that a worker needs one
// part at a time: counts go to all at once, the rest is handed on.
func (e *engine) searchFaults(p planes, rate int, start int64, all *gathered) (out []*fault.Order) {
	part := e.part(rate, start)
	defer e.parts.put(part)
	for c := range all.faults {
		if c > 0 {
			part.Reset(rate, start)
		}
		if p.words != nil {
			part.AddWords(p.words[c])
		} else {
			part.Add(p.reals[c])
		}
		out = append(out, part.Order())
		all.mu.Lock()
		all.faults[c].Absorb(part)
		all.mu.Unlock()
	}
	return out
}

// part borrows an empty part.
func (e *engine) part(rate int, start int64) *fault.Part {
	if p, ok := e.parts.take(); ok {
		p.Reset(rate, start)
		return p
	}
	return fault.NewPart(rate, start)
}

// findFaults judges what the first pass gathered, and spectra of segments
// spread over the recording, and enters what is wrong with it.
func (e *engine) findFaults(s *survey, all *gathered) error {
	scans := make([]*fault.Scan, s.clip.Channels)
	for c := range scans {
		scans[c] = fault.NewScan(s.clip.RateHz)
		scans[c].Join(all.faults[c])
		e.parts.put(all.faults[c])
	}
	if err := e.readSegments(s, scans); err != nil {
		return err
	}
	s.clip.Findings = []Finding{}
	for c, scan := range scans {
		s.enter(c, scan.Findings(s.context(&all.levels[c])))
	}
	return nil
}

// readSegments feeds the scans their spectra.
func (e *engine) readSegments(s *survey, scans []*fault.Scan) error {
	e.tokens <- struct{}{}
	defer func() { <-e.tokens }()
	count, stride, length := fault.Segments(s.clip.RateHz, s.clip.Samples)
	for i := range int64(count) {
		if err := e.ctx.Err(); err != nil {
			return err
		}
		p, err := read(s.rec, i*stride, length)
		if err != nil {
			return err
		}
		for c, scan := range scans {
			scan.AddSegment(p.asReals(c))
		}
		p.done()
	}
	return nil
}

// context is what is known of a channel already.
func (s *survey) context(l *measure.Levels) fault.Context {
	info := s.rec.Info()
	c := fault.Context{
		LSB: l.LSB(), ActiveDBov: float64(s.clip.ActiveDBov), LevelDBov: l.LevelDBov(), PeakDB: l.PeakDB(),
		DC: l.DC(), Seconds: s.clip.Seconds,
		InRangeShare: float64(s.clip.FramesInRange) / float64(s.clip.Frames),
	}
	if info.Encoding == "PCM" {
		c.Bits = info.ValidBits
	}
	return c
}

// enter records a channel's findings; with one channel its number goes unsaid.
func (s *survey) enter(channel int, found []fault.Finding) {
	for _, f := range found {
		s.clip.Findings = append(s.clip.Findings, Finding{
			Channel: channel + 1, Kind: f.Kind, Severity: f.Severity.String(),
			Sentence: f.Sentence, Advice: f.Advice, Value: f.Value, Unit: f.Unit,
		})
		text := f.Sentence + ": " + f.Advice
		if s.clip.Channels > 1 {
			text = fmt.Sprintf("channel %d: %s", channel+1, text)
		}
		s.clip.Warnings = append(s.clip.Warnings, text)
	}
}
