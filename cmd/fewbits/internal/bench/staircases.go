package bench

import (
	"context"
	"errors"
	"fmt"
	"math"

	"fewbits/codec"
	"fewbits/codec/design"
	"fewbits/codec/family"
	"fewbits/measure"
	"fewbits/measure/model"
)

// Staircase is one design shown by itself, with its error under its model.
type Staircase struct {
	Design
	Model       string `json:"model"` // density that the figures below hold for
	MSE         Num    `json:"mse"`
	SNRDB       Num    `json:"snr_db"`
	EntropyBits Num    `json:"entropy_bits"`
	OverloadP   Num    `json:"overload_probability"`
	// Off are SNRs in dB when the real level is off by so many dB.
	Off []OffLevel `json:"off_level"`
	// BoundGapDB is how far the SNR lies below Shannon's lower bound at the
	// rate log2 N for the same model.
	BoundGapDB Num `json:"below_shannon_bound_db"`
	// HighRateGapDB is how far the MSE lies above Panter and Dite's for many
	// levels, dB; speech densities come from below, so negative at few levels.
	HighRateGapDB Num `json:"above_panter_dite_db"`
	// OverloadMSE is the part of the MSE beyond the overload points.
	OverloadMSE Num `json:"overload_mse"`
	// FrameSNRDB is what a segmental aim reached: the mean limited SNR of the
	// frames it was made on, dB; undefined for other aims.
	FrameSNRDB Num `json:"mean_frame_snr_db"`
	// Trace is the designer's convergence, a number a round, of what TraceOf
	// says; only where asked for.
	Trace   []float64 `json:"trace,omitempty"`
	TraceOf string    `json:"trace_of,omitempty"`
	// Stair is the staircase itself; Words the counts of the recordings' 65,536
	// words, nil without recordings.
	Stair *codec.Staircase `json:"-"`
	Words []float64        `json:"-"`
}

// OffLevel is the SNR at another level than the one designed for.
type OffLevel struct {
	DB    float64 `json:"db"`
	SNRDB Num     `json:"snr_db"`
}

// MakeStaircases makes designs without coding anything: on plan.Inputs where
// there are any, otherwise for a model at the given rms (full scale = 1.0).
// Designs without a model of their own are judged by the named one.
func MakeStaircases(ctx context.Context, plan Plan, judge string, rms float64) ([]Staircase, []Refusal, error) {
	m, words, who, refused, err := materialFor(ctx, plan, rms)
	if err != nil {
		return nil, refused, err
	}
	m.Trace = plan.Trace
	var out []Staircase
	for _, spec := range plan.Specs {
		got, err := spec.Family.Make(spec, m)
		if err != nil {
			return nil, refused, fmt.Errorf("design %q: %w", spec.Text, err)
		}
		s := Staircase{Design: finish(spec, got, who).Design, Model: got.From, Stair: got.Stair, Words: words}
		s.Design.Name, s.FrameSNRDB = spec.Name(), Num(math.NaN())
		if spec.Need() == family.FramedData {
			s.FrameSNRDB = Num(got.Solution.Aim)
		}
		if sol := got.Solution; sol != nil && plan.Trace {
			s.Trace, s.TraceOf = sol.Trace, sol.TraceOf
		}
		d := got.Density
		if words != nil && d == nil {
			s.judgeData(m, made{stair: got.Stair}.search())
			out = append(out, s)
			continue
		}
		if d == nil {
			if d, err = model.OfRMS(judge, m.RMS); err != nil {
				return nil, refused, err
			}
			s.Model = fmt.Sprintf("%s at %.1f dBov", judge, 20*math.Log10(m.RMS))
		}
		s.judge(d)
		out = append(out, s)
	}
	return out, refused, nil
}

