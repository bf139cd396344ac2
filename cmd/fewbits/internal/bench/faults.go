package bench

import (
	"fmt"

	"fewbits/measure"
	"fewbits/measure/fault"
)

// scanFaults reads a recording once more, channel by channel in order, and
// enters what is wrong with it.
func (e *engine) scanFaults(s *survey, per []measure.Levels) error {
	scans := make([]*fault.Scan, s.clip.Channels)
	for c := range scans {
		scans[c] = fault.NewScan(s.clip.RateHz)
	}
	for _, c := range chunksOf(s.clip.Samples, s.frame) {
		if err := e.scanChunk(s, c, scans); err != nil {
			return err
		}
	}
	s.clip.Findings = []Finding{}
	for c, scan := range scans {
		s.enter(c, scan.Findings(s.context(&per[c])))
	}
	return nil
}

func (e *engine) scanChunk(s *survey, c chunk, scans []*fault.Scan) error {
	e.tokens <- struct{}{}
	defer func() { <-e.tokens }()
	if err := e.ctx.Err(); err != nil {
		return err
	}
	p, err := read(s.rec, c.start, c.samples)
	if err != nil {
		return err
	}
	for ch, scan := range scans {
		if p.words != nil {
			scan.AddWords(p.words[ch])
		} else {
			scan.Add(p.reals[ch])
		}
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
