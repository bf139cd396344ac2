package bench

import (
	"fewbits/measure"
)

// outcome is one clip coded by every design.
type outcome struct {
	tallies []measure.Tally
	blocks  [][]measure.Tally // per block of frames, per design
	trace   ClipTrace
	spread  *spread
}

// measure codes a clip with every design, measures it and writes the audio.
func (e *engine) measure(s *survey, designs []made) (*outcome, error) {
	c := e.newCoder(s, designs)
	out := newOutcome(len(designs))
	tr := newTracer(s, designs)
	var sound *audio
	if e.plan.Audio {
		var err error
		if sound, err = e.openAudio(s, designs); err != nil {
			return nil, err
		}
		defer sound.abort()
	}
	rows, err := e.openRows(s, designs)
	if err != nil {
		return nil, err
	}
	defer rows.close()
	work := func(c0 chunk) (codedChunk, error) {
		p, err := read(s.rec, c0.start, c0.samples)
		if err != nil {
			return codedChunk{}, err
		}
		defer p.done()
		r := codedChunk{coded: c.code(s, p, c0, e.plan.Settings)}
		r.envelope = tr.envelope(p, c0)
		r.rows = rows.format(s, c0, r.coded)
		if sound != nil {
			err = sound.write(p, c0.start)
		}
		return r, err
	}
	err = chunks(e, s, work, func(c0 chunk, r codedChunk) error {
		out.add(r.coded)
		out.spread.merge(r.spread)
		tr.add(s, c0, r)
		c.spare.put(r.coded)
		return rows.write(r.rows)
	})
	if err != nil {
		return nil, err
	}
	if s.rec.Words() {
		e.whole(s, c, out.tallies)
	}
	out.trace = tr.finish(s.clip.File, float64(s.frame)/float64(s.clip.RateHz), designs)
	if sound != nil {
		if err := sound.commit(); err != nil {
			return nil, err
		}
		sound.outs = nil
	}
	return out, rows.flush()
}

// codedChunk is a chunk's measurements and what goes with them in order.
type codedChunk struct {
	coded
	envelope []span
	rows     []byte
}

func newOutcome(designs int) *outcome {
	o := &outcome{tallies: make([]measure.Tally, designs), spread: newSpread(designs)}
	for range blocksPerClip {
		o.blocks = append(o.blocks, make([]measure.Tally, designs))
	}
	return o
}

// add merges a chunk, in order.
func (o *outcome) add(c coded) {
	for b, tallies := range c.blocks {
		for i := range tallies {
			o.tallies[i].Merge(&tallies[i])
			o.blocks[c.first+b][i].Merge(&tallies[i])
		}
	}
}
