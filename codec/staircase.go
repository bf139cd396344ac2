package codec

import (
	"fmt"
	"math"
	"sort"
)

// Tie says to which cell a value exactly on a threshold belongs.
type Tie uint8

const (
	// TieUp puts it into the upper cell.
	TieUp Tie = iota
	// TieOut puts it into the cell of larger magnitude, for both signs; zero,
	// where it is a threshold, belongs to the positive cell.
	TieOut
)

// Staircase is a memoryless scalar quantizer with N cells. Cell k lies between
// Thresholds[k-1] and Thresholds[k]; the outermost cells run to infinity.
type Staircase struct {
	// Thresholds are the N-1 decision values, strictly ascending, finite,
	// full scale = 1.0.
	Thresholds []float64
	// Values are the N reconstruction values, ascending, finite, full scale
	// = 1.0. Two cells may share a value (the two zeros of G.711 mu-law).
	Values []float64
	// Lo and Hi bound the range without overload: a sample strictly outside
	// [Lo, Hi] is an overload.
	Lo, Hi float64
	// Tie is the rule for a value exactly on a threshold.
	Tie Tie
	// Codes gives the transmitted word of each cell where a standard fixes
	// one (G.711); nil means the cell number itself.
	Codes []uint16
}

// MaxCells is the largest number of cells a staircase may have: its indices
// fit 16 bits.
const MaxCells = 1 << 16

// Check reports the first broken promise of s: lengths, order, finiteness,
// bounds. Range checks are written so that NaN fails.
func (s *Staircase) Check() error {
	n := len(s.Values)
	if n < 1 || n > MaxCells {
		return fmt.Errorf("staircase of %d cells: want 1 to %d", n, MaxCells)
	}
	if len(s.Thresholds) != n-1 {
		return fmt.Errorf("staircase of %d cells has %d thresholds: want %d", n, len(s.Thresholds), n-1)
	}
	for i, t := range s.Thresholds {
		if !(math.Abs(t) <= math.MaxFloat64) || i > 0 && !(t > s.Thresholds[i-1]) {
			return fmt.Errorf("threshold %d (%g) is not finite and above its neighbour", i, t)
		}
	}
	for i, y := range s.Values {
		if !(math.Abs(y) <= math.MaxFloat64) || i > 0 && !(y >= s.Values[i-1]) {
			return fmt.Errorf("value %d (%g) is not finite and at or above its neighbour", i, y)
		}
	}
	if !(s.Lo <= s.Hi) {
		return fmt.Errorf("overload bounds [%g, %g] are not in order", s.Lo, s.Hi)
	}
	if s.Codes != nil && len(s.Codes) != n {
		return fmt.Errorf("%d codes for %d cells", len(s.Codes), n)
	}
	return nil
}

// Cells returns the number of cells N.
func (s *Staircase) Cells() int { return len(s.Values) }

// Index returns the cell, 0 to N-1, that x belongs to. NaN goes to cell 0;
// recordings that hold one are refused before they come here.
func (s *Staircase) Index(x float64) int {
	k := sort.Search(len(s.Thresholds), func(i int) bool { return s.Thresholds[i] > x })
	if s.Tie == TieOut && x < 0 && k > 0 && s.Thresholds[k-1] == x {
		k--
	}
	return k
}

// Quantize returns the reconstruction value of x.
func (s *Staircase) Quantize(x float64) float64 { return s.Values[s.Index(x)] }

// Overloads reports whether x lies strictly outside [Lo, Hi].
func (s *Staircase) Overloads(x float64) bool { return x < s.Lo || x > s.Hi }

// MirrorBounds sets Lo and Hi of an optimised staircase: the outermost
// thresholds mirrored at the outermost values, 2y - t (a convention of this
// project). With a single cell everything is in range.
func (s *Staircase) MirrorBounds() {
	n := len(s.Values)
	if n < 2 {
		s.Lo, s.Hi = math.Inf(-1), math.Inf(1)
		return
	}
	s.Lo = 2*s.Values[0] - s.Thresholds[0]
	s.Hi = 2*s.Values[n-1] - s.Thresholds[n-2]
}
