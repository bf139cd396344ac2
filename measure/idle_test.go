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

// TestTogglesAgainstSlowPath: for every number of lanes in use.
func TestTogglesAgainstSlowPath(t *testing.T) {
	r := rand.New(rand.NewPCG(21, 21))
	for d := 1; d <= 9; d++ {
		designs := make([]Lookup, d)
		searches := make([]*Search, d)
		for i := range designs {
			th, v := randomStairs(2+r.IntN(3000), r)
			v[len(v)/2] = v[len(v)/2-1] // two cells that sound alike
			searches[i] = NewSearch(th, v, -1, 1, true)
			designs[i] = searches[i].LookupAt(1)
		}
		k := NewToggles(designs)
		got := make([]int64, d)
		for _, n := range []int{0, 1, 2, 160, 65536, 65537, 70000} {
			words := everyKind(n, r)
			clear(got)
			k.Add(words, got)
			for i := range designs {
				if want := searches[i].Toggles(toFloat(words)); got[i] != want {
					t.Fatalf("%d designs, %d words: %d changes of design %d, want %d", d, n, got[i], i, want)
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

// TestTogglesFill: an alternating channel fills a lane to its last count.
func TestTogglesFill(t *testing.T) {
	words := make([]int16, 200001)
	for i := range words {
		words[i] = int16(i%2) * -30000
	}
	got := make([]int64, 1)
	NewToggles([]Lookup{uniformLookup(2, 1)}).Add(words, got)
	if got[0] != 200000 {
		t.Errorf("%d changes, want 200000", got[0])
	}
}
