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

// amounted are recordings that share their designs, by their histogram.
type amounted struct {
	designs []made
	values  []float64
	counts  []int64
}

// amountsOf pools the recordings, or keeps each by itself where it has its own
// designs.
func (e *engine) amountsOf(surveys []*survey, sets [][]made) (out []amounted) {
	var all measure.Histogram
	for i, s := range surveys {
		s.all.AddTo(&all)
		if e.plan.HoldOut || i == len(surveys)-1 {
			values, counts := all.Sparse()
			out = append(out, amounted{sets[i], values, counts})
			all.Reset()
		}
	}
	return out
}

// snrAt is the pooled SNR of design number i at each gain in dB.
func snrAt(amounts []amounted, i int, gains []float64) []float64 {
	sums := make([]measure.Energies, len(gains))
	for _, a := range amounts {
		search := a.designs[i].search()
		for k, g := range gains {
			b := search.ErrorAt(a.values, a.counts, math.Pow(10, g/20))
			sums[k].Signal += b.Signal
			sums[k].Error += b.Error
		}
	}
	out := make([]float64, len(gains))
	for k := range sums {
		out[k] = sums[k].SNR()
	}
	return out
}

// curves sweeps the level of the pooled recordings, exactly from their
// histograms, and for 8-bit designs tests a sine and noise.
func (e *engine) curves(t *Traces, designs []Design, amounts []amounted) error {
	sweeps := make([]Curve, len(designs))
	err := inOrder(e.ctx, len(designs), e.plan.Workers,
		func(i int) (Curve, error) { return sweepOf(designs[i].Spec, i, amounts), nil },
		func(i int, c Curve) error { sweeps[i] = c; return nil })
	t.Sweep = sweeps
	for _, d := range designs {
		if d.Bits == 8 {
			zero := measure.ZeroDBm0(float64(d.Hi), loadOf(d))
			t.Sine = append(t.Sine, testCurve(d, measure.SineTest(d.Thresholds, d.Values, zero, measure.DistortionLevels)))
			t.Noise = append(t.Noise, testCurve(d, measure.NoiseTest(d.Thresholds, d.Values, zero, measure.DistortionLevels)))
		}
	}
	return err
}

// loadOf is the load capacity in dBm0 that ties the overload point to 0 dBm0:
// A-law's for A-law designs, mu-law's for all others.
func loadOf(d Design) float64 {
	if d.Family == "a-law" || d.Family == "g711-a" {
		return measure.LoadA
	}
	return measure.LoadMu
}

func sweepOf(spec string, i int, amounts []amounted) Curve {
	c := Curve{Design: spec, LevelDB: sweepLevels(), RangeSNR: sweepTarget}
	snr := snrAt(amounts, i, c.LevelDB)
	for _, v := range snr {
		c.SNRDB = append(c.SNRDB, Num(v))
	}
	c.RangeDB = Num(measure.DynamicRange(c.LevelDB, snr, sweepTarget).Width())
	return c
}

func testCurve(d Design, points []measure.LevelPoint) Curve {
	c := Curve{Design: d.Spec, RangeDB: Num(math.NaN())}
	for _, p := range points {
		c.LevelDB = append(c.LevelDB, p.LevelDBm0)
		c.SNRDB = append(c.SNRDB, Num(p.DB))
		c.LimitDB = append(c.LimitDB, Num(p.LimitDB))
	}
	return c
}
