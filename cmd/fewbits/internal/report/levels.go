package report

import (
	"fmt"
	"math"
	"strings"

	"fewbits/cmd/fewbits/internal/bench"
	"fewbits/cmd/fewbits/internal/report/drawing"
)

// levelKind is one of the pictures of SNR against level.
type levelKind struct{ name, title, x, y, caption string }

var (
	sweepKind = levelKind{
		"level", "SNR against level", "level relative to the recordings' own, dB", "SNR, dB",
		"The recordings made louder or softer before coding. The bars at the foot mark the range of levels with at least %s dB of SNR.",
	}
	sineKind = levelKind{
		"sine", "Sine test", "level of the 1020 Hz sine, dBm0", "signal to total distortion, dB",
		"Phase-averaged, dBm0 from the design's own overload point. Grey line: limits of ITU-T G.712, taken second-hand.",
	}
	noiseKind = levelKind{
		"noise", "Noise test", "level of the band-limited Gaussian noise, dBm0", "signal to total distortion, dB",
		"dBm0 from the design's own overload point. Grey line: limits of ITU-T G.712, unverified: no verdict is drawn from them.",
	}
)

// levelPlate draws the curves of the designs of so many bits; nil without any.
func levelPlate(b *book, curves []bench.Curve, bits int, k levelKind) *plate {
	var of []bench.Curve
	for _, c := range curves {
		if d := b.design[c.Design]; d != nil && d.Bits == bits {
			of = append(of, c)
		}
	}
	if len(of) == 0 {
		return nil
	}
	f := canvas(fmt.Sprintf("%s-%d", k.name, bits), fmt.Sprintf("%s, %d bits", k.title, bits), 340)
	p := whole(f, levelX(of), levelY(of))
	p.Grid(drawing.Ticks(p.X.Min, p.X.Max, 8), drawing.Ticks(p.Y.Min, p.Y.Max, 7), k.x, k.y)
	drawLimits(p, of)
	var said []string
	for i, c := range of {
		said = append(said, levelCurve(b, p, c, i))
		f.Key = append(f.Key, drawing.Entry{Label: c.Design, Series: b.series(c.Design), ID: b.design[c.Design].Name})
	}
	f.Text = strings.Join(said, "; ") + "."
	caption := k.caption
	if k.name == "level" {
		caption = fmt.Sprintf(k.caption, trim(of[0].RangeSNR))
	}
	return &plate{Figure: f, Caption: caption, Turn: bitsTurn(bits)}
}

// levelCurve draws one design and says what it reaches.
func levelCurve(b *book, p drawing.Panel, c bench.Curve, i int) string {
	s := b.series(c.Design)
	p.F.Group("data-line", b.design[c.Design].Name)
	defer p.F.Ungroup()
	y := floats(c.SNRDB)
	p.Curve(drawing.Stroke(s), c.LevelDB, y)
	every := max(1, len(y)/6)
	for j := (i * every / 5) % every; j < len(y); j += every {
		if y[j] >= p.Y.Min && y[j] <= p.Y.Max {
			at := p.Point(c.LevelDB[j], y[j])
			p.F.Marker(s, at.X, at.Y)
		}
	}
	return c.Design + ": " + reaches(p, c, s, i)
}

// reaches marks the dynamic range, or compares with the limits.
func reaches(p drawing.Panel, c bench.Curve, series, i int) string {
	if len(c.LimitDB) > 0 {
		return margin(c)
	}
	lo, hi, ok := rangeEnds(c)
	if !ok || !c.RangeDB.Defined() {
		return fmt.Sprintf("nowhere %s dB of SNR", trim(c.RangeSNR))
	}
	y := p.Y.From - 7 - 7*float64(i)
	ink := drawing.Ink{Role: drawing.Role(series), Width: 2}
	p.F.Line(ink, drawing.Point{X: p.X.At(lo), Y: y}, drawing.Point{X: p.X.At(hi), Y: y})
	for _, x := range []float64{lo, hi} {
		p.F.Rect(drawing.Ink{Role: ink.Role}, p.X.At(x)-2.5, y-2.5, 5, 5)
	}
	return fmt.Sprintf("at least %s dB of SNR over %s dB of level", trim(c.RangeSNR), fixed(c.RangeDB, 1))
}

// rangeEnds are the levels between which the widest run of points has at least
// RangeSNR, interpolated at its ends.
func rangeEnds(c bench.Curve) (lo, hi float64, ok bool) {
	y := floats(c.SNRDB)
	for i := 0; i < len(y); i++ {
		if !(y[i] >= c.RangeSNR) {
			continue
		}
		j := i
		for j+1 < len(y) && y[j+1] >= c.RangeSNR {
			j++
		}
		a, z := crossing(c, y, i-1, i), crossing(c, y, j+1, j)
		if !ok || z-a > hi-lo {
			lo, hi, ok = a, z, true
		}
		i = j
	}
	return lo, hi, ok
}

// crossing is the level between point out (below RangeSNR, or none) and point
// in (not below) where the curve crosses it.
func crossing(c bench.Curve, y []float64, out, in int) float64 {
	if out < 0 || out >= len(y) || math.IsNaN(y[out]) {
		return c.LevelDB[in]
	}
	part := (c.RangeSNR - y[in]) / (y[out] - y[in])
	return c.LevelDB[in] + part*(c.LevelDB[out]-c.LevelDB[in])
}

// margin is the least distance of a curve above its limits.
func margin(c bench.Curve) string {
	least, at := math.Inf(1), 0.0
	for i, limit := range c.LimitDB {
		if m := float64(c.SNRDB[i] - limit); m < least {
			least, at = m, c.LevelDB[i]
		}
	}
	if math.IsInf(least, 0) {
		return "no limit applies"
	}
	side := "above"
	if least < 0 {
		side = "below"
	}
	return fmt.Sprintf("%s dB %s the limit where it is nearest, at %s dBm0", trim(math.Abs(math.Round(10*least)/10)), side, trim(at))
}

// drawLimits draws the limits of the first curve that has some.
func drawLimits(p drawing.Panel, curves []bench.Curve) {
	for _, c := range curves {
		if len(c.LimitDB) > 0 {
			p.Curve(drawing.Ink{Role: "axis", Width: 5}, c.LevelDB, floats(c.LimitDB))
			return
		}
	}
}

func levelX(curves []bench.Curve) [2]float64 {
	lo, hi := math.Inf(1), math.Inf(-1)
	for _, c := range curves {
		lo, hi = drawing.Reach(lo, hi, c.LevelDB...)
	}
	if !(hi > lo) {
		return [2]float64{-1, 1}
	}
	return [2]float64{lo, hi}
}

func levelY(curves []bench.Curve) [2]float64 {
	lo, hi := 0.0, 20.0
	for _, c := range curves {
		lo, hi = drawing.Reach(lo, hi, floats(c.SNRDB)...)
		lo, hi = drawing.Reach(lo, hi, floats(c.LimitDB)...)
	}
	return [2]float64{math.Max(-10, math.Floor(lo/10)*10), math.Ceil(hi/10+0.1) * 10}
}