// materialFor is what there is to design on.
func materialFor(ctx context.Context, plan Plan, rms float64) (family.Material, []float64, string, []Refusal, error) {
	if len(plan.Inputs) == 0 {
		m := family.Material{RMS: rms, ActiveRMS: rms, Density: func(from, scale string) (design.Density, string, error) {
			if scale == "fit" || from == "best" || from == "generalized-gaussian" || from == "free-gamma" {
				return nil, "", errors.New("a fitted model needs recordings: name some with --like")
			}
			return densityOf(from, rms, "at the level asked for")
		}, Frames: func(float64) (*design.Frames, error) { return nil, errors.New("frames need --like RECORDING") }}
		return m, nil, "no recordings", nil, nil
	}
	e := newEngine(ctx, plan)
	surveys, refused, err := e.openAll(plan.Inputs, map[string]bool{})
	if err != nil {
		return family.Material{}, nil, "", refused, err
	}
	defer closeAll(surveys)
	if len(surveys) == 0 {
		return family.Material{}, nil, "", refused, noneLeft(refused)
	}
	p := newPool(surveys)
	if err := e.refine(p); err != nil {
		return family.Material{}, nil, "", refused, err
	}
	m, err := p.material()
	words := make([]float64, 0, 1<<16)
	for _, n := range p.hist.Counts() {
		words = append(words, float64(n))
	}
	return m, words, "the recordings of --like", refused, err
}

// judge fills in what the density says of the staircase.
func (s *Staircase) judge(d design.Density) {
	mse, entropy := design.EvaluateDensity(d, s.Thresholds, s.Values)
	s.MSE, s.EntropyBits = Num(mse), Num(entropy)
	s.SNRDB = Num(design.Decibels(design.Power(d), mse))
	s.OverloadP, s.OverloadMSE = s.beyond(d)
	s.BoundGapDB = Num(design.Decibels(mse, design.ShannonBound(d, math.Log2(float64(s.Levels)))))
	n := float64(s.Levels)
	s.HighRateGapDB = Num(design.Decibels(mse, design.PanterDite(d)/n/n))
	for _, db := range offLevels {
		s.Off = append(s.Off, OffLevel{DB: db, SNRDB: Num(design.SNRAt(d, s.Thresholds, s.Values, db))})
	}
}

// offLevels are how far the level may be off from the one designed for, dB.
var offLevels = []float64{-12, -6, 6, 12}

// judgeData fills in what the recordings say of the staircase.
func (s *Staircase) judgeData(m family.Material, search *measure.Search) {
	h := m.Histogram
	counts := make([]int64, len(h.Weights))
	var power, over, overMSE, total float64
	for i, w := range h.Weights {
		counts[i] = int64(w)
		x := h.Values[i]
		power += w * x * x
		total += w
	}
	indices := make([]int64, len(s.Values))
	var sum float64
	for i, x := range h.Values {
		k := search.Index(x)
		e := x - s.Values[k]
		square := h.Weights[i] * e * e
		if m.Within != nil {
			square += h.Weights[i] * m.Within[i]
		}
		sum += square
		if x < float64(s.Lo) || x > float64(s.Hi) {
			over += h.Weights[i]
			overMSE += square
		}
		indices[k] += counts[i]
	}
	s.Model = "the recordings"
	s.MSE, s.SNRDB = Num(sum/total), Num(10*math.Log10(power/sum))
	s.EntropyBits, s.OverloadP, s.OverloadMSE = Num(measure.Entropy(indices)), Num(over/total), Num(overMSE/total)
	s.BoundGapDB, s.HighRateGapDB = Num(math.NaN()), Num(math.NaN())
	for _, db := range offLevels {
		s.Off = append(s.Off, OffLevel{DB: db, SNRDB: Num(search.SNRAt(h.Values, counts, db))})
	}
}

// beyond is the probability beyond the overload bounds and its part of the
// mean squared error.
func (s *Staircase) beyond(d design.Density) (p, mse Num) {
	lo, hi := d.Support()
	for _, side := range [2]struct{ a, b, y float64 }{
		{lo, math.Min(float64(s.Lo), hi), s.Values[0]},
		{math.Max(float64(s.Hi), lo), hi, s.Values[len(s.Values)-1]},
	} {
		if side.a < side.b {
			q, e := design.About(d, side.a, side.b, side.y)
			p, mse = p+Num(q), mse+Num(e)
		}
	}
	return p, mse
}
