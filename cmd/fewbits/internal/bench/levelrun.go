package bench

import (
	"context"
	"math"

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
}

// LevelDesign is one design against level. Levels are gains in dB around the
// recordings' own.
type LevelDesign struct {
	Spec     string    `json:"spec"`
	Bits     int       `json:"bits"`
	LevelDB  []float64 `json:"level_db"`
	SNRDB    []Num     `json:"snr_db"`    // exact, from the histogram
	SegSNRDB []Num     `json:"segsnr_db"` // customary limits, frames in range
	// Range is the span of levels with at least Target dB of SNR; an end at
	// the sweep's own end is open.
	RangeLo Num         `json:"range_lo_db"`
	RangeHi Num         `json:"range_hi_db"`
	RangeDB Num         `json:"range_db"`
	OpenLo  bool        `json:"range_open_below"`
	OpenHi  bool        `json:"range_open_above"`
	Sine    []TestPoint `json:"sine,omitempty"`
	Noise   []TestPoint `json:"noise,omitempty"`
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
	designs, err := e.makeOn(surveys, "the recordings it is tested on")
	if err != nil {
		return nil, err
	}
	run := &LevelRun{Schema: "fewbits/sweep/1", Target: target, Refused: append([]Refusal{}, refused...),
		SineSource: measure.SineLimitSource, NoiseSource: measure.NoiseLimitSource}
	var all measure.Histogram
	for _, s := range surveys {
		all.Merge(s.hist)
	}
	values, counts := all.Sparse()
	for _, d := range designs {
		run.Designs = append(run.Designs, levelDesign(d, values, counts, target))
	}
	return run, e.segmentalAtLevels(run, surveys, designs)
}

// levelDesign fills in what the histogram and the closed forms give.
func levelDesign(d made, values []float64, counts []int64, target float64) LevelDesign {
	out := LevelDesign{Spec: d.Spec, Bits: d.Bits, ZeroDBm0: Num(math.NaN())}
	for g := -60.0; g <= 10; g += 5 {
		out.LevelDB = append(out.LevelDB, g)
	}
	search := d.search()
	for _, v := range search.Sweep(values, counts, out.LevelDB) {
		out.SNRDB = append(out.SNRDB, Num(v))
	}
	fine := sweepLevels()
	span := measure.DynamicRange(fine, search.Sweep(values, counts, fine), target)
	out.RangeLo, out.RangeHi, out.RangeDB = Num(span.Lo), Num(span.Hi), Num(span.Width())
	out.OpenLo, out.OpenHi = span.OpenLo, span.OpenHi
	if d.Bits == 8 {
		zero := measure.ZeroDBm0(d.stair.Hi, loadOf(d))
		out.ZeroDBm0 = Num(zero)
		out.Sine = testPoints(measure.SineTest(d.stair.Thresholds, d.stair.Values, zero, measure.DistortionLevels))
		out.Noise = testPoints(measure.NoiseTest(d.stair.Thresholds, d.stair.Values, zero, measure.DistortionLevels))
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
func (e *engine) segmentalAtLevels(run *LevelRun, surveys []*survey, designs []made) error {
	var total int64
	for _, s := range surveys {
		total += s.levels.Samples
	}
	levels := run.Designs[0].LevelDB
	e.begin("sweeping", total*int64(len(levels)))
	for _, g := range levels {
		scaled := make([]made, len(designs))
		for i, d := range designs {
			scaled[i] = d
			scaled[i].stair = lowered(d.stair, math.Pow(10, g/20))
			scaled[i].grid = scaled[i].stair.Grid()
		}
		sums := make([]measure.Tally, len(designs))
		err := inOrder(e.ctx, len(surveys), e.plan.Workers,
			func(i int) (*outcome, error) { return e.measure(surveys[i], scaled) },
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
