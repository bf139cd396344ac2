package measure

import "math"

// Lossless reports whether samples were measured and none had an error: SNR
// is then undefined and shown as lossless.
func Lossless(t *Tally) bool { return t.Samples > 0 && t.Error == 0 }

// ratio is 10 log10(signal/err), NaN where either is 0: no error is
// "lossless", no signal undefined, neither is a number.
func ratio(signal, err float64) float64 {
	if !(signal > 0) || !(err > 0) {
		return math.NaN()
	}
	return DB(signal / err)
}

var mse = Measure{
	Name: "mse", Unit: "FS^2",
	Means: "mean squared error over all samples, full scale = 1.0",
	Of:    func(t *Tally) float64 { return t.Error / float64(t.Samples) },
}

var snr = Measure{
	Name: "snr_db", Unit: "dB",
	Means: "signal energy over error energy of all samples; undefined without error (lossless) or without signal",
	Of:    func(t *Tally) float64 { return ratio(t.Signal, t.Error) },
}

var quietSNR = Measure{
	Name: "quiet_snr_db", Unit: "dB",
	Means: "signal energy over error energy of the frames with signal that are out of range",
	Of:    func(t *Tally) float64 { return ratio(t.SignalOut, t.ErrorOut) },
}
