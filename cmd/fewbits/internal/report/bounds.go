package report

import (
	"cmp"
	"math"
	"slices"

	"fewbits/cmd/fewbits/internal/bench"
	"fewbits/cmd/fewbits/internal/report/drawing"
)

// drawBounds draws the models' bounds and names them, the highest first.
func drawBounds(p drawing.Panel, bounds []bench.Bound) {
	list := slices.Clone(bounds)
	slices.SortStableFunc(list, func(x, y bench.Bound) int { return cmp.Compare(height(y), height(x)) })
	var names []string
	for _, bound := range list {
		var xs, ys []float64
		for j, x := range bound.Bits {
			y := float64(bound.SNRDB[j])
			if !(x >= p.X.Min && x <= p.X.Max && y >= p.Y.Min && y <= p.Y.Max) {
				y = nan
			}
			xs, ys = append(xs, x), append(ys, y)
		}
		p.Curve(drawing.Ink{Role: "axis", Width: 1.3, Dash: []float64{1.5, 2.5}}, xs, ys)
		names = append(names, bound.Model)
	}
	p.F.Words("tick", p.X.To-8, p.Y.From-10, drawing.End, "grey dots: Shannon's bound of the models, from above "+listed(names))
}

// height is a bound's SNR at its first number of bits.
func height(b bench.Bound) float64 {
	if len(b.SNRDB) == 0 {
		return math.Inf(-1)
	}
	return float64(b.SNRDB[0]) - 20*math.Log10(2)*b.Bits[0]
}
