package bench

import (
	"fmt"
	"slices"

	"fewbits/measure"
)

// plainFamilies are what savings are told against.
var plainFamilies = []string{"mu-law", "uniform"}

// savings tells how many bits the winners save against the plain families at
// equal leading figure, where the family's numbers of bits reach it.
func savings(r *Results) (out []Saving) {
	for _, v := range r.Verdicts {
		winner := slices.IndexFunc(r.Designs, func(d Design) bool { return d.Spec == v.Winners[r.Leading] })
		for _, family := range plainFamilies {
			if winner < 0 || familyOf(r.Designs[winner].Spec) == family {
				continue
			}
			if s, ok := saving(r, winner, family); ok {
				out = append(out, s)
			}
		}
	}
	return out
}

// saving matches one design with a family; ok is false where it has fewer than
// two numbers of bits or does not reach the design's figure within them.
func saving(r *Results, design int, family string) (s Saving, ok bool) {
	members := membersOf(r, family)
	if len(members) < 2 {
		return s, false
	}
	var bits []float64
	for _, i := range members {
		bits = append(bits, float64(r.Designs[i].Bits))
	}
	reach := measure.MatchBits(bits, r.units(append(members, design), r.Leading), r.Settings.Seed)
	own := float64(r.Designs[design].Bits)
	return Saving{
		Design: r.Designs[design].Spec, Against: family, Bits: Num(reach.Bits - own),
		Interval: [2]Num{Num(reach.Lo - own), Num(reach.Hi - own)}, Observations: reach.Observations,
	}, Num(reach.Bits).Defined()
}

// membersOf lists the designs of a family (a spec without its bits), by bits.
func membersOf(r *Results, family string) (members []int) {
	for i, d := range r.Designs {
		if familyOf(d.Spec) == family {
			members = append(members, i)
		}
	}
	slices.SortFunc(members, func(a, b int) int { return r.Designs[a].Bits - r.Designs[b].Bits })
	return members
}

func floats(n []int) (out []float64) {
	for _, v := range n {
		out = append(out, float64(v))
	}
	return out
}

// between says a 95 % interval of bits saved whose ends may lie beyond the
// numbers of bits measured.
func between(v [2]Num, observations, decimals int) string {
	lo, hi := fmt.Sprintf("%+.*f", decimals, float64(v[0])), fmt.Sprintf("%+.*f", decimals, float64(v[1]))
	switch {
	case observations < 2:
		return "no interval from one recording"
	case v[0].Defined() && v[1].Defined():
		return "95 %: " + lo + " to " + hi
	case v[0].Defined():
		return "95 %: " + lo + " or more"
	case v[1].Defined():
		return "95 %: " + hi + " or less"
	}
	return "95 %: any number of the bits measured"
}

// amount is "saves 1.20 bits" or "costs 0.30 bits".
func amount(bits Num) string {
	if bits < 0 {
		return fmt.Sprintf("costs %.2f bits", -float64(bits))
	}
	return fmt.Sprintf("saves %.2f bits", float64(bits))
}

// Sentence says what a saving amounts to; figure is the leading one.
func (s Saving) Sentence(figure string) string {
	return fmt.Sprintf("For the same %s, %s %s a sample against %s (%s).",
		figure, s.Design, amount(s.Bits), s.Against, between(s.Interval, s.Observations, 2))
}
