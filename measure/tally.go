// Package measure holds the figures of merit: levels, active speech level,
// SNR, segmental SNR, overload, entropy, histograms, intervals. Numbers in,
// numbers out: it knows no files and no designs.
//
// Amplitudes are float64 with full scale = 1.0; levels are dBov (ITU-T
// G.100.1: 10 log10 of the mean square). Undefined figures are NaN.
//
// Sources: ITU-T Rec. G.100.1, P.56 (method B); N. S. Jayant, P. Noll, Digital
// Coding of Waveforms (1984); J. H. L. Hansen, B. L. Pellom, ICSLP 1998 (the
// customary frame limits).
package measure

// Frame is one frame of one channel as coded by one design.
type Frame struct {
	// Samples is the frame length n.
	Samples int
	// Signal and Error are the energies sum x^2 and sum e^2, full scale = 1.0.
	Signal, Error float64
	// InRange: the frame's level is above the channel's active level less the
	// range.
	InRange bool
	// Floor is n lsb^2 / 12, the least error energy the open value counts.
	Floor float64
}

// Tally is everything that was summed about one design on one clip, or on
// several after Merge. Sums run over frames in order.
type Tally struct {
	Samples      int64
	Signal       float64 // sum x^2 over all samples
	Error        float64 // sum e^2 over all samples
	GranularErr  float64 // part of Error within [lo, hi]
	OverloadErr  float64 // part of Error strictly outside
	Overloaded   int64   // samples strictly outside [lo, hi]
	Indices      []int64 // count of each index
	Segmental    [3]Segments
	FramesIn     int64 // frames in range with signal
	FramesOut    int64 // frames with signal, out of range (or range undefined)
	FramesSilent int64 // frames whose signal is exactly zero
	// SignalOut and ErrorOut are the energies over the frames with signal out
	// of range (the quiet ones).
	SignalOut, ErrorOut float64
	// SignalIn, CrossIn: sum x^2 and sum x y over the in-range frames (for
	// level matching: b = CrossIn/SignalIn).
	SignalIn, CrossIn float64
	// SamplesOut counts the samples of whole frames that are not in range, the
	// silent ones included; OutputOut is sum y^2 over them (idle level).
	SamplesOut int64
	OutputOut  float64
	// Toggled of Steps samples of these frames differ in output from the one
	// before (the first of a frame has none before).
	Toggled, Steps int64
}

// Merge adds what o summed after t: figures of t are then pooled over both.
func (t *Tally) Merge(o *Tally) {
	t.Samples += o.Samples
	t.Signal += o.Signal
	t.Error += o.Error
	t.GranularErr += o.GranularErr
	t.OverloadErr += o.OverloadErr
	t.Overloaded += o.Overloaded
	t.grow(len(o.Indices))
	for k, n := range o.Indices {
		t.Indices[k] += n
	}
	for i := range t.Segmental {
		t.Segmental[i].merge(&o.Segmental[i])
	}
	t.FramesIn += o.FramesIn
	t.FramesOut += o.FramesOut
	t.FramesSilent += o.FramesSilent
	t.SignalOut += o.SignalOut
	t.ErrorOut += o.ErrorOut
	t.SignalIn += o.SignalIn
	t.CrossIn += o.CrossIn
	t.SamplesOut += o.SamplesOut
	t.OutputOut += o.OutputOut
	t.Toggled += o.Toggled
	t.Steps += o.Steps
}

// Segments sums one segmental measure over frames.
type Segments struct {
	SumDB   float64 // sum of the limited frame values, dB
	SumSqDB float64 // sum of their squares, dB^2
	Frames  int64
	AtUpper int64 // frames at the upper limit
	AtLower int64 // frames at the lower limit
	Floored int64 // frames whose error energy was raised to the floor
}

// Measure is one figure of merit. A new one is a new file with a Measure
// value and one line in Register.
type Measure struct {
	Name  string // key in results.json, e.g. "snr_db"
	Unit  string // "dB", "bits", "", ...
	Means string // one sentence: what the number means
	// Of computes it; NaN where undefined.
	Of func(*Tally) float64
}
