package report

import (
	"fmt"
	"math"
	"strings"

	"fewbits/cmd/fewbits/internal/bench"
	"fewbits/cmd/fewbits/internal/report/drawing"
)

// gaps draws how far the designs of so many bits are behind the best,
// with the intervals of the differences; nil where there are none.
func gaps(b *book, bits int) *plate {
	var of []*bench.Design
	reach := [2]float64{0, 1}
	found := false
	for _, d := range b.ranked() {
		p := b.pooled[d.Spec]
		if p == nil || d.Bits != bits || p.Lead == "" {
			continue
		}
		of = append(of, d)
		found = found || p.Behind[0].Defined()
		for _, v := range p.Behind {
			if v.Defined() {
				reach[0], reach[1] = drawing.Reach(reach[0], reach[1], float64(v))
			}
		}
	}
	if !found {
		return nil
	}
	const row = 30
	h := 12 + row*float64(len(of)) + 50
	f := canvas(fmt.Sprintf("behind-%d", bits), fmt.Sprintf("Behind the best, %d bits", bits), h)
	p := drawing.Panel{
		F: f, X: drawing.Scale{Min: math.Floor(reach[0]), Max: math.Ceil(reach[1]), From: 16, To: width - 14},
		Y: drawing.Scale{Max: 1, From: h - 44, To: 4},
	}
	p.Grid(drawing.Ticks(p.X.Min, p.X.Max, 9), nil, "behind the best, dB of "+b.Leading, "")
	var said []string
	for i, d := range of {
		said = append(said, gap(b, p, d, 12+row*float64(i)))
	}
	f.Text = strings.Join(said, "; ") + "."
	return &plate{Figure: f, Turn: bitsTurn(bits), Caption: "Bars: 95 % intervals of the differences, taken together; the mark is their middle. " +
		"A bar that reaches the upright strokes at 0 cannot be told from the best. Compared is " + b.intervalOf() + "."}
}

// gap draws one design's row at y and says it.
func gap(b *book, p drawing.Panel, d *bench.Design, y float64) string {
	v := b.pooled[d.Spec].Behind
	words := "best"
	if v[0].Defined() && v[1].Defined() {
		words = drawing.Minus(fixed(v[0], 1)) + " to " + drawing.Minus(fixed(v[1], 1)) + " dB"
		if v[0] <= 0 {
			words += ", cannot be told from the best"
		}
	}
	n, mid := b.series(d.Spec), y+19
	p.F.Words("tick", 22, y+9, drawing.Start, d.Spec+"  ·  "+words)
	zero := p.X.At(0)
	p.F.Line(drawing.Ink{Role: "ink", Width: 1.6}, drawing.Point{X: zero, Y: mid - 7}, drawing.Point{X: zero, Y: mid + 8})
	at := 0.0
	if words != "best" {
		at = float64(v[0]+v[1]) / 2
		p.F.Line(drawing.Ink{Role: drawing.Role(n), Width: 2.4},
			drawing.Point{X: p.X.At(float64(v[0])), Y: mid}, drawing.Point{X: p.X.At(float64(v[1])), Y: mid})
	}
	p.F.Marker(n, p.X.At(at), mid, "data-design", d.Spec, "data-lo", full(float64(v[0])), "data-hi", full(float64(v[1])))
	return d.Spec + ": " + words
}
