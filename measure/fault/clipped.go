package fault

import (
	"fmt"
	"math"
)

const (
	// fullScale is where any flat top or repeated extreme counts.
	fullScale = 1 - 2.5/(1<<15)
	// flatSamples is how many samples a flat top below full scale needs, and
	// flatShare the part of the samples within some 2 % of the peak that must
	// sit exactly on it: rounding alone leaves at most 0.45 of a slow tone's
	// crest on one step above flatSteps.
	flatSamples = 10
	flatShare   = 0.5
	flatSteps   = 64
	// crowdSamples, crowdRatio and crowdSteps: the samples within 2 % of the
	// peak against those in the 8 % below. Speech has less than 0.2, a uniform
	// density 0.25, a sine 0.6 to 0.8.
	crowdSamples = 20
	crowdRatio   = 1.5
	crowdSteps   = 300
	// clippedShare makes clipping severe (share of all samples).
	clippedShare = 0.001
)

// clipped reports flat tops at full scale, flat tops below it, and crowding
// under the peak as clipping leaves behind when a filter came after it.
func clipped(s *Scan, c Context) []Finding {
	r := s.runs.closed()
	full, below := tally{}, tally{}
	var at float64
	for _, side := range []struct {
		top  top
		sign int
	}{{r.upper, 0}, {r.lower, 1}} {
		switch t := side.top; {
		case t.samples == 0:
		case math.Abs(beyondSign(t.value, side.sign)-1) <= 1-fullScale:
			full.merge(t)
		case s.flatBelow(t, side.sign, s.lsb(c)):
			below.merge(t)
			at = math.Max(at, math.Abs(t.value))
		}
	}
	switch {
	case full.samples >= 3 || full.longest >= 2:
		return one(s.clipFinding("at full scale", full))
	case below.samples > 0:
		return one(s.clipFinding(fmt.Sprintf("on a flat top at %.2f dB", decibel(20*math.Log10(at))), below))
	}
	return s.crowded(s.lsb(c))
}

// beyondSign is v measured towards the side it is the extreme of.
func beyondSign(v float64, sign int) float64 {
	if sign == 1 {
		return -v
	}
	return v
}

// merge adds an extreme: every sample counts, a single one as a run of one.
func (t *tally) merge(e top) {
	t.samples += e.samples
	t.runs += e.flat.runs + e.samples - e.flat.samples
	t.longest = max(t.longest, e.flat.longest, 1)
}

// flatBelow says whether an extreme below full scale is a flat top.
func (s *Scan) flatBelow(t top, sign int, lsb float64) bool {
	if beyondSign(t.value, sign) < flatSteps*lsb || t.flat.samples < flatSamples {
		return false
	}
	near, _ := s.magnitudes().crown(sign)
	return float64(t.flat.samples) >= flatShare*float64(near)
}

func (s *Scan) clipFinding(where string, t tally) Finding {
	share := float64(t.samples) / float64(s.grid.total)
	stretch := "each by itself"
	if t.longest > 1 {
		stretch = fmt.Sprintf("in %s, the longest of %d", plural(t.runs, "run"), t.longest)
	}
	f := Finding{
		Kind: "clipped", Severity: Warning, Value: float64(t.samples), Unit: "samples",
		Sentence: fmt.Sprintf("clipped: %s %s (%s of all), %s", plural(t.samples, "sample"), where, percent(share), stretch),
		Advice:   "record again with the gain lower, or leave the clipped stretches out with --from and --to; lowering the level afterwards does not bring the peaks back",
	}
	if share > clippedShare {
		f.Severity = Severe
	}
	return f
}

// crowded reports peaks that crowd under a ceiling without being equal.
func (s *Scan) crowded(lsb float64) []Finding {
	for sign, t := range []top{s.runs.closed().upper, s.runs.closed().lower} {
		crown, below := s.magnitudes().crown(sign)
		if crown < crowdSamples || beyondSign(t.value, sign) < crowdSteps*lsb || float64(crown) < crowdRatio*float64(below) {
			continue
		}
		return one(Finding{
			Kind: "clipped", Severity: Warning, Value: float64(crown), Unit: "samples",
			Sentence: fmt.Sprintf("clipped or limited, then filtered or scaled: %s crowd within 2 %% of the peak and only %d in the 8 %% below, where speech has the larger number",
				plural(crown, "sample"), below),
			Advice: "look for the stage that clips ahead of this recording and take the signal before it",
		})
	}
	return nil
}
