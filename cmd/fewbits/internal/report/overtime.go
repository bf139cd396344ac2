package report

import (
	"fmt"
	"math"
	"regexp"

	"fewbits/cmd/fewbits/internal/bench"
	"fewbits/cmd/fewbits/internal/report/drawing"
)

// The places of the three panels over time; the page's script redraws in them.
const (
	timeLeft, timeRight   = 56, width - 14
	waveTop, waveFoot     = 18, 80
	levelTop, levelFoot   = 96, 166
	framesTop, framesFoot = 182, 326
	timeHeight            = 370
	levelMin, levelMax    = -90, 0
)

// overTime draws a clip: waveform, level, and SNR of two designs.
func overTime(b *book, t *bench.Traces, c *bench.ClipTrace, a, z *bench.Design) plate {
	c = thin(c, width)
	f := canvas("time-"+odd.ReplaceAllString(clipName(b, c.File), "-"), "Over time: "+c.File, timeHeight)
	end := float64(len(c.Max)) * c.StepSeconds
	x := drawing.Scale{Min: 0, Max: math.Max(end, 1e-9), From: timeLeft, To: timeRight}
	low, top := framesReach(t)
	panel := func(lo, hi, foot, head float64) drawing.Panel {
		return drawing.Panel{F: f, X: x, Y: drawing.Scale{Min: lo, Max: hi, From: foot, To: head}}
	}
	wave := panel(-1, 1, waveFoot, waveTop)
	level := panel(levelMin, levelMax, levelFoot, levelTop)
	frames := panel(low, top, framesFoot, framesTop)
	wave.Grid(nil, nil, "", "wave")
	level.Grid(nil, drawing.Ticks(levelMin, levelMax, 3), "", "dBov")
	frames.Grid(nil, drawing.Ticks(low, top, 6), "time, s", "SNR, dB")
	timeTicks(f, x)
	peak := peak(c)
	f.Area(drawing.Ink{Role: "soft"}, envelope(wave, c, peak), "data-part", "wave")
	f.Words("tick", timeLeft, waveTop-5, drawing.Start, peakLabel(peak), "data-part", "peak")
	f.Path(drawing.Ink{Role: "soft", Width: 1.2}, level.Points(steps(c), floats(c.LevelDBov)), "data-part", "level")
	for i, d := range []*bench.Design{a, z} {
		ink := pairInk(i)
		f.Path(ink, frames.Points(steps(c), floats(c.SNR[d.Spec])), "data-part", []string{"a", "b"}[i])
		f.Key = append(f.Key, drawing.Entry{Label: []string{"A ", "B "}[i] + d.Spec, Series: i})
	}
	f.Path(drawing.Ink{Role: "ink", Width: 1.4}, []drawing.Point{{X: timeLeft, Y: waveTop}, {X: timeLeft, Y: framesFoot}}, "data-part", "cursor")
	f.Text = fmt.Sprintf("Waveform, level and SNR of %s over %s seconds, coded by %s (A) and %s (B).", c.File, trim(end), a.Spec, z.Spec)
	return plate{Figure: f, Caption: "From above: waveform, level in dBov, and SNR of A (solid) and B (dashed); gaps where there is no signal or no error."}
}

// pairInk are the lines of A and B.
func pairInk(i int) drawing.Ink {
	ink := drawing.Ink{Role: drawing.Role(i), Width: 1.4}
	if i == 1 {
		ink.Dash = []float64{5, 2}
	}
	return ink
}

func timeTicks(f *drawing.Figure, x drawing.Scale) {
	f.Group("data-part", "ticks")
	for _, t := range drawing.Ticks(x.Min, x.Max, 8) {
		f.Words("tick", x.At(t.At), framesFoot+18, drawing.Middle, t.Label)
	}
	f.Ungroup()
}

func peakLabel(peak float64) string {
	return "peak " + drawing.Minus(fixed(bench.Num(decibels(peak)), 0)) + " dB"
}

// steps are the middles of the steps in seconds.
func steps(c *bench.ClipTrace) []float64 {
	out := make([]float64, len(c.Max))
	for i := range out {
		out[i] = (float64(i) + 0.5) * c.StepSeconds
	}
	return out
}

// envelope runs along the maxima and back along the minima.
func envelope(p drawing.Panel, c *bench.ClipTrace, peak float64) []drawing.Point {
	x := steps(c)
	var out []drawing.Point
	for i := range x {
		if c.Max[i].Defined() {
			out = append(out, p.Point(x[i], float64(c.Max[i])/peak))
		}
	}
	for i := len(x) - 1; i >= 0; i-- {
		if c.Min[i].Defined() {
			out = append(out, p.Point(x[i], float64(c.Min[i])/peak))
		}
	}
	return out
}

// framesReach is the SNR axis, the same for all clips and designs.
func framesReach(t *bench.Traces) (low, top float64) {
	low, top = 0, 30
	for i := range t.Clips {
		for _, v := range t.Clips[i].SNR {
			low, top = drawing.Reach(low, top, floats(v)...)
		}
	}
	return math.Max(-20, math.Floor(low/10)*10), math.Min(100, math.Ceil(top/10)*10)
}

var odd = regexp.MustCompile(`[^\pL\pN._-]+`)

func clipName(b *book, file string) string {
	for i := range b.Clips {
		if b.Clips[i].File == file {
			return b.Clips[i].Name
		}
	}
	return file
}
