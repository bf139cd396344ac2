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
	Bits        Num    `json:"bits"`
	AtBits      int    `json:"at_bits"`
	Spec        string `json:"spec"`
	Figure      Num    `json:"figure_db"`
	TableBytes  int    `json:"table_bytes"`
	Comparisons int    `json:"comparisons"`
	Rates       []int  `json:"rates"`
	Figures     []Num  `json:"figures_db"`
}

// SavedBits is how many bits a family saves against another at the target,
// over the units that intervals come from, and its 95 % interval; null where
// the numbers of bits measured do not reach.
type SavedBits struct {
	Family   string `json:"family"`
	Against  string `json:"against"`
	Bits     Num    `json:"bits"`
	Interval [2]Num `json:"interval"`
	// Observations are the clips, talkers or blocks of frames compared.
	Observations int `json:"observations"`
	method       string
}

// NeedBits runs a comparison over all rates and interpolates. figure is snr,
// segsnr or open.
func NeedBits(ctx context.Context, plan Plan, figure string, target float64) (*BitsRun, error) {
	plan.Audio, plan.FramesCSV = false, false
	r, _, err := Run(ctx, plan)
	if err != nil {
		return nil, err
	}
	run := &BitsRun{Schema: "fewbits/bits/1", Target: target, Results: r, Refused: r.Refused, Warnings: r.Warnings}
	run.Figure, run.Why = decide(r, figure, target)
	for _, name := range familiesOf(r) {
		run.Families = append(run.Families, needOf(r, name, run.Figure, target))
	}
	run.compare(r)
	return run, nil
}

// compare tells what families save against the plain ones; these two are
// compared once.
func (run *BitsRun) compare(r *Results) {
	for k, base := range plainFamilies {
		i := slices.IndexFunc(run.Families, func(n BitsNeed) bool { return n.Family == base })
		if i < 0 {
			continue
		}
		for _, n := range run.Families {
			if slices.Index(plainFamilies, n.Family) < k {
				s := savedBits(r, n, run.Families[i], run.Figure, run.Target)
				run.Against = append(run.Against, s)
				if s.method != "" {
					run.Method = s.method
				}
			}
		}
	}
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
	members := membersOf(r, name)
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

// savedBits compares two families where the first reaches the target in the
// mean over the units.
func savedBits(r *Results, n, base BitsNeed, figure string, target float64) SavedBits {
	mine, theirs := membersOf(r, n.Family), membersOf(r, base.Family)
	u := r.units(slices.Concat(theirs, mine), figure)
	own := measure.Units{Values: u.Values[len(theirs):], Weights: u.Weights, Groups: u.Groups}
	at := crossing(n.Rates, measure.Compare(own, r.Settings.Seed).Means, target)
	out := SavedBits{Family: n.Family, Against: base.Family}
	if math.IsNaN(at) || len(base.Rates) < 2 {
		nan := Num(math.NaN())
		out.Bits, out.Interval = nan, [2]Num{nan, nan}
		return out
	}
	u.Values = append(u.Values[:len(theirs)], interpolate(n.Rates, own.Values, at))
	reach := measure.MatchBits(floats(base.Rates), u, r.Settings.Seed)
	out.Bits, out.Interval = Num(reach.Bits-at), [2]Num{Num(reach.Lo - at), Num(reach.Hi - at)}
	out.Observations, out.method = reach.Observations, methodWords(r, figure, reach.Method, reach.Observations)
	return out
}

// interpolate is a family's figure on each unit at so many bits.
func interpolate(rates []int, values [][]float64, bits float64) []float64 {
	i := 1
	for i < len(rates)-1 && float64(rates[i]) < bits {
		i++
	}
	out := make([]float64, len(values[0]))
	for u := range out {
		a, b := values[i-1][u], values[i][u]
		out[u] = a + (bits-float64(rates[i-1]))/float64(rates[i]-rates[i-1])*(b-a)
	}
	return out
}

// Sentence says what a saving amounts to.
func (s SavedBits) Sentence() string {
	if !s.Bits.Defined() {
		return fmt.Sprintf("%s against %s: cannot be said, the bits measured do not reach", s.Family, s.Against)
	}
	return fmt.Sprintf("%s %s against %s (%s)", s.Family, amount(s.Bits), s.Against, between(s.Interval, s.Observations, 2))
}
