package bench

import (
	"context"
	"math"
	"slices"

	"fewbits/codec"
	"fewbits/measure"
)

// LevelRun is how designs stand up to other levels than the recordings' own.
type LevelRun struct {
	Schema  string        `json:"schema"`
	Target  float64       `json:"target_db"` // SNR that the dynamic range is told for
	Designs []LevelDesign `json:"designs"`
	// SineSource and NoiseSource say where the limits come from.
	SineSource  string    `json:"sine_source"`
	NoiseSource string    `json:"noise_source"`
	Refused     []Refusal `json:"refused"`
	Warnings    []string  `json:"warnings"`
}

// LevelDesign is one design against level. Levels are gains in dB around the
// recordings' own.
type LevelDesign struct {
	Spec     string    `json:"spec"`
	Bits     int       `json:"bits"`
	MadeOn   string    `json:"made_on"`
	LevelDB  []float64 `json:"level_db"`
	SNRDB    []Num     `json:"snr_db"`    // exact, from the histogram
	SegSNRDB []Num     `json:"segsnr_db"` // customary limits, frames in range
	// Range is the span of levels with at least Target dB of SNR; an end at
	// the sweep's own end is open.
	RangeLo Num  `json:"range_lo_db"`
	RangeHi Num  `json:"range_hi_db"`
	RangeDB Num  `json:"range_db"`
	OpenLo  bool `json:"range_open_below"`
	OpenHi  bool `json:"range_open_above"`
	// The tests are of the design made on everything where clips have their
	// own (--hold-out).
	Sine  []TestPoint `json:"sine,omitempty"`
	Noise []TestPoint `json:"noise,omitempty"`
	// ZeroDBm0 is the rms of 0 dBm0 that the tests used, full scale = 1.0, from
	// the design's own overload point.
	ZeroDBm0 Num `json:"zero_dbm0"`
}

// TestPoint is one level of a sine or noise test.
type TestPoint struct {
	LevelDBm0 float64 `json:"level_dbm0"`
	DB        Num     `json:"db"`
	LimitDB   Num     `json:"limit_db"`
	MarginDB  Num     `json:"margin_db"`
}

// SweepLevels measures every design over levels from -60 to +10 dB around the
// recordings' own, in steps of 5 dB.
func SweepLevels(ctx context.Context, plan Plan, target float64) (*LevelRun, error) {
	plan.Audio, plan.FramesCSV = false, false
	e := newEngine(ctx, plan)
	surveys, refused, err := e.openAll(plan.Inputs, map[string]bool{})
	if err != nil {
		return nil, err
	}
	defer closeAll(surveys)
	if len(surveys) == 0 {
		return nil, noneLeft(refused)
	}
	r := e.results(surveys, refused)
	sets, err := e.designs(r, surveys)
	if err != nil {
		return nil, err
	}
	run := &LevelRun{Schema: "fewbits/sweep/1", Target: target, Refused: r.Refused, Warnings: r.Warnings,
		SineSource: measure.SineLimitSource, NoiseSource: measure.NoiseLimitSource}
	amounts := e.amountsOf(surveys, sets)
	err = inOrder(ctx, len(r.Designs), plan.Workers,
		func(i int) (LevelDesign, error) { return levelDesign(r.Designs[i], i, amounts, target), nil },
		func(_ int, d LevelDesign) error { run.Designs = append(run.Designs, d); return nil })
	if err != nil {
		return nil, err
	}
	return run, e.segmentalAtLevels(run, surveys, sets)
}

// coarse: the run tells every fifth of the levels, 1 dB apart, that the range is
// found on.
const coarse = 5

// levelDesign fills in what the histograms and the closed forms give for
// design number i.
func levelDesign(d Design, i int, amounts []amounted, target float64) LevelDesign {
	out := LevelDesign{Spec: d.Spec, Bits: d.Bits, MadeOn: d.MadeOn, ZeroDBm0: Num(math.NaN())}
	fine := sweepLevels()
	snr := snrAt(amounts, i, fine)
	for k := 0; k < len(fine); k += coarse {
		out.LevelDB, out.SNRDB = append(out.LevelDB, fine[k]), append(out.SNRDB, Num(snr[k]))
	}
	span := measure.DynamicRange(fine, snr, target)
	out.RangeLo, out.RangeHi, out.RangeDB = Num(span.Lo), Num(span.Hi), Num(span.Width())
	out.OpenLo, out.OpenHi = span.OpenLo, span.OpenHi
	if d.Bits == 8 {
		zero := measure.ZeroDBm0(float64(d.Hi), loadOf(d))
		out.ZeroDBm0 = Num(zero)
		out.Sine = testPoints(measure.SineTest(d.Thresholds, d.Values, zero, measure.DistortionLevels))
		out.Noise = testPoints(measure.NoiseTest(d.Thresholds, d.Values, zero, measure.DistortionLevels))
	}
	return out
}

func testPoints(points []measure.LevelPoint) (out []TestPoint) {
	for _, p := range points {
		out = append(out, TestPoint{LevelDBm0: p.LevelDBm0, DB: Num(p.DB), LimitDB: Num(p.LimitDB), MarginDB: Num(p.MarginDB)})
	}
	return out
}

// segmentalAtLevels codes the recordings once per level. Instead of raising
// them by a gain, each staircase is lowered by it, which gives the same SNR.
func (e *engine) segmentalAtLevels(run *LevelRun, surveys []*survey, sets [][]made) error {
	var total int64
	for _, s := range surveys {
		total += s.levels.Samples
	}
	levels := run.Designs[0].LevelDB
	e.begin("sweeping", total*int64(len(levels)))
	for _, g := range levels {
		scaled := scaledFor(sets, e.plan.HoldOut, math.Pow(10, g/20))
		sums := make([]measure.Tally, len(run.Designs))
		err := inOrder(e.ctx, len(surveys), e.plan.Workers,
			func(i int) (*outcome, error) { return e.measure(surveys[i], scaled(i)) },
			func(_ int, o *outcome) error {
				for d := range sums {
					sums[d].Merge(&o.tallies[d])
				}
				return nil
			})
		if err != nil {
			return err
		}
		for d := range sums {
			v := sums[d].Segmental[measure.SegInRange]
			run.Designs[d].SegSNRDB = append(run.Designs[d].SegSNRDB, Num(v.Mean()))
		}
	}
	return nil
}

// scaledFor gives the designs of recording i lowered by a gain: made once where
// all share them.
func scaledFor(sets [][]made, own bool, gain float64) func(i int) []made {
	lower := func(designs []made) []made {
		out := slices.Clone(designs)
		for i := range out {
			out[i].stair = lowered(out[i].stair, gain)
			out[i].grid = out[i].stair.Grid()
		}
		return out
	}
	if own {
		return func(i int) []made { return lower(sets[i]) }
	}
	shared := lower(sets[0])
	return func(int) []made { return shared }
}

// lowered divides a staircase by a gain.
func lowered(s *codec.Staircase, gain float64) *codec.Staircase {
	out := &codec.Staircase{
		Thresholds: make([]float64, len(s.Thresholds)), Values: make([]float64, len(s.Values)),
		Lo: s.Lo / gain, Hi: s.Hi / gain, Tie: s.Tie,
	}
	for i, t := range s.Thresholds {
		out.Thresholds[i] = t / gain
	}
	for i, y := range s.Values {
		out.Values[i] = y / gain
	}
	return out
}
