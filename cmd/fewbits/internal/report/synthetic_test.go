package report

import (
	"fmt"
	"math"
	"math/rand/v2"

	"fewbits/cmd/fewbits/internal/bench"
)

// synthetic makes up a run: recordings x 12 designs with figures of the size
// that speech gives. Nothing of it was measured; it only has to be consistent
// where the report relies on it.
func synthetic(clips, points int) (*bench.Results, *bench.Traces) {
	g := &invention{rng: rand.New(rand.NewPCG(7, 11))}
	r := &bench.Results{
		Schema: bench.Schema, Version: "v0.0.0-test",
		Command: []string{"fewbits", "compare", "--bits", "4,6,8", "harbour/"},
		Settings: bench.Settings{
			FrameSeconds: 0.02, RangeDB: 30, LimitsDB: [2]float64{-10, 35}, OpenLimitsDB: [2]float64{-10, 100},
			Depth: "16", Bits: []int{4, 6, 8}, Seed: 1,
		},
		Definitions:    inventedDefinitions,
		Leading:        bench.OpenSNR,
		LeadingWhy:     "segsnr_open_db decides: 62 % of the frames of mu-law:8 sit at the 35 dB ceiling of segsnr_db",
		IntervalMethod: fmt.Sprintf("Student's t on %d clips, each weighing by its frames in range", clips),
		Warnings:       []string{"the recordings have more than one sample rate"},
		Refused:        []bench.Refusal{{File: "harbour/torn.wav", Reason: "byte offset 36: data chunk claims 90,000 bytes, the file holds 12"}},
	}
	for i := range clips {
		r.Clips = append(r.Clips, g.clip(i))
	}
	for _, d := range inventedDesigns {
		r.Designs = append(r.Designs, d.design())
	}
	g.measure(r)
	return r, g.traces(r, points)
}

type invention struct{ rng *rand.Rand }

// inventedDefinitions name the figures that a run has, with shorter words.
var inventedDefinitions = []bench.Definition{
	{Name: "mse", Unit: "FS^2", Means: "mean squared error over all samples, full scale = 1.0"},
	{Name: "snr_db", Unit: "dB", Means: "signal energy over error energy of all samples"},
	{Name: "segsnr_db", Unit: "dB", Means: "mean of the frames' SNR in dB over the frames in range, limited"},
	{Name: "segsnr_all_db", Unit: "dB", Means: "as segsnr_db over all frames with signal"},
	{Name: "segsnr_open_db", Unit: "dB", Means: "as segsnr_db limited to -10 to 100 dB"},
	{Name: "frames_used", Unit: "frames", Means: "frames in range"},
	{Name: "frames_out_of_range", Unit: "frames", Means: "frames with signal out of range"},
	{Name: "frames_left_out", Unit: "frames", Means: "frames without signal"},
	{Name: "at_upper_limit", Unit: "share", Means: "share of the frames of segsnr_db at its upper limit"},
	{Name: "at_lower_limit", Unit: "share", Means: "share of the frames of segsnr_db at its lower limit"},
	{Name: "all_at_upper_limit", Unit: "share", Means: "share of the frames of segsnr_all_db at its upper limit"},
	{Name: "all_at_lower_limit", Unit: "share", Means: "share of the frames of segsnr_all_db at its lower limit"},
	{Name: "open_at_upper_limit", Unit: "share", Means: "share of the frames of segsnr_open_db at its upper limit"},
	{Name: "open_at_lower_limit", Unit: "share", Means: "share of the frames of segsnr_open_db at its lower limit"},
	{Name: "floored", Unit: "share", Means: "share of the frames whose error was raised to the recording's rounding"},
	{Name: "overload_fraction", Unit: "share", Means: "share of samples strictly outside the overload bounds"},
	{Name: "granular_mse", Unit: "FS^2", Means: "part of mse within the overload bounds"},
	{Name: "overload_mse", Unit: "FS^2", Means: "part of mse from overloaded samples"},
	{Name: "entropy_bits", Unit: "bits/sample", Means: "first-order empirical entropy of the indices"},
	{Name: "quiet_snr_db", Unit: "dB", Means: "SNR over the frames out of range"},
	{Name: "idle_dbov", Unit: "dBov", Means: "level of the output over the frames out of range"},
	{Name: "idle_gain_db", Unit: "dB", Means: "output level over the frames out of range less the input's there"},
	{Name: "idle_toggling", Unit: "share", Means: "share of samples whose output differs from the one before, there"},
	{Name: "match_gain", Unit: "", Means: "gain that brings the output to the input"},
}

// inventedDesign has rough figures of a family at so many bits.
type inventedDesign struct {
	spec, family       string
	bits               int
	snr, seg, quiet    float64
	entropy, over      float64
	mu, peak           float64 // staircase: mu-law with this mu up to peak; 0: uniform
	fitted, arithmetic bool
}

