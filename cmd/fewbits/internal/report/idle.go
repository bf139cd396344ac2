package report

import (
	"fmt"
	"math"
	"slices"

	"fewbits/cmd/fewbits/internal/bench"
	"fewbits/cmd/fewbits/internal/report/drawing"
)

// Figures of the idle channel.
const (
	idleOut  = "idle_dbov"
	idleOver = "idle_gain_db"
	toggling = "idle_toggling"
)

// silent is what is said where the output is exactly zero.
const silent = "silent"

// tried is a level that a design puts out on an idle channel.
func tried(d *bench.Design, v bench.Num) string {
	switch {
	case d.IdleLSB == 0:
		return dash
	case !v.Defined():
		return silent
	}
	return fixed(v, 1)
}

// pauses is the level of a design's output over the frames out of range, and
// pausesAt the number to rank it by: silence is the least, no such frame NaN.
func (b *book) pauses(spec string) string {
	v := b.pausesAt(spec)
	if math.IsInf(v, -1) {
		return silent
	}
	return fixed(bench.Num(v), 1)
}

func (b *book) pausesAt(spec string) float64 {
	if v := b.figure(spec, idleOut); v.Defined() {
		return float64(v)
	}
	if b.figure(spec, "frames_out_of_range")+b.figure(spec, "frames_left_out") > 0 {
		return math.Inf(-1)
	}
	return nan
}

// extremes finds the designs of the least and the most output in the pauses at
// a number of bits; nil where they differ by 1 dB or less, so that there is
// nothing to choose.
func (b *book) extremes(bits int) (least, most *bench.Design) {
	for _, d := range b.at(bits) {
		v := b.pausesAt(d.Spec)
		if math.IsNaN(v) {
			continue
		}
		if least == nil || v < b.pausesAt(least.Spec) {
			least = d
		}
		if most == nil || v > b.pausesAt(most.Spec) {
			most = d
		}
	}
	if least == nil || !(b.pausesAt(most.Spec) > b.pausesAt(least.Spec)+1) {
		return nil, nil
	}
	return least, most
}

// idlers are the designs that the terminal tells the idle channel of: at each
// number of bits where there is something to choose, the best, the quietest
// and the loudest.
func (b *book) idlers() (out []*bench.Design) {
	for _, v := range b.Verdicts {
		least, most := b.extremes(v.Bits)
		for _, d := range []*bench.Design{b.design[v.Winners[b.Leading]], least, most} {
			if least != nil && d != nil && !slices.Contains(out, d) {
				out = append(out, d)
			}
		}
	}
	return out
}

// idleColumns are those of the terminal's second table.
func idleColumns(b *book) []column {
	return []column{
		{"idle channel", true, 0, func(d *bench.Design) string { return mark(b, d) + plain(d.Spec) }},
		{"bits", false, 0, func(d *bench.Design) string { return fmt.Sprint(d.Bits) }},
		{"pauses dBov", false, 0, func(d *bench.Design) string { return b.pauses(d.Spec) }},
		{"over input dB", false, 1, func(d *bench.Design) string { return fixed(b.figure(d.Spec, idleOver), 1) }},
		{"toggling %", false, 2, func(d *bench.Design) string { return percent(b.figure(d.Spec, toggling)) }},
		{"zero dBov", false, 3, func(d *bench.Design) string { return tried(d, d.IdleZero) }},
		{"1 lsb dBov", false, 4, func(d *bench.Design) string { return tried(d, d.IdleOneLSB) }},
	}
}

const idleMeans = "idle channel: output over the frames out of range (pauses), dB over the input there, share of samples where it changes; then for an input of zero and of +-1 lsb. Shown: the best, the quietest, the loudest, where more than 1 dB apart."

// idleChannelTable tells every design's idle channel.
func (b *book) idleChannelTable() gridTable {
	g := gridTable{ID: "idle", Caption: "Idle channel", Note: "Silent: the output is exactly zero. Zero, 1 lsb: for an input of zero, and of + and - one lsb of the recordings in turn. Pauses: the frames out of range."}
	g.Head = append(words("design"), headCell{Text: "bits"}, headCell{Text: "zero", Unit: "dBov"}, headCell{Text: "1 lsb", Unit: "dBov"},
		headCell{Text: "pauses", Unit: "dBov", Means: b.means[idleOut].Means}, headCell{Text: "over input", Unit: "dB", Means: b.means[idleOver].Means},
		headCell{Text: "toggling", Unit: "%", Means: b.means[toggling].Means})
	for _, d := range b.ranked() {
		if d.IdleLSB == 0 && math.IsNaN(b.pausesAt(d.Spec)) {
			continue
		}
		over, share := b.figure(d.Spec, idleOver), b.figure(d.Spec, toggling)
		g.Rows = append(g.Rows, []cell{
			{Text: d.Spec, Win: b.winner[d.Spec]}, integer(int64(d.Bits)),
			level(tried(d, d.IdleZero), float64(d.IdleZero)), level(tried(d, d.IdleOneLSB), float64(d.IdleOneLSB)),
			level(b.pauses(d.Spec), b.pausesAt(d.Spec)), decimal(over, 1), number(float64(share), percent(share)),
		})
	}
	return g
}

// level is a cell that may say silent.
func level(text string, v float64) cell {
	c := said(text)
	if text != silent && text != dash {
		c.V = full(v)
	}
	return c
}

// idleSentences say at each number of bits what a listener hears before the
// first word.
func (b *book) idleSentences() (out []string) {
	for _, v := range b.Verdicts {
		w := b.design[v.Winners[b.Leading]]
		least, most := b.extremes(v.Bits)
		if w == nil || least == nil {
			continue
		}
		best := "the best"
		if w == least {
			best = "the best and quietest"
		}
		text := fmt.Sprintf("At %s %s is %s", plural(v.Bits, "bit", "bits"), best, b.idleSentence(w))
		if w != least {
			text += " The quietest is " + b.idleSentence(least)
		}
		if w != most {
			text += " The loudest is " + b.idleSentence(most)
		}
		out = append(out, text)
	}
	return out
}

func (b *book) idleSentence(d *bench.Design) string {
	if b.pauses(d.Spec) == silent {
		return d.Spec + ": silent in the pauses."
	}
	text := d.Spec + ": " + drawing.Minus(b.pauses(d.Spec)) + " dBov in the pauses"
	if v := b.figure(d.Spec, idleOver); v.Defined() {
		text += ", " + drawing.Minus(fixed(v, 1)) + " dB over the input there"
	}
	if v := b.figure(d.Spec, toggling); v.Defined() {
		text += ", changing at " + percent(v) + " % of the samples"
	}
	return text + "."
}
