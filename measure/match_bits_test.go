package measure

import (
	"math"
	"math/rand/v2"
	"testing"
)

// TestMatchBitsByHand: a family of 10, 22, 34 dB at 4, 6, 8 bits on two units
// of weights 1 and 3; the design has 15 and 17 dB, in the mean 16.5, which the
// family has at 4 + 2 (16.5 - 10)/12 bits. As observations (see Units) that is
// 15.75 and 17.25, standard error 0.75, so that the ends lie Student's t times
// 0.75 dB away, at 6 dB a bit.
func TestMatchBitsByHand(t *testing.T) {
	u := Units{Values: [][]float64{{10, 10}, {22, 22}, {34, 34}, {15, 17}}, Weights: []float64{1, 3}}
	got := MatchBits([]float64{4, 6, 8}, u, 1)
	near(t, "bits", got.Bits, 4+2*6.5/12, 1e-12)
	const se = 0.75
	near(t, "upper end", got.Hi, got.Bits+12.706204736*se/6, 1e-5)
	if !math.IsNaN(got.Lo) {
		t.Errorf("the lower end, %g, lies below the bits measured", got.Lo)
	}
	if r := MatchBits([]float64{4, 6, 8}, Units{Values: [][]float64{{10, 10}, {22, 22}, {34, 34}, {35, 36}}}, 1); !math.IsNaN(r.Bits) {
		t.Errorf("extrapolated to %g bits", r.Bits)
	}
	if r := MatchBits([]float64{4, 6}, Units{Values: [][]float64{{10}, {22}, {16}}}, 1); r.Bits != 5 || !math.IsNaN(r.Lo) || !math.IsNaN(r.Hi) {
		t.Errorf("one unit: %+v", r)
	}
	if r := MatchBits([]float64{4, 6}, Units{Values: [][]float64{{10, 11, 14}, {22, 23, 26}, {16, 17, 20}}}, 1); math.Abs(r.Lo-5) > 1e-5 || math.Abs(r.Hi-5) > 1e-5 {
		t.Errorf("always the same difference: %+v", r)
	}
}

// TestMatchBitsCoverage: units of their own level, slope and noise around
// known curves; 95 % intervals hold the true bits that often, to three standard
// deviations of the count, with Student's t and with the bootstrap. Every unit
// counts: leaving out those that miss the figure would bias the answer.
func TestMatchBitsCoverage(t *testing.T) {
	for _, n := range []int{6, 40} {
		const runs = 400
		const truth = 5.5 // 6 dB a bit from 10 dB at 4 bits on: 19 dB
		hit := 0
		for run := range runs {
			r := rand.New(rand.NewPCG(uint64(n), uint64(run)))
			u := Units{Values: make([][]float64, 5)}
			for range n {
				level, lead := 5*r.NormFloat64(), 19+2*r.NormFloat64()
				for k := range 4 {
					u.Values[k] = append(u.Values[k], 10+12*float64(k)+level+0.5*r.NormFloat64())
				}
				u.Values[4] = append(u.Values[4], lead+level)
			}
			got := MatchBits([]float64{4, 6, 8, 10}, u, uint64(run))
			if got.Lo <= truth && truth <= got.Hi {
				hit++
			}
		}
		t.Logf("%d units: %d of %d", n, hit, runs)
		if sd := math.Sqrt(0.95 * 0.05 * runs); math.Abs(float64(hit)-0.95*runs) > 3*sd {
			t.Errorf("%d units: %d of %d intervals hold the true bits", n, hit, runs)
		}
	}
}

func BenchmarkMatchBits(b *testing.B) {
	r := rand.New(rand.NewPCG(3, 3))
	for _, n := range []int{29, 100} {
		u := Units{Values: make([][]float64, 4)}
		for k := range u.Values {
			for range n {
				u.Values[k] = append(u.Values[k], []float64{10, 22, 34, 20}[k]+r.NormFloat64())
			}
		}
		name := "t"
		if n >= BootstrapFrom {
			name = "bootstrap"
		}
		b.Run(name, func(b *testing.B) {
			for b.Loop() {
				MatchBits([]float64{4, 6, 8}, u, 1)
			}
		})
	}
}