var inventedDesigns = []inventedDesign{
	{"uniform:4", "uniform", 4, 6.1, 1.2, -4, 1.4, 0, 0, 1, false, true},
	{"uniform:4,overload=optimal", "uniform", 4, 13.2, 9.8, -1, 2.6, 0.0043, 0, 0.32, true, true},
	{"mu-law:4", "mu-law", 4, 12.4, 12.1, 2.2, 3.6, 0, 255, 1, false, false},
	{"lloyd-max:4,from=gamma", "lloyd-max", 4, 15.4, 11.6, 1, 2.9, 0.0004, 60, 0.6, true, false},
	{"uniform:6", "uniform", 6, 18.2, 13.1, 2, 2.7, 0, 0, 1, false, true},
	{"mu-law:6", "mu-law", 6, 24.6, 24.3, 14.4, 5.4, 0, 255, 1, false, false},
	{"lloyd-max:6,from=gamma", "lloyd-max", 6, 27.3, 22.6, 11, 4.6, 0.00005, 90, 0.9, true, false},
	{"uniform:8", "uniform", 8, 30.1, 25.2, 12, 4.3, 0, 0, 1, false, true},
	{"mu-law:8", "mu-law", 8, 36.6, 36.4, 27, 7.3, 0, 255, 1, false, false},
	{"a-law:8", "a-law", 8, 36.9, 36.2, 21, 7.2, 0, 100, 1, false, false},
	{"g711-mu", "g711-mu", 8, 36.2, 36.1, 26.5, 7.2, 0.0000002, 255, 1, false, false},
	{"lloyd-max:8,from=gamma", "lloyd-max", 8, 39.4, 34.1, 19, 6.5, 0, 120, 1, true, false},
}

func (d inventedDesign) design() bench.Design {
	n := 1 << d.bits
	out := bench.Design{
		Spec: d.spec, Name: safe(d.spec), Family: d.family, Levels: n, Bits: d.bits, MadeOn: "fixed",
		Lo: bench.Num(-d.peak), Hi: bench.Num(d.peak), Residual: bench.Num(math.NaN()), Notes: []string{},
	}
	out.IdleLSB, out.IdleZero, out.IdleOneLSB = 1.0/32768, bench.Num(-58-d.quiet/2), bench.Num(-58-d.quiet/2)
	if d.family == "g711-mu" {
		out.IdleZero, out.IdleOneLSB = bench.Num(nan), bench.Num(nan)
	}
	if d.fitted {
		out.MadeOn, out.Proof = "a gamma model at the recordings' rms, the recordings it is tested on", "gap to the bound"
	}
	if !d.arithmetic {
		out.TableBytes, out.Comparisons = 2*n, d.bits
	}
	for i := 1; i < n; i++ {
		out.Thresholds = append(out.Thresholds, d.expand(2*float64(i)/float64(n)-1))
	}
	for i := range n {
		out.Values = append(out.Values, d.expand(2*(float64(i)+0.5)/float64(n)-1))
	}
	return out
}

func (d inventedDesign) expand(u float64) float64 {
	if d.mu == 0 {
		return d.peak * u
	}
	return d.peak * math.Copysign((math.Pow(1+d.mu, math.Abs(u))-1)/d.mu, u)
}

func safe(spec string) string {
	out := []byte(spec)
	for i, c := range out {
		if c == ':' || c == ',' || c == '=' {
			out[i] = '-'
		}
	}
	return string(out)
}

func (g *invention) clip(i int) bench.Clip {
	level := -24 - 8*g.rng.Float64()
	c := bench.Clip{
		File: fmt.Sprintf("harbour/call-%02d.wav", i+1), Name: fmt.Sprintf("call-%02d", i+1),
		SHA256: fmt.Sprintf("%064x", g.rng.Uint64()), Format: "WAV, PCM 16-bit", RateHz: 8000, Channels: 1,
		Samples: 8000 * int64(4+i%5), Seconds: float64(4 + i%5),
		LevelDBov: bench.Num(level), ActiveDBov: bench.Num(level + 2.1), Activity: 0.62,
		PeakDB: bench.Num(level + 18), CrestDB: 18, DC: 0.0003, LSB: 1.0 / 32768, EffectiveBits: 16,
		NoiseDBov: bench.Num(level - 33), ZeroShare: 0.02, Frames: 50 * int64(4+i%5), FramesInRange: 32 * int64(4+i%5),
		OptimalTableDB: bench.Num(math.NaN()),
	}
	if i%4 == 1 {
		f := bench.Finding{
			Channel: 1, Kind: "clipped", Severity: "warning", Value: 3, Unit: "runs",
			Sentence: "clipped: 3 runs of 4 or more samples at full scale", Advice: "record again with the gain lower",
		}
		c.Findings, c.Warnings = []bench.Finding{f}, []string{f.Sentence + ": " + f.Advice}
	}
	for k, model := range []string{"laplacian", "gaussian", "gamma", "gamma-free", "generalized-gaussian"} {
		for _, over := range []string{"all", "in-range"} {
			c.Fits = append(c.Fits, bench.Fit{
				Model: model, Over: over, Shape: bench.Num([]float64{1, 2, 0.5, 0.41, 0.43}[k]), Scale: 0.02, RMS: 0.045,
				LogLik: bench.Num(2.9 - 0.2*float64(k%3)), AIC: bench.Num(-250000 + 900*float64(k)), KS: bench.Num(0.02 + 0.03*float64(k%3)),
				DesignLossDB: bench.Num([]float64{0.62, 2.9, 0.31, 0.2, 0.12}[k]), Samples: c.Samples,
			})
		}
	}
	return c
}

