package family

import (
	"fmt"
	"strconv"

	"fewbits/codec"
	"fewbits/codec/design"
)

var compander = Family{
	Name:    "compander",
	About:   "cells whose density follows a power of the amplitude density",
	MinBits: 1, MaxBits: 12,
	Keys: []Key{
		fromKey, scaleKey,
		number("power", "0.3333333333333333", 0, 1),
		{
			Name: "segments", Accepts: "a whole number from 0 (smooth) to 64 of straight pieces a side", Default: "0",
			Valid: func(v string) bool { n, err := strconv.Atoi(v); return err == nil && n >= 0 && n <= 64 },
		},
	},
	Needs: func(a Args) Need {
		if a["from"] == "data" {
			return Data
		}
		return Level
	},
	Make: makeCompander,
}

// makeCompander follows P. F. Panter and W. Dite (Proc. IRE 39, 1951): with
// power 1/3 the mean squared error at many levels is least.
func makeCompander(s Spec, m Material) (Made, error) {
	segments, err := strconv.Atoi(s.Get("segments"))
	if err != nil {
		return Made{}, err
	}
	var made Made
	var sol design.Solution
	if from := s.Get("from"); from == "data" {
		made.From = "the recordings' amplitudes"
		sol, err = design.CompanderData(m.Histogram, s.Levels, s.Number("power"), segments)
	} else if made.Density, made.From, err = m.Density(from, s.Get("scale")); err == nil {
		sol, err = design.Compander(made.Density, s.Levels, s.Number("power"), segments)
	}
	if err != nil {
		return made, err
	}
	if d := made.Density; d != nil {
		n := float64(s.Levels)
		sol.Notes = append(sol.Notes, fmt.Sprintf("mse %.6g; at many levels the best is %.6g (Panter-Dite)", sol.MSE, design.PanterDite(d)/n/n))
	}
	made.Solution, made.Notes = &sol, sol.Notes
	made.Stair, err = of(sol, codec.TieUp)
	return made, err
}
