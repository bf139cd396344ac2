package bench

import (
	"math"

	"fewbits/codec"
	"fewbits/measure"
)

// sweepTarget is the SNR that the dynamic range is told for, dB: that which
// the sine mask of ITU-T G.712 keeps down to -40 dBm0 (second-hand), rounded.
const sweepTarget = 25

// sweepLevels are gains in dB around the recordings' own level.
func sweepLevels() (out []float64) {
	for g := -60.0; g <= 10; g++ {
		out = append(out, g)
	}
	return out
}

// search prepares a design for samples off the 16-bit grid.
func (d made) search() *measure.Search {
	s := d.stair
	return measure.NewSearch(s.Thresholds, s.Values, s.Lo, s.Hi, s.Tie == codec.TieOut)
}

// curves sweeps the level of the pooled recordings, exactly from their
// histogram, and for 8-bit designs tests a sine and noise.
func (e *engine) curves(t *Traces, designs []made, all *measure.Histogram) error {
	values, counts := all.Sparse()
	sweeps := make([]Curve, len(designs))
	err := inOrder(e.ctx, len(designs), e.plan.Workers,
		func(i int) (Curve, error) { return sweepOf(designs[i], values, counts), nil },
		func(i int, c Curve) error { sweeps[i] = c; return nil })
	t.Sweep = sweeps
	for _, d := range designs {
		if d.Bits == 8 {
			zero := measure.ZeroDBm0(d.stair.Hi, loadOf(d))
			t.Sine = append(t.Sine, testCurve(d, measure.SineTest(d.stair.Thresholds, d.stair.Values, zero, measure.DistortionLevels)))
			t.Noise = append(t.Noise, testCurve(d, measure.NoiseTest(d.stair.Thresholds, d.stair.Values, zero, measure.DistortionLevels)))
		}
	}
	return err
}

// loadOf is the load capacity in dBm0 that ties the overload point to 0 dBm0:
// A-law's for A-law designs, mu-law's for all others.
func loadOf(d made) float64 {
	if d.Family == "a-law" || d.Family == "g711-a" {
		return measure.LoadA
	}
	return measure.LoadMu
}

func sweepOf(d made, values []float64, counts []int64) Curve {
	c := Curve{Design: d.Spec, LevelDB: sweepLevels(), RangeSNR: sweepTarget}
	snr := d.search().Sweep(values, counts, c.LevelDB)
	for _, v := range snr {
		c.SNRDB = append(c.SNRDB, Num(v))
	}
	c.RangeDB = Num(measure.DynamicRange(c.LevelDB, snr, sweepTarget).Width())
	return c
}

func testCurve(d made, points []measure.LevelPoint) Curve {
	c := Curve{Design: d.Spec, RangeDB: Num(math.NaN())}
	for _, p := range points {
		c.LevelDB = append(c.LevelDB, p.LevelDBm0)
		c.SNRDB = append(c.SNRDB, Num(p.DB))
		c.LimitDB = append(c.LimitDB, Num(p.LimitDB))
	}
	return c
}
