package drawing

import (
	"math"
	"strconv"
)

// Scale maps values to user units.
type Scale struct{ Min, Max, From, To float64 }

// At is the place of v.
func (s Scale) At(v float64) float64 {
	return s.From + (v-s.Min)/(s.Max-s.Min)*(s.To-s.From)
}

// clip is At kept within the scale; NaN stays.
func (s Scale) clip(v float64) float64 {
	if v < s.Min {
		v = s.Min
	}
	if v > s.Max {
		v = s.Max
	}
	return s.At(v)
}

// Tick is a labelled value of an axis.
type Tick struct {
	At    float64
	Label string
}

// Ticks are about n round values from min to max.
func Ticks(min, max float64, n int) (out []Tick) {
	if !(max > min) || n < 1 {
		return nil
	}
	step := math.Pow(10, math.Floor(math.Log10((max-min)/float64(n))))
	for _, m := range []float64{1, 2, 5, 10} {
		if (max-min)/(m*step) <= float64(n)+1e-9 {
			step *= m
			break
		}
	}
	decimals := 0
	if step < 1 {
		decimals = int(math.Ceil(-math.Log10(step) - 1e-9))
	}
	for k := math.Ceil(min/step - 1e-9); k*step <= max+1e-9*step; k++ {
		out = append(out, Tick{k * step, Minus(strconv.FormatFloat(k*step+0, 'f', decimals, 64))})
	}
	return out
}

// Minus writes a number's sign as one.
func Minus(s string) string {
	if len(s) > 0 && s[0] == '-' {
		if s == "-0" {
			return "0"
		}
		return "−" + s[1:]
	}
	return s
}

// Panel is a pair of axes within a figure.
type Panel struct {
	F    *Figure
	X, Y Scale
}

// Grid draws frame, ticks and labels.
func (p Panel) Grid(x, y []Tick, xlabel, ylabel string) {
	f := p.F
	left, right := min(p.X.From, p.X.To), max(p.X.From, p.X.To)
	bottom, top := max(p.Y.From, p.Y.To), min(p.Y.From, p.Y.To)
	rule := Ink{Role: "rule", Width: 1}
	for _, t := range x {
		at := p.X.At(t.At)
		f.Line(rule, Point{at, top}, Point{at, bottom})
		f.Words("tick", at, bottom+18, Middle, t.Label)
	}
	for _, t := range y {
		at := p.Y.At(t.At)
		f.Line(rule, Point{left, at}, Point{right, at})
		f.Words("tick", left-6, at+4, End, t.Label)
	}
	f.Line(Ink{Role: "axis", Width: 1}, Point{left, top}, Point{left, bottom}, Point{right, bottom})
	if xlabel != "" {
		f.Words("label", (left+right)/2, bottom+37, Middle, xlabel)
	}
	if ylabel != "" {
		f.Upward("label", 13, (top+bottom)/2, ylabel)
	}
}

// Point is the place of a pair of values.
func (p Panel) Point(x, y float64) Point { return Point{p.X.At(x), p.Y.At(y)} }

// Curve draws y against x, lifting the pen where either is NaN; what lies above
// or below the axes is cut off where it crosses their edge.
func (p Panel) Curve(ink Ink, x, y []float64) {
	var out []Point
	for i := range x {
		if i > 0 {
			out = append(out, p.crossings(x[i-1], y[i-1], x[i], y[i])...)
		}
		if y[i] >= p.Y.Min && y[i] <= p.Y.Max {
			out = append(out, p.Point(x[i], y[i]))
		} else {
			out = append(out, Up)
		}
	}
	p.F.Path(ink, out)
}

// crossings are the places between two points, in order, where a line leaves or
// enters the axes.
func (p Panel) crossings(x0, y0, x1, y1 float64) (out []Point) {
	edges := []float64{p.Y.Min, p.Y.Max}
	if y1 < y0 {
		edges[0], edges[1] = edges[1], edges[0]
	}
	for _, edge := range edges {
		if (y0 < edge) != (y1 < edge) && y0 != edge && y1 != edge && !math.IsNaN(y0+y1) {
			out = append(out, p.Point(x0+(edge-y0)/(y1-y0)*(x1-x0), edge))
		}
	}
	return out
}

// Points are the places of pairs of values; those outside the axes stand at
// their edge.
func (p Panel) Points(x, y []float64) []Point {
	out := make([]Point, len(x))
	for i := range x {
		out[i] = Point{p.X.clip(x[i]), p.Y.clip(y[i])}
	}
	return out
}

// Steps is the outline of a function that is y[i] from x[i] to x[i+1].
func Steps(x, y []float64) (xs, ys []float64) {
	for i, v := range y {
		xs = append(xs, x[i], x[i+1])
		ys = append(ys, v, v)
	}
	return xs, ys
}

// Reach widens [lo, hi] over the defined values of v.
func Reach(lo, hi float64, v ...float64) (float64, float64) {
	for _, x := range v {
		if !math.IsNaN(x) && !math.IsInf(x, 0) {
			lo, hi = math.Min(lo, x), math.Max(hi, x)
		}
	}
	return lo, hi
}
