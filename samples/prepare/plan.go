package prepare

import (
	"fmt"
	"math"

	"fewbits/samples"
)

// Plan is what to do. The zero Plan does nothing.
type Plan struct {
	From     float64 // start, seconds
	To       float64 // end, seconds; 0: the recording's end
	Channel  string  // "each" or "": as they are; "first"; "mix": their mean
	RemoveDC bool    // subtract each channel's mean
	Rate     int     // Hz; 0: as it is
	GainDB   float64 // dB
}

// MaxGainDB bounds the gain in either direction.
const MaxGainDB = 120

// Check says what is wrong with a plan, whatever the recording.
func (p Plan) Check() error {
	switch {
	case !(p.From >= 0 && p.From < math.MaxInt32):
		return fmt.Errorf("start of %g s: give 0 or more", p.From)
	case p.To != 0 && !(p.To > p.From && p.To < math.MaxInt32):
		return fmt.Errorf("end of %g s: give more than the start of %g s", p.To, p.From)
	case p.Channel != "" && p.Channel != "each" && p.Channel != "first" && p.Channel != "mix":
		return fmt.Errorf("channel %q: give first, each or mix", p.Channel)
	case p.Rate != 0 && (p.Rate < samples.MinRate || p.Rate > samples.MaxRate):
		return fmt.Errorf("rate of %d Hz: give %d to %d", p.Rate, samples.MinRate, samples.MaxRate)
	case !(math.Abs(p.GainDB) <= MaxGainDB):
		return fmt.Errorf("gain of %g dB: give -%d to %d", p.GainDB, MaxGainDB, MaxGainDB)
	}
	return nil
}

// stretch gives the frames to keep: from one up to and without another.
func (p Plan) stretch(i samples.Info) (from, to int64, err error) {
	from, to = frameAt(p.From, i), i.Frames
	if p.To != 0 {
		to = min(to, frameAt(p.To, i))
	}
	switch {
	case from >= i.Frames:
		err = fmt.Errorf("a start of %g s is beyond its end at %.6g s", p.From, i.Seconds())
	case from >= to:
		err = fmt.Errorf("no sample lies between %g and %g s", p.From, p.To)
	}
	return from, to, err
}

// frameAt is the frame nearest to a time, half up.
func frameAt(seconds float64, i samples.Info) int64 {
	return int64(math.Floor(seconds*float64(i.Rate) + 0.5))
}
