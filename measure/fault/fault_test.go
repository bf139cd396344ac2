package fault

import (
	"encoding/json"
	"math"
	"math/rand/v2"
	"reflect"
	"testing"

	"pgregory.net/rapid"
)

const testRate = 16000

// talk is seeded sound with the ups and downs of speech: noise through a
// gentle low-pass, in syllables over a steady quiet background, in 16-bit
// words. No fault is in it.
func talk(seconds float64, seed uint64) []int16 {
	rng := rand.New(rand.NewPCG(seed, 1))
	n := int(seconds * testRate)
	out := make([]int16, n)
	low := 0.0
	for i := range out {
		low = 0.7*low + rng.NormFloat64()
		syllable := math.Max(0, math.Sin(2*math.Pi*3*float64(i)/testRate)) * math.Max(0, math.Sin(2*math.Pi*0.4*float64(i)/testRate))
		out[i] = int16(math.Round(3000*syllable*low + 60*rng.NormFloat64()))
	}
	return out
}

func findingsOf(words []int16) []Finding { return findingsAt(words, testRate) }

func findingsAt(words []int16, rate int) []Finding {
	s := NewScan(rate)
	s.AddWords(words)
	return s.Findings(contextOf(amplitudes(words), rate))
}

func mapped(words []int16, f func(i int, w float64) float64) []int16 {
	out := make([]int16, len(words))
	for i, w := range words {
		out[i] = int16(max(-32768, min(32767, math.Round(f(i, float64(w))))))
	}
	return out
}

func TestNothingWrong(t *testing.T) {
	for seed := range uint64(5) {
		if got := findingsOf(talk(8, seed)); got != nil {
			t.Errorf("seed %d: %+v", seed, got)
		}
	}
}

// Each row spoils the clean signal, once enough to be found (want) and once
// just not (the other rows).
func TestFaults(t *testing.T) {
	clean := talk(8, 7)
	tone := mapped(clean, func(i int, _ float64) float64 { return 5000 * math.Sin(0.0123*float64(i)) })
	for _, tc := range []struct {
		name       string
		words      []int16
		want, none []string
	}{
		{"driven into full scale", mapped(clean, func(_ int, w float64) float64 { return 6 * w }), []string{"clipped"}, nil},
		{"clipped, then 6 dB down", mapped(clean, func(_ int, w float64) float64 { return max(-4000, min(4000, w)) }), []string{"clipped"}, nil},
		{"one side clipped", mapped(clean, func(_ int, w float64) float64 { return min(4000, w) }), []string{"clipped"}, nil},
		{"clipped, then noise added", mapped(clean, func(i int, w float64) float64 {
			return 3*max(-4000, min(4000, w)) + 40*math.Sin(float64(i*i))
		}), []string{"clipped"}, nil},
		{"slow tone with round crests", tone, nil, []string{"clipped", "held"}},
		{"slow quiet tone", mapped(tone, func(_ int, w float64) float64 { return w / 20 }), nil, []string{"clipped", "held"}},
		{"two samples at full scale, apart", mapped(clean, func(i int, w float64) float64 {
			if i == 500 || i == 900 {
				return 32767
			}
			return w
		}), nil, []string{"clipped"}},
		{"three samples at full scale, apart", mapped(clean, func(i int, w float64) float64 {
			if i == 500 || i == 900 || i == 1300 {
				return 32767
			}
			return w
		}), []string{"clipped"}, nil},
		{"DC 0.007", mapped(clean, func(_ int, w float64) float64 { return w + 0.007*32768 }), []string{"dc"}, nil},
		{"a stretch of zeros", zeroed(clean, 20000, 4000), []string{"silence"}, []string{"cut-out"}},
		{"zeros of 0.3 % of the samples", zeroed(clean, 20000, 380), nil, []string{"silence"}},
		{"silence that is not zero", mapped(zeroed(clean, 20000, 4000), func(i int, w float64) float64 {
			if i >= 20000 && i < 24000 {
				return 8
			}
			return w
		}), []string{"held"}, []string{"silence"}},
		{"12 bits", mapped(clean, func(_ int, w float64) float64 { return 16 * math.Round(w/16) }), []string{"unused-bits"}, []string{"coarse", "companded"}},
		{"8 bits", mapped(clean, func(_ int, w float64) float64 { return 256 * math.Round(w/256) }), []string{"unused-bits"}, []string{"companded"}},
		{"8 bits, scaled by 0.7", mapped(clean, func(_ int, w float64) float64 { return 0.7 * 256 * math.Round(w/256) }), []string{"coarse"}, []string{"companded"}},
		{"40 dB down", mapped(clean, func(_ int, w float64) float64 { return w / 100 }), []string{"quiet"}, []string{"coarse", "clipped", "companded"}},
		{"7 dB down", mapped(clean, func(_ int, w float64) float64 { return w / 2.24 }), nil, []string{"quiet", "hot"}},
		{"14 dB up", mapped(clean, func(_ int, w float64) float64 { return 5 * w }), []string{"hot"}, nil},
		{"0.9 s", clean[:14400], []string{"short"}, nil},
		{"3.1 s", clean[:49600], nil, []string{"short"}},
	} {
		t.Run(tc.name, func(t *testing.T) { expect(t, tc.name, findingsOf(tc.words), tc.want, tc.none) })
	}
}

