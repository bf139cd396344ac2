package bench

import (
	"fmt"
	"math"
	"slices"

	"fewbits/codec/design"
	"fewbits/measure"
	"fewbits/measure/model"
)

// lossLevels is the size of the tables that the design loss compares.
const lossLevels = 64

// fitClip fits every model to one clip's samples, all and in range.
func (e *engine) fitClip(s *survey) {
	e.tokens <- struct{}{}
	defer func() { <-e.tokens }()
	inRange := later(func() ([]fitted, error) { return fitModels(s.in, s.clip.LSB, "in-range"), nil })
	fits := fitModels(s.hist, s.clip.LSB, "all")
	s.fits, _ = inRange()
	for _, f := range append(fits, s.fits...) {
		s.clip.Fits = append(s.clip.Fits, f.Fit)
	}
}

// fitted is one model with its entry for the results; model is nil where the
// fit is undefined.
type fitted struct {
	Fit
	model model.Model
}

// fitModels fits all models, the most likely first, and holds the table of
// each against the best mirror table for the data. Data finer than the 16-bit
// grid are fitted as binned on it.
func fitModels(h *measure.Histogram, lsb float64, over string) []fitted {
	values, counts := h.Sparse()
	lsb = max(lsb, math.Ldexp(1, -15))
	all, err := model.FitAll(model.Data{Values: values, Counts: counts, LSB: lsb, Lo: -1, Hi: 1 - lsb})
	if err != nil || len(values) < 2 {
		return nil
	}
	data := histogramOf(values, counts)
	best, err := design.ExactData(data, lossLevels, design.Mirror)
	if err != nil {
		return nil
	}
	var out []fitted
	for _, f := range all {
		shape := Num(f.Shape)
		if f.Parameters < 2 {
			shape = Num(math.NaN())
		}
		entry := Fit{
			Model: f.Name, Over: over, Shape: shape, ShapeSE: Num(f.ShapeError), Scale: Num(f.Scale), ScaleSE: Num(f.ScaleError),
			RMS: Num(f.RMS), LogLik: Num(f.LogLik), AIC: Num(f.AIC), KS: Num(f.KS), Samples: h.Total(),
			DesignLossDB: Num(math.NaN()),
		}
		if f.Model != nil {
			entry.DesignLossDB = Num(designLoss(f.Model, data, best.MSE))
		}
		out = append(out, fitted{entry, f.Model})
	}
	slices.SortStableFunc(out, func(a, b fitted) int {
		switch {
		case a.model == nil || b.model == nil:
			return boolInt(a.model == nil) - boolInt(b.model == nil)
		case a.LogLik > b.LogLik:
			return -1
		case a.LogLik < b.LogLik:
			return 1
		}
		return 0
	})
	return out
}

func boolInt(b bool) int {
	if b {
		return 1
	}
	return 0
}

// histogramOf is a sparse histogram as designers want it.
func histogramOf(values []float64, counts []int64) design.Histogram {
	h := design.Histogram{Values: values, Weights: make([]float64, len(counts))}
	for i, n := range counts {
		h.Weights[i] = float64(n)
	}
	return h
}

// designLoss is how many dB the model's table falls short of the best mirror
// table for the data; NaN where either leaves no error.
func designLoss(m model.Model, data design.Histogram, best float64) float64 {
	sol, err := design.LloydMax(m, lossLevels, design.Mirror)
	if err != nil || !(best > 0) {
		return math.NaN()
	}
	mse, _ := design.EvaluateData(data, sol.Thresholds, sol.Values)
	return 10 * math.Log10(mse/best)
}

// fit is the pooled fit of the named model to the in-range samples; "best"
// takes the least AIC.
func (p *pool) fit(name string) (model.Model, string, error) {
	fits := p.fits()
	best := -1
	for i, f := range fits {
		if f.model != nil && (f.Model == name || name == "best") && (best < 0 || f.AIC < fits[best].AIC) {
			best = i
		}
	}
	if best < 0 {
		return nil, "", fmt.Errorf("from=%s: no fit: the recordings have too few samples in range; use scale=rms with laplacian, gaussian or gamma", name)
	}
	f := fits[best]
	how := f.Model
	if f.Shape.Defined() {
		how = fmt.Sprintf("%s of shape %.3f", f.Model, float64(f.Shape))
	}
	return f.model, how + " fitted to the samples in range", nil
}

// curvesOf draws the pooled models over magnitude, and Shannon's bounds.
func (t *Traces) curvesOf(fits []fitted) {
	for _, f := range fits {
		if f.model == nil {
			continue
		}
		c := ModelCurve{Fit: f.Fit}
		for k := -15 * 4; k <= 0; k++ {
			x := math.Exp2(float64(k) / 4)
			c.Magnitude, c.Density = append(c.Magnitude, x), append(c.Density, Num(f.model.PDF(x)))
		}
		t.Models = append(t.Models, c)
		b := Bound{Model: f.Model}
		for bits := 1.0; bits <= 12; bits++ {
			b.Bits = append(b.Bits, bits)
			b.SNRDB = append(b.SNRDB, Num(10*math.Log10(design.Power(f.model)/design.ShannonBound(f.model, bits))))
		}
		t.Bounds = append(t.Bounds, b)
	}
}
