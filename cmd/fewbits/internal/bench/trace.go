package bench

// Traces hold what pictures over time need and results.json would bloat with:
// written beside it as traces.json, documented in DEVELOPERS.md.
type Traces struct {
	Schema string      `json:"schema"` // "fewbits/traces/1"
	Clips  []ClipTrace `json:"clips"`
	// Histogram of all clips' amplitudes: bin edges in magnitude (full scale
	// = 1.0, ascending, logarithmic, first edge 0) and probability per bin for
	// negative and positive samples (zero counts as positive).
	Edges    []float64 `json:"edges"`
	Negative []float64 `json:"negative"`
	Positive []float64 `json:"positive"`
	// Models are the amplitude models fitted to all clips together, with their
	// densities to draw over the histogram.
	Models []ModelCurve `json:"models"`
	// Bounds are Shannon's lower bounds on the error of memoryless sources with
	// these models' densities: the models', not the recordings'.
	Bounds []Bound  `json:"bounds"`
	Spread []Spread `json:"spread"`
	Sweep  []Curve  `json:"sweep"`
	Sine   []Curve  `json:"sine"`
	// Noise is the noise test, as Sine; its limits draw no verdict.
	Noise []Curve `json:"noise,omitempty"`
}

// ModelCurve is the density of a fitted model, symmetric about 0.
type ModelCurve struct {
	Fit
	// Magnitude ascends, full scale = 1.0, above 0; Density is p(x) = p(-x) per
	// unit of full scale (it integrates to 1/2 over the magnitudes).
	Magnitude []float64 `json:"magnitude"`
	Density   []Num     `json:"density"`
}

// Bound is the largest SNR that any code of so many bits a sample can reach on
// a memoryless source with the model's density (Shannon's lower bound on the
// error): a straight line of 6.02 dB a bit, at ascending bits.
type Bound struct {
	Model string    `json:"model"`
	Bits  []float64 `json:"bits"`
	SNRDB []Num     `json:"snr_db"`
}

// ClipTrace is one clip over time, first channel, at most 2,000 points.
type ClipTrace struct {
	File        string  `json:"file"`
	StepSeconds float64 `json:"step_seconds"`
	Min         []Num   `json:"min"` // waveform envelope per step, full scale = 1.0
	Max         []Num   `json:"max"`
	LevelDBov   []Num   `json:"level_dbov"` // per step
	// SNR of each design, spec -> dB per step (unlimited; null where the step
	// holds no signal or no error).
	SNR map[string][]Num `json:"snr_db"`
}

// Spread is the distribution of one design's frame SNR (limited as
// segsnr_open_db) in one class of frame level: quantiles 5, 25, 50, 75, 95 %.
// Class is "quiet" (out of range), "middle" or "loud" (in range, below or
// above the active level).
type Spread struct {
	Design    string `json:"design"`
	Class     string `json:"class"`
	Frames    int64  `json:"frames"`
	Quantiles [5]Num `json:"quantiles_db"`
	IdleDBov  Num    `json:"idle_dbov"` // output level over the quiet frames
}

// Curve is one design's SNR against level.
type Curve struct {
	Design  string    `json:"design"`
	LevelDB []float64 `json:"level_db"` // re the recordings' own level; dBm0 for the sine
	SNRDB   []Num     `json:"snr_db"`
	LimitDB []Num     `json:"limit_db,omitempty"` // sine test
	// Range of levels with SNR of at least RangeSNR, dB (sweep).
	RangeDB  Num     `json:"range_db"`
	RangeSNR float64 `json:"range_snr_db"`
}
