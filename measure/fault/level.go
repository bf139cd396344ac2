package fault

import (
	"fmt"
	"math"
)

const (
	// customary is the active level speech material is brought to for
	// listening tests: -26 dBov (ITU-T P.800 practice; from memory).
	customary = -26.0
	// apart and farApart are the distances from it, in dB, that draw a note
	// and a warning.
	apart, farApart = 10.0, 16.0
	// headroom is the peak, in dB re full scale, above which nothing is left.
	headroom = -0.3
)

// wrongLevel reports speech too quiet or too hot for its scale.
func wrongLevel(s *Scan, c Context) []Finding {
	if !(math.Abs(c.ActiveDBov) <= math.MaxFloat64) {
		return noLevel(s)
	}
	off := c.ActiveDBov - customary
	f := Finding{Kind: "quiet", Value: c.ActiveDBov, Unit: "dBov"}
	switch {
	case off < -apart:
		f.Sentence = fmt.Sprintf("quiet: active level %.1f dBov, %.0f dB below the customary -26, peak %.1f dB; %.0f dB above its own rounding noise",
			c.ActiveDBov, -off, c.PeakDB, c.ActiveDBov-10*math.Log10(s.lsb(c)*s.lsb(c)/12))
		f.Advice = "bring it up with --level -26, or record with more gain: low bits lost at recording stay lost"
	case off > apart:
		f.Kind = "hot"
		f.Sentence = fmt.Sprintf("hot: active level %.1f dBov, %.0f dB above the customary -26, peak %.1f dB", c.ActiveDBov, off, decibel(c.PeakDB))
		f.Advice = "bring it down with --level -26 unless the channel runs this hot: overload decides the figures otherwise"
	case c.PeakDB > headroom:
		f.Kind, f.Value, f.Unit = "hot", c.PeakDB, "dB"
		f.Sentence = fmt.Sprintf("no headroom: peak %.2f dB at an active level of %.1f dBov", decibel(c.PeakDB), c.ActiveDBov)
		f.Advice = "look at the peaks for clipping; --level -26 leaves room for designs with a lower overload point"
	default:
		return nil
	}
	if math.Abs(off) > farApart {
		f.Severity = Warning
	}
	return one(f)
}

// noLevel speaks when there is sound but no active level.
func noLevel(s *Scan) []Finding {
	if s.grid.nonzero() == 0 {
		return nil
	}
	return one(Finding{
		Kind: "no-active-level", Severity: Warning, Value: float64(s.grid.nonzero()), Unit: "samples",
		Sentence: "no active speech level: shorter than some 50 ms, or quieter than about -74 dBov",
		Advice:   "figures over frames in range stay undefined; take a longer or louder stretch",
	})
}
