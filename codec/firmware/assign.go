package firmware

import (
	"fmt"
	"math/bits"

	"fewbits/codec"
)

// Assignment says which code word stands for which cell.
type Assignment string

const (
	// Usual is Standard where the staircase brings code words, else Natural.
	Usual Assignment = ""
	// Natural numbers the cells from the lowest up.
	Natural Assignment = "natural"
	// Folded is sign and magnitude: the top bit is set for the cells below the
	// middle, the rest counts outwards from zero. Mirror tables only. With an
	// odd number of cells the middle one has sign 0; sign 1 with magnitude 0
	// is unused.
	Folded Assignment = "folded"
	// Gray is the reflected binary code: neighbouring cells differ in one bit.
	Gray Assignment = "gray"
	// Standard takes the staircase's own code words (G.711).
	Standard Assignment = "standard"
)

// mirrorTolerance is how far, relative to the outermost value, a mirror table
// may be off.
const mirrorTolerance = 1e-9

// codesOf returns the code word of each cell, and the assignment Usual stands
// for.
func codesOf(s *codec.Staircase, a Assignment) ([]uint16, Assignment, error) {
	n := s.Cells()
	if a == Usual {
		a = Natural
		if s.Codes != nil {
			a = Standard
		}
	}
	switch a {
	case Natural:
		return codesBy(n, func(k int) int { return k }), a, nil
	case Gray:
		return codesBy(n, func(k int) int { return k ^ k>>1 }), a, nil
	case Folded:
		if !s.IsMirror(mirrorTolerance) {
			return nil, a, fmt.Errorf("index assignment %q needs a table that is its own mirror image: design with symmetry=mirror, or take natural or gray", a)
		}
		return codesBy(n, func(k int) int { return fold(n, k) }), a, nil
	case Standard:
		return standard(s)
	}
	return nil, a, fmt.Errorf("unknown index assignment %q: want natural, folded, gray or standard", a)
}

func codesBy(n int, code func(k int) int) []uint16 {
	out := make([]uint16, n)
	for k := range out {
		out[k] = uint16(code(k))
	}
	return out
}

// signBit is the value of the sign bit for n cells: the least power of two
// that exceeds the largest magnitude index.
func signBit(n int) int {
	if n < 2 {
		return 0
	}
	return 1 << bits.Len(uint(n/2-(1-n%2)))
}

// fold is the sign-magnitude code of cell k of n.
func fold(n, k int) int {
	switch middle := n / 2; {
	case k >= middle:
		return k - middle
	case n%2 == 0:
		return signBit(n) | (middle - 1 - k)
	default:
		return signBit(n) | (middle - k)
	}
}

func standard(s *codec.Staircase) ([]uint16, Assignment, error) {
	if s.Codes == nil {
		return nil, Standard, fmt.Errorf("index assignment %q: no standard gives this table code words; take natural, folded or gray", Standard)
	}
	seen := make(map[uint16]int, len(s.Codes))
	for k, c := range s.Codes {
		if j, twice := seen[c]; twice {
			return nil, Standard, fmt.Errorf("cells %d and %d share the code word %#x", j, k, c)
		}
		seen[c] = k
	}
	return append([]uint16(nil), s.Codes...), Standard, nil
}
