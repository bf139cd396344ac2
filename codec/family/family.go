// Package family says which designs can be asked for by name: the grammar of
// a design spec, one file per family, and the register of them all. It turns
// a spec and what is known of the recordings (Material) into a
// codec.Staircase.
//
// A spec reads family[:bits][,key=value...], for example "mu-law:8" or
// "lloyd-max:6,from=gamma,scale=active".
package family

import (
	"fewbits/codec"
	"fewbits/codec/design"
)

// Family is one kind of design.
type Family struct {
	Name  string // first word of a spec
	About string // one line for the help
	// MinBits to MaxBits are accepted; levels=N up to 2^MaxBits.
	MinBits, MaxBits int
	Keys             []Key
	// Needs reports what of Material the args call for.
	Needs func(a Args) Need
	// Cells is the number of cells for so many bits; nil means 2^bits.
	Cells func(a Args, bits int) int
	// Check refuses combinations of keys that make no sense; may be nil.
	Check func(s Spec) error
	Make  func(s Spec, m Material) (Made, error)
}

// Need says what a design must know of recordings.
type Need uint8

const (
	// Nothing: the same staircase for every recording.
	Nothing Need = iota
	// Level: an rms or a fitted model.
	Level
	// Data: the amplitude histogram.
	Data
	// FramedData: the histogram of each frame.
	FramedData
)

// Material is what designs may be made from. Amplitudes have full scale = 1.0.
type Material struct {
	// RMS over all samples; ActiveRMS at the active speech level (NaN where
	// undefined).
	RMS, ActiveRMS float64
	// Histogram of all samples. Within is nil where its values are the data
	// themselves; where they are bins of finer data, the mean squared distance
	// to each bin's value.
	Histogram design.Histogram
	Within    []float64
	// Density gives the model named from, scaled by the rule scale (rms,
	// active, fit), and says in words how it was scaled.
	Density func(from, scale string) (d design.Density, how string, err error)
	// Frames gives the in-range frames for the segmental aims, each as it is and,
	// where spread is above 0, also at gains up to that many dB up and down.
	Frames func(spread float64) (*design.Frames, error)
	// Trace asks designers for their convergence (Solution.Trace).
	Trace bool
}

// Made is a finished design.
type Made struct {
	Stair *codec.Staircase
	// From says what it was made from, in words ("laplacian at the
	// recordings' rms"); empty for a fixed design.
	From string
	// Density it was made for; nil for fixed designs and designs from data.
	Density design.Density
	// Solution of the designer; nil for closed forms.
	Solution *design.Solution
	// Arithmetic: codes by one multiplication, no table.
	Arithmetic bool
	Notes      []string
}

// of wraps a solution as a staircase with mirrored overload bounds.
func of(sol design.Solution, tie codec.Tie) (*codec.Staircase, error) {
	s := &codec.Staircase{Thresholds: sol.Thresholds, Values: sol.Values, Tie: tie}
	s.MirrorBounds()
	return s, s.Check()
}
