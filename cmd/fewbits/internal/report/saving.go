package report

import (
	"fmt"
	"math"

	"fewbits/cmd/fewbits/internal/bench"
)

// savingSentences say what the winner saves in bits.
func (b *book) savingSentences(winner string) (out []string) {
	for _, family := range []string{"mu-law", "uniform"} {
		if kin(winner) == family {
			continue
		}
		if s, ok := b.saving(winner, family); ok {
			out = append(out, b.savingSentence(s, family))
		} else if most, ok := b.outOfReach(winner, family); ok {
			out = append(out, fmt.Sprintf("No %s design here reaches its %s, not even %d bits: it saves more than %s.",
				family, b.Leading, most, plural(most-b.design[winner].Bits, "bit", "bits")))
		}
	}
	return out
}

func (b *book) savingSentence(s bench.Saving, family string) string {
	bits, side := fixed(bench.Num(math.Abs(float64(s.Bits))), 1), "fewer"
	if s.Bits < 0 {
		side = "more"
	}
	text := fmt.Sprintf("For the same %s it needs %s bits a sample %s than %s", b.Leading, bits, side, family)
	if bits == "0.0" {
		text = fmt.Sprintf("For the same %s it needs as many bits as %s", b.Leading, family)
	}
	if between := span(s.Interval); between != "" {
		text += " (95 %: " + between + ")"
	}
	return text + ", interpolated."
}

// saving is the run's own where it has one, else read off the pooled figures
// of the family's plain designs, without interval.
func (b *book) saving(spec, family string) (bench.Saving, bool) {
	for _, s := range b.Savings {
		if s.Design == spec && s.Against == family {
			return s, s.Bits.Defined()
		}
	}
	x, y := b.plainLine(family)
	want := float64(b.figure(spec, b.Leading))
	for i := 1; i < len(y); i++ {
		if y[i-1] <= want && want <= y[i] && y[i] > y[i-1] {
			at := x[i-1] + (x[i]-x[i-1])*(want-y[i-1])/(y[i]-y[i-1])
			none := bench.Num(nan)
			return bench.Saving{Bits: bench.Num(at - float64(b.design[spec].Bits)), Interval: [2]bench.Num{none, none}}, true
		}
	}
	return bench.Saving{}, false
}

// outOfReach tells whether a family's plain designs of more bits all stay below
// the winner, and how many bits the largest has.
func (b *book) outOfReach(spec, family string) (most int, ok bool) {
	x, y := b.plainLine(family)
	want := float64(b.figure(spec, b.Leading))
	for i := range y {
		if y[i] >= want {
			return 0, false
		}
		most = int(x[i])
	}
	return most, most > b.design[spec].Bits
}

// plainLine is bits and leading figure of a family's designs without further
// keys, by bits.
func (b *book) plainLine(family string) (x, y []float64) {
	for _, d := range b.ranked() {
		if kin(d.Spec) == family && b.figure(d.Spec, b.Leading).Defined() {
			x, y = append(x, float64(d.Bits)), append(y, float64(b.figure(d.Spec, b.Leading)))
		}
	}
	return x, y
}
