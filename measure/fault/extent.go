package fault

import "fmt"

const (
	// shortNote and shortWarning are durations in seconds: 150 and 50 frames
	// of 20 ms.
	shortNote, shortWarning = 3.0, 1.0
	// frame is the customary frame in seconds.
	frame = 0.020
	// busyShare is the share of frames in range above which there are no
	// pauses (this project's definition).
	busyShare = 0.95
)

// tooShort reports recordings with too few frames to say much.
func tooShort(_ *Scan, c Context) []Finding {
	if !(c.Seconds < shortNote) {
		return nil
	}
	f := Finding{
		Kind: "short", Severity: Note, Value: c.Seconds, Unit: "s",
		Sentence: fmt.Sprintf("short: %.3g s, %d frames of 20 ms", c.Seconds, int(c.Seconds/frame)),
		Advice:   "pool it with others; intervals on this one alone stay wide",
	}
	switch {
	case c.Seconds < frame:
		f.Severity = Severe
		f.Sentence = fmt.Sprintf("shorter than one frame: %.3g s", c.Seconds)
		f.Advice = "take a longer recording: segmental figures are undefined"
	case c.Seconds < shortWarning:
		f.Severity = Warning
	}
	return one(f)
}

// noPauses reports recordings almost all of whose frames are in range.
func noPauses(_ *Scan, c Context) []Finding {
	if !(c.InRangeShare > busyShare) {
		return nil
	}
	return one(Finding{
		Kind: "no-pauses", Severity: Note, Value: c.InRangeShare, Unit: "share",
		Sentence: fmt.Sprintf("%s of the frames are in range: no pauses, or noise within 30 dB of the speech", percent(c.InRangeShare)),
		Advice:   "read segmental SNR as one over all frames; a quieter place or a tighter --range separates speech from noise",
	})
}
