package bench

import (
	"context"
	"fmt"
	"math"
	"slices"
	"strings"

	"fewbits/measure"
)

// BitsRun says how many bits each family needs for a target.
type BitsRun struct {
	Schema   string      `json:"schema"`
	Figure   string      `json:"figure"` // figure that the target is held against
	Why      string      `json:"why"`
	Target   float64     `json:"target_db"`
	Families []BitsNeed  `json:"families"`
	Method   string      `json:"interval_method"`
	Refused  []Refusal   `json:"refused"`
	Warnings []string    `json:"warnings"`
	Results  *Results    `json:"-"`
	Against  []SavedBits `json:"saved"`
}

// BitsNeed is one family (a spec without its bits).
type BitsNeed struct {
	Family string `json:"family"`
	// Bits needed, interpolated between the rates measured (pooled figure);
	// null where the target is not reached. AtBits is the next rate measured
	// that reaches it, 0 for none, and the others belong to the design there.
	Bits        Num       `json:"bits"`
	AtBits      int       `json:"at_bits"`
	Spec        string    `json:"spec"`
	Figure      Num       `json:"figure_db"`
	TableBytes  int       `json:"table_bytes"`
	Comparisons int       `json:"comparisons"`
	Rates       []int     `json:"rates"`
	Figures     []Num     `json:"figures_db"`
	perClip     []float64 // bits needed on each clip
}

// SavedBits is how many bits a family saves against another at the target:
// the mean over clips and its 95 % interval.
type SavedBits struct {
	Family   string `json:"family"`
	Against  string `json:"against"`
	Bits     Num    `json:"bits"`
	Interval [2]Num `json:"interval"`
	Clips    int    `json:"clips"` // where both reach the target
}

// NeedBits runs a comparison over all rates and interpolates. figure is snr,
// segsnr or open.
func NeedBits(ctx context.Context, plan Plan, figure string, target float64) (*BitsRun, error) {
	plan.Audio, plan.FramesCSV = false, false
	r, _, err := Run(ctx, plan)
	if err != nil {
		return nil, err
	}
	run := &BitsRun{Schema: "fewbits/bits/1", Target: target, Results: r, Refused: r.Refused, Warnings: r.Warnings, Method: "paired Student's t over clips"}
	run.Figure, run.Why = decide(r, figure, target)
	for _, name := range familiesOf(r) {
		run.Families = append(run.Families, needOf(r, name, run.Figure, target))
	}
	for _, base := range []string{"mu-law", "uniform"} {
		i := slices.IndexFunc(run.Families, func(n BitsNeed) bool { return n.Family == base })
		if i < 0 {
			continue
		}
		for _, n := range run.Families {
			if n.Family != base {
				run.Against = append(run.Against, savedBits(n, run.Families[i]))
			}
		}
	}
	return run, nil
}

// decide settles the figure: a segmental target that comes near the ceiling is
// held against the open value, by the rule of the 35 dB ceiling.
func decide(r *Results, figure string, target float64) (name, why string) {
	switch figure {
	case "snr":
		return SNR, "as asked"
	case "open":
		return OpenSNR, "as asked"
	}
	if r.Leading == OpenSNR {
		return OpenSNR, r.LeadingWhy
	}
	return SegSNR, r.LeadingWhy
}

// familyOf is a spec without its bits.
func familyOf(spec string) string {
	head, rest, more := strings.Cut(spec, ",")
	head, _, _ = strings.Cut(head, ":")
	if more {
		return head + "," + rest
	}
	return head
}

func familiesOf(r *Results) (names []string) {
	for _, d := range r.Designs {
		if n := familyOf(d.Spec); !slices.Contains(names, n) {
			names = append(names, n)
		}
	}
	return names
}

// needOf interpolates one family.
func needOf(r *Results, name, figure string, target float64) BitsNeed {
	n := BitsNeed{Family: name, Bits: Num(math.NaN()), Figure: Num(math.NaN())}
	var members []int
	for i, d := range r.Designs {
		if familyOf(d.Spec) == name {
			members = append(members, i)
		}
	}
	slices.SortFunc(members, func(a, b int) int { return r.Designs[a].Bits - r.Designs[b].Bits })
	var pooled []float64
	for _, i := range members {
		v := r.Pooled[i].Figures[figure]
		n.Rates, n.Figures = append(n.Rates, r.Designs[i].Bits), append(n.Figures, v)
		pooled = append(pooled, float64(v))
		if d := r.Designs[i]; n.AtBits == 0 && float64(v) >= target {
			n.AtBits, n.Spec, n.Figure, n.TableBytes, n.Comparisons = d.Bits, d.Spec, v, d.TableBytes, d.Comparisons
		}
	}
	n.Bits = Num(crossing(n.Rates, pooled, target))
	for c := range r.Clips {
		var own []float64
		for _, i := range members {
			own = append(own, float64(r.Results[c*len(r.Designs)+i].Figures[figure]))
		}
		n.perClip = append(n.perClip, crossing(n.Rates, own, target))
	}
	return n
}

// crossing is where a figure first reaches the target, linear between rates;
// NaN where it never does or already does at the first rate.
func crossing(rates []int, figures []float64, target float64) float64 {
	for i := 1; i < len(rates); i++ {
		a, b := figures[i-1], figures[i]
		if a < target && b >= target {
			return float64(rates[i-1]) + (target-a)/(b-a)*float64(rates[i]-rates[i-1])
		}
	}
	return math.NaN()
}

// savedBits compares two families clip by clip.
func savedBits(n, base BitsNeed) SavedBits {
	out := SavedBits{Family: n.Family, Against: base.Family, Bits: Num(math.NaN()), Interval: [2]Num{Num(math.NaN()), Num(math.NaN())}}
	var saved []float64
	for c := range n.perClip {
		if d := base.perClip[c] - n.perClip[c]; !math.IsNaN(d) {
			saved = append(saved, d)
		}
	}
	if out.Clips = len(saved); out.Clips == 0 {
		return out
	}
	cmp := measure.Compare(measure.Units{Values: [][]float64{saved}}, 1)
	out.Bits = Num(cmp.Means[0])
	if out.Clips > 1 {
		out.Interval = [2]Num{Num(cmp.Interval[0][0]), Num(cmp.Interval[0][1])}
	}
	return out
}

// Sentence says what a saving amounts to.
func (s SavedBits) Sentence() string {
	if !s.Bits.Defined() {
		return fmt.Sprintf("%s against %s: no clip on which both reach the target", s.Family, s.Against)
	}
	verb := "saves"
	v := float64(s.Bits)
	if v < 0 {
		verb, v = "costs", -v
	}
	return fmt.Sprintf("%s %s %.2f bits against %s (95 %%: %+.2f to %+.2f saved, %d clips)",
		s.Family, verb, v, s.Against, float64(s.Interval[0]), float64(s.Interval[1]), s.Clips)
}
