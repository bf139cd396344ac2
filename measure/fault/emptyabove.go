package fault

import (
	"fmt"
	"math"
)

const (
	// emptySegments is the least number of segments with sound to judge by.
	emptySegments = 8
	// edgeDrop is the fall in dB over edgeBands bands that makes a hard edge.
	edgeDrop, edgeBands = 25.0, 6
	// sunk is how far above the rounding noise, in dB, still counts as none.
	sunk = 3.0
	// openShare is the share of half the sampling rate from which an edge is
	// the usual anti-alias filter, and narrowShare that below which a large
	// part of the band is missing.
	openShare, narrowShare = 0.92, 0.75
	// lowestEdge is the lowest edge looked for, in Hz: further down, the bands
	// are too wide to tell an edge from a slope.
	lowestEdge = 1500.0
)

// usualRates are the sampling rates an edge is traced back to.
var usualRates = []float64{6000, 8000, 11025, 12000, 16000, 22050, 24000, 32000, 44100, 48000, 96000}

// edge is where a spectrum ends.
type edge struct {
	// hertz is where; drop is how much less is above, in dB: at a hard edge the
	// 3 bands below it against the most above, else the octave below against
	// the most above.
	hertz, drop float64
	hard        bool
}

// emptyAbove reports a spectrum that ends well below half the sampling rate:
// at a hard edge, or by sinking into the rounding noise.
func emptyAbove(s *Scan, c Context) []Finding {
	segments := s.spectra.sounding()
	if len(segments) < emptySegments {
		return nil
	}
	ground := s.spectra.rounding(s.lsb(c))
	e, found := s.spectra.findEdge(s.spectra.average(segments, ground-6), ground)
	if !found {
		return nil
	}
	f := Finding{Kind: "empty-above", Severity: Note, Value: e.hertz, Unit: "Hz"}
	half := float64(s.rate) / 2
	if e.hard && e.hertz < narrowShare*half {
		f.Severity = Warning
	}
	f.Sentence = fmt.Sprintf("nothing but rounding noise above %s, %.0f dB under the octave below", hertz(e.hertz), e.drop)
	f.Advice = "figures are those of the band below; resample with --rate if the channel is that narrow"
	if e.hard {
		f.Sentence = fmt.Sprintf("spectrum empty above %s: it drops by %.0f dB there and stays down to %s%s",
			hertz(e.hertz), e.drop, hertz(half), origin(e.hertz, half))
		f.Advice = "use the recording before it was brought to this rate, or --rate down to the band it has: neighbouring samples repeat each other, and noise above the edge counts as error though no speech is there"
	}
	return one(f)
}

// origin guesses which rate the material came from.
func origin(at, half float64) string {
	for _, r := range usualRates {
		if r/2 < half && at <= 1.02*r/2 && at >= 0.8*r/2 {
			return fmt.Sprintf(", as after up-sampling from %s", fmt.Sprintf("%g kHz", r/1000))
		}
	}
	return ", as after a low-pass filter or a coder's band limit"
}

// findEdge looks for the steepest hard edge, else for where the spectrum
// sinks into the rounding noise (both dB).
func (s *spectra) findEdge(level []float64, ground float64) (edge, bool) {
	n := len(level)
	top := make([]float64, n+1) // the most at or above band j
	top[n] = math.Inf(-1)
	for j := n - 1; j >= 0; j-- {
		top[j] = math.Max(top[j+1], level[j])
	}
	best := edge{}
	sink := n
	for j := n - 1; j >= edgeBands; j-- {
		if top[j] <= ground+sunk {
			sink = j
		}
		if s.hertz(j-edgeBands) < lowestEdge {
			continue
		}
		below := (level[j-6] + level[j-5] + level[j-4]) / 3
		if drop := below - top[j]; drop >= edgeDrop && drop > best.drop {
			best = edge{hertz: s.hertz(crossing(level, j, (below+top[j])/2)), drop: drop, hard: true}
		}
	}
	limit := openShare * float64(s.rate) / 2
	if best.hard && best.hertz < limit {
		return best, true
	}
	if sink == n || s.hertz(sink) >= limit {
		return edge{}, false
	}
	var octave float64
	for _, l := range level[sink/2 : sink] {
		octave += l / float64(sink-sink/2)
	}
	return edge{hertz: s.hertz(sink), drop: octave - top[sink]}, true
}

// crossing is the first band of the transition below j that is under half.
func crossing(level []float64, j int, half float64) int {
	for i := j - 3; i < j; i++ {
		if level[i] < half {
			return i
		}
	}
	return j
}
