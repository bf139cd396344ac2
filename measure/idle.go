package measure

// Idle is the output of a design on an idle channel, dBov; -Inf is silence.
type Idle struct {
	// Zero is the level for an input of exactly zero (a constant: heard only
	// where it comes and goes).
	Zero float64
	// OneLSB is the level for an input that alternates between +1 and -1 lsb
	// of the recording.
	OneLSB float64
}

// Idle measures the idle channel; lsb is the recordings' grid, full scale =
// 1.0.
func (s *Search) Idle(lsb float64) Idle {
	zero, up, down := s.Quantize(0), s.Quantize(lsb), s.Quantize(-lsb)
	return Idle{Zero: DB(zero * zero), OneLSB: DB((up*up + down*down) / 2)}
}
