package codec

import (
	"fmt"
	"math"
)

// Shape says what a symmetric staircase has at zero.
type Shape uint8

const (
	// MidRise has a threshold at zero: the number of cells is even.
	MidRise Shape = iota
	// MidTread has a reconstruction value at zero: the number of cells is odd.
	MidTread
)

// String is the trade's word.
func (s Shape) String() string {
	if s == MidTread {
		return "mid-tread"
	}
	return "mid-rise"
}

// checkShape refuses a number of cells that the shape cannot have.
func checkShape(n int, s Shape) error {
	switch {
	case n < 2 || n > MaxCells:
		return fmt.Errorf("%d cells: want 2 to %d", n, MaxCells)
	case s == MidRise && n%2 != 0:
		return fmt.Errorf("%d cells: mid-rise needs an even number", n)
	case s == MidTread && n%2 == 0:
		return fmt.Errorf("%d cells: mid-tread needs an odd number", n)
	}
	return nil
}

// Uniform returns n cells of width 2v/n over [-v, v]; v is the overload point
// (full scale = 1.0, finite, above 0). A value on a threshold goes outwards
// for mid-rise and upwards for mid-tread.
func Uniform(n int, v float64, s Shape) (*Staircase, error) {
	if err := checkShape(n, s); err != nil {
		return nil, err
	}
	if !(v > 0 && v <= math.MaxFloat64) {
		return nil, fmt.Errorf("overload point %g: want a finite number above 0", v)
	}
	out := mirrored(n, func(u float64) float64 { return v * u })
	out.Lo, out.Hi = -v, v
	if s == MidTread {
		out.Tie = TieUp
	}
	return out, out.Check()
}

// mirrored builds n cells that are even in the variable u over [-1, 1] and
// passed through expand (odd, increasing): thresholds are expanded cell
// edges, values expanded cell middles. The lower half is the exact negative
// of the upper.
func mirrored(n int, expand func(u float64) float64) *Staircase {
	s := &Staircase{Thresholds: make([]float64, n-1), Values: make([]float64, n), Tie: TieOut}
	for k := range s.Thresholds {
		if i := 2*(k+1) - n; i > 0 {
			s.Thresholds[k] = expand(float64(i) / float64(n))
			s.Thresholds[n-2-k] = -s.Thresholds[k]
		}
	}
	for k := range s.Values {
		if i := 2*k + 1 - n; i > 0 {
			s.Values[k] = expand(float64(i) / float64(n))
			s.Values[n-1-k] = -s.Values[k]
		}
	}
	return s
}
