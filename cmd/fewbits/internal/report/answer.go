package report

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"fewbits/cmd/fewbits/internal/bench"
)

// answer is what the page says about one number of bits.
type answer struct {
	Bits      int
	Winner    string
	Value     string // the leading figure, in words
	Sentences []string
	Others    []winner // by each measure
}

type winner struct{ Measure, Design, Value string }

// answers turns verdicts into sentences made from the numbers.
func (b *book) answers() (out []answer) {
	for _, v := range b.Verdicts {
		w := v.Winners[b.Leading]
		a := answer{Bits: v.Bits, Winner: w, Sentences: []string{v.Sentence}}
		if w != "" {
			a.Value = fixed(b.figure(w, b.Leading), 1) + " dB " + b.Leading
			a.Sentences = append(a.Sentences, b.leadSentence(v, w))
			a.Sentences = append(a.Sentences, b.savingSentences(w)...)
			a.Sentences = append(a.Sentences, b.winnerCautions(w)...)
		}
		a.Sentences = slices.DeleteFunc(a.Sentences, func(s string) bool { return s == "" })
		for _, name := range []string{segSNR, snr, openSNR, quiet} {
			if d := v.Winners[name]; d != "" {
				a.Others = append(a.Others, winner{name, d, b.inUnits(name, d)})
			}
		}
		out = append(out, a)
	}
	return out
}

func (b *book) inUnits(name, spec string) string {
	if name == snr && b.lossless(spec) {
		return "lossless"
	}
	return fixed(b.figure(spec, name), 1) + " dB"
}

// leadSentence says whether the lead is real.
func (b *book) leadSentence(v bench.Verdict, winner string) string {
	p := b.pooled[winner]
	if p == nil {
		return ""
	}
	others := 0
	for _, spec := range v.Tied {
		if spec != winner {
			others++
		}
	}
	switch {
	case p.Lead == "clear":
		return "The lead is real: the 95 % intervals of all differences, taken together, lie above zero."
	case p.Lead == "shared":
		return fmt.Sprintf("The lead is shared with %s: level within what can be told and within what matters.", plural(others, "other", "others"))
	case p.Lead != "":
		return fmt.Sprintf("The lead is not settled: %s at this number of bits might be as good (95 %%); more recordings would tell.", plural(others, "other", "others"))
	}
	return ""
}

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

// winnerCautions are what to beware of when taking a design.
func (b *book) winnerCautions(spec string) (out []string) {
	if slices.Contains(b.optimistic(), spec) {
		out = append(out, "It was made on the recordings it is tested on; on others it may do worse.")
	}
	if share := b.figure(spec, ceiling); share.Defined() && share > 0.05 {
		out = append(out, fmt.Sprintf("%s %% of its frames sit at the %s dB ceiling of %s.",
			strings.TrimSuffix(percent(share), ".0"), trim(b.Settings.LimitsDB[1]), segSNR))
	}
	if share := b.figure(spec, over); share.Defined() && share > 0.001 {
		out = append(out, percent(share)+" % of the samples overload it.")
	}
	return out
}
