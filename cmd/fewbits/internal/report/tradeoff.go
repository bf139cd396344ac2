package report

import (
	"fmt"
	"math"
	"slices"
	"strconv"
	"strings"

	"fewbits/cmd/fewbits/internal/bench"
	"fewbits/cmd/fewbits/internal/report/drawing"
)

// What the trade-off picture can have on its axes.
var (
	qualities = []string{segSNR, snr, openSNR}
	costs     = []string{"bits", entropy}
)

func (b *book) quality(name string) string {
	switch name {
	case snr:
		return "SNR, dB"
	case segSNR:
		return "segmental SNR, limited, dB"
	}
	return "segmental SNR, open, dB"
}

func costLabel(name string) string {
	if name == entropy {
		return "entropy of the indices, bits per sample"
	}
	return "bits per sample"
}

func tradeoffs(b *book, t *bench.Traces) (out []plate) {
	if len(b.Designs) == 0 {
		return nil
	}
	for _, y := range qualities {
		for _, x := range costs {
			out = append(out, tradeoff(b, t, y, x))
		}
	}
	return out
}

// tradeoff draws quality against cost, a line per kin.
func tradeoff(b *book, t *bench.Traces, quality, cost string) plate {
	f := canvas("tradeoff-"+slug(quality)+"-"+slug(cost), capital(b.quality(quality))+", against "+costLabel(cost), 380)
	p := whole(f, tradeoffX(b, cost), tradeoffY(b, quality))
	p.Grid(drawing.Ticks(p.X.Min, p.X.Max, 9), drawing.Ticks(p.Y.Min, p.Y.Max, 8), costLabel(cost), b.quality(quality))
	caption := "Filled marks: pooled over all frames and clips."
	if quality == b.Leading {
		caption += " Upright bars: its 95 % interval."
	}
	if cost == "bits" {
		caption += " Designs of the same number of bits stand a little apart so that none hides another."
	}
	if quality == snr && len(t.Bounds) > 0 {
		drawBounds(p, t.Bounds)
		caption += " Grey: what no code of so many bits can pass for a memoryless source with the named model's amplitudes (Shannon's bound): the model's, not these recordings', whose samples depend on one another."
	}
	var said []string
	for i, k := range b.kins {
		if s := tradeoffLine(b, p, i, k, quality, cost); s != "" {
			said = append(said, s)
			f.Key = append(f.Key, drawing.Entry{Label: k, Series: i, ID: "k" + strconv.Itoa(i)})
		}
	}
	f.Text = strings.Join(said, "; ") + "."
	return plate{Figure: f, Caption: caption, Turn: []string{quality, cost}}
}

// tradeoffLine draws one kin and says its points.
func tradeoffLine(b *book, p drawing.Panel, i int, k, quality, cost string) string {
	var members []*bench.Design
	for j := range b.Designs {
		if d := &b.Designs[j]; kin(d.Spec) == k && b.figure(d.Spec, quality).Defined() && !math.IsNaN(b.cost(d, cost)) {
			members = append(members, d)
		}
	}
	slices.SortStableFunc(members, func(x, y *bench.Design) int { return x.Bits - y.Bits })
	if len(members) == 0 {
		return ""
	}
	aside := 0.0
	if cost == "bits" {
		aside = 0.05 * (float64(i) - float64(len(b.kins)-1)/2)
	}
	p.F.Group("data-line", "k"+strconv.Itoa(i))
	defer p.F.Ungroup()
	var xs, ys []float64
	var said []string
	for _, d := range members {
		x, y := b.cost(d, cost), float64(b.figure(d.Spec, quality))
		xs, ys = append(xs, x+aside), append(ys, y)
		said = append(said, fmt.Sprintf("%s dB at %s", fixed(bench.Num(y), 1), trim(x)))
	}
	p.Curve(drawing.Stroke(i), xs, ys)
	for j, d := range members {
		if quality == b.Leading {
			whisker(p, i, xs[j], b.interval(d.Spec))
		}
		at := p.Point(xs[j], ys[j])
		p.F.Marker(i, at.X, at.Y, "data-design", d.Spec, "data-x", full(b.cost(d, cost)), "data-y", full(ys[j]))
	}
	return k + ": " + strings.Join(said, ", ")
}

// whisker draws an interval.
func whisker(p drawing.Panel, series int, x float64, v [2]bench.Num) {
	if !v[0].Defined() || !v[1].Defined() {
		return
	}
	ink := drawing.Ink{Role: drawing.Role(series), Width: 1.2}
	lo, hi := p.Point(x, float64(v[0])), p.Point(x, float64(v[1]))
	p.F.Line(ink, lo, hi)
	for _, at := range []drawing.Point{lo, hi} {
		p.F.Line(ink, drawing.Point{X: at.X - 3, Y: at.Y}, drawing.Point{X: at.X + 3, Y: at.Y})
	}
}

func (b *book) cost(d *bench.Design, name string) float64 {
	if name == "bits" {
		return float64(d.Bits)
	}
	return float64(b.figure(d.Spec, name))
}

func tradeoffX(b *book, cost string) [2]float64 {
	lo, hi := math.Inf(1), math.Inf(-1)
	for i := range b.Designs {
		lo, hi = drawing.Reach(lo, hi, b.cost(&b.Designs[i], cost))
	}
	if !(hi >= lo) {
		return [2]float64{0, 1}
	}
	return [2]float64{math.Floor(lo - 0.4), math.Ceil(hi + 0.4)}
}

func tradeoffY(b *book, quality string) [2]float64 {
	lo, hi := 0.0, 10.0
	for _, d := range b.Designs {
		lo, hi = drawing.Reach(lo, hi, float64(b.figure(d.Spec, quality)))
		if v := b.interval(d.Spec); quality == b.Leading {
			lo, hi = drawing.Reach(lo, hi, float64(v[0]), float64(v[1]))
		}
	}
	return [2]float64{math.Floor(lo/5-0.1) * 5, math.Ceil(hi/5+0.1) * 5}
}