// measure fills results, pooled figures and verdicts.
func (g *invention) measure(r *bench.Results) {
	for _, c := range r.Clips {
		for _, d := range inventedDesigns {
			r.Results = append(r.Results, bench.Result{Clip: c.File, Design: d.spec, Figures: g.figures(d, 2.5)})
		}
	}
	best := map[int]int{}
	for i, d := range inventedDesigns {
		f := g.figures(d, 0)
		p := bench.Pooled{Design: d.spec, Figures: f, ClipMeans: bench.Figures{}}
		for name, v := range f {
			p.ClipMeans[name] = v + 0.1
		}
		at := f[bench.OpenSNR]
		p.Interval = [2]bench.Num{at - 0.9, at + 0.9}
		r.Pooled = append(r.Pooled, p)
		if k, ok := best[d.bits]; !ok || f[bench.OpenSNR] > r.Pooled[k].Figures[bench.OpenSNR] {
			best[d.bits] = i
		}
	}
	for i, d := range inventedDesigns {
		p := &r.Pooled[i]
		top := r.Pooled[best[d.bits]]
		gap := top.Figures[bench.OpenSNR] - p.Figures[bench.OpenSNR]
		p.Behind = [2]bench.Num{gap - 0.3, gap + 0.3}
		switch {
		case i == best[d.bits]:
			p.Lead, p.Behind = "clear", [2]bench.Num{bench.Num(nan), bench.Num(nan)}
			if d.bits == 8 {
				p.Lead = "open"
			}
		case gap < 0.4:
			p.Lead = "open"
		default:
			p.Lead = "behind"
		}
	}
	for _, bits := range []int{4, 6, 8} {
		r.Verdicts = append(r.Verdicts, inventedVerdict(r, bits, best[bits]))
	}
}

func inventedVerdict(r *bench.Results, bits, best int) bench.Verdict {
	v := bench.Verdict{Bits: bits, Winners: map[string]string{}}
	for _, name := range []string{bench.SNR, bench.SegSNR, bench.OpenSNR, bench.Quiet} {
		at := math.Inf(-1)
		for i, d := range r.Designs {
			if x := float64(r.Pooled[i].Figures[name]); d.Bits == bits && x > at {
				at, v.Winners[name] = x, d.Spec
			}
		}
	}
	for i, d := range r.Designs {
		if d.Bits == bits && r.Pooled[i].Lead != "behind" {
			v.Tied = append(v.Tied, d.Spec)
		}
	}
	v.Sentence = fmt.Sprintf("At %d bits take %s: %.1f dB of %s. Other measures disagree: snr_db prefers %s.", bits,
		r.Designs[best].Spec, float64(r.Pooled[best].Figures[r.Leading]), r.Leading, v.Winners[bench.SNR])
	return v
}

func (g *invention) figures(d inventedDesign, spread float64) bench.Figures {
	jitter := func(v float64) bench.Num { return bench.Num(v + spread*g.rng.NormFloat64()) }
	open := jitter(d.seg)
	limited := bench.Num(math.Min(float64(open), 33.9))
	ceil := bench.Num(0)
	if d.seg > 30 {
		ceil = bench.Num(math.Min(0.9, 0.05+(d.seg-30)/11))
	}
	return bench.Figures{
		"mse": bench.Num(0.002 * math.Pow(10, -d.snr/10)), "snr_db": jitter(d.snr), "segsnr_db": limited,
		"segsnr_all_db": limited - 3, "segsnr_open_db": open, "frames_used": 160, "at_upper_limit": ceil,
		"overload_fraction": bench.Num(d.over), "entropy_bits": jitter2(d.entropy, spread/20, g.rng),
		"quiet_snr_db": jitter(d.quiet), "idle_dbov": bench.Num(-61 - d.quiet/4),
		"idle_gain_db": bench.Num(5 - d.quiet/4), "idle_toggling": bench.Num(0.06 * d.entropy),
		"frames_out_of_range": 40, "frames_left_out": 3, "at_lower_limit": bench.Num(0.01 * g.rng.Float64()),
		"all_at_upper_limit": ceil * 0.9, "all_at_lower_limit": bench.Num(0.02 * g.rng.Float64()),
		"open_at_upper_limit": 0, "open_at_lower_limit": bench.Num(0.01 * g.rng.Float64()),
		"floored": bench.Num(0.1 * g.rng.Float64()), "granular_mse": bench.Num(0.0019 * math.Pow(10, -d.snr/10)),
		"overload_mse": bench.Num(1e-9 * g.rng.Float64()), "match_gain": bench.Num(0.99 + 0.01*g.rng.Float64()),
	}
}

func jitter2(v, s float64, rng *rand.Rand) bench.Num { return bench.Num(v + s*rng.NormFloat64()) }
