package bench

import (
	"context"
	"math"
	"slices"
	"sort"
	"testing"
)

// TestAllFiguresWithoutTheKernels computes every count, share and energy of a
// clip from the written definitions with nothing of the measuring packages:
// cells by a plain search and the tie rule, the active level by ITU-T P.56
// method B (constants from memory), sums in one loop.
func TestAllFiguresWithoutTheKernels(t *testing.T) {
	p := planFor(t, t.TempDir(), recordings(t), "mu-law:5", "uniform:4,overload=0.1", "uniform:5,shape=mid-tread", "lloyd-max:4", "g711-mu")
	p.Audio = false
	r, _, err := Run(context.Background(), p)
	if err != nil {
		t.Fatal(err)
	}
	for _, res := range r.Results {
		clip := r.Clips[slices.IndexFunc(r.Clips, func(c Clip) bool { return c.File == res.Clip })]
		design := r.Designs[slices.IndexFunc(r.Designs, func(d Design) bool { return d.Spec == res.Design })]
		out := design.Family == "mu-law" || design.Family == "g711-mu" || design.Spec == "uniform:4,overload=0.1"
		want := plainFigures(all(t, clip.File), clip, design, out)
		for name, w := range want {
			got, ok := res.Figures[name]
			if !ok {
				t.Errorf("no figure %s", name)
			}
			undefined := math.IsNaN(w) || math.IsInf(w, 0) // no output at all has no level
			if undefined != !got.Defined() || got.Defined() && !(math.Abs(float64(got)-w) <= 1e-9*math.Max(1, math.Abs(w))) {
				t.Errorf("%s %s: %s = %.12g, by the definition %.12g", res.Clip, res.Design, name, float64(got), w)
			}
		}
	}
}

// cell is the index of x: on a threshold the cell of larger magnitude (out),
// the positive one at zero, or the upper one.
func cell(x float64, d Design, out bool) int {
	k := sort.Search(len(d.Thresholds), func(i int) bool { return d.Thresholds[i] > x })
	if out && k > 0 && x < 0 && d.Thresholds[k-1] == x {
		k--
	}
	return k
}

// plainFigures is one long walk through definitions, on purpose.
func plainFigures(x [][]float64, c Clip, d Design, out bool) map[string]float64 {
	n := int(math.Floor(float64(c.RateHz)*0.02 + 0.5))
	var total, gran, over, overloaded, samples float64
	var used, outOfRange, silent, upper, lower, floored float64
	var quietS, quietE, inS, cross, idle, idleN, quietIn, toggled, steps float64
	counts := map[int]float64{}
	for _, plane := range x {
		threshold := plainActive(plane, float64(c.RateHz)) - 30
		for _, v := range plane {
			k := cell(v, d, out)
			e := v - d.Values[k]
			counts[k]++
			samples++
			total += v * v
			if v < float64(d.Lo) || v > float64(d.Hi) {
				over, overloaded = over+e*e, overloaded+1
			} else {
				gran += e * e
			}
		}
		for ; len(plane) >= n; plane = plane[n:] {
			var s, e, xy, yy float64
			for _, v := range plane[:n] {
				y := d.Values[cell(v, d, out)]
				s, e, xy, yy = s+v*v, e+(v-y)*(v-y), xy+v*y, yy+y*y
			}
			in := s > 0 && 10*math.Log10(s/float64(n)) > threshold
			if !in {
				idle, idleN, quietIn = idle+yy, idleN+float64(n), quietIn+s
				for i := 1; i < n; i++ {
					steps++
					if d.Values[cell(plane[i], d, out)] != d.Values[cell(plane[i-1], d, out)] {
						toggled++
					}
				}
			}
			switch db := 10 * math.Log10(s/e); {
			case s == 0:
				silent++
			case !in:
				outOfRange, quietS, quietE = outOfRange+1, quietS+s, quietE+e
			default:
				used, inS, cross = used+1, inS+s, cross+xy
				if db >= 35 {
					upper++
				}
				if db <= -10 {
					lower++
				}
				if e < float64(n)*c.LSB*c.LSB/12 {
					floored++
				}
			}
		}
	}
	entropy := 0.0
	for _, m := range counts {
		entropy -= m / samples * math.Log2(m/samples)
	}
	return map[string]float64{
		"mse": (gran + over) / samples, "granular_mse": gran / samples, "overload_mse": over / samples,
		"snr_db": 10 * math.Log10(total/(gran+over)), "overload_fraction": overloaded / samples, "entropy_bits": entropy,
		"frames_used": used, "frames_out_of_range": outOfRange, "frames_left_out": silent,
		"at_upper_limit": upper / used, "at_lower_limit": lower / used, "floored": floored / used,
		"quiet_snr_db": 10 * math.Log10(quietS/quietE), "idle_dbov": 10 * math.Log10(idle/idleN), "match_b": cross / inS,
		"idle_gain_db": 10 * math.Log10(idle/quietIn), "idle_toggling": toggled / steps,
	}
}

