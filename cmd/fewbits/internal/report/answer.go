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
	var others []string
	for _, spec := range v.Tied {
		if spec != winner {
			others = append(others, spec)
		}
	}
	switch {
	case p.Lead == "clear":
		return "The lead is real: no other design at this number of bits comes within chance of it (95 %, simultaneous)."
	case len(others) > 0:
		return "The lead is not settled: " + listed(others) + " cannot be told from the best on these recordings."
	case p.Lead != "":
		return "The lead is not settled on these recordings."
	}
	return ""
}

// savingSentences say what the winner saves in bits.
func (b *book) savingSentences(winner string) (out []string) {
	for _, family := range []string{"mu-law", "uniform"} {
		if kin(winner) == family {
			continue
		}
		s, ok := b.saving(winner, family)
		if !ok {
			continue
		}
		bits := math.Abs(float64(s.Bits))
		text := fmt.Sprintf("For the same %s it needs %s bits a sample %s than %s", b.Leading, fixed(bench.Num(bits), 1), fewer(float64(s.Bits)), family)
		if bits < 0.05 {
			text = fmt.Sprintf("For the same %s it needs as many bits as %s", b.Leading, family)
		}
		if span(s.Interval) != "" {
			text += " (95 %: " + span(s.Interval) + ")"
		}
		out = append(out, text+", interpolated.")
	}
	return out
}

func fewer(bits float64) string {
	if bits < 0 {
		return "more"
	}
	return "fewer"
}

// saving is the run's own where it has one, else read off the pooled figures
// of the family's plain designs, without interval.
func (b *book) saving(spec, family string) (bench.Saving, bool) {
	for _, s := range b.Savings {
		if s.Design == spec && s.Against == family {
			return s, s.Bits.Defined()
		}
	}
	var x, y []float64
	for _, d := range b.ranked() {
		if kin(d.Spec) == family && b.figure(d.Spec, b.Leading).Defined() {
			x, y = append(x, float64(d.Bits)), append(y, float64(b.figure(d.Spec, b.Leading)))
		}
	}
	want := float64(b.figure(spec, b.Leading))
	for i := 1; i < len(y); i++ {
		if y[i-1] <= want && want <= y[i] && y[i] > y[i-1] {
			at := x[i-1] + (x[i]-x[i-1])*(want-y[i-1])/(y[i]-y[i-1])
			return bench.Saving{Bits: bench.Num(at - float64(b.design[spec].Bits)), Interval: [2]bench.Num{bench.Num(nan), bench.Num(nan)}}, true
		}
	}
	return bench.Saving{}, false
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
