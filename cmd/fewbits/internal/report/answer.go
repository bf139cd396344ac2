package report

import (
	"fmt"
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
