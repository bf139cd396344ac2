package family

import (
	"fmt"

	"fewbits/codec"
	"fewbits/codec/design"
)

// modelKey names the model a fitted design is made for; fromKey also takes the
// recordings themselves; scaleKey says how a model is scaled to them.
var (
	modelKey = oneOf("from", "laplacian", "gaussian", "gamma")
	fromKey  = oneOf("from", "laplacian", "gaussian", "gamma", "data")
	scaleKey = oneOf("scale", "rms", "active")
)

var lloydMax = Family{
	Name:    "lloyd-max",
	About:   "least mean squared error for a model or for the recordings",
	MinBits: 1, MaxBits: 12,
	Keys: []Key{fromKey, scaleKey, oneOf("symmetry", "mirror", "free"), oneOf("aim", "mse", "segsnr", "segsnr-open")},
	Needs: func(a Args) Need {
		switch {
		case a["aim"] != "mse":
			return FramedData
		case a["from"] == "data":
			return Data
		}
		return Level
	},
	Check: func(s Spec) error {
		if s.Get("aim") != "mse" && s.Get("from") != "data" {
			return fmt.Errorf("aim=%q goes with from=data only", s.Get("aim"))
		}
		return nil
	},
	Make: makeLloydMax,
}

func makeLloydMax(s Spec, m Material) (Made, error) {
	sym := design.Mirror
	if s.Get("symmetry") == "free" {
		sym = design.Free
	}
	var made Made
	var sol design.Solution
	var err error
	switch {
	case s.Get("aim") != "mse":
		made.From = "the recordings' frames in range"
		sol, err = segmental(s, m, sym)
	case s.Get("from") == "data":
		made.From = "the recordings' amplitudes"
		sol, err = design.ExactData(m.Histogram, s.Levels, sym)
	default:
		if made.Density, made.From, err = m.Density(s.Get("from"), s.Get("scale")); err != nil {
			return made, err
		}
		sol, err = design.LloydMax(made.Density, s.Levels, sym)
	}
	if err != nil {
		return made, err
	}
	made.Solution, made.Notes = &sol, sol.Notes
	made.Stair, err = of(sol, codec.TieUp)
	return made, err
}

// segmental designs for the mean frame SNR.
func segmental(s Spec, m Material, sym design.Symmetry) (design.Solution, error) {
	frames, err := m.Frames()
	if err != nil {
		return design.Solution{}, err
	}
	return design.SegSNR(*frames, s.Levels, sym, s.Get("aim") == "segsnr-open", design.SegOptions{})
}
