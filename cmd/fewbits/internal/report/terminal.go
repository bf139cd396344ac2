package report

import (
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
	cols, left := fit(columns(b), b.ranked(), width)
	var out strings.Builder
	if len(r.Designs) > 0 {
		out.WriteString(grid(b, cols, b.ranked(), color))
		out.WriteString("\n\n")
	}
	if idle := b.idlers(); len(idle) > 0 {
		cols, _ := fit(idleColumns(b), idle, width)
		out.WriteString(grid(b, cols, idle, color))
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

// grid draws a table of designs that come by bits.
func grid(b *book, cols []column, designs []*bench.Design, color bool) string {
	t := table.NewWriter()
	t.SetStyle(look())
	var head table.Row
	for _, c := range cols {
		head = append(head, c.head)
	}
	t.SetColumnConfigs(configs(cols))
	t.AppendHeader(head)
	bits := -1
	for _, d := range designs {
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
