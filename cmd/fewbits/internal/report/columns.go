package report

import (
	"fmt"
	"strings"

	"github.com/jedib0t/go-pretty/v6/text"

	"fewbits/cmd/fewbits/internal/bench"
)

// column is one column of the table; the larger drop, the sooner it goes when
// the terminal is narrow (0: never).
type column struct {
	head string
	left bool // aligned
	drop int
	cell func(d *bench.Design) string
}

func columns(b *book) []column {
	out := []column{
		{"design", true, 0, func(d *bench.Design) string { return mark(b, d) + plain(d.Spec) }},
		{"bits", false, 0, func(d *bench.Design) string { return fmt.Sprint(d.Bits) }},
		{b.short(b.Leading), false, 0, decibel(b, b.Leading)},
		{intervalHead(b), false, 3, func(d *bench.Design) string { return span(b.interval(d.Spec)) }},
		{"lead", true, 2, func(d *bench.Design) string { return lead(b, d) }},
	}
	for i, name := range []string{snr, segSNR, openSNR} {
		if name != b.Leading {
			out = append(out, column{b.short(name), false, 1 + 4*min(i, 1), decibel(b, name)})
		}
	}
	return append(out,
		column{b.short(over), false, 6, func(d *bench.Design) string { return percent(b.figure(d.Spec, over)) }},
		column{b.short(entropy), false, 7, func(d *bench.Design) string { return fixed(b.figure(d.Spec, entropy), 2) }},
	)
}

func intervalHead(b *book) string {
	if b.hereOnly() {
		return "95 %, these\nrecordings only"
	}
	return "95 %"
}

func decibel(b *book, name string) func(*bench.Design) string {
	return func(d *bench.Design) string {
		if b.lossless(d.Spec) && name == snr {
			return "lossless"
		}
		return fixed(b.figure(d.Spec, name), 1)
	}
}

// mark leads the winner of a bit rate.
func mark(b *book, d *bench.Design) string {
	if b.winner[d.Spec] {
		return "* "
	}
	return "  "
}

func lead(b *book, d *bench.Design) string {
	if p := b.pooled[d.Spec]; p != nil {
		return p.Lead
	}
	return ""
}

// fit drops columns until the table keeps to width; it returns the heads of
// those left out.
func fit(cols []column, designs []*bench.Design, width int) (kept []column, left []string) {
	kept = cols
	for width > 0 && tableWidth(kept, designs) > width {
		worst := 0
		for i, c := range kept {
			if c.drop > kept[worst].drop {
				worst = i
			}
		}
		if kept[worst].drop == 0 {
			break
		}
		left = append(left, strings.ReplaceAll(kept[worst].head, "\n", " "))
		kept = append(append([]column{}, kept[:worst]...), kept[worst+1:]...)
	}
	return kept, left
}

func tableWidth(cols []column, designs []*bench.Design) int {
	total := 2 * len(cols)
	for _, c := range cols {
		w := text.LongestLineLen(c.head)
		for _, d := range designs {
			w = max(w, text.StringWidthWithoutEscSequences(c.cell(d)))
		}
		total += w
	}
	return total
}
