package bench

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"fewbits/measure"
)

// ceilingShare is the share of frames at the upper limit above which the
// limited segmental SNR stops deciding (a convention of this project).
const ceilingShare = 0.05

// Names of figures that decide.
const (
	SNR     = "snr_db"
	SegSNR  = "segsnr_db"
	OpenSNR = "segsnr_open_db"
	Quiet   = "quiet_snr_db"
)

// leading settles which figure decides for the whole comparison, and why.
func leading(pooled []Pooled, upper float64) (name, why string) {
	worst, at := "", 0.0
	for _, p := range pooled {
		if share := float64(p.Figures["at_upper_limit"]); share > at {
			worst, at = p.Design, share
		}
	}
	if at > ceilingShare {
		return OpenSNR, fmt.Sprintf("%s decides: %.0f %% of the frames of %s sit at the %g dB ceiling of %s",
			OpenSNR, 100*at, worst, upper, SegSNR)
	}
	return SegSNR, fmt.Sprintf("%s decides: no design has more than %g %% of its frames at the %g dB ceiling",
		SegSNR, 100*ceilingShare, upper)
}

// verdicts names the winners at each bit rate.
func verdicts(r *Results) []Verdict {
	var out []Verdict
	for _, members := range byBits(r.Designs) {
		out = append(out, verdict(r, r.Designs[members[0]].Bits, members))
	}
	return out
}

func verdict(r *Results, bits int, members []int) Verdict {
	v := Verdict{Bits: bits, Winners: map[string]string{}}
	for _, name := range []string{SNR, SegSNR, OpenSNR, Quiet} {
		if best := bestBy(r, members, name); best >= 0 {
			v.Winners[name] = r.Designs[best].Spec
		}
	}
	for _, i := range members {
		if lead := r.Pooled[i].Lead; lead != "" && lead != measure.LeadBehind {
			v.Tied = append(v.Tied, r.Designs[i].Spec)
		}
	}
	v.Sentence = sentence(r, v, members)
	return v
}

// bestBy finds the design of the largest pooled figure; -1 where none is
// defined. A lossless design has no error and beats every number.
func bestBy(r *Results, members []int, name string) int {
	best, at := -1, math.Inf(-1)
	for _, i := range members {
		v := float64(r.Pooled[i].Figures[name])
		if name == SNR && r.Pooled[i].Lossless {
			v = math.Inf(1)
		}
		if v > at {
			best, at = i, v
		}
	}
	return best
}

// sentence says which design to take at a bit rate and why.
func sentence(r *Results, v Verdict, members []int) string {
	winner, ok := v.Winners[r.Leading]
	if !ok {
		return fmt.Sprintf("At %d bits nothing can be said: no frame is in range.", v.Bits)
	}
	var b strings.Builder
	fmt.Fprintf(&b, "At %d bits take %s: %.1f dB of %s", v.Bits, winner, float64(figure(r, winner, r.Leading)), r.Leading)
	if second := runnerUp(r, members, winner); second >= 0 {
		p := r.Pooled[second]
		fmt.Fprintf(&b, ", %.1f dB above %s", float64(figure(r, winner, r.Leading)-p.Figures[r.Leading]), p.Design)
		switch {
		case len(v.Tied) > 1:
			fmt.Fprintf(&b, " (not distinguishable from the best: %s)", strings.Join(without(v.Tied, winner), ", "))
		case p.Behind[0].Defined():
			fmt.Fprintf(&b, " (95 %%: %.1f to %.1f)", float64(p.Behind[0]), float64(p.Behind[1]))
		}
	}
	b.WriteString(".")
	if by := dissent(v, r.Leading, winner); by != "" {
		fmt.Fprintf(&b, " Other measures disagree: %s.", by)
	}
	return b.String()
}

func runnerUp(r *Results, members []int, winner string) int {
	others := slices.DeleteFunc(slices.Clone(members), func(i int) bool { return r.Designs[i].Spec == winner })
	return bestBy(r, others, r.Leading)
}

// dissent lists the measures that name another winner.
func dissent(v Verdict, leading, winner string) string {
	var out []string
	for _, name := range []string{SNR, SegSNR, OpenSNR, Quiet} {
		if other := v.Winners[name]; name != leading && other != "" && other != winner {
			out = append(out, fmt.Sprintf("%s prefers %s", name, other))
		}
	}
	return strings.Join(out, ", ")
}

func figure(r *Results, design, name string) Num {
	for _, p := range r.Pooled {
		if p.Design == design {
			return p.Figures[name]
		}
	}
	return Num(math.NaN())
}

func without(list []string, word string) []string {
	return slices.DeleteFunc(slices.Clone(list), func(s string) bool { return s == word })
}
