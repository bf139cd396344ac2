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
	Spread   []Spread  `json:"spread"`
	Sweep    []Curve   `json:"sweep"`
	Sine     []Curve   `json:"sine"`
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
