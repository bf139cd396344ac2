package measure

import "math"

var segSNR = Measure{
	Name: "segsnr_db", Unit: "dB",
	Means: "mean of the frames' SNR in dB over the frames in range, each limited to the customary limits (-10 to 35 dB unless set)",
	Of:    func(t *Tally) float64 { return t.Segmental[SegInRange].Mean() },
}

var segSNRAll = Measure{
	Name: "segsnr_all_db", Unit: "dB",
	Means: "as segsnr_db over all frames with signal",
	Of:    func(t *Tally) float64 { return t.Segmental[SegAll].Mean() },
}

var segSNROpen = Measure{
	Name: "segsnr_open_db", Unit: "dB",
	Means: "as segsnr_db limited to -10 to 100 dB, a frame's error counting at least the rounding of the recording itself (n lsb^2/12)",
	Of:    func(t *Tally) float64 { return t.Segmental[SegOpen].Mean() },
}

var framesUsed = Measure{
	Name: "frames_used", Unit: "frames",
	Means: "frames in range: those that segsnr_db and segsnr_open_db average",
	Of:    func(t *Tally) float64 { return float64(t.FramesIn) },
}

var framesOutOfRange = Measure{
	Name: "frames_out_of_range", Unit: "frames",
	Means: "frames with signal whose level is not above the clip's active speech level less the range",
	Of:    func(t *Tally) float64 { return float64(t.FramesOut) },
}

var framesLeftOut = Measure{
	Name: "frames_left_out", Unit: "frames",
	Means: "frames whose signal is exactly zero: no measure uses them",
	Of:    func(t *Tally) float64 { return float64(t.FramesSilent) },
}

var (
	atUpperLimit     = upperShare("at_upper_limit", "segsnr_db", SegInRange)
	atLowerLimit     = lowerShare("at_lower_limit", "segsnr_db", SegInRange)
	atUpperLimitAll  = upperShare("all_at_upper_limit", "segsnr_all_db", SegAll)
	atLowerLimitAll  = lowerShare("all_at_lower_limit", "segsnr_all_db", SegAll)
	atUpperLimitOpen = upperShare("open_at_upper_limit", "segsnr_open_db", SegOpen)
	atLowerLimitOpen = lowerShare("open_at_lower_limit", "segsnr_open_db", SegOpen)
)

func upperShare(name, of string, segmental int) Measure {
	return Measure{
		Name: name, Unit: "share",
		Means: "share of the frames of " + of + " at its upper limit",
		Of: func(t *Tally) float64 {
			s := &t.Segmental[segmental]
			return share(s.AtUpper, s.Frames)
		},
	}
}

func lowerShare(name, of string, segmental int) Measure {
	return Measure{
		Name: name, Unit: "share",
		Means: "share of the frames of " + of + " at its lower limit",
		Of: func(t *Tally) float64 {
			s := &t.Segmental[segmental]
			return share(s.AtLower, s.Frames)
		},
	}
}

var floored = Measure{
	Name: "floored", Unit: "share",
	Means: "share of the frames of segsnr_open_db whose error was raised to the rounding of the recording",
	Of:    func(t *Tally) float64 { return share(t.Segmental[SegOpen].Floored, t.Segmental[SegOpen].Frames) },
}

// share is NaN of nothing.
func share(part, whole int64) float64 {
	if whole == 0 {
		return math.NaN()
	}
	return float64(part) / float64(whole)
}
