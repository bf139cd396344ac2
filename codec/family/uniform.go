package family

import (
	"fmt"
	"strings"

	"fewbits/codec"
	"fewbits/codec/design"
)

var uniform = Family{
	Name:    "uniform",
	About:   "cells of equal width up to an overload point",
	MinBits: 1, MaxBits: 16,
	Keys: []Key{
		shapeKey,
		{
			Name: "overload", Accepts: "full, optimal, a level above 0 (full scale = 1) or a multiple of the rms such as 4rms",
			Default: "full", Valid: validOverload,
		},
		fromKey, scaleKey,
	},
	Needs: func(a Args) Need {
		switch o := a["overload"]; {
		case o == "optimal" && a["from"] == "data":
			return Data
		case o == "optimal" || strings.HasSuffix(o, "rms"):
			return Level
		}
		return Nothing
	},
	Cells: shapedCells,
	Check: checkUniform,
	Make:  makeUniform,
}

func validOverload(v string) bool {
	if v == "full" || v == "optimal" {
		return true
	}
	f, ok := parseNumber(strings.TrimSuffix(v, "rms"))
	return ok && f > 0 && f <= 1e6
}

// checkUniform refuses from= and scale= where nothing is fitted.
func checkUniform(s Spec) error {
	for _, key := range []string{"from", "scale"} {
		if v, given := s.Args[key]; given && s.Get("overload") != "optimal" {
			return fmt.Errorf("%s=%q goes with overload=optimal only", key, v)
		}
	}
	return checkShape(s)
}

func makeUniform(s Spec, m Material) (Made, error) {
	overload := s.Get("overload")
	if overload == "optimal" {
		return makeUniformOptimal(s, m)
	}
	v, from := 1.0, ""
	if k, ok := strings.CutSuffix(overload, "rms"); ok {
		f, _ := parseNumber(k)
		v, from = f*m.RMS, overload+" of the recordings"
	} else if overload != "full" {
		v, _ = parseNumber(overload)
	}
	st, err := codec.Uniform(s.Levels, v, s.shape())
	return Made{Stair: st, From: from, Arithmetic: true}, err
}

func makeUniformOptimal(s Spec, m Material) (Made, error) {
	made := Made{Arithmetic: true}
	var sol design.Solution
	var err error
	if s.Get("from") == "data" {
		made.From = "the recordings' amplitudes"
		sol, err = design.UniformData(m.Histogram, s.Levels)
		if m.Within != nil {
			sol.Proof, sol.Starts = design.Local, 1
		}
	} else if made.Density, made.From, err = m.Density(s.Get("from"), s.Get("scale")); err == nil {
		sol, err = design.OptimalUniform(made.Density, s.Levels)
	}
	if err != nil {
		return made, err
	}
	v := sol.Values[s.Levels-1] * float64(s.Levels) / float64(s.Levels-1)
	made.Solution = &sol
	made.Stair, err = codec.Uniform(s.Levels, v, s.shape())
	return made, err
}
