// Package drawing makes pictures of curves: a Figure collects shapes in user
// units (x to the right, y down) and is written as SVG, to stand in a page or
// alone, or as PNG. Colours are named by role, so that a page can give them
// for light and dark; series differ by dash and marker too.
//
// SVG 1.1 (W3C Recommendation, 2011); PNG through gg and the Liberation fonts.
package drawing

import "math"

// Point is a place in user units. A coordinate that is NaN or infinite lifts
// the pen.
type Point struct{ X, Y float64 }

// Up lifts the pen between two parts of a line.
var Up = Point{math.NaN(), math.NaN()}

func (p Point) lifts() bool {
	return math.IsNaN(p.X-p.X) || math.IsNaN(p.Y-p.Y)
}

// Ink says how a shape is drawn.
type Ink struct {
	Role  string    // colour by meaning: a key of Roles
	Width float64   // of the stroke, user units; 0: filled instead
	Dash  []float64 // user units; nil: solid
}

// Anchor says which part of a text its place is.
type Anchor uint8

// Anchors, along the direction of writing.
const (
	Start Anchor = iota
	Middle
	End
)

type kind uint8

const (
	line kind = iota
	text
	group
	groupEnd
)

type shape struct {
	kind   kind
	ink    Ink
	points []Point // the place of a text
	closed bool
	words  string
	anchor Anchor
	upward bool     // text turned to read upward
	attrs  []string // name, value, ...
}

// Entry is a line of the key.
type Entry struct {
	Label  string
	Series int
	ID     string // data-line of the groups it stands for
}

// Figure is a picture.
type Figure struct {
	Name  string // file name without extension, unique in a report
	Title string
	Text  string // what it shows, in words
	W, H  float64
	Key   []Entry
	Attrs []string // of the root: name, value, ...

	shapes []shape
}

// Line draws through points.
func (f *Figure) Line(ink Ink, points ...Point) {
	f.shapes = append(f.shapes, shape{kind: line, ink: ink, points: points})
}

// Area draws a closed outline, filled where the ink has no width. attrs are
// names and values of attributes.
func (f *Figure) Area(ink Ink, points []Point, attrs ...string) {
	f.shapes = append(f.shapes, shape{kind: line, ink: ink, points: points, closed: true, attrs: attrs})
}

// Path is Line with attributes.
func (f *Figure) Path(ink Ink, points []Point, attrs ...string) {
	f.shapes = append(f.shapes, shape{kind: line, ink: ink, points: points, attrs: attrs})
}

// Rect draws a rectangle.
func (f *Figure) Rect(ink Ink, x, y, w, h float64, attrs ...string) {
	f.Area(ink, []Point{{x, y}, {x + w, y}, {x + w, y + h}, {x, y + h}}, attrs...)
}

// Words writes text; role is tick, label or head.
func (f *Figure) Words(role string, x, y float64, a Anchor, s string, attrs ...string) {
	f.shapes = append(f.shapes, shape{kind: text, ink: Ink{Role: role}, points: []Point{{x, y}}, words: s, anchor: a, attrs: attrs})
}

// Upward writes text that reads from bottom to top.
func (f *Figure) Upward(role string, x, y float64, s string) {
	f.shapes = append(f.shapes, shape{kind: text, ink: Ink{Role: role}, points: []Point{{x, y}}, words: s, anchor: Middle, upward: true})
}

// Group opens a group with attributes, to be ended with Ungroup.
func (f *Figure) Group(attrs ...string) {
	f.shapes = append(f.shapes, shape{kind: group, attrs: attrs})
}

// Ungroup ends the group opened last.
func (f *Figure) Ungroup() { f.shapes = append(f.shapes, shape{kind: groupEnd}) }
