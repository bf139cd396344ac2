package family

import (
	"fmt"

	"fewbits/codec"
)

var shapeKey = oneOf("shape", "mid-rise", "mid-tread")

var muLaw = Family{
	Name:    "mu-law",
	About:   "cells even after ln(1+mu|x|)/ln(1+mu)",
	MinBits: 1, MaxBits: 16,
	Keys:  []Key{number("mu", "255", 0, 1e6), number("peak", "1", 0, 1e6), shapeKey},
	Cells: shapedCells,
	Check: checkShape,
	Make: func(s Spec, _ Material) (Made, error) {
		return companded(s, codec.MuLaw{Mu: s.Number("mu")})
	},
}

var aLaw = Family{
	Name:    "a-law",
	About:   "cells even after the smooth A-law",
	MinBits: 1, MaxBits: 16,
	Keys: []Key{
		{
			Name: "a", Accepts: "a number from 1 to 1e6", Default: "87.6",
			Valid: func(v string) bool { f, ok := parseNumber(v); return ok && f >= 1 && f <= 1e6 },
		},
		number("peak", "1", 0, 1e6), shapeKey,
	},
	Cells: shapedCells,
	Check: checkShape,
	Make: func(s Spec, _ Material) (Made, error) {
		return companded(s, codec.ALaw{A: s.Number("a")})
	},
}

func companded(s Spec, l codec.Law) (Made, error) {
	st, err := codec.Companded(s.Levels, l, s.Number("peak"), s.shape())
	return Made{Stair: st}, err
}

func (s Spec) shape() codec.Shape {
	if s.Get("shape") == "mid-tread" {
		return codec.MidTread
	}
	return codec.MidRise
}

// shapedCells: 2^bits, or one less where zero is to be a value.
func shapedCells(a Args, bits int) int {
	if a["shape"] == "mid-tread" {
		return 1<<bits - 1
	}
	return 1 << bits
}

// checkShape refuses a number of cells that the shape cannot have.
func checkShape(s Spec) error {
	switch tread := s.shape() == codec.MidTread; {
	case tread && s.Levels < 3:
		return fmt.Errorf("shape=mid-tread needs 2 bits or more")
	case tread && s.Levels%2 == 0:
		return fmt.Errorf("levels=%d: shape=mid-tread needs an odd number", s.Levels)
	case !tread && s.Levels%2 != 0:
		return fmt.Errorf("levels=%d: shape=mid-rise needs an even number", s.Levels)
	}
	return nil
}
