// Package bench is the run itself: recordings times designs to results, as plain
// data. Other packages render them.
package bench

import (
	"encoding/json"
	"math"
	"strconv"

	"fewbits/measure"
)

// Schema names the layout of results.json; it changes when a field changes
// meaning.
const Schema = "fewbits/results/1"

// Num is a figure that may be undefined: NaN and infinities are null in JSON.
type Num float64

// MarshalJSON writes full precision, or null where undefined.
func (n Num) MarshalJSON() ([]byte, error) {
	f := float64(n)
	if math.IsNaN(f) || math.IsInf(f, 0) {
		return []byte("null"), nil
	}
	return strconv.AppendFloat(nil, f, 'g', -1, 64), nil
}

// UnmarshalJSON reads null as NaN.
func (n *Num) UnmarshalJSON(b []byte) error {
	if string(b) == "null" {
		*n = Num(math.NaN())
		return nil
	}
	f, err := strconv.ParseFloat(string(b), 64)
	*n = Num(f)
	return err
}

// Defined reports whether n is a number.
func (n Num) Defined() bool { return !math.IsNaN(float64(n)) && !math.IsInf(float64(n), 0) }

// Results is one run: the single source of every other output.
type Results struct {
	Schema      string       `json:"schema"`
	Version     string       `json:"version"`
	Command     []string     `json:"command"` // as typed, program name first
	Settings    Settings     `json:"settings"`
	Definitions []Definition `json:"definitions"` // one per figure, in table order
	Leading     string       `json:"leading"`     // the figure that decides: segsnr_db or segsnr_open_db
	LeadingWhy  string       `json:"leading_why"` // one sentence
	// IntervalMethod says in words how the 95 % intervals were made.
	IntervalMethod string    `json:"interval_method"`
	Clips          []Clip    `json:"clips"`    // by path
	Designs        []Design  `json:"designs"`  // in order asked
	Results        []Result  `json:"results"`  // clips x designs
	Pooled         []Pooled  `json:"pooled"`   // one per design
	Verdicts       []Verdict `json:"verdicts"` // one per bit rate
	// Savings of the winners, against the plain mu-law and uniform designs.
	Savings  []Saving  `json:"savings,omitempty"`
	Refused  []Refusal `json:"refused"`
	Warnings []string  `json:"warnings"` // about the run as a whole

	// units are what intervals of a figure of some designs come from; nil in
	// results that were read back.
	units func(designs []int, figure string) measure.Units
}

// Settings are the parameters that the figures depend on.
type Settings struct {
	FrameSeconds float64    `json:"frame_seconds"`
	RangeDB      float64    `json:"range_db"`       // in range: above active level less this
	LimitsDB     [2]float64 `json:"limits_db"`      // segsnr_db, segsnr_all_db
	OpenLimitsDB [2]float64 `json:"open_limits_db"` // segsnr_open_db
	Depth        string     `json:"depth"`          // 16, 24 or 32f: depth of the written audio
	Preparation  []string   `json:"preparation"`    // in the order applied
	TrainedOn    []string   `json:"trained_on"`     // files of --train
	HoldOut      bool       `json:"hold_out"`
	Bits         []int      `json:"bits"`
	Seed         uint64     `json:"seed"` // of the bootstrap
}

// Definition explains one figure.
type Definition struct {
	Name  string `json:"name"`
	Unit  string `json:"unit"`
	Means string `json:"means"`
}

// Clip is one recording as measured (after preparation).
type Clip struct {
	File           string    `json:"file"`
	Name           string    `json:"name"` // folder under audio/, unique, safe
	SHA256         string    `json:"sha256"`
	Format         string    `json:"format"` // in words: "WAV, PCM 16-bit"
	RateHz         int       `json:"rate_hz"`
	Channels       int       `json:"channels"`
	Samples        int64     `json:"samples"` // per channel
	Seconds        float64   `json:"seconds"`
	LevelDBov      Num       `json:"level_dbov"`
	ActiveDBov     Num       `json:"active_level_dbov"`
	Activity       Num       `json:"activity"`
	PeakDB         Num       `json:"peak_db"`
	CrestDB        Num       `json:"crest_db"`
	DC             Num       `json:"dc"`
	LSB            float64   `json:"lsb"`
	EffectiveBits  int       `json:"effective_bits"`
	NoiseDBov      Num       `json:"noise_dbov"` // level of the frames out of range
	ZeroShare      Num       `json:"zero_share"`
	Frames         int64     `json:"frames"` // whole frames, all channels
	FramesInRange  int64     `json:"frames_in_range"`
	Preparation    []string  `json:"preparation"`
	Fits           []Fit     `json:"fits"`
	Findings       []Finding `json:"findings"`
	Warnings       []string  `json:"warnings"` // reading notes, then a sentence per finding
	Talker         string    `json:"talker,omitempty"`
	OptimalTableDB Num       `json:"best_mirror_snr_db"` // reserved for the design loss
}

// Finding is something wrong with one channel of a recording.
type Finding struct {
	Channel  int     `json:"channel"` // from 1
	Kind     string  `json:"kind"`
	Severity string  `json:"severity"` // note, warning, severe
	Sentence string  `json:"sentence"`
	Advice   string  `json:"advice"`
	Value    float64 `json:"value"`
	Unit     string  `json:"unit"`
}

// Fit is one amplitude model fitted to one clip.
type Fit struct {
	Model        string `json:"model"`
	Over         string `json:"over"` // "all" or "in-range"
	Shape        Num    `json:"shape"`
	ShapeSE      Num    `json:"shape_se"`
	Scale        Num    `json:"scale"`
	ScaleSE      Num    `json:"scale_se"`
	RMS          Num    `json:"rms"`
	LogLik       Num    `json:"loglik_nats"` // per sample
	AIC          Num    `json:"aic"`
	KS           Num    `json:"ks"`
	DesignLossDB Num    `json:"design_loss_db"`
	Samples      int64  `json:"samples"`
}