func zeroed(words []int16, from, n int) []int16 {
	out := append([]int16(nil), words...)
	clear(out[from : from+n])
	return out
}

func TestCutOut(t *testing.T) {
	tone := make([]int16, 5*testRate)
	for i := range tone {
		tone[i] = int16(8000 * math.Sin(0.3*float64(i)))
	}
	// 2.5 ms of zeros that start and end where the tone is loud
	gap := zeroed(tone, 3000, 40)
	gap[2999], gap[3040] = 6000, -6000
	f := find(findingsOf(gap), "cut-out")
	if f == nil || f.Value != 1 {
		t.Errorf("one gap: %+v", f)
	}
	if f := find(findingsOf(tone), "cut-out"); f != nil {
		t.Errorf("no gap: %s", f.Sentence)
	}
	// the end of a recording is no cut-out
	if f := find(findingsOf(append(tone, make([]int16, 400)...)), "cut-out"); f != nil {
		t.Errorf("silent end: %s", f.Sentence)
	}
}

func TestUndefinedContext(t *testing.T) {
	nan := math.NaN()
	for name, words := range map[string][]int16{
		"nothing": nil, "one sample": {5}, "one zero": {0}, "zeros": make([]int16, 5000), "constant": {7, 7, 7, 7}, "talk": talk(1, 1),
	} {
		s := NewScan(8000)
		s.AddWords(words)
		c := Context{ActiveDBov: nan, LevelDBov: nan, PeakDB: math.Inf(-1), DC: nan, Seconds: float64(len(words)) / 8000, InRangeShare: nan}
		got := s.Findings(c)
		if _, err := json.Marshal(got); err != nil {
			t.Errorf("%s: %v", name, err)
		}
		for _, f := range got {
			if f.Sentence == "" || f.Advice == "" || f.Kind == "" || math.IsNaN(f.Value) {
				t.Errorf("%s: incomplete finding %+v", name, f)
			}
		}
		if name == "zeros" && find(got, "silence") == nil {
			t.Error("all zeros went unnoticed")
		}
	}
}

func TestBusyNote(t *testing.T) {
	words := talk(5, 3)
	c := contextOf(amplitudes(words), testRate)
	for share, want := range map[float64]bool{0.95: false, 0.96: true, math.NaN(): false} {
		s := NewScan(testRate)
		s.AddWords(words)
		c.InRangeShare = share
		if got := find(s.Findings(c), "no-pauses") != nil; got != want {
			t.Errorf("share %g: found %v", share, got)
		}
	}
}

// 24-bit material: finer than the 16-bit grid, or 16 bits in a larger file.
func TestFineGrid(t *testing.T) {
	x := amplitudes(talk(4, 9))
	c := contextOf(x, testRate)
	c.Bits = 24
	s := NewScan(testRate)
	s.Add(x)
	if f := find(s.Findings(c), "unused-bits"); f == nil || f.Value != 16 || f.Severity != Note {
		t.Errorf("16 in 24: %+v", f)
	}
	x[100] += 0x1p-23
	s = NewScan(testRate)
	s.Add(x)
	if f := find(s.Findings(c), "unused-bits"); f != nil {
		t.Errorf("24 in 24: %s", f.Sentence)
	}
}

