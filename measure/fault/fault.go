package fault

import (
	"fmt"
	"math"
)

// Severity says how much a finding matters.
type Severity uint8

const (
	// Note: worth knowing, figures stand.
	Note Severity = iota
	// Warning: some figures mean less than they seem to.
	Warning
	// Severe: a table made from this recording should not be trusted.
	Severe
)

// String is the word printed.
func (s Severity) String() string {
	switch s {
	case Note:
		return "note"
	case Warning:
		return "warning"
	case Severe:
		return "severe"
	}
	return fmt.Sprintf("severity(%d)", uint8(s))
}

// MarshalText writes the word.
func (s Severity) MarshalText() ([]byte, error) { return []byte(s.String()), nil }

// Finding is one fault of one channel.
type Finding struct {
	// Kind is a short fixed key, e.g. "clipped".
	Kind     string   `json:"kind"`
	Severity Severity `json:"severity"`
	// Sentence says with numbers what was found, Advice what to do about it;
	// lower case, no full stop.
	Sentence string `json:"sentence"`
	Advice   string `json:"advice"`
	// Value is the figure the finding rests on, in Unit ("samples", "dB",
	// "Hz", "bits", "share", "s", "levels"); never NaN or Inf.
	Value float64 `json:"value"`
	Unit  string  `json:"unit"`
}

// Context is what is already known of the channel. NaN means undefined.
type Context struct {
	// LSB is the clip's grid (full scale = 1.0), e.g. 2^-15; 0 for unknown:
	// the scan's own finding is used.
	LSB float64
	// Bits is the sample size of an integer PCM file; 0 for float, companded
	// or unknown.
	Bits int
	// ActiveDBov is the active speech level (ITU-T P.56), LevelDBov the
	// long-term level, DC included.
	ActiveDBov, LevelDBov float64
	// PeakDB is the peak in dB re full scale.
	PeakDB float64
	// DC is the mean, full scale = 1.0.
	DC float64
	// Seconds is the duration.
	Seconds float64
	// InRangeShare is the share (0 to 1) of frames with signal that count as
	// in range.
	InRangeShare float64
}

// judges lists the kinds of fault, in the order of the report.
var judges = []func(*Scan, Context) []Finding{
	tooShort,
	clipped,
	beyondFull,
	offCentre,
	silent,
	cutOut,
	unusedBits,
	coarse,
	wrongLevel,
	noPauses,
	emptyAbove,
	lossySource,
}

// Scan gathers, in one pass over one channel, what the judges need. It is not
// safe for concurrent use.
type Scan struct {
	rate    int
	grid    grid
	runs    runs
	tops    tops
	means   means
	spectra *spectra
	scratch []float64
}

// NewScan starts a scan of a channel at rate Hz; a rate below 1 is the
// caller's bug and panics.
func NewScan(rate int) *Scan {
	if rate < 1 {
		panic("fault: rate below 1 Hz")
	}
	return &Scan{rate: rate, grid: newGrid(), runs: newRuns(rate), means: newMeans(rate), spectra: newSpectra(rate)}
}

// Add takes the next samples, full scale = 1.0, finite. How the channel is cut
// into blocks makes no difference.
func (s *Scan) Add(x []float64) {
	s.grid.add(x)
	s.runs.add(x)
	s.tops.add(x)
	s.means.add(x)
	s.spectra.add(x)
}

// AddWords takes the next samples as 16-bit words.
func (s *Scan) AddWords(words []int16) {
	const block = 4096
	if s.scratch == nil {
		s.scratch = make([]float64, block)
	}
	for len(words) > 0 {
		n := min(len(words), block)
		for i, w := range words[:n] {
			s.scratch[i] = float64(w) / (1 << 15)
		}
		s.Add(s.scratch[:n])
		words = words[n:]
	}
}

// Findings judges what was gathered so far, in a fixed order; nil when nothing
// is wrong. The scan may go on afterwards.
func (s *Scan) Findings(c Context) []Finding {
	var all []Finding
	for _, judge := range judges {
		all = append(all, judge(s, c)...)
	}
	return all
}

// lsb is the grid to reckon with: the caller's, else the scan's own, never
// finer than 2^-24 (float audio).
func (s *Scan) lsb(c Context) float64 {
	if c.LSB > 0 {
		return c.LSB
	}
	return math.Max(s.grid.step(), 0x1p-24)
}
