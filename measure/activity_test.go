package measure

import (
	"math"
	"math/rand/v2"
	"testing"
)

// bursts is gen(k) for half a second, then a second and a half of silence, at
// 8 kHz; k counts all samples.
func bursts(seconds int, gen func(k int) float64) []float64 {
	out := make([]float64, seconds*8000)
	for k := range out {
		if k%16000 < 4000 {
			out[k] = gen(k)
		}
	}
	return out
}

func sine997(k int) float64 { return 0.25 * math.Sin(2*math.Pi*997*float64(k)/8000) }

func square100(k int) float64 { return 0.25 - 0.5*float64(k/40%2) }

// TestActivityCheckValues: computed independently of this code from the
// algorithm of ITU-T P.56 method B (constants from memory), 8 kHz, no filter.
func TestActivityCheckValues(t *testing.T) {
	tone := make([]float64, 80000)
	for k := range tone {
		tone[k] = sine997(k)
	}
	for _, c := range []struct {
		name                 string
		x                    []float64
		long, active, factor float64
	}{
		{"sine 997 Hz, 10 s", tone, -15.051499783199029, -15.041416040483062, 0.9976808258835453},
		{"sine bursts", bursts(10, sine997), -21.07209969647871, -16.99540648206842, 0.3911386014409565},
		{"sine bursts at -20 dB", bursts(10, func(k int) float64 { return sine997(k) / 10 }),
			-41.07209969647868, -36.996879457124265, 0.3912712844800469},
		{"square bursts", bursts(10, square100), -18.06179973983887, -14.021287215693494, 0.39441075371437495},
	} {
		a := NewActivity(8000)
		a.Add(c.x)
		var l Levels
		l.Add(c.x)
		active, factor := a.Result()
		near(t, c.name+": level", l.LevelDBov(), c.long, 1e-9)
		near(t, c.name+": active level", active, c.active, 1e-9)
		near(t, c.name+": activity", factor, c.factor, 1e-9)
	}
}

// near fails unless got is within tol of want.
func near(t *testing.T, what string, got, want, tol float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tol) {
		t.Errorf("%s = %.15g, want %.15g (off by %.2g, tolerance %g)", what, got, want, got-want, tol)
	}
}

// slowCounts counts as the definition is written, sample by sample and
// threshold by threshold.
func slowCounts(x []float64, rate float64) (counts [thresholds56]int64) {
	g := math.Exp(-1 / (0.03 * rate))
	hangover := int(math.Ceil(0.2 * rate))
	var p, q float64
	var h [thresholds56]int
	for j := range h {
		h[j] = hangover
	}
	for _, v := range x {
		p = float64(g*p) + float64((1-g)*math.Abs(v))
		q = float64(g*q) + float64((1-g)*p)
		for j := range counts {
			switch {
			case q >= math.Ldexp(1, j-15):
				counts[j]++
				h[j] = 0
			case h[j] < hangover:
				counts[j]++
				h[j]++
			}
		}
	}
	return counts
}

// pauses is speechLike with digital silence and faint noise between.
func pauses(n int, seed uint64) []int16 {
	r := rand.New(rand.NewPCG(seed, 2))
	out := speechLike(n, seed)
	for i := 0; i < n; {
		stretch := 500 + r.IntN(9000)
		kind := r.IntN(4)
		for end := min(n, i+stretch); i < end; i++ {
			switch kind {
			case 0:
				out[i] = 0
			case 1:
				out[i] /= 64
			case 2:
				out[i] = int16(r.IntN(3) - 1)
			}
		}
	}
	return out
}

func TestActivityAgainstDefinition(t *testing.T) {
	for seed := range uint64(8) {
		words := pauses(90000, seed)
		x := toFloat(words)
		for _, rate := range []float64{8000, 11025, 600} {
			want := slowCounts(x, rate)
			fast, floats := NewActivity(rate), NewActivity(rate)
			r := rand.New(rand.NewPCG(seed, 3))
			for rest := words; len(rest) > 0; {
				n := min(len(rest), 1+r.IntN(7000))
				fast.AddWords(rest[:n])
				if r.IntN(3) == 0 {
					fast.Counts() // asking must not disturb
				}
				rest = rest[n:]
			}
			floats.Add(x)
			if fast.Counts() != want || floats.Counts() != want {
				t.Errorf("seed %d at %g Hz: counts\n%v (words)\n%v (floats), by definition\n%v",
					seed, rate, fast.Counts(), floats.Counts(), want)
			}
		}
	}
}

