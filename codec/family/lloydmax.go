package family

import (
	"fmt"
	"strings"

	"fewbits/codec"
	"fewbits/codec/design"
)

// fromKey names what a fitted design is made from: a model, a density table
// or the recordings themselves. scaleKey says how a model is scaled to them.
var (
	fromKey = Key{
		Name:    "from",
		Accepts: "laplacian|gaussian|gamma|generalized-gaussian|free-gamma|best|data or a density table FILE.csv (a line a value and its density)",
		Default: "laplacian", Valid: validFrom,
	}
	scaleKey = oneOf("scale", "rms", "active", "fit")
)

// validFrom accepts the models, data and the name of a table.
func validFrom(v string) bool {
	switch v {
	case "laplacian", "gaussian", "gamma", "generalized-gaussian", "free-gamma", "best", "data":
		return true
	}
	return len(v) > 4 && strings.HasSuffix(strings.ToLower(v), ".csv")
}

var lloydMax = Family{
	Name:    "lloyd-max",
	About:   "least mean squared error, or another aim, for a model or for the recordings",
	MinBits: 1, MaxBits: 12,
	Keys: []Key{
		fromKey, scaleKey, oneOf("symmetry", "mirror", "free"),
		oneOf("aim", "mse", "segsnr", "segsnr-open", "entropy"),
		spreadKey,
		optional("rate", "a number of bits a sample above 0, at most 16, with aim=entropy", 16),
		optional("lambda", "a price of a bit above 0, at most 1e6, with aim=entropy", 1e6),
	},
	Needs: func(a Args) Need {
		switch {
		case strings.HasPrefix(a["aim"], "segsnr"):
			return FramedData
		case a["from"] == "data":
			return Data
		}
		return Level
	},
	Check: checkLloydMax,
	Make:  makeLloydMax,
}

// spreadKey makes a segmental design serve levels that its recordings do not
// have.
var spreadKey = Key{
	Name: "spread", Accepts: "dB from 0 to 30, with aim=segsnr: serve talkers up to so much louder or softer too",
	Default: "0", Valid: func(v string) bool { f, ok := parseNumber(v); return ok && f >= 0 && f <= 30 },
}

// optional is a number above 0 that may be left out.
func optional(name, accepts string, most float64) Key {
	return Key{
		Name: name, Accepts: accepts, Default: "",
		Valid: func(v string) bool { f, ok := parseNumber(v); return ok && f > 0 && f <= most },
	}
}

// checkLloydMax refuses aims without what they need.
func checkLloydMax(s Spec) error {
	aim, rate, lambda := s.Get("aim"), s.Get("rate"), s.Get("lambda")
	switch {
	case strings.HasPrefix(aim, "segsnr") && s.Get("from") != "data":
		return fmt.Errorf("aim=%q goes with from=data only", aim)
	case !strings.HasPrefix(aim, "segsnr") && s.Number("spread") != 0:
		return fmt.Errorf("spread=%q goes with aim=segsnr and aim=segsnr-open only", s.Get("spread"))
	case aim == "entropy" && (rate == "") == (lambda == ""):
		return fmt.Errorf("aim=entropy needs rate= or lambda=, one of them")
	case aim != "entropy" && rate+lambda != "":
		return fmt.Errorf("rate=%q and lambda=%q go with aim=entropy only", rate, lambda)
	}
	return nil
}

func makeLloydMax(s Spec, m Material) (Made, error) {
	sym := design.Mirror
	if s.Get("symmetry") == "free" {
		sym = design.Free
	}
	var made Made
	var err error
	switch from := s.Get("from"); {
	case from != "data":
		if made.Density, made.From, err = m.Density(from, s.Get("scale")); err != nil {
			return made, err
		}
	case s.Need() == FramedData:
		made.From = "the recordings' frames in range"
		if s.Number("spread") > 0 {
			made.From += ", also up to " + s.Get("spread") + " dB louder and softer"
		}
	default:
		made.From = "the recordings' amplitudes"
	}
	sol, err := solve(s, m, made.Density, sym)
	if err != nil {
		return made, err
	}
	made.Solution, made.Notes = &sol, sol.Notes
	made.Stair, err = of(sol, codec.TieUp)
	return made, err
}

// solve hands the aim to its designer; d is nil for data.
func solve(s Spec, m Material, d design.Density, sym design.Symmetry) (design.Solution, error) {
	switch aim := s.Get("aim"); {
	case aim == "entropy":
		opt := design.EntropyOptions{Levels: s.Levels, Symmetry: sym}
		if s.Get("rate") != "" {
			opt.Rate = s.Number("rate")
		} else {
			opt.Lambda = s.Number("lambda")
		}
		return entropyConstrained(m, d, opt)
	case aim != "mse":
		frames, err := m.Frames(s.Number("spread"))
		if err != nil {
			return design.Solution{}, err
		}
		return design.SegSNR(*frames, s.Levels, sym, aim == "segsnr-open", design.SegOptions{Trace: m.Trace})
	case d == nil:
		return exact(m, s.Levels, sym)
	}
	if m.Trace {
		return design.LloydMax(d, s.Levels, sym, design.WithTrace())
	}
	return design.LloydMax(d, s.Levels, sym)
}

// exact is the optimum for data, on bins where they are finer than those.
func exact(m Material, levels int, sym design.Symmetry) (design.Solution, error) {
	if m.Within == nil {
		return design.ExactData(m.Histogram, levels, sym)
	}
	fine := design.FineHistogram{Weights: m.Histogram.Weights, Centroids: m.Histogram.Values, Within: m.Within}
	sol, err := design.ExactFine(fine, levels, sym)
	sol.Notes = append(sol.Notes, fmt.Sprintf("exact for %d bins of the recordings, which are finer: the best table that cuts no bin", len(m.Within)))
	return sol, err
}

// entropyConstrained designs for a density or, where d is nil, for data, and
// notes the rate reached.
func entropyConstrained(m Material, d design.Density, opt design.EntropyOptions) (sol design.Solution, err error) {
	if d != nil {
		sol, err = design.EntropyDensity(d, opt)
	} else {
		sol, err = design.EntropyData(m.Histogram, opt)
	}
	if err == nil {
		sol.Notes = append(sol.Notes, fmt.Sprintf("entropy reached: %.4f bits a sample with %d levels", sol.Entropy, len(sol.Values)))
	}
	return sol, err
}
