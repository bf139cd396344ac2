package report

import "fmt"

// savingSentences say what a winner saves in bits; where the run could not
// interpolate that, no number is said.
func (b *book) savingSentences(winner string) (out []string) {
	if b.design[winner] == nil {
		return nil
	}
	for _, family := range []string{"mu-law", "uniform"} {
		said := false
		for _, s := range b.Savings {
			if s.Design == winner && s.Against == family && s.Bits.Defined() {
				out, said = append(out, s.Sentence(b.Leading)), true
			}
		}
		if most, ok := b.outOfReach(winner, family); ok && !said && kin(winner) != family {
			out = append(out, fmt.Sprintf("No %s design here reaches its %s, not even %d bits.", family, b.Leading, most))
		}
	}
	return out
}

// outOfReach tells whether a family's plain designs all stay below the winner
// though one has more bits, and how many the largest has.
func (b *book) outOfReach(spec, family string) (most int, ok bool) {
	want := b.figure(spec, b.Leading)
	for _, d := range b.ranked() {
		v := b.figure(d.Spec, b.Leading)
		if kin(d.Spec) != family || !v.Defined() {
			continue
		}
		if v >= want {
			return 0, false
		}
		most = d.Bits
	}
	return most, most > b.design[spec].Bits
}
