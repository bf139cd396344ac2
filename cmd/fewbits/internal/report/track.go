package report

import (
	"encoding/base64"
	"math"

	"fewbits/cmd/fewbits/internal/bench"
)

// track is one clip over time as the page carries it: a byte a value, base64.
// Min and max are parts of Peak (1 to 255, 128 is zero), level is from -100
// dBov and SNR from -20 dB in half decibels; 255 stands for undefined.
type track struct {
	File    string   `json:"file"`
	Name    string   `json:"name"` // folder under audio/
	Step    float64  `json:"step"` // seconds
	Seconds float64  `json:"seconds"`
	Peak    float64  `json:"peak"` // full scale = 1.0
	Min     string   `json:"min"`
	Max     string   `json:"max"`
	Level   string   `json:"level"`
	SNR     []string `json:"snr"` // by design
}

const (
	mostPoints  = 2000   // a clip
	trackBudget = 280000 // characters of all tracks together
	undefined   = 255
)

// tracks packs the traces, fewer points a clip where there are many clips and
// designs.
func tracks(b *book, t *bench.Traces) []track {
	if len(t.Clips) == 0 {
		return nil
	}
	points := int(trackBudget * 3 / 4 / float64(len(t.Clips)*(3+len(b.Designs))))
	points = min(mostPoints, max(100, points))
	var out []track
	for i := range t.Clips {
		out = append(out, pack(b, &t.Clips[i], points))
	}
	return out
}

func pack(b *book, c *bench.ClipTrace, points int) track {
	out := track{File: c.File, Seconds: c.StepSeconds * float64(len(c.Max)), Peak: peak(c)}
	c = thin(c, points)
	out.Step = c.StepSeconds
	for i := range b.Clips {
		if b.Clips[i].File == c.File {
			out.Name, out.Seconds = b.Clips[i].Name, b.Clips[i].Seconds
		}
	}
	wave := func(v float64) float64 { return 128 + 127*v/out.Peak }
	out.Min = bytesOf(c.Min, wave)
	out.Max = bytesOf(c.Max, wave)
	out.Level = bytesOf(c.LevelDBov, func(v float64) float64 { return 2 * (v + 100) })
	for _, d := range b.Designs {
		out.SNR = append(out.SNR, bytesOf(c.SNR[d.Spec], func(v float64) float64 { return 2 * (v + 20) }))
	}
	return out
}

// thin merges steps until at most so many points are left: extremes of the
// waveform, mean power of the level, mean of the SNR in dB.
func thin(c *bench.ClipTrace, points int) *bench.ClipTrace {
	merge := (len(c.Max) + points - 1) / points
	if merge <= 1 {
		return c
	}
	out := &bench.ClipTrace{
		File: c.File, StepSeconds: c.StepSeconds * float64(merge), SNR: map[string][]bench.Num{},
		Min: reduce(c.Min, merge, least), Max: reduce(c.Max, merge, most), LevelDBov: reduce(c.LevelDBov, merge, power10),
	}
	for spec, v := range c.SNR {
		out.SNR[spec] = reduce(v, merge, mean)
	}
	return out
}

// peak is the largest magnitude, 1 where there is none.
func peak(c *bench.ClipTrace) float64 {
	top := 0.0
	for i := range c.Max {
		top = math.Max(top, math.Max(float64(c.Max[i]), -float64(c.Min[i])))
	}
	if !(top > 0) || math.IsInf(top, 0) {
		return 1
	}
	return top
}

// reduce merges so many values at a time; undefined ones are passed over.
func reduce(v []bench.Num, merge int, how func([]float64) float64) (out []bench.Num) {
	for i := 0; i < len(v); i += merge {
		var part []float64
		for _, x := range v[i:min(i+merge, len(v))] {
			if x.Defined() {
				part = append(part, float64(x))
			}
		}
		if len(part) == 0 {
			out = append(out, bench.Num(nan))
			continue
		}
		out = append(out, bench.Num(how(part)))
	}
	return out
}

func least(v []float64) float64 {
	out := v[0]
	for _, x := range v {
		out = math.Min(out, x)
	}
	return out
}

func most(v []float64) float64 {
	out := v[0]
	for _, x := range v {
		out = math.Max(out, x)
	}
	return out
}

func mean(v []float64) float64 {
	sum := 0.0
	for _, x := range v {
		sum += x
	}
	return sum / float64(len(v))
}

// power10 is the mean of levels as power.
func power10(v []float64) float64 {
	sum := 0.0
	for _, x := range v {
		sum += math.Pow(10, x/10)
	}
	return 10 * math.Log10(sum/float64(len(v)))
}

func bytesOf(v []bench.Num, scale func(float64) float64) string {
	out := make([]byte, len(v))
	for i, x := range v {
		out[i] = undefined
		if x.Defined() {
			out[i] = byte(math.Max(0, math.Min(254, math.Round(scale(float64(x))))))
		}
	}
	return base64.StdEncoding.EncodeToString(out)
}
