package fault

import (
	"math"
	"math/rand/v2"
	"testing"
)

// lowPassed filters by a windowed sinc (Hamming, 401 taps, about 55 dB) with
// its edge at cut Hz and rounds to words again.
func lowPassed(words []int16, cut float64) []int16 {
	const half = 200
	taps := make([]float64, 2*half+1)
	for i := range taps {
		k := float64(i - half)
		taps[i] = 2 * cut / testRate * (0.54 + 0.46*math.Cos(math.Pi*k/half))
		if k != 0 {
			w := 2 * math.Pi * cut / testRate * k
			taps[i] *= math.Sin(w) / w
		}
	}
	return mapped(words, func(i int, _ float64) float64 {
		sum := 0.0
		for k, h := range taps {
			if j := i + k - half; j >= 0 && j < len(words) {
				sum += h * float64(words[j])
			}
		}
		return sum
	})
}

func TestEmptyAbove(t *testing.T) {
	clean := talk(4, 21)
	for _, tc := range []struct {
		cut      float64
		found    bool
		severity Severity
	}{
		{2700, true, Warning}, {4000, true, Warning}, {5500, true, Warning}, {6800, true, Note}, {7700, false, Note},
	} {
		f := find(findingsOf(lowPassed(clean, tc.cut)), "empty-above")
		switch {
		case (f != nil) != tc.found:
			t.Errorf("cut at %g Hz: found %v", tc.cut, f)
		case f != nil && (math.Abs(f.Value-tc.cut) > 200 || f.Severity != tc.severity):
			t.Errorf("cut at %g Hz: %s: %s", tc.cut, f.Severity, f.Sentence)
		}
	}
}

// A gentle slope is not an edge, and a deep enough one sinks into the rounding
// noise.
func TestSlope(t *testing.T) {
	clean := talk(4, 22)
	pole := func(words []int16, a float64, times int) []int16 {
		x := amplitudes(words)
		for range times {
			y := 0.0
			for i := range x {
				y = a*y + (1-a)*x[i]
				x[i] = y
			}
		}
		return mapped(words, func(i int, _ float64) float64 { return 4 * 32768 * x[i] })
	}
	if f := find(findingsOf(pole(clean, 0.7, 1)), "empty-above"); f != nil {
		t.Errorf("6 dB an octave: %s", f.Sentence)
	}
	f := find(findingsOf(pole(clean, 0.9, 4)), "empty-above")
	if f == nil || f.Severity != Note {
		t.Errorf("24 dB an octave: %+v", f)
	}
}

// coded passes words through a bare perceptual coder: a transform with
// half-overlapped sine windows (J. P. Princen, A. B. Bradley, IEEE Trans. ASSP
// 34 (1986)), bands of 8 lines, and bands more than mask dB under the
// loudest of their frame coded as nothing.
func coded(words []int16, mask float64) []int16 {
	const n = 256 // lines
	table := make([]float64, 8*n)
	for i := range table {
		table[i] = math.Cos(2 * math.Pi * float64(i) / (8 * n))
	}
	angle := func(i, k int) float64 { return table[((2*i+1+n)*(2*k+1))%(8*n)] }
	win := func(i int) float64 { return math.Sin(math.Pi * (float64(i) + 0.5) / (2 * n)) }
	out := make([]float64, len(words))
	lines := make([]float64, n)
	for s := 0; s+2*n <= len(words); s += n {
		for k := range lines {
			lines[k] = 0
			for i := range 2 * n {
				lines[k] += win(i) * float64(words[s+i]) * angle(i, k)
			}
		}
		masked(lines, 8, mask)
		for i := range 2 * n {
			sum := 0.0
			for k, c := range lines {
				if c != 0 {
					sum += c * angle(i, k)
				}
			}
			out[s+i] += 2.0 / n * win(i) * sum
		}
	}
	return mapped(words, func(i int, _ float64) float64 { return out[i] })
}

// masked clears the bands of width lines that are mask dB under the loudest.
func masked(lines []float64, width int, mask float64) {
	energy := make([]float64, len(lines)/width)
	loudest := 0.0
	for b := range energy {
		for _, c := range lines[b*width : (b+1)*width] {
			energy[b] += c * c
		}
		loudest = math.Max(loudest, energy[b])
	}
	for b, e := range energy {
		if e < loudest*math.Pow(10, -mask/10) {
			clear(lines[b*width : (b+1)*width])
		}
	}
}

// steepTalk is talk with more low frequencies than high ones, as voices have.
func steepTalk(seconds float64, seed uint64) []int16 {
	y := 0.0
	return mapped(talk(seconds, seed), func(i int, w float64) float64 {
		y = 0.6*y + w
		return y
	})
}

func TestLossySource(t *testing.T) {
	clean := steepTalk(2, 31)
	for _, tc := range []struct {
		name  string
		words []int16
		found bool
	}{
		{"uncoded", clean, false},
		{"through the transform, nothing masked", coded(clean, 200), false},
		{"bands 22 dB under the loudest dropped", coded(clean, 22), true},
		{"bands 25 dB under the loudest dropped", coded(clean, 25), true},
		{"gated: everything down at once", mapped(clean, func(i int, w float64) float64 {
			if i%16000 > 12000 {
				return w / 50
			}
			return w
		}), false},
		{"faded", mapped(clean, func(i int, w float64) float64 { return w * math.Exp(-float64(i)/16000) }), false},
		{"too short to say", coded(clean[:4000], 26), false},
	} {
		f := find(findingsOf(tc.words), "lossy-source")
		if (f != nil) != tc.found {
			t.Errorf("%s: found %+v", tc.name, f)
		}
		if f != nil {
			t.Log(tc.name, ": ", f.Sentence)
		}
	}
}

// However long the channel, the segments kept are bounded and spread evenly.
func TestSegmentsStayBounded(t *testing.T) {
	s := newSpectra(8000)
	block := make([]float64, 8000)
	for i := range 600 {
		for k := range block {
			block[k] = float64(i+1) * math.Sin(float64(k))
		}
		s.add(block)
		if len(s.segments) >= maxSegments {
			t.Fatalf("%d segments after %d s", len(s.segments), i+1)
		}
	}
	n := len(s.segments)
	if want := (600*8000 - len(s.buf)) / s.stride; n < want || n > want+1 {
		t.Errorf("%d segments at a stride of %d, want about %d", n, s.stride, want)
	}
	// the middle segment must come from the middle second
	level := func(i int) (sum float64) {
		for _, p := range s.segments[i] {
			sum += float64(p)
		}
		return math.Sqrt(sum)
	}
	if r := level(n/2) / level(n-1); math.Abs(r-0.5) > 0.02 {
		t.Errorf("middle to end %.3f, want 0.5", r)
	}
}

// White noise of known power: its density is power / (rate/2).
func TestDensity(t *testing.T) {
	rng := rand.New(rand.NewPCG(1, 2))
	x := make([]float64, 20*testRate)
	for i := range x {
		x[i] = 0.01 * rng.NormFloat64()
	}
	s := newSpectra(testRate)
	s.add(x)
	want := 10 * math.Log10(0.01*0.01/(testRate/2))
	for j, got := range s.average(s.sounding(), -300)[2:] {
		// 400 or more segments and 4 bins: standard error under 0.2 dB
		if math.Abs(got-want) > 1 {
			t.Errorf("band %d: %.2f dB, want %.2f", j+2, got, want)
		}
	}
}
