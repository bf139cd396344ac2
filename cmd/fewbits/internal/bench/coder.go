package bench

import (
	"sync"

	"fewbits/codec"
	"fewbits/measure"
)

// coder codes chunks with all designs of a comparison and measures the frames.
type coder struct {
	designs []made
	lookups []measure.Lookup
	kernel  *measure.Kernel   // for 16-bit samples
	toggles *measure.Toggles  // for their quiet frames
	search  []*measure.Search // for all others
	spare   shelf[coded]
}

func (e *engine) newCoder(s *survey, designs []made) *coder {
	c := &coder{designs: designs}
	if s.rec.Words() {
		c.lookups, c.kernel = e.tables(designs)
		c.toggles = measure.NewToggles(c.lookups, s.quietPeak())
		return c
	}
	for _, d := range designs {
		s := d.stair
		c.search = append(c.search, measure.NewSearch(s.Thresholds, s.Values, s.Lo, s.Hi, s.Tie == codec.TieOut))
	}
	return c
}

// tableSet is what all 16-bit clips coded with the same designs share; making
// it takes as long as measuring a million samples.
type tableSet struct {
	of      *made // the first of the designs
	once    sync.Once
	lookups []measure.Lookup
	kernel  *measure.Kernel
}

// tables gives the tables of designs, made anew where the last ones were for
// others.
func (e *engine) tables(designs []made) ([]measure.Lookup, *measure.Kernel) {
	e.mu.Lock()
	if e.last == nil || e.last.of != &designs[0] {
		e.last = &tableSet{of: &designs[0]}
	}
	t := e.last
	e.mu.Unlock()
	t.once.Do(func() {
		for _, d := range designs {
			t.lookups = append(t.lookups, measure.Lookup(d.grid))
		}
		t.kernel = measure.NewKernel(t.lookups)
	})
	return t.lookups, t.kernel
}

// quietPeak bounds the words of all frames out of range.
func (s *survey) quietPeak() (peak int) {
	for _, threshold := range s.inRange {
		peak = max(peak, measure.PeakOf(threshold, s.frame))
	}
	return peak
}

// blocksPerClip is how many stretches a clip is cut into where intervals must
// come from blocks, because there are few clips.
const blocksPerClip = 16

// coded is what coding a chunk gave: for each block that it touches a tally a
// design, and the energies of each frame of each channel.
type coded struct {
	first  int // block of blocks[0]
	blocks [][]measure.Tally
	frames int       // per channel
	signal []float64 // channel-major: [channel*frames+frame]
	errs   []float64 // [(channel*frames+frame)*designs+design]
	spread *spread
}

// block is the block of the frame that starts at a sample.
func (s *survey) block(start int64) int {
	whole := s.clip.Samples / int64(s.frame)
	return int(min(blocksPerClip-1, start/int64(s.frame)*blocksPerClip/max(1, whole)))
}

// code measures a chunk. Global figures of 16-bit samples are left to the
// histogram.
func (c *coder) code(s *survey, p planes, at chunk, set Settings) coded {
	d, channels := len(c.designs), s.clip.Channels
	n := p.samples() / s.frame
	first := s.block(at.start)
	out := c.blank(s.block(at.start+at.samples-1)-first+1, channels*n, d)
	out.first, out.frames = first, n
	for ch := range channels {
		signal, errs := out.signal[ch*n:(ch+1)*n], out.errs[ch*n*d:(ch+1)*n*d]
		if p.words != nil {
			c.kernel.Frames(p.words[ch], s.frame, signal, errs)
			c.toggling(s, p.words[ch], ch, out.blocks[0], signal)
		} else {
			c.frames(s, p.reals[ch], ch, out.blocks[0], signal, errs)
		}
		c.count(s, ch, at, set, &out, signal, errs)
	}
	return out
}

// blank takes what a chunk of so many blocks and frames fills from those done
// with.
func (c *coder) blank(blocks, frames, designs int) coded {
	out, ok := c.spare.take()
	if !ok || cap(out.signal) < frames {
		out = coded{signal: make([]float64, frames), errs: make([]float64, frames*designs), spread: newSpread(designs)}
	}
	clear(out.spread.counts)
	out.signal, out.errs = out.signal[:frames], out.errs[:frames*designs]
	kept := out.blocks[:cap(out.blocks)]
	out.blocks = out.blocks[:0]
	for i := range blocks {
		if i < len(kept) && kept[i] != nil {
			clear(kept[i])
			out.blocks = append(out.blocks, kept[i])
			continue
		}
		out.blocks = append(out.blocks, make([]measure.Tally, designs))
	}
	return out
}

// count enters the frames of a channel into the segmental measures.
func (c *coder) count(s *survey, ch int, at chunk, set Settings, out *coded, signal, errs []float64) {
	lim, floor, d := set.limits(), measure.FloorOf(s.frame, s.clip.LSB), len(c.designs)
	for f, sig := range signal {
		tallies := out.blocks[s.block(at.start+int64(f*s.frame))-out.first]
		frame := measure.Frame{
			Samples: s.frame, Signal: sig, Floor: floor,
			InRange: measure.InRange(sig, s.frame, s.inRange[ch]),
		}
		class := s.class(sig, ch)
		for i := range tallies {
			frame.Error = errs[f*d+i]
			if db := measure.AddFrame(&tallies[i], frame, lim); sig > 0 {
				out.spread.add(i, class, db)
			}
		}
	}
}

// toggling counts the changes of output in the quiet frames of a channel.
func (c *coder) toggling(s *survey, words []int16, ch int, tallies []measure.Tally, signal []float64) {
	changes := make([]int64, len(c.designs))
	for f, sig := range signal {
		if measure.InRange(sig, s.frame, s.inRange[ch]) {
			continue
		}
		clear(changes)
		c.toggles.Add(words[f*s.frame:(f+1)*s.frame], changes)
		for i, n := range changes {
			tallies[i].AddToggles(n, s.frame)
		}
	}
}

// frames is the general path: every sample of every design is searched. Its
// global figures go to the chunk's first block.
func (c *coder) frames(s *survey, x []float64, ch int, tallies []measure.Tally, signal, errs []float64) {
	n, d := s.frame, len(c.search)
	for f := range signal {
		part := x[f*n : (f+1)*n]
		for i, search := range c.search {
			e := search.Add(&tallies[i], part)
			signal[f], errs[f*d+i] = e.Signal, e.Error
			if measure.InRange(e.Signal, n, s.inRange[ch]) {
				tallies[i].AddInRange(e)
			} else {
				tallies[i].AddQuiet(e, int64(n))
				tallies[i].AddToggles(e.Changes, n)
			}
		}
	}
	for i, search := range c.search {
		search.Add(&tallies[i], x[len(signal)*n:])
	}
}

// whole adds what the histograms of a 16-bit clip say about each design.
func (e *engine) whole(s *survey, c *coder, tallies []measure.Tally) {
	all, in, out := e.histogram(), e.histogram(), e.histogram()
	s.all.AddTo(all)
	s.ranged.AddTo(in)
	s.quiet.AddTo(out)
	for i, l := range c.lookups {
		t := measure.TallyHistogram(all, l)
		t.AddInRange(measure.EnergiesOf(in, l))
		t.AddQuiet(measure.EnergiesOf(out, l), s.quietLen)
		tallies[i].Merge(&t)
	}
	e.giveBack(all)
	e.giveBack(in)
	e.giveBack(out)
}
