package measure

import (
	"math"
	"math/rand/v2"
	"testing"
)

// TestIdleChannel: G.711 (ITU-T G.711, Tables 1 and 2): mu-law silence decodes
// to 0; A-law has no zero, silence decodes to one 13-bit unit, 1/4096. A 4-bit
// mid-rise mu-law idles at +-53.2 words of 16 bits (closed form: (256^(1/16) -
// 1)/255 of full scale).
func TestIdleChannel(t *testing.T) {
	const lsb = 1.0 / 32768
	th, v := g711Cells(true)
	if got := NewSearch(th, v, -1, 1, true).Idle(lsb); !math.IsInf(got.Zero, -1) || !math.IsInf(got.OneLSB, -1) {
		t.Errorf("mu-law idles at %+v", got)
	}
	th, v = g711Cells(false)
	got := NewSearch(th, v, -1, 1, true).Idle(lsb)
	near(t, "A-law", got.Zero, 20*math.Log10(1.0/4096), 1e-12)
	near(t, "A-law at one lsb", got.OneLSB, 20*math.Log10(1.0/4096), 1e-12)
	th, v = smoothCells(4, expandMu)
	got = NewSearch(th, v, -1, 1, true).Idle(lsb)
	near(t, "4-bit mu-law", math.Pow(10, got.OneLSB/20)*32768, (math.Sqrt2-1)/255*32768, 1e-9)
}

// slowToggles counts word by word.
func slowToggles(s *Search, words []int16) (changes int64) {
	for i := 1; i < len(words); i++ {
		if s.Quantize(float64(words[i])/32768) != s.Quantize(float64(words[i-1])/32768) {
			changes++
		}
	}
	return changes
}

// TestTogglesAgainstSlowPath: for every number of lanes in use, up to several
// peaks, with few cells (eight lanes) and many (four); the general path counts
// the same.
func TestTogglesAgainstSlowPath(t *testing.T) {
	r := rand.New(rand.NewPCG(21, 21))
	for d := 1; d <= 18; d++ {
		for _, most := range []int{3, 200, 3000} {
			designs := make([]Lookup, d)
			searches := make([]*Search, d)
			for i := range designs {
				th, v := randomStairs(2+r.IntN(most), r)
				v[len(v)/2] = v[len(v)/2-1] // two cells that sound alike
				searches[i] = NewSearch(th, v, -1, 1, true)
				designs[i] = searches[i].LookupAt(1)
			}
			for _, peak := range []int{0, 1, 300, 32767, 32768} {
				k := NewToggles(designs, peak)
				for _, n := range []int{0, 1, 2, 160, 256, 257, 600} {
					words := within(everyKind(n, r), peak)
					got := make([]int64, d)
					k.Add(words, got)
					for i := range designs {
						want := slowToggles(searches[i], words)
						if e := searches[i].Add(new(Tally), toFloat(words)); got[i] != want || e.Changes != want {
							t.Fatalf("%d designs up to %d, %d words: %d changes of design %d, in general %d, want %d", d, peak, n, got[i], i, e.Changes, want)
						}
					}
				}
			}
		}
	}
	var tally Tally
	tally.AddToggles(3, 160)
	tally.AddToggles(0, 0)
	if tally.Toggled != 3 || tally.Steps != 159 {
		t.Errorf("%d of %d", tally.Toggled, tally.Steps)
	}
}

// within folds words into a peak.
func within(words []int16, peak int) []int16 {
	for i, w := range words {
		if v := int(w); v > peak || v < -peak {
			words[i] = int16(v % (peak + 1))
		}
	}
	return words
}

// TestTogglesFill: an alternating channel fills lanes of both widths to their
// last count.
func TestTogglesFill(t *testing.T) {
	words := make([]int16, 200001)
	for i := range words {
		words[i] = int16(i%2) * -30000
	}
	for _, levels := range []int{2, 1024} {
		got := make([]int64, 1)
		NewToggles([]Lookup{uniformLookup(levels, 1)}, 30000).Add(words, got)
		if got[0] != 200000 {
			t.Errorf("%d levels: %d changes, want 200000", levels, got[0])
		}
	}
}

// TestPeakOf: no frame that is out of range holds a larger word, and the bound
// is met; without an active level every word may be.
func TestPeakOf(t *testing.T) {
	const n = 160
	for _, threshold := range []float64{0, 1e-12, 1e-9, 2.5e-6, 0.003, 1} {
		peak := PeakOf(threshold, n)
		quiet := func(w int) bool { return !InRange(float64(w*w)/(1<<30), n, threshold) }
		if !quiet(peak) || peak < 32768 && quiet(peak+1) {
			t.Errorf("threshold %g: peak %d", threshold, peak)
		}
	}
	if peak := PeakOf(math.NaN(), n); peak != 32768 {
		t.Errorf("no active level: peak %d", peak)
	}
}
