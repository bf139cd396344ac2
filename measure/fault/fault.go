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

// Part gathers what a stretch of one channel adds. Parts of neighbouring
// stretches are joined in order; how the channel is cut makes no difference.
// It is not safe for concurrent use.
type Part struct {
	grid  grid
	runs  runs
	tops  tops // of samples off the 16-bit grid; the others are in grid
	means means
}

// NewPart starts a part at sample start of a channel at rate Hz; a rate below
// 1 is the caller's bug and panics. It takes 0.6 MB.
func NewPart(rate int, start int64) *Part {
	if rate < 1 {
		panic("fault: rate below 1 Hz")
	}
	p := &Part{grid: newGrid()}
	p.begin(rate, start)
	return p
}

func (p *Part) begin(rate int, start int64) {
	p.runs, p.means = newRuns(rate), newMeans(rate, start)
}

// Reset empties the part for another stretch.
func (p *Part) Reset(rate int, start int64) {
	if p.grid.off > 0 {
		p.tops = tops{}
	}
	p.grid.reset()
	p.begin(rate, start)
}

// Add takes the next samples, full scale = 1.0, finite.
func (p *Part) Add(x []float64) {
	p.grid.add(x, &p.tops)
	p.runs.add(x)
	p.means.add(x)
}

// AddWords takes the next samples as 16-bit words.
func (p *Part) AddWords(words []int16) {
	p.grid.addWords(words)
	p.runs.addWords(words)
	p.means.addWords(words)
}

// Join appends the part that follows.
func (p *Part) Join(next *Part) {
	p.Absorb(next)
	p.Follow(next.Order())
}

// Absorb adds what another part counted, whichever stretch it was: all but
// what Order keeps.
func (p *Part) Absorb(other *Part) {
	p.grid.join(&other.grid)
	if other.grid.off > 0 {
		p.tops.join(&other.tops)
	}
}

// Order is the little of a part that depends on the stretches' order.
type Order struct {
	runs  runs
	means means
}

// Order copies it.
func (p *Part) Order() *Order { return &Order{p.runs, p.means} }

// Follow appends it for the stretch that follows.
func (p *Part) Follow(next *Order) {
	p.runs.join(&next.runs)
	p.means.join(&next.means)
}

// Counts are how often each 16-bit word occurred, that of word w at w + 32768;
// samples between two words are in none. Read only.
func (p *Part) Counts() []int64 { return p.grid.counts }

// Scan is what the judges need of one channel: all its parts, and spectra of
// segments spread over it.
type Scan struct {
	Part
	rate    int
	spectra *spectra
	crowns  *tops // of all samples, made when first asked for
}

// NewScan starts a scan of a channel at rate Hz; a rate below 1 is the
// caller's bug and panics.
func NewScan(rate int) *Scan {
	return &Scan{Part: *NewPart(rate, 0), rate: rate, spectra: newSpectra(rate)}
}

// Add takes the next samples, full scale = 1.0, finite, spectra included.
func (s *Scan) Add(x []float64) {
	s.Part.Add(x)
	s.spectra.add(x)
}

// AddWords takes the next samples as 16-bit words, spectra included.
func (s *Scan) AddWords(words []int16) {
	s.Part.AddWords(words)
	var block [4096]float64
	for len(words) > 0 {
		n := min(len(words), len(block))
		for i, w := range words[:n] {
			block[i] = float64(w) / (1 << 15)
		}
		s.spectra.add(block[:n])
		words = words[n:]
	}
}

// Findings judges what was gathered so far, in a fixed order; nil when nothing
// is wrong. The scan may go on afterwards.
func (s *Scan) Findings(c Context) []Finding {
	var all []Finding
	s.crowns = nil
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
