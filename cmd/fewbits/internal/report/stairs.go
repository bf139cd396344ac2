package report

import (
	"fmt"
	"math"
	"strings"

	"fewbits/cmd/fewbits/internal/bench"
	"fewbits/cmd/fewbits/internal/report/drawing"
)

// stairs draws characteristic and cell widths of the designs of so many bits
// over the histogram, for positive amplitudes, logarithmic in magnitude.
func stairs(b *book, t *bench.Traces, bits int) *plate {
	designs := b.at(bits)
	f := canvas(fmt.Sprintf("staircases-%d", bits), fmt.Sprintf("Staircases, %d bits", bits), 520)
	x := drawing.Scale{Min: quietest, Max: 3, From: 56, To: f.W - 14}
	out := drawing.Panel{F: f, X: x, Y: drawing.Scale{Min: quietest, Max: 3, From: 232, To: 12}}
	cells := drawing.Panel{F: f, X: x, Y: drawing.Scale{Min: quietest, Max: 6, From: 476, To: 256}}
	weights(f, x, t, 476, 220)
	out.Grid(drawing.Ticks(quietest, 0, 9), drawing.Ticks(quietest, 0, 6), "", "output, dB re full scale")
	cells.Grid(drawing.Ticks(quietest, 0, 9), drawing.Ticks(quietest, 0, 6), "input magnitude, dB re full scale", "cell width, dB re full scale")
	var said []string
	for i, d := range designs {
		said = append(said, drawStair(b, out, cells, d, i))
	}
	f.Key = b.key(designs)
	f.Text = strings.Join(said, "; ") + "."
	return &plate{Figure: f, Turn: bitsTurn(bits), Caption: "Above: output against input, positive half. Below: width of the cell an input falls into; " +
		"a curve that lies lower where the grey is high spends its levels where the samples are. " +
		"Grey: share of the samples per dB of magnitude. An output of zero lies below the axis."}
}

// weights fills in the share of samples per dB of magnitude, scaled to its
// largest.
func weights(f *drawing.Figure, x drawing.Scale, t *bench.Traces, floor, height float64) {
	edges, density := histogram(t)
	most := 0.0
	share := make([]float64, len(density))
	for i, d := range density {
		if w := edges[i+1] - edges[i]; w > 0 && d > 0 {
			share[i] = d * (t.Edges[i+1] - t.Edges[i]) / w
			most = math.Max(most, share[i])
		}
	}
	if most == 0 {
		return
	}
	outline := []drawing.Point{{X: x.At(quietest), Y: floor}}
	for i, s := range share {
		y := floor - height*s/most
		outline = append(outline, drawing.Point{X: x.At(math.Min(edges[i], x.Max)), Y: y},
			drawing.Point{X: x.At(math.Min(edges[i+1], x.Max)), Y: y})
	}
	last := outline[len(outline)-1]
	f.Area(drawing.Ink{Role: "fill"}, append(outline, drawing.Point{X: last.X, Y: floor}))
}

// drawStair draws one design and says its smallest and largest cell.
func drawStair(b *book, out, cells drawing.Panel, d *bench.Design, i int) string {
	x, y, w := positive(d)
	s := b.series(d.Spec)
	ink := drawing.Stroke(s)
	out.F.Group("data-line", d.Name)
	defer out.F.Ungroup()
	xs, ys := drawing.Steps(x, y)
	out.Curve(ink, xs, ys)
	xs, ws := drawing.Steps(x, w)
	cells.Curve(ink, xs, ws)
	// Marks at set places, a little apart from design to design.
	for at := float64(quietest) + 8 + 3*float64(i); at < 0; at += 24 {
		for j := range y {
			if x[j] <= at && at < x[j+1] && !math.IsNaN(w[j]) {
				p := cells.Point(at, w[j])
				cells.F.Marker(s, p.X, p.Y)
			}
		}
	}
	least, most := drawing.Reach(math.Inf(1), math.Inf(-1), w...)
	if math.IsInf(least, 0) {
		return d.Spec + ": a single cell"
	}
	return fmt.Sprintf("%s: cells of %s to %s dB re full scale, overload beyond %s", d.Spec,
		fixed(bench.Num(least), 1), fixed(bench.Num(most), 1), fixed(d.Hi, 3))
}

// positive is the half of a staircase above zero in dB: edges of the cells,
// their outputs (NaN at or below 0) and their widths. The outermost cell ends
// at the overload bound, where that is within the axis.
func positive(d *bench.Design) (edges, outputs, widths []float64) {
	top := math.Min(float64(d.Hi), math.Pow(10, 3.0/20))
	if !(top > 0) {
		top = 1
	}
	edges = []float64{quietest}
	for k, v := range d.Values {
		lo, hi := math.Inf(-1), top
		if k > 0 {
			lo = d.Thresholds[k-1]
		}
		if k < len(d.Thresholds) {
			hi = math.Min(top, d.Thresholds[k])
		}
		if hi <= 0 || lo >= top || decibels(hi) <= quietest {
			continue
		}
		width := hi - lo
		if math.IsInf(lo, -1) {
			width = nan
		}
		edges = append(edges, decibels(hi))
		outputs = append(outputs, decibels(v))
		widths = append(widths, decibels(width))
	}
	return edges, outputs, widths
}
