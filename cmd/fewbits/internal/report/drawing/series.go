package drawing

import (
	"fmt"
	"math"
)

// Roles are the colours by meaning, for a light and for a dark background.
// Series hues follow Okabe and Ito (2008); lightness is moved so that each has
// a contrast of at least 3 : 1 against its background (WCAG 2.1, 1.4.11).
var Roles = map[string][2]string{
	"paper": {"#ffffff", "#12171d"},
	"ink":   {"#1d2329", "#e6e9ec"},
	"soft":  {"#566069", "#a3adb6"},
	"rule":  {"#dfe3e6", "#2c343c"},
	"axis":  {"#8b949c", "#6c7781"},
	"fill":  {"#d5dbe0", "#333d47"},
	"tick":  {"#566069", "#a3adb6"},
	"label": {"#1d2329", "#e6e9ec"},
	"head":  {"#1d2329", "#e6e9ec"},
	"s0":    {"#0072b2", "#56b4e9"},
	"s1":    {"#c04e00", "#ff8f4d"},
	"s2":    {"#007f5c", "#2fc99f"},
	"s3":    {"#a8527f", "#e79fc8"},
	"s4":    {"#946400", "#f0b63a"},
	"s5":    {"#5a4fcf", "#a79ff5"},
	"s6":    {"#6b6b00", "#d6cc4a"},
	"s7":    {"#3d4a55", "#c3ccd4"},
}

const hues = 8

var dashes = [][]float64{nil, {7, 3}, {2, 2.5}, {9, 3, 2, 3}, {5, 2}, {12, 4}, {2, 2, 6, 2}, {1, 3}}

// shift tells series of the same hue apart: each round of hues takes other
// dashes and markers.
func shift(series int) int { return (series + series/hues*3) % len(dashes) }

// Role is the colour of a series.
func Role(series int) string { return fmt.Sprintf("s%d", series%hues) }

// Stroke is the line of a series.
func Stroke(series int) Ink {
	return Ink{Role: Role(series), Width: 1.8, Dash: dashes[shift(series)]}
}

// Marker draws the mark of a series at x, y.
func (f *Figure) Marker(series int, x, y float64, attrs ...string) {
	const r = 4.2
	var points []Point
	for _, p := range marks[shift(series)] {
		points = append(points, Point{x + r*p.X, y + r*p.Y})
	}
	f.Area(Ink{Role: Role(series)}, points, attrs...)
}

// marks are outlines about the origin of about the same area.
var marks = [][]Point{
	regular(16, 0, 0.95),
	regular(4, math.Pi/4, 1.25),
	regular(3, -math.Pi/2, 1.4),
	regular(4, 0, 1.3),
	regular(3, math.Pi/2, 1.4),
	star(4, math.Pi/4, 1.45, 0.5),
	star(4, 0, 1.5, 0.5),
	star(5, -math.Pi/2, 1.45, 0.6),
}

func regular(n int, from, r float64) []Point { return star(n, from, r, 0) }

// star has n points at radius r and, where inner is above 0, as many between.
func star(n int, from, r, inner float64) (out []Point) {
	for i := range n {
		a := from + 2*math.Pi*float64(i)/float64(n)
		out = append(out, Point{r * math.Cos(a), r * math.Sin(a)})
		if inner > 0 {
			a += math.Pi / float64(n)
			out = append(out, Point{inner * math.Cos(a), inner * math.Sin(a)})
		}
	}
	return out
}

// Swatch is a key entry's line and mark as a small picture.
func Swatch(series int) *Figure {
	f := &Figure{W: 36, H: 12}
	f.Line(Stroke(series), Point{1, 6}, Point{35, 6})
	f.Marker(series, 18, 6)
	return f
}
