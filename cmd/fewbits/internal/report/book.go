package report

import (
	"cmp"
	"math"
	"slices"
	"strings"

	"fewbits/cmd/fewbits/internal/bench"
)

// Figures that the report treats by name.
const (
	snr     = bench.SNR
	segSNR  = bench.SegSNR
	openSNR = bench.OpenSNR
	quiet   = bench.Quiet
	entropy = "entropy_bits"
	over    = "overload_fraction"
	ceiling = "at_upper_limit"
)

// book finds things in results.
type book struct {
	*bench.Results
	pooled map[string]*bench.Pooled // by spec
	design map[string]*bench.Design // by spec
	means  map[string]bench.Definition
	winner map[string]bool // specs that lead at their bit rate
	line   map[string]int  // series by kin
	kins   []string        // in order of series
}

func open(r *bench.Results) *book {
	b := &book{
		Results: r, pooled: map[string]*bench.Pooled{}, design: map[string]*bench.Design{},
		means: map[string]bench.Definition{}, winner: map[string]bool{},
	}
	for i := range r.Pooled {
		b.pooled[r.Pooled[i].Design] = &r.Pooled[i]
	}
	for i := range r.Designs {
		b.design[r.Designs[i].Spec] = &r.Designs[i]
	}
	for _, d := range r.Definitions {
		b.means[d.Name] = d
	}
	for _, v := range r.Verdicts {
		if w := v.Winners[r.Leading]; w != "" {
			b.winner[w] = true
		}
	}
	b.numberLines()
	return b
}

// figure is a design's pooled figure, NaN where there is none.
func (b *book) figure(spec, name string) bench.Num {
	if p := b.pooled[spec]; p != nil {
		if v, ok := p.Figures[name]; ok && v.Defined() {
			return v
		}
	}
	return bench.Num(nan)
}

func (b *book) lossless(spec string) bool {
	p := b.pooled[spec]
	return p != nil && p.Lossless
}

// interval is the 95 % interval of the leading figure.
func (b *book) interval(spec string) [2]bench.Num {
	if p := b.pooled[spec]; p != nil {
		return p.Interval
	}
	return [2]bench.Num{bench.Num(nan), bench.Num(nan)}
}

// hereOnly: too few clips for intervals that say something of other recordings.
func (b *book) hereOnly() bool {
	return slices.ContainsFunc(b.Warnings, func(w string) bool { return strings.HasPrefix(w, hereOnly) })
}

// hereOnly heads intervals made from blocks of frames.
const hereOnly = "these recordings only"

// intervalOf is what the 95 % intervals are about.
func (b *book) intervalOf() string {
	if b.hereOnly() {
		return b.Leading + " over all frames in range of these recordings"
	}
	return b.Leading + " over all frames in range"
}

// ranked lists the designs by bits, then by the leading figure, best first.
func (b *book) ranked() []*bench.Design {
	var out []*bench.Design
	for i := range b.Designs {
		out = append(out, &b.Designs[i])
	}
	slices.SortStableFunc(out, func(x, y *bench.Design) int {
		if x.Bits != y.Bits {
			return cmp.Compare(x.Bits, y.Bits)
		}
		return cmp.Compare(b.rank(y), b.rank(x))
	})
	return out
}

func (b *book) rank(d *bench.Design) float64 {
	if v := b.figure(d.Spec, b.Leading); v.Defined() {
		return float64(v)
	}
	if b.lossless(d.Spec) {
		return math.Inf(1)
	}
	return math.Inf(-1)
}

// optimistic lists the designs made on the recordings they are tested on.
func (b *book) optimistic() (specs []string) {
	for _, d := range b.Designs {
		if strings.Contains(d.MadeOn, "the recordings it is tested on") {
			specs = append(specs, d.Spec)
		}
	}
	return specs
}

// short is the name of a figure in a table head, with its unit.
func (b *book) short(name string) string {
	switch name {
	case snr:
		return "SNR dB"
	case segSNR:
		return "segsnr dB"
	case openSNR:
		return "open dB"
	case entropy:
		return "entropy bit"
	case over:
		return "overload %"
	}
	if u := b.means[name].Unit; u != "" {
		return name + " " + u
	}
	return name
}