// TestActivityChunked: chunks started with two seconds of warm-up count as a
// run from the start does.
func TestActivityChunked(t *testing.T) {
	const rate, chunk = 8000, 50001
	words := pauses(10*chunk+777, 11)
	whole := NewActivity(rate)
	whole.AddWords(words)
	joined := NewActivity(rate)
	for at := 0; at < len(words); at += chunk {
		part := NewActivity(rate)
		part.WarmWords(words[max(0, at-WarmUpSeconds*rate):at])
		part.AddWords(words[at:min(len(words), at+chunk)])
		joined.Merge(part)
	}
	if joined.Counts() != whole.Counts() {
		t.Errorf("chunked\n%v\nsequential\n%v", joined.Counts(), whole.Counts())
	}
	a, fa := joined.Result()
	b, fb := whole.Result()
	if a != b || fa != fb || math.IsNaN(a) {
		t.Errorf("chunked %v %v, sequential %v %v", a, fa, b, fb)
	}
	joined.AddWords(words) // merging keeps the state
	whole.AddWords(words)
	if joined.Counts() != whole.Counts() {
		t.Errorf("after more samples: chunked\n%v\nsequential\n%v", joined.Counts(), whole.Counts())
	}
}

// TestActivityClosedForm: the envelope of a square-wave burst of amplitude A
// is A (1-(1+u) e^-u), u = t/0.03 s, and decays after the burst's end as
// (q + p u) e^-u; so the time above each threshold is known. The sampled
// smoother is that one to O(1/(0.03 s rate)).
func TestActivityClosedForm(t *testing.T) {
	const tau, on, off, amp, rate = 0.03, 0.5, 1.5, 0.25, 192000
	rise := func(u float64) float64 { return amp * (1 - (1+u)*math.Exp(-u)) }
	pEnd, qEnd := amp*(1-math.Exp(-on/tau)), rise(on/tau)
	fall := func(u float64) float64 { return (qEnd + pEnd*u) * math.Exp(-u) }
	x := make([]float64, 10*rate)
	for k := range x {
		if float64(k%(2*rate)) < on*rate {
			x[k] = amp
		}
	}
	a := NewActivity(rate)
	a.Add(x)
	counts := a.Counts()
	for j := 3; j < thresholds56-2; j++ { // 2^-12 to 2^-3: all below A
		c := math.Ldexp(1, j-thresholds56)
		up := tau * bisect(func(u float64) float64 { return rise(u) - c }, 0, on/tau)
		down := tau * bisect(func(u float64) float64 { return c - fall(u) }, 0.2, off/tau)
		want := 5 * math.Min(2-up, on-up+down+0.2)
		near(t, "active seconds at 2^"+string(rune('0'+thresholds56-j)), float64(counts[j])/rate, want, 5*2.0/rate*8)
	}
}

// bisect finds the zero of a rising f.
func bisect(f func(float64) float64, lo, hi float64) float64 {
	for range 200 {
		if m := (lo + hi) / 2; f(m) < 0 {
			lo = m
		} else {
			hi = m
		}
	}
	return (lo + hi) / 2
}

func TestActivityUndefined(t *testing.T) {
	for _, c := range []struct {
		name string
		x    []float64
	}{
		{"nothing", nil},
		{"silence", make([]float64, 80000)},
		{"-80 dBov", bursts(10, func(k int) float64 { return sine997(k) * 2e-4 })},
		{"50 ms", bursts(10, sine997)[:400]},
	} {
		a := NewActivity(8000)
		a.Add(c.x)
		if level, factor := a.Result(); !math.IsNaN(level) || !math.IsNaN(factor) {
			t.Errorf("%s: active level %g, activity %g, want undefined", c.name, level, factor)
		}
	}
}
