package report

import (
	"strconv"

	"fewbits/cmd/fewbits/internal/bench"
)

// gridTable is a table of the page.
type gridTable struct {
	ID, Caption, Note string
	Head              []headCell
	Rows              [][]cell
}

type headCell struct {
	Text, Unit, Means string
	Words             bool // a column of words, not numbers
	Long              bool // of many words
}

// Class is what the page's style and script know the column by.
func (h headCell) Class() string {
	switch {
	case h.Long:
		return "w long"
	case h.Words:
		return "w"
	}
	return ""
}

type cell struct {
	Text string
	V    string // full precision, for sorting and reading back; empty: the text says all
	Name string // figure, for reading back
	Win  bool
}

func said(s string) cell { return cell{Text: s} }

// number shows v rounded and carries all its digits.
func number(v float64, text string) cell {
	n := bench.Num(v)
	if !n.Defined() {
		return cell{Text: dash}
	}
	return cell{Text: text, V: full(v)}
}

func decimal(v bench.Num, decimals int) cell { return number(float64(v), fixed(v, decimals)) }

func integer(v int64) cell { return said(strconv.FormatInt(v, 10)) }

// tell shows a figure as its unit asks.
func (b *book) tell(name string, v bench.Num) cell {
	c := number(float64(v), figureText(b.means[name].Unit, v))
	c.Name = name
	return c
}

func figureText(unit string, v bench.Num) string {
	switch unit {
	case "dB", "dBov":
		return fixed(v, 2)
	case "share":
		return percent(v)
	case "frames", "samples":
		return fixed(v, 0)
	case "bits/sample", "bits":
		return fixed(v, 3)
	}
	return strconv.FormatFloat(float64(v), 'g', 4, 64)
}

// figureHead is the head of a figure's column; shares are shown in per cent.
func (b *book) figureHead(name string) headCell {
	d := b.means[name]
	if d.Unit == "share" {
		d.Unit = "%"
	}
	return headCell{Text: name, Unit: d.Unit, Means: d.Means}
}

func words(list ...string) (out []headCell) {
	for _, s := range list {
		out = append(out, headCell{Text: s, Words: true})
	}
	return out
}
