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
	var out []Staircase
	for _, spec := range plan.Specs {
		got, err := spec.Family.Make(spec, m)
		if err != nil {
			return nil, refused, fmt.Errorf("design %q: %w", spec.Text, err)
		}
		s := Staircase{Design: finish(spec, got, who).Design, Model: got.From, Stair: got.Stair, Words: words}
		s.Design.Name = spec.Name()
		d := got.Density
		if words != nil && d == nil {
			s.judgeData(m.Histogram, made{stair: got.Stair}.search())
			out = append(out, s)
			continue
		}
		if d == nil {
			if d, err = model.OfRMS(judge, m.RMS); err != nil {
				return nil, refused, err
			}
			s.Model = fmt.Sprintf("%s at %.1f dBov", judge, 20*math.Log10(m.RMS))
		}
		s.judge(d, judge, m.RMS)
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
		}, Frames: func() (*design.Frames, error) { return nil, errors.New("frames need --like RECORDING") }}
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
	m, err := p.material()
	words := make([]float64, 0, 1<<16)
	for _, n := range p.hist.Counts() {
		words = append(words, float64(n))
	}
	return m, words, "the recordings of --like", refused, err
}

// judge fills in what the density says of the staircase.
func (s *Staircase) judge(d design.Density, judge string, rms float64) {
	mse, entropy := design.EvaluateDensity(d, s.Thresholds, s.Values)
	power := secondMoment(d)
	s.MSE, s.EntropyBits, s.SNRDB = Num(mse), Num(entropy), Num(10*math.Log10(power/mse))
	s.OverloadP = Num(outside(d, float64(s.Lo), float64(s.Hi)))
	s.BoundGapDB = Num(math.NaN())
	if m, ok := d.(model.Model); ok {
		// D >= 2^(2h) / (2 pi e) 2^(-2R) (C. E. Shannon 1959).
		bound := math.Exp2(2*m.Entropy()) / (2 * math.Pi * math.E) / float64(s.Levels) / float64(s.Levels)
		s.BoundGapDB = Num(10 * math.Log10(mse/bound))
	}
	for _, db := range []float64{-12, -6, 6, 12} {
		k := math.Pow(10, db/20)
		s.Off = append(s.Off, OffLevel{DB: db, SNRDB: Num(snrScaled(d, s.Thresholds, s.Values, k, power))})
	}
}

// judgeData fills in what the recordings say of the staircase.
func (s *Staircase) judgeData(h design.Histogram, search *measure.Search) {
	counts := make([]int64, len(h.Weights))
	var power, over, total float64
	for i, w := range h.Weights {
		counts[i] = int64(w)
		x := h.Values[i]
		power += w * x * x
		total += w
		if x < float64(s.Lo) || x > float64(s.Hi) {
			over += w
		}
	}
	indices := make([]int64, len(s.Values))
	var sum float64
	for i, x := range h.Values {
		k := search.Index(x)
		e := x - s.Values[k]
		sum += h.Weights[i] * e * e
		indices[k] += counts[i]
	}
	s.Model = "the recordings"
	s.MSE, s.SNRDB = Num(sum/total), Num(10*math.Log10(power/sum))
	s.EntropyBits, s.OverloadP, s.BoundGapDB = Num(measure.Entropy(indices)), Num(over/total), Num(math.NaN())
	for _, db := range []float64{-12, -6, 6, 12} {
		s.Off = append(s.Off, OffLevel{DB: db, SNRDB: Num(search.SNRAt(h.Values, counts, db))})
	}
}

// snrScaled is the SNR when the amplitude is k times what d says: the
// staircase shrinks by k instead.
func snrScaled(d design.Density, thresholds, values []float64, k, power float64) float64 {
	t, y := make([]float64, len(thresholds)), make([]float64, len(values))
	for i := range t {
		t[i] = thresholds[i] / k
	}
	for i := range y {
		y[i] = values[i] / k
	}
	mse, _ := design.EvaluateDensity(d, t, y)
	return 10 * math.Log10(power/mse)
}

// secondMoment is the mean square of the density.
func secondMoment(d design.Density) float64 {
	mse, _ := design.EvaluateDensity(d, nil, []float64{0})
	return mse
}

// outside is the probability beyond the overload bounds.
func outside(d design.Density, lo, hi float64) (p float64) {
	a, b := d.Support()
	if lo > a {
		q, _, _ := d.Cell(a, lo)
		p += q
	}
	if hi < b {
		q, _, _ := d.Cell(hi, b)
		p += q
	}
	return p
}
