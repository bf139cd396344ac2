package report

import (
	"fmt"
	"math"
	"strconv"
	"strings"

	"fewbits/cmd/fewbits/internal/bench"
	"fewbits/cmd/fewbits/internal/report/drawing"
)

// quietest is the left end of magnitude axes, dB re full scale: just below one
// step of 16 bits.
const quietest = -96

// signal draws the amplitude histogram and the fitted models, both axes
// logarithmic.
func signal(t *bench.Traces) *plate {
	mags, density := histogram(t)
	lo, hi := math.Inf(1), math.Inf(-1)
	for _, v := range density {
		if v > 0 {
			lo, hi = drawing.Reach(lo, hi, math.Log10(v))
		}
	}
	if !(hi >= lo) {
		return nil
	}
	f := canvas("amplitudes", "How amplitudes are distributed", 360)
	p := whole(f, [2]float64{quietest, 0}, [2]float64{math.Floor(lo), math.Ceil(hi + 0.1)})
	bars(p, mags, density)
	p.Grid(drawing.Ticks(quietest, 0, 9), powers(p.Y), "magnitude, dB re full scale", "density, per unit of full scale")
	said := []string{fmt.Sprintf("the density falls from %s at the smallest magnitudes to %s at the largest", power(hi), power(lo))}
	for i, m := range t.Models {
		drawModel(p, m, i)
		label := m.Model + " (" + m.Over + ")"
		f.Key = append(f.Key, drawing.Entry{Label: label, Series: i, ID: fmt.Sprintf("m%d", i)})
		said = append(said, fmt.Sprintf("a table made for the fitted %s loses %s dB", label, fixed(m.DesignLossDB, 2)))
	}
	f.Text = "Histogram of all clips with the fitted models: " + strings.Join(said, "; ") + "."
	return &plate{Figure: f, Caption: "Grey: the recordings, both signs together. Lines: models fitted to them. Both axes are logarithmic."}
}

// histogram gives bin edges in dB and the density per unit of full scale, one
// sign, mean of both; NaN where a bin is empty.
func histogram(t *bench.Traces) (edges, density []float64) {
	if len(t.Edges) < 2 {
		return nil, nil
	}
	for _, e := range t.Edges {
		edges = append(edges, max(quietest, decibels(math.Max(e, 1e-12))))
	}
	for i := range min(len(t.Positive), len(t.Negative), len(t.Edges)-1) {
		d := (t.Positive[i] + t.Negative[i]) / 2 / (t.Edges[i+1] - t.Edges[i])
		if !(d > 0) {
			d = nan
		}
		density = append(density, d)
	}
	return edges[:len(density)+1], density
}

// bars fills the histogram; empty bins stay empty.
func bars(p drawing.Panel, edges, density []float64) {
	var outline []drawing.Point
	floor := p.Y.From
	for i, d := range density {
		top := floor
		if !math.IsNaN(d) {
			top = math.Min(floor, p.Y.At(math.Log10(d)))
		}
		outline = append(outline, drawing.Point{X: p.X.At(math.Min(0, edges[i])), Y: top},
			drawing.Point{X: p.X.At(math.Min(0, edges[i+1])), Y: top})
	}
	if n := len(outline); n > 0 {
		outline = append(outline, drawing.Point{X: outline[n-1].X, Y: floor}, drawing.Point{X: outline[0].X, Y: floor})
		p.F.Area(drawing.Ink{Role: "fill"}, outline, "data-part", "histogram")
	}
}

func drawModel(p drawing.Panel, m bench.ModelCurve, i int) {
	var xs, ys []float64
	for j, x := range m.Magnitude {
		y := math.Log10(math.Max(0, float64(m.Density[j])))
		at := decibels(x)
		if !(y >= p.Y.Min && y <= p.Y.Max && at >= p.X.Min && at <= p.X.Max) {
			y = nan
		}
		xs, ys = append(xs, at), append(ys, y)
	}
	p.F.Group("data-line", fmt.Sprintf("m%d", i))
	p.Curve(drawing.Stroke(i), xs, ys)
	for j := (i + 1) * len(xs) / 12; j < len(xs); j += max(1, len(xs)/4) {
		if !math.IsNaN(ys[j]) {
			at := p.Point(xs[j], ys[j])
			p.F.Marker(i, at.X, at.Y)
		}
	}
	p.F.Ungroup()
}

// powers are ticks at whole powers of ten, at most about eight.
func powers(s drawing.Scale) (out []drawing.Tick) {
	step := math.Max(1, math.Ceil((s.Max-s.Min)/8))
	for v := math.Ceil(s.Min); v <= s.Max; v += step {
		out = append(out, drawing.Tick{At: v, Label: power(v)})
	}
	return out
}

// power writes the whole power of ten next below 10^v, in letters that every
// font has.
func power(v float64) string {
	k := int(math.Floor(v))
	if k < -3 || k > 3 {
		return fmt.Sprintf("1e%d", k)
	}
	return strconv.FormatFloat(math.Pow10(k), 'f', -1, 64)
}
