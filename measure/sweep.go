package measure

import "math"

// EnergiesAt sums over ascending values (full scale = 1.0), each counted as
// often as counts says and played gain (> 0) times as loud, before any
// rounding or clipping other than the design's own: one walk along values and
// thresholds.
func (s *Search) EnergiesAt(values []float64, counts []int64, gain float64) Energies {
	var e Energies
	k := 0
	for i, v := range values {
		x, n := gain*v, float64(counts[i])
		k = s.walk(k, x)
		y := s.values[s.settleTie(k, x)]
		d := x - y
		e.Signal += n * float64(x*x)
		e.Error += n * float64(d*d)
		e.Cross += n * float64(x*y)
		e.Output += n * float64(y*y)
	}
	return e
}

// walk moves on from cell k to that of a larger x, ties upwards.
func (s *Search) walk(k int, x float64) int {
	for k < len(s.thresholds) && s.thresholds[k] <= x {
		k++
	}
	return k
}

// settleTie corrects cell k, found with ties upwards, for the rule of s.
func (s *Search) settleTie(k int, x float64) int {
	if k > 0 && s.thresholds[k-1] == x && x < 0 && s.tieOut {
		return k - 1
	}
	return k
}

// SNRAt is the exact SNR in dB at a gain in dB, from a histogram's sparse form;
// +Inf without error, NaN without signal.
func (s *Search) SNRAt(values []float64, counts []int64, gainDB float64) float64 {
	return s.ErrorAt(values, counts, math.Pow(10, gainDB/20)).SNR()
}

// ErrorAt is EnergiesAt with Signal and Error alone, which is faster.
func (s *Search) ErrorAt(values []float64, counts []int64, gain float64) (e Energies) {
	k := 0
	for i, v := range values {
		x, n := gain*v, float64(counts[i])
		k = s.walk(k, x)
		d := x - s.values[s.settleTie(k, x)]
		e.Signal += n * float64(x*x)
		e.Error += n * float64(d*d)
	}
	return e
}

// Sweep is SNRAt for each gain.
func (s *Search) Sweep(values []float64, counts []int64, gainsDB []float64) []float64 {
	out := make([]float64, len(gainsDB))
	for i, g := range gainsDB {
		out[i] = s.SNRAt(values, counts, g)
	}
	return out
}

// LookupAt tabulates the design as it acts on 16-bit audio played gain (> 0)
// times as loud and brought back: Q(gain x)/gain. With gain 1 it is the design
// itself. A Kernel of such tables measures segmental SNR against level; at a
// gain the error floor of FloorOf stays that of the recording.
func (s *Search) LookupAt(gain float64) Lookup {
	l := Lookup{Index: make([]uint16, words16), Values: make([]float64, len(s.values)), Lo: s.lo / gain, Hi: s.hi / gain}
	for i, y := range s.values {
		l.Values[i] = y / gain
	}
	k := 0
	for i := range l.Index {
		x := gain * (float64(i-words16/2) / (words16 / 2))
		k = s.walk(k, x)
		l.Index[i] = uint16(s.settleTie(k, x))
	}
	return l
}

// Span is a stretch of levels in dB; an open end is where the sweep ended, not
// the design.
type Span struct {
	Lo, Hi         float64
	OpenLo, OpenHi bool
}

// Width is the dynamic range in dB; NaN for no span.
func (s Span) Width() float64 { return s.Hi - s.Lo }

// DynamicRange finds the levels around the best one at which the SNR is at
// least target dB, interpolated between the points of a sweep (levels
// ascending, dB; +Inf is no error, NaN undefined and below every target). Lo
// and Hi are NaN where no level reaches the target.
func DynamicRange(levels, snr []float64, target float64) Span {
	best := -1
	for i, v := range snr {
		if v >= target && (best < 0 || v > snr[best]) {
			best = i
		}
	}
	if best < 0 {
		return Span{Lo: math.NaN(), Hi: math.NaN()}
	}
	lo, hi := best, best
	for lo > 0 && snr[lo-1] >= target {
		lo--
	}
	for hi+1 < len(snr) && snr[hi+1] >= target {
		hi++
	}
	s := Span{Lo: levels[lo], Hi: levels[hi], OpenLo: lo == 0, OpenHi: hi == len(snr)-1}
	if !s.OpenLo {
		s.Lo = crossing(levels[lo], snr[lo], levels[lo-1], snr[lo-1], target)
	}
	if !s.OpenHi {
		s.Hi = crossing(levels[hi], snr[hi], levels[hi+1], snr[hi+1], target)
	}
	return s
}

// crossing is the level between a met point and an unmet one where the SNR is
// target; the met one's where that can't be said.
func crossing(met, above, unmet, below, target float64) float64 {
	if math.IsNaN(below) || math.IsInf(above, 0) || math.IsInf(below, 0) {
		return met
	}
	return met + (unmet-met)*(above-target)/(above-below)
}