// plainActive is P.56 method B, a walk over the samples per threshold.
func plainActive(x []float64, rate float64) float64 {
	g, hang := math.Exp(-1/(0.03*rate)), int(math.Ceil(0.2*rate))
	sum := 0.0
	for _, v := range x {
		sum += v * v
	}
	lastA, lastD := math.NaN(), math.NaN()
	for j := 15; j >= 1; j-- {
		c, p, q, active, left := math.Ldexp(1, -j), 0.0, 0.0, 0, 0
		for _, v := range x {
			p = g*p + (1-g)*math.Abs(v)
			q = g*q + (1-g)*p
			if q >= c {
				active, left = active+1, hang
			} else if left > 0 {
				active, left = active+1, left-1
			}
		}
		a := 10 * math.Log10(sum/float64(active))
		dist := a - 20*math.Log10(c)
		if dist <= 15.9 {
			return lastA + (a-lastA)*(lastD-15.9)/(lastD-dist)
		}
		lastA, lastD = a, dist
	}
	return math.NaN()
}

// TestHoldOutAndTrainChangeTheDesigns: made_on and the staircases follow the
// material; fixed designs do not.
func TestHoldOutAndTrainChangeTheDesigns(t *testing.T) {
	inputs := recordings(t)
	plain := planFor(t, t.TempDir(), inputs[:3], "lloyd-max:4,from=data", "mu-law:4")
	plain.Audio = false
	held, trained := plain, plain
	held.HoldOut = true
	trained.Train = inputs[3:5]
	var rs []*Results
	for _, p := range []Plan{plain, held, trained} {
		r, _, err := Run(context.Background(), p)
		if err != nil {
			t.Fatal(err)
		}
		rs = append(rs, r)
	}
	seen := map[string]bool{}
	for _, r := range rs {
		seen[r.Designs[0].MadeOn] = true
		if r.Designs[1].MadeOn != "fixed" {
			t.Errorf("mu-law is made on %q", r.Designs[1].MadeOn)
		}
	}
	if len(seen) != 3 {
		t.Errorf("made_on does not tell the three apart: %v", seen)
	}
	if slices.Equal(rs[0].Designs[0].Values, rs[2].Designs[0].Values) {
		t.Error("--train leaves the table as it was")
	}
	own, out := pooledOf(rs[0], "lloyd-max:4,from=data", "mse"), pooledOf(rs[1], "lloyd-max:4,from=data", "mse")
	if !(out > own) {
		t.Errorf("mse held out %g, on its own recordings %g: the optimum for the pool cannot be beaten by tables for parts of it", out, own)
	}
	if pooledOf(rs[0], "mu-law:4", "mse") != pooledOf(rs[1], "mu-law:4", "mse") {
		t.Error("holding out changes a fixed design")
	}
}

// TestThirtyDecibelsOfLevel: real speech at -20 to -50 dBov (common practice,
// no source): each 10 dB costs uniform:8 about 10 dB, mu-law:8 a few in all.
func TestThirtyDecibelsOfLevel(t *testing.T) {
	inputs := realRecordings(t)
	var mu, uniform []float64
	for _, level := range []float64{-20, -30, -40, -50} {
		p := planFor(t, t.TempDir(), inputs, "mu-law:8", "uniform:8")
		p.Audio, p.Level = false, level
		r, _, err := Run(context.Background(), p)
		if err != nil {
			t.Fatal(err)
		}
		mu, uniform = append(mu, pooledOf(r, "mu-law:8", SNR)), append(uniform, pooledOf(r, "uniform:8", SNR))
	}
	t.Logf("mu-law:8 %.1f dB, uniform:8 %.1f dB", mu, uniform)
	if d := slices.Max(mu) - slices.Min(mu); !(d < 8) {
		t.Errorf("mu-law moves by %.1f dB", d)
	}
	if d := uniform[0] - uniform[3]; !(d > 24 && d < 34) {
		t.Errorf("uniform loses %.1f dB", d)
	}
}
