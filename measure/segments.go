package measure

import "math"

// The three segmental measures: positions in Tally.Segmental.
const (
	SegInRange = iota // segsnr_db: frames in range, customary limits
	SegAll            // segsnr_all_db: all frames with signal, customary limits
	SegOpen           // segsnr_open_db: frames in range, wide limits, floored error
)

// OpenLower and OpenUpper limit a frame's value in segsnr_open_db, dB (a
// convention of this project).
const (
	OpenLower = -10
	OpenUpper = 100
)

// Limits on a frame's SNR in dB. The customary ones are from J. H. L. Hansen,
// B. L. Pellom, ICSLP 1998 (from memory).
type Limits struct {
	Lower     float64 // of segsnr_db and segsnr_all_db
	Upper     float64 // of segsnr_db and segsnr_all_db
	OpenUpper float64 // of segsnr_open_db, whose lower limit is OpenLower
}

// CustomaryLimits are -10, 35 and 100 dB.
var CustomaryLimits = Limits{Lower: -10, Upper: 35, OpenUpper: OpenUpper}

// RangeThreshold is the mean square a frame must exceed to be in range: that
// of the active level less rangeDB. NaN, so that no frame is in range, where
// the active level is undefined.
func RangeThreshold(activeDBov, rangeDB float64) float64 {
	return math.Pow(10, (activeDBov-rangeDB)/10)
}

// InRange reports whether a frame of n samples with energy signal = sum x^2
// lies above the threshold.
func InRange(signal float64, n int, threshold float64) bool {
	return signal > threshold*float64(n)
}

// PeakOf is the largest magnitude that a 16-bit word of a frame of n samples
// out of range can have: 32,768 where the threshold is NaN.
func PeakOf(threshold float64, n int) int {
	peak := math.Sqrt(threshold*float64(n)) * (words16 / 2)
	if !(peak < words16/2) {
		return words16 / 2
	}
	w := int(peak) + 1 // whatever the rounding of the root
	for InRange(float64(w*w)/(1<<30), n, threshold) {
		w--
	}
	return w
}

// FloorOf is the least error energy that the open measure counts for a frame
// of n samples on a grid of lsb: n lsb^2 / 12, that of rounding to the grid.
func FloorOf(n int, lsb float64) float64 { return float64(n) * lsb * lsb / 12 }

// FrameSNR is 10 log10(signal/err) within [lower, upper] in dB; a frame
// without error takes the upper limit. signal must be above 0.
func FrameSNR(signal, err, lower, upper float64) float64 {
	return max(lower, min(upper, ratioDB(signal, err)))
}

// OpenSNR is a frame's value in segsnr_open_db, dB.
func OpenSNR(f Frame, l Limits) float64 {
	return FrameSNR(f.Signal, max(f.Error, f.Floor), OpenLower, l.OpenUpper)
}

// ratioDB is +Inf where err is 0. One logarithm a frame and design is what
// framing costs beside the kernel: Log is the fastest.
func ratioDB(signal, err float64) float64 { return (10 / math.Ln10) * math.Log(signal/err) }

// AddFrame adds one frame to the segmental measures and frame counts. It
// returns the frame's SNR in dB with the error floored, as the open measure
// has it but for the limits; NaN without signal.
func AddFrame(t *Tally, f Frame, l Limits) (openDB float64) {
	if f.Signal == 0 {
		t.FramesSilent++
		return math.NaN()
	}
	db := ratioDB(f.Signal, f.Error)
	openDB = db
	if f.Error < f.Floor {
		openDB = ratioDB(f.Signal, f.Floor)
	}
	t.Segmental[SegAll].add(db, l.Lower, l.Upper)
	if !f.InRange {
		t.FramesOut++
		t.SignalOut += f.Signal
		t.ErrorOut += f.Error
		return openDB
	}
	t.FramesIn++
	t.Segmental[SegInRange].add(db, l.Lower, l.Upper)
	open := &t.Segmental[SegOpen]
	if f.Error < f.Floor {
		open.Floored++
	}
	open.add(openDB, OpenLower, l.OpenUpper)
	return openDB
}

func (s *Segments) add(db, lower, upper float64) {
	if db >= upper {
		s.AtUpper++
		db = upper
	} else if db <= lower {
		s.AtLower++
		db = lower
	}
	s.Frames++
	s.SumDB += db
	s.SumSqDB += float64(db * db)
}

func (s *Segments) merge(o *Segments) {
	s.SumDB += o.SumDB
	s.SumSqDB += o.SumSqDB
	s.Frames += o.Frames
	s.AtUpper += o.AtUpper
	s.AtLower += o.AtLower
	s.Floored += o.Floored
}

// Mean is the segmental value in dB; NaN without frames.
func (s *Segments) Mean() float64 { return s.SumDB / float64(s.Frames) }

// Deviation is the standard deviation of the frame values in dB (divisor: the
// number of frames less one); NaN below two frames.
func (s *Segments) Deviation() float64 {
	n := float64(s.Frames)
	if n < 2 {
		return math.NaN()
	}
	return math.Sqrt(max(0, s.SumSqDB-s.SumDB*s.SumDB/n) / (n - 1))
}
