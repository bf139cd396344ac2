package family

import (
	"strconv"

	"fewbits/codec"
	"fewbits/codec/design"
)

var compander = Family{
	Name:    "compander",
	About:   "cells whose density follows a power of the recordings' amplitude density",
	MinBits: 1, MaxBits: 12,
	Keys: []Key{
		oneOf("from", "data"),
		number("power", "0.3333333333333333", 0, 1),
		{
			Name: "segments", Accepts: "a whole number from 0 (smooth) to 64 of straight pieces a side", Default: "0",
			Valid: func(v string) bool { n, err := strconv.Atoi(v); return err == nil && n >= 0 && n <= 64 },
		},
	},
	Needs: func(Args) Need { return Data },
	Make:  makeCompander,
}

// makeCompander follows P. F. Panter and W. Dite (Proc. IRE 39, 1951): with
// power 1/3 the mean squared error at many levels is least.
func makeCompander(s Spec, m Material) (Made, error) {
	segments, err := strconv.Atoi(s.Get("segments"))
	if err != nil {
		return Made{}, err
	}
	sol, err := design.CompanderData(m.Histogram, s.Levels, s.Number("power"), segments)
	if err != nil {
		return Made{}, err
	}
	made := Made{From: "the recordings' amplitudes", Solution: &sol, Notes: sol.Notes}
	made.Stair, err = of(sol, codec.TieUp)
	return made, err
}
