package report

import (
	"fmt"
	"strings"

	"fewbits/cmd/fewbits/internal/bench"
)

// pooledTables hold every pooled figure: decibels first, then the others, then
// the means over clips.
func (b *book) pooledTables() []gridTable {
	var levels, rest []string
	for _, name := range measured(b.Results) {
		if strings.HasPrefix(b.means[name].Unit, "dB") {
			levels = append(levels, name)
		} else {
			rest = append(rest, name)
		}
	}
	pooled := func(p *bench.Pooled) bench.Figures { return p.Figures }
	means := func(p *bench.Pooled) bench.Figures { return p.ClipMeans }
	return []gridTable{
		b.designTable("pooled", "Quality, pooled", "Over all frames of all clips; SNR from summed energies.", levels, pooled, true),
		b.designTable("pooled-rest", "Errors, frames and entropy, pooled", "From summed counts and energies.", rest, pooled, false),
		b.designTable("means", "Quality, mean over clips", "Each clip counts the same, however long.", levels, means, false),
		b.designTable("means-rest", "Errors, frames and entropy, mean over clips", "", rest, means, false),
	}
}

func (b *book) designTable(id, caption, note string, figures []string, of func(*bench.Pooled) bench.Figures, lead bool) gridTable {
	t := gridTable{ID: id, Caption: caption, Note: note, Head: append(words("design"), headCell{Text: "bits"})}
	if lead {
		t.Head = append(t.Head, headCell{Text: "95 %", Unit: b.intervalUnit(), Means: "interval of " + b.intervalOf()},
			headCell{Text: "behind", Unit: "dB", Means: "95 % interval of the difference from the leader"},
			headCell{Text: "lead", Words: true, Means: leadMeans})
		t.Note += b.intervalNote()
	}
	for _, name := range figures {
		t.Head = append(t.Head, b.figureHead(name))
	}
	for _, d := range b.ranked() {
		p := b.pooled[d.Spec]
		if p == nil {
			continue
		}
		row := []cell{{Text: d.Spec, Win: b.winner[d.Spec]}, integer(int64(d.Bits))}
		if lead {
			row = append(row, interval(p.Interval, "interval"), interval(p.Behind, "behind"), said(p.Lead))
		}
		for _, name := range figures {
			c := b.tell(name, valueOr(of(p), name))
			if name == snr && p.Lossless && c.V == "" {
				c = said("lossless")
			}
			row = append(row, c)
		}
		t.Rows = append(t.Rows, row)
	}
	return t
}

func (b *book) intervalNote() string {
	if b.IntervalMethod == "" {
		return ""
	}
	return " 95 %: interval of " + b.intervalOf() + "; " + b.IntervalMethod + "."
}

func (b *book) intervalUnit() string {
	if b.hereOnly() {
		return "dB, these recordings only"
	}
	return "dB"
}

// interval sorts by its lower end.
func interval(v [2]bench.Num, name string) cell {
	c := said(strings.ReplaceAll(span(v), " to ", " … "))
	if c.Text != "" {
		c.V, c.Name = full(float64(v[0])), name
	}
	return c
}

func valueOr(f bench.Figures, name string) bench.Num {
	if v, ok := f[name]; ok {
		return v
	}
	return bench.Num(nan)
}

// designsTable is what each design is.
func (b *book) designsTable() gridTable {
	t := gridTable{ID: "designs", Caption: "The designs", Note: "Overload bounds with full scale = 1.0. Table bytes at 16 bits a number; comparisons of a binary search."}
	t.Head = append(words("design", "folder name"), headCell{Text: "made on", Words: true, Long: true}, headCell{Text: "levels"}, headCell{Text: "bits"},
		headCell{Text: "overload from"}, headCell{Text: "to"}, headCell{Text: "table", Unit: "bytes"},
		headCell{Text: "comparisons", Unit: "per sample"}, headCell{Text: "rounds"}, headCell{Text: "residual"},
		headCell{Text: "optimality shown by", Words: true, Long: true})
	for _, d := range b.ranked() {
		t.Rows = append(t.Rows, []cell{
			{Text: d.Spec, Win: b.winner[d.Spec]}, said(d.Name), said(d.MadeOn), integer(int64(d.Levels)), integer(int64(d.Bits)),
			decimal(d.Lo, 4), decimal(d.Hi, 4), integer(int64(d.TableBytes)), integer(int64(d.Comparisons)), integer(int64(d.Rounds)),
			number(float64(d.Residual), fmt.Sprintf("%.2g", float64(d.Residual))), said(d.Proof),
		})
	}
	return t
}

// classesTable is the frame SNR by level class.
func classesTable(b *book, t *bench.Traces) gridTable {
	g := gridTable{ID: "classes", Caption: "Frame SNR by frame level", Note: "Quantiles over the frames of all clips, dB."}
	g.Head = append(words("design", "frames"), headCell{Text: "bits"}, headCell{Text: "count"}, headCell{Text: "5 %", Unit: "dB"},
		headCell{Text: "25 %", Unit: "dB"}, headCell{Text: "median", Unit: "dB"}, headCell{Text: "75 %", Unit: "dB"},
		headCell{Text: "95 %", Unit: "dB"})
	for _, d := range b.ranked() {
		for _, class := range classes {
			s := spreadOf(t, d.Spec, class.name)
			if s == nil {
				continue
			}
			row := []cell{{Text: d.Spec, Win: b.winner[d.Spec]}, said(class.name), integer(int64(d.Bits)), integer(s.Frames)}
			for _, q := range s.Quantiles {
				row = append(row, decimal(q, 1))
			}
			g.Rows = append(g.Rows, row)
		}
	}
	return g
}