// However a channel is cut into blocks, the findings are the same.
func TestBlocksDoNotMatter(t *testing.T) {
	words := mapped(zeroed(talk(1.6, 2), 9000, 3000), func(_ int, w float64) float64 { return 6*w + 200 })
	want := findingsOf(words)
	c := contextOf(amplitudes(words), testRate)
	if len(want) < 3 {
		t.Fatalf("the signal shows only %d faults", len(want))
	}
	rapid.Check(t, func(rt *rapid.T) {
		s := NewScan(testRate)
		for rest := words; len(rest) > 0; {
			n := rapid.IntRange(1, 8000).Draw(rt, "block")
			n = min(n, len(rest))
			s.AddWords(rest[:n])
			rest = rest[n:]
		}
		if got := s.Findings(c); !reflect.DeepEqual(got, want) {
			rt.Fatalf("got %+v, want %+v", got, want)
		}
	})
}

// Turning the signal over changes no kind, and findings can be asked for
// twice.
func TestMirror(t *testing.T) {
	words := mapped(talk(4, 2), func(_ int, w float64) float64 { return min(3000, w) })
	turned := mapped(words, func(_ int, w float64) float64 { return -w })
	kinds := func(all []Finding) (out []string) {
		for _, f := range all {
			out = append(out, f.Kind)
		}
		return out
	}
	if a, b := kinds(findingsOf(words)), kinds(findingsOf(turned)); !reflect.DeepEqual(a, b) {
		t.Errorf("%v, turned over %v", a, b)
	}
	s := NewScan(testRate)
	s.AddWords(words)
	c := contextOf(amplitudes(words), testRate)
	if !reflect.DeepEqual(s.Findings(c), s.Findings(c)) {
		t.Error("asking twice changes the answer")
	}
}

func TestNoRatePanics(t *testing.T) {
	defer func() {
		if recover() == nil {
			t.Error("rate 0 was taken")
		}
	}()
	NewScan(0)
}

// Float recordings beyond full scale; flat tops up there are clipped too.
func TestBeyondFullScale(t *testing.T) {
	x := amplitudes(talk(4, 9))
	for i := range x {
		x[i] *= 6.1
	}
	got := func(x []float64) []Finding {
		s := NewScan(testRate)
		s.Add(x)
		c := contextOf(x, testRate)
		c.LSB, c.Bits = 0, 0
		return s.Findings(c)
	}
	expect(t, "loud", got(x), []string{"beyond-full-scale"}, []string{"clipped"})
	for i := range x {
		x[i] = max(-1.2, min(1.2, x[i]))
	}
	expect(t, "loud and flat", got(x), []string{"beyond-full-scale", "clipped"}, nil)
	for i := range x {
		x[i] = max(-1, min(1, x[i]))
	}
	expect(t, "flat at 1", got(x), []string{"clipped"}, []string{"beyond-full-scale"})
}

// Whatever the rate and the samples, no panic, and findings that can be
// written as JSON.
func TestAnything(t *testing.T) {
	rapid.Check(t, func(rt *rapid.T) {
		s := NewScan(rapid.IntRange(1, 100000).Draw(rt, "rate"))
		part := rapid.SliceOfN(rapid.OneOf(rapid.Float64Range(-1, 1), rapid.SampledFrom([]float64{0, 1, -1, 1e300, -1e300, 1e-300, 0x1p-31, 0x1p-40})), 1, 50).Draw(rt, "part")
		var x []float64
		for range rapid.IntRange(1, 200).Draw(rt, "times") {
			x = append(x, part...)
		}
		s.Add(x)
		got := s.Findings(contextOf(x, s.rate))
		if _, err := json.Marshal(got); err != nil {
			rt.Fatalf("%v: %+v", err, got)
		}
	})
}

func BenchmarkScan(b *testing.B) {
	words := talk(60, 1)
	x := amplitudes(words)
	b.SetBytes(int64(len(x)))
	for b.Loop() {
		s := NewScan(testRate)
		for i := 0; i < len(x); i += 4096 {
			s.Add(x[i:min(i+4096, len(x))])
		}
	}
	b.ReportMetric(float64(len(x))*float64(b.N)/b.Elapsed().Seconds()/1e6, "Msamples/s")
}