// Design is one staircase of the comparison.
type Design struct {
	Spec        string    `json:"spec"` // as typed
	Name        string    `json:"name"` // safe for every file system
	Family      string    `json:"family"`
	Levels      int       `json:"levels"`
	Bits        int       `json:"bits"`
	MadeOn      string    `json:"made_on"` // "fixed", "a model ...", "the recordings it is tested on", ...
	Thresholds  []float64 `json:"thresholds"`
	Values      []float64 `json:"values"`
	Lo          Num       `json:"overload_lo"` // overload bounds
	Hi          Num       `json:"overload_hi"`
	TableBytes  int       `json:"table_bytes"`
	Comparisons int       `json:"comparisons"` // per sample
	// IdleLSB is the grid that the idle channel was tried with: the
	// recordings' coarsest lsb, full scale = 1.0; 0: not tried. The levels are
	// those of the output for an input of zero, and of one that alternates
	// between + and - one lsb; null: the output is exactly zero, silent.
	IdleLSB    float64            `json:"idle_lsb"`
	IdleZero   Num                `json:"idle_zero_dbov"`
	IdleOneLSB Num                `json:"idle_one_lsb_dbov"`
	Proof      string             `json:"proof"`
	Rounds     int                `json:"rounds"`
	Residual   Num                `json:"residual"`
	Notes      []string           `json:"notes"`
	Extra      map[string]float64 `json:"extra,omitempty"`
}

// Figures are measured values by name; in JSON they stand beside the other
// fields of their object, sorted by name.
type Figures map[string]Num

// Result is one clip coded by one design. Lossless: no error at all, so SNR is
// undefined.
type Result struct {
	Clip     string // Clip.File
	Design   string // Design.Spec
	Lossless bool
	Figures  Figures
}

// Pooled is one design over all clips: figures from summed counts and
// energies, and the mean over clips of each clip's figure.
type Pooled struct {
	Design    string
	Lossless  bool
	Figures   Figures
	ClipMeans Figures
	// Interval is the 95 % interval of the leading figure, Behind that of the
	// difference from the leader; Lead is clear, open, shared or behind.
	Interval, Behind [2]Num
	Lead             string
}

// Verdict names the winners at one bit rate.
type Verdict struct {
	Bits     int               `json:"bits"`
	Winners  map[string]string `json:"winners"` // figure -> design spec
	Tied     []string          `json:"tied"`    // not distinguishable from the best by the leading figure
	Sentence string            `json:"sentence"`
}

// Saving is how many bits a sample a design saves against a family at equal
// leading figure, interpolated over that family's numbers of bits; negative
// where it costs bits. There is none where the family's designs do not reach
// the figure.
type Saving struct {
	Design  string `json:"design"`  // spec
	Against string `json:"against"` // family: "mu-law", "uniform"
	Bits    Num    `json:"bits"`
	// Interval, 95 %, bits, each on its own (leads are told for all designs
	// together); an end is null where it lies beyond the family's numbers of
	// bits.
	Interval     [2]Num `json:"interval"`
	Observations int    `json:"observations"` // clips, talkers or blocks of frames
}

// Refusal is one recording that was not used, and why.
type Refusal struct {
	File   string `json:"file"`
	Reason string `json:"reason"`
}

type object map[string]any

func (f Figures) into(o object) object {
	for k, v := range f {
		o[k] = v
	}
	return o
}

// MarshalJSON flattens the figures.
func (r Result) MarshalJSON() ([]byte, error) {
	return json.Marshal(r.Figures.into(object{"clip": r.Clip, "design": r.Design, "lossless": r.Lossless}))
}

// UnmarshalJSON is the inverse.
func (r *Result) UnmarshalJSON(b []byte) error {
	var head struct {
		Clip, Design string
		Lossless     bool
	}
	if err := json.Unmarshal(b, &head); err != nil {
		return err
	}
	*r = Result{Clip: head.Clip, Design: head.Design, Lossless: head.Lossless}
	return figuresOf(b, &r.Figures)
}

// MarshalJSON flattens the figures.
func (p Pooled) MarshalJSON() ([]byte, error) {
	return json.Marshal(p.Figures.into(object{
		"design": p.Design, "lossless": p.Lossless, "clip_means": p.ClipMeans,
		"interval": p.Interval, "behind": p.Behind, "lead": p.Lead,
	}))
}

// UnmarshalJSON is the inverse.
func (p *Pooled) UnmarshalJSON(b []byte) error {
	var head struct {
		Design           string
		Lossless         bool
		ClipMeans        Figures `json:"clip_means"`
		Interval, Behind [2]Num
		Lead             string
	}
	if err := json.Unmarshal(b, &head); err != nil {
		return err
	}
	*p = Pooled{
		Design: head.Design, Lossless: head.Lossless, ClipMeans: head.ClipMeans,
		Interval: head.Interval, Behind: head.Behind, Lead: head.Lead,
	}
	return figuresOf(b, &p.Figures)
}

// figuresOf collects the numbers (and nulls) of a JSON object.
func figuresOf(b []byte, f *Figures) error {
	var raw map[string]json.RawMessage
	if err := json.Unmarshal(b, &raw); err != nil {
		return err
	}
	*f = Figures{}
	for k, v := range raw {
		if c := v[0]; c == 'n' || c == '-' || c >= '0' && c <= '9' {
			var n Num
			if err := n.UnmarshalJSON(v); err != nil {
				return err
			}
			(*f)[k] = n
		}
	}
	return nil
}
