package bench

import (
	"math"

	"fewbits/measure"
)

// tracePoints is the most points a clip's curves over time have.
const tracePoints = 1000

// span is the extent of the waveform in one step.
type span struct{ lo, hi float64 }

// tracer gathers one clip's first channel over time, a few frames a step.
type tracer struct {
	frame  int
	group  int64 // frames per step
	spans  []span
	signal []float64
	errs   []float64 // [step*designs+design]
	n      int       // designs
}

func newTracer(s *survey, designs []made) *tracer {
	whole := max(1, s.clip.Samples/int64(s.frame))
	t := &tracer{frame: s.frame, group: (whole + tracePoints - 1) / tracePoints, n: len(designs)}
	steps := (whole + t.group - 1) / t.group
	t.spans = make([]span, steps)
	t.signal = make([]float64, steps)
	t.errs = make([]float64, steps*int64(t.n))
	return t
}

// step is the step of a sample of the first channel.
func (t *tracer) step(sample int64) int {
	return int(min(sample/int64(t.frame)/t.group, int64(len(t.spans)-1)))
}

// envelope is the waveform's extent in each step that a chunk touches.
func (t *tracer) envelope(p planes, c chunk) []span {
	first := t.step(c.start)
	out := make([]span, t.step(c.start+c.samples-1)-first+1)
	width := int64(t.frame) * t.group
	for i := range out {
		lo := max(0, int64(first+i)*width-c.start)
		hi := min(c.samples, int64(first+i+1)*width-c.start)
		if first+i == len(t.spans)-1 {
			hi = c.samples
		}
		if lo < hi {
			out[i] = p.extent(int(lo), int(hi))
		}
	}
	return out
}

// extent of samples a to b of the first channel, 0 included.
func (p planes) extent(a, b int) (s span) {
	if p.words == nil {
		for _, x := range p.reals[0][a:b] {
			s.lo, s.hi = min(s.lo, x), max(s.hi, x)
		}
		return s
	}
	var lo, low, hi, high int16 // two each: one waits for its own last value
	words := p.words[0][a:b]
	for ; len(words) >= 2; words = words[2:] {
		v, w := words[0], words[1]
		lo, hi = min(lo, v), max(hi, v)
		low, high = min(low, w), max(high, w)
	}
	for _, w := range words {
		lo, hi = min(lo, w), max(hi, w)
	}
	return span{float64(min(lo, low)) / (1 << 15), float64(max(hi, high)) / (1 << 15)}
}

// add enters a chunk, in order.
func (t *tracer) add(s *survey, c chunk, r codedChunk) {
	first := t.step(c.start)
	for i, e := range r.envelope {
		sp := &t.spans[first+i]
		sp.lo, sp.hi = min(sp.lo, e.lo), max(sp.hi, e.hi)
	}
	for f := range r.frames {
		k := t.step(c.start + int64(f*s.frame))
		t.signal[k] += r.signal[f]
		for d := range t.n {
			t.errs[k*t.n+d] += r.errs[f*t.n+d]
		}
	}
}

// finish turns the sums into curves.
func (t *tracer) finish(file string, seconds float64, designs []made) ClipTrace {
	out := ClipTrace{File: file, StepSeconds: seconds * float64(t.group), SNR: map[string][]Num{}}
	n := float64(int64(t.frame) * t.group)
	for k, sp := range t.spans {
		out.Min, out.Max = append(out.Min, Num(sp.lo)), append(out.Max, Num(sp.hi))
		out.LevelDBov = append(out.LevelDBov, Num(measure.DB(t.signal[k]/n)))
		for d, design := range designs {
			snr := math.NaN()
			if t.signal[k] > 0 && t.errs[k*t.n+d] > 0 {
				snr = measure.DB(t.signal[k] / t.errs[k*t.n+d])
			}
			out.SNR[design.Spec] = append(out.SNR[design.Spec], Num(snr))
		}
	}
	return out
}
