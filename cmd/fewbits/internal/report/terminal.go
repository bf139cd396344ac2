package report

import (
	"fmt"
	"io"
	"strings"

	"github.com/jedib0t/go-pretty/v6/table"
	"github.com/jedib0t/go-pretty/v6/text"

	"fewbits/cmd/fewbits/internal/bench"
)

// Terminal prints the pooled table, a line a design, and under it what to take
// and what to beware of. Lines keep to width columns where that is possible
// (0: no limit); a column that does not fit is left out and named. color uses
// the escape codes of ECMA-48.
func Terminal(w io.Writer, r *bench.Results, width int, color bool) error {
	b := open(r)
	cols, left := fit(b, columns(b), width)
	var out strings.Builder
	if len(r.Designs) > 0 {
		out.WriteString(grid(b, cols, color))
		out.WriteString("\n\n")
	}
	limit := width
	if limit <= 0 || limit > 100 {
		limit = 100
	}
	for _, line := range notes(b, left) {
		out.WriteString(text.WrapSoft(plain(line), limit))
		out.WriteString("\n")
	}
	_, err := io.WriteString(w, trimmed(out.String()))
	return err
}

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
func fit(b *book, cols []column, width int) (kept []column, left []string) {
	kept = cols
	for width > 0 && tableWidth(b, kept) > width {
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

func tableWidth(b *book, cols []column) int {
	total := 2 * len(cols)
	for _, c := range cols {
		w := text.LongestLineLen(c.head)
		for i := range b.Designs {
			w = max(w, text.StringWidthWithoutEscSequences(c.cell(&b.Designs[i])))
		}
		total += w
	}
	return total
}

// grid draws the table: designs by bits, the best first.
func grid(b *book, cols []column, color bool) string {
	t := table.NewWriter()
	t.SetStyle(look())
	var head table.Row
	for _, c := range cols {
		head = append(head, c.head)
	}
	t.SetColumnConfigs(configs(cols))
	t.AppendHeader(head)
	bits := -1
	for _, d := range b.ranked() {
		if bits >= 0 && d.Bits != bits {
			t.AppendSeparator()
		}
		bits = d.Bits
		t.AppendRow(row(b, cols, d, color))
	}
	return t.Render()
}

func configs(cols []column) (out []table.ColumnConfig) {
	for i, c := range cols {
		a := text.AlignRight
		if c.left {
			a = text.AlignLeft
		}
		out = append(out, table.ColumnConfig{Number: i + 1, Align: a, AlignHeader: a})
	}
	return out
}

func row(b *book, cols []column, d *bench.Design, color bool) (out table.Row) {
	for _, c := range cols {
		cell := c.cell(d)
		if color && b.winner[d.Spec] {
			cell = "\x1b[1;36m" + cell + "\x1b[0m"
		}
		out = append(out, cell)
	}
	return out
}

// look is a table of white space and thin rules; heads keep their case.
func look() table.Style {
	s := table.StyleLight
	s.Format.Header, s.Format.Footer = text.FormatDefault, text.FormatDefault
	s.Options = table.Options{SeparateHeader: true, SeparateColumns: true}
	s.Box = table.StyleBoxDefault
	s.Box.MiddleVertical, s.Box.MiddleHorizontal, s.Box.MiddleSeparator = "", "─", ""
	s.Box.PaddingLeft, s.Box.PaddingRight = "", "  "
	return s
}

// trimmed takes the blanks off line ends.
func trimmed(s string) string {
	lines := strings.Split(s, "\n")
	for i := range lines {
		lines[i] = strings.TrimRight(lines[i], " ")
	}
	return strings.Join(lines, "\n")
}
