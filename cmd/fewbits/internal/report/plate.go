package report

import (
	"fmt"

	"fewbits/cmd/fewbits/internal/bench"
	"fewbits/cmd/fewbits/internal/report/drawing"
)

// plate is one picture of the report, or one of several that take turns at the
// same place.
type plate struct {
	*drawing.Figure
	Caption string
	Turn    []string // the choices under which it is shown, one per switch of its set
}

// width of all pictures in user units; one unit is about a pixel on a desk.
const width = 600

// album draws every picture but those over time.
type album struct {
	Gaps, Tradeoff, Sweep, Sine, Noise, Signal, Stairs, Spread []plate
}

func draw(b *book, t *bench.Traces) album {
	var a album
	a.Tradeoff = tradeoffs(b, t)
	for _, bits := range b.rates() {
		a.Gaps = add(a.Gaps, gaps(b, bits))
		a.Sweep = add(a.Sweep, levelPlate(b, t.Sweep, bits, sweepKind))
		a.Sine = add(a.Sine, levelPlate(b, t.Sine, bits, sineKind))
		a.Noise = add(a.Noise, levelPlate(b, t.Noise, bits, noiseKind))
		a.Stairs = add(a.Stairs, stairs(b, t, bits))
		a.Spread = add(a.Spread, spread(b, t, bits))
	}
	a.Signal = add(nil, signal(t))
	return a
}

func add(list []plate, p *plate) []plate {
	if p == nil {
		return list
	}
	return append(list, *p)
}

// all lists the pictures in the order of the page.
func (a album) all() (out []plate) {
	for _, set := range [][]plate{a.Gaps, a.Tradeoff, a.Sweep, a.Sine, a.Noise, a.Signal, a.Stairs, a.Spread} {
		out = append(out, set...)
	}
	return out
}

func bitsTurn(bits int) []string { return []string{fmt.Sprint(bits)} }

// canvas is an empty picture of height h.
func canvas(name, title string, h float64) *drawing.Figure {
	return &drawing.Figure{Name: name, Title: title, W: width, H: h}
}

// whole is the panel that fills a picture of height h but for the labels.
func whole(f *drawing.Figure, x, y [2]float64) drawing.Panel {
	return drawing.Panel{
		F: f,
		X: drawing.Scale{Min: x[0], Max: x[1], From: 56, To: f.W - 14},
		Y: drawing.Scale{Min: y[0], Max: y[1], From: f.H - 44, To: 12},
	}
}
