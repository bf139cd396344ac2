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
	return t
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
