package report

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"fewbits/cmd/fewbits/internal/bench"
	"fewbits/cmd/fewbits/internal/report/drawing"
)

// classes of frame level, and what they are.
var classes = []struct{ name, means string }{
	{"quiet", "quiet: frames out of range"},
	{"middle", "middle: in range, below the active level"},
	{"loud", "loud: in range, above the active level"},
}

// spread draws the distribution of frame SNR of the designs of so many bits by
// level class; nil where there is none.
func spread(b *book, t *bench.Traces, bits int) *plate {
	designs := b.at(bits)
	found := false
	for _, s := range t.Spread {
		found = found || b.design[s.Design] != nil && b.design[s.Design].Bits == bits
	}
	if !found {
		return nil
	}
	const row, gap, head = 30, 14, 22
	h := 12 + float64(len(classes))*(head+gap+row*float64(len(designs))) + 44
	f := canvas(fmt.Sprintf("frames-%d", bits), fmt.Sprintf("Frame SNR by frame level, %d bits", bits), h)
	lo, hi := spreadX(b, t, bits)
	p := drawing.Panel{F: f, X: drawing.Scale{Min: lo, Max: hi, From: 16, To: f.W - 14}, Y: drawing.Scale{Max: 1, From: h - 44, To: 4}}
	p.Grid(drawing.Ticks(lo, hi, 9), nil, "frame SNR, dB, limited as segsnr_open_db", "")
	y := 12.0
	var said []string
	for _, class := range classes {
		f.Words("head", 22, y+14, drawing.Start, class.means)
		y += head
		for _, d := range designs {
			if s := spreadOf(t, d.Spec, class.name); s != nil {
				box(b, p, d, s, y)
				said = append(said, fmt.Sprintf("%s %s: median %s, 5 to 95 %% %s to %s dB", class.name, d.Spec,
					fixed(s.Quantiles[2], 1), fixed(s.Quantiles[0], 1), fixed(s.Quantiles[4], 1)))
			}
			y += row
		}
		y += gap
	}
	f.Text = strings.Join(said, "; ") + "."
	return &plate{Figure: f, Turn: bitsTurn(bits), Caption: "Thin line: 5 to 95 % of the frames; bar: 25 to 75 %; mark: the median. " +
		"A design whose quiet row lies far left of its loud row sacrifices quiet speech."}
}

func spreadOf(t *bench.Traces, spec, class string) *bench.Spread {
	for i := range t.Spread {
		if s := &t.Spread[i]; s.Design == spec && s.Class == class {
			return s
		}
	}
	return nil
}

func spreadX(b *book, t *bench.Traces, bits int) (lo, hi float64) {
	lo, hi = 0, 10
	for _, s := range t.Spread {
		if d := b.design[s.Design]; d != nil && d.Bits == bits {
			lo, hi = drawing.Reach(lo, hi, floats(s.Quantiles[:])...)
		}
	}
	return math.Floor(lo/5-0.01) * 5, math.Ceil(hi/5+0.01) * 5
}

// box draws one design's quantiles in a row at y, its name above them.
func box(b *book, p drawing.Panel, d *bench.Design, s *bench.Spread, y float64) {
	f := p.F
	f.Words("tick", 22, y+9, drawing.Start, d.Spec+idleWords(s))
	q := floats(s.Quantiles[:])
	if slices.ContainsFunc(q, math.IsNaN) {
		return
	}
	n, mid := b.series(d.Spec), y+19
	at := func(v float64) drawing.Point { return drawing.Point{X: p.X.At(v), Y: mid} }
	f.Line(drawing.Ink{Role: drawing.Role(n), Width: 1.3}, at(q[0]), at(q[4]))
	bar := []float64{p.X.At(q[1]), mid - 4.5, p.X.At(q[3]) - p.X.At(q[1]), 9}
	f.Rect(drawing.Ink{Role: "fill"}, bar[0], bar[1], bar[2], bar[3])
	f.Rect(drawing.Ink{Role: drawing.Role(n), Width: 1.3}, bar[0], bar[1], bar[2], bar[3])
	f.Marker(n, at(q[2]).X, mid, "data-design", d.Spec, "data-class", s.Class, "data-x", full(q[2]))
}

// idleWords tells the idle noise beside the quiet frames.
func idleWords(s *bench.Spread) string {
	if s.Class != "quiet" || !s.IdleDBov.Defined() {
		return ""
	}
	return "  ·  idles at " + drawing.Minus(fixed(s.IdleDBov, 1)) + " dBov"
}
