package report

import (
	"math"

	"fewbits/cmd/fewbits/internal/bench"
)

// traces makes up what pictures need: points is the number of steps a clip.
func (g *invention) traces(r *bench.Results, points int) *bench.Traces {
	t := &bench.Traces{Schema: "fewbits/traces/1"}
	for i, c := range r.Clips {
		t.Clips = append(t.Clips, g.clipTrace(r, c, i, points))
	}
	g.signal(t)
	for _, m := range t.Models {
		b := bench.Bound{Model: m.Model}
		for bits := 0.0; bits <= 8; bits++ {
			b.Bits, b.SNRDB = append(b.Bits, bits), append(b.SNRDB, bench.Num(6.02*bits+1.2*float64(len(t.Bounds))))
		}
		t.Bounds = append(t.Bounds, b)
	}
	for _, d := range inventedDesigns {
		t.Sweep = append(t.Sweep, d.sweep())
		if d.bits == 8 {
			t.Sine = append(t.Sine, d.sine())
		}
		for k, class := range []string{"quiet", "middle", "loud"} {
			mid := d.quiet + float64(k)*(d.snr-d.quiet)/2
			s := bench.Spread{Design: d.spec, Class: class, Frames: 60, IdleDBov: bench.Num(-61 - d.quiet/4)}
			for q, off := range []float64{-8, -3, 0, 2.5, 6} {
				s.Quantiles[q] = bench.Num(mid + off)
			}
			t.Spread = append(t.Spread, s)
		}
	}
	return t
}

// signal makes up a Laplacian histogram of 60 logarithmic bins and two models.
func (g *invention) signal(t *bench.Traces) {
	const scale = 0.02
	cdf := func(x float64) float64 { return 1 - math.Exp(-x/scale) }
	t.Edges = []float64{0}
	for k := 0; k <= 60; k++ {
		t.Edges = append(t.Edges, math.Pow(10, -4.5+4.5*float64(k)/60))
	}
	for k := range t.Edges[1:] {
		mass := (cdf(t.Edges[k+1]) - cdf(t.Edges[k])) / 2 * (1 + 0.1*g.rng.NormFloat64())
		t.Positive, t.Negative = append(t.Positive, math.Max(0, mass)), append(t.Negative, math.Max(0, mass))
	}
	for i, model := range []string{"laplacian", "gaussian", "gamma"} {
		m := bench.ModelCurve{Fit: bench.Fit{
			Model: model, Over: "all", Shape: bench.Num([]float64{1, 2, 0.5}[i]), Scale: scale, RMS: 0.03,
			DesignLossDB: bench.Num([]float64{0.62, 2.91, 0.3}[i]), Samples: 200000,
		}}
		for x := -90.0; x <= 0; x += 1.5 {
			v := math.Pow(10, x/20)
			m.Magnitude = append(m.Magnitude, v)
			m.Density = append(m.Density, bench.Num([]float64{
				math.Exp(-v/scale) / 2 / scale,
				math.Exp(-v*v/2/0.03/0.03) / 0.03 / math.Sqrt(2*math.Pi),
				math.Exp(-v/0.035) / math.Sqrt(v) * 1.5,
			}[i]))
		}
		t.Models = append(t.Models, m)
	}
}

func (d inventedDesign) sweep() bench.Curve {
	c := bench.Curve{Design: d.spec, RangeSNR: 20, RangeDB: bench.Num(nan)}
	first, last := nan, nan
	for x := -60.0; x <= 10; x += 2 {
		v := d.snr + x
		if d.mu > 0 {
			v = d.snr - 3 - 10*math.Log10(1+math.Pow(10, (-x-30)/10))
		}
		v -= 10 * math.Log10(1+math.Pow(10, (x-4)/2))
		c.LevelDB, c.SNRDB = append(c.LevelDB, x), append(c.SNRDB, bench.Num(v))
		if v >= 20 {
			if math.IsNaN(first) {
				first = x
			}
			last = x
		}
	}
	c.RangeDB = bench.Num(last - first)
	return c
}

func (d inventedDesign) sine() bench.Curve {
	c := bench.Curve{Design: d.spec, RangeDB: bench.Num(nan)}
	for i, x := range []float64{-45, -40, -30, -20, -10, 0, 3} {
		c.LevelDB = append(c.LevelDB, x)
		c.LimitDB = append(c.LimitDB, bench.Num([]float64{24, 29, 35, 35, 35, 35, nan}[i]))
		v := 38.5
		if x < -30 {
			v += (x + 30) * 0.6
		}
		if d.mu == 0 {
			v = 48 + x
		}
		c.SNRDB = append(c.SNRDB, bench.Num(v))
	}
	return c
}

func (g *invention) clipTrace(r *bench.Results, c bench.Clip, i, points int) bench.ClipTrace {
	out := bench.ClipTrace{File: c.File, StepSeconds: c.Seconds / float64(points), SNR: map[string][]bench.Num{}}
	for k := range points {
		at := float64(k) / float64(points)
		loud := math.Pow(math.Abs(math.Sin(9*at+float64(i))*math.Sin(31*at)), 1.5)*0.3 + 0.0008
		out.Max = append(out.Max, bench.Num(loud*(0.7+0.3*g.rng.Float64())))
		out.Min = append(out.Min, bench.Num(-loud*(0.7+0.3*g.rng.Float64())))
		level := 20*math.Log10(loud) - 6
		out.LevelDBov = append(out.LevelDBov, bench.Num(level))
		for j, d := range inventedDesigns {
			v := d.snr + (level+24)*0.9
			if d.mu > 0 {
				v = d.seg + (level+24)*0.15
			}
			if k%97 == 5 && j == 0 {
				v = math.NaN()
			}
			out.SNR[d.spec] = append(out.SNR[d.spec], bench.Num(v+g.rng.NormFloat64()))
		}
	}
	return out
}
