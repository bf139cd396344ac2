package fault

import (
	"fmt"
	"math"
)

const (
	// coarseLevels is the least number of amplitudes and coarsePeak the least
	// peak, in 16-bit steps, to judge by: below, any 13-bit recording lies on
	// the innermost segment of both laws.
	coarseLevels = 16
	coarsePeak   = 512
	// lonely hits on an amplitude without neighbours, and the share of the
	// samples other than zero on such amplitudes, make a staircase. Natural
	// recordings stay near 0, decoded ones near 1.
	lonely      = 4
	lonelyShare = 0.9
)

// g711Outputs lists the 16-bit output values of both laws. Source: ITU-T Rec. G.711
// (11/1988), Tables 1 and 2, by the segment rule; mu-law's 14-bit outputs
// count 4 steps of the 16-bit grid each, A-law's 13-bit ones 8.
func g711Outputs(mu bool) map[int]bool {
	set := map[int]bool{}
	for code := range 128 {
		seg, m := code>>4, code&15
		v := 4 * ((2*m+33)<<seg - 33)
		if !mu {
			v = 8 * (2*m + 1)
			if seg > 0 {
				v = 8 * (2*m + 33) << (seg - 1)
			}
		}
		set[v], set[-v] = true, true
	}
	return set
}

// coarse reports recordings whose values were quantized on a coarse staircase
// before: G.711, another law, or few bits at another scale.
func coarse(s *Scan, _ Context) []Finding {
	levels := s.grid.levels()
	if s.grid.off > 0 || levels < coarseLevels || s.grid.peak() < coarsePeak {
		return nil
	}
	for _, law := range []struct {
		name string
		mu   bool
	}{{"mu-law", true}, {"A-law", false}} {
		if s.grid.within(g711Outputs(law.mu)) {
			return one(companded(law.name, levels))
		}
	}
	if share := s.grid.lonelyShare(); share > lonelyShare {
		return one(stepped(levels, share))
	}
	return nil
}

func companded(law string, levels int) Finding {
	return Finding{
		Kind: "companded", Severity: Severe, Value: float64(levels), Unit: "levels",
		Sentence: fmt.Sprintf("already companded: all samples lie on the %d occupied of 256 output values of G.711 %s", levels, law),
		Advice:   "take the signal before the codec: G.711 would look lossless here, and every other design would be judged on G.711's noise",
	}
}

func stepped(levels int, share float64) Finding {
	return Finding{
		Kind: "coarse", Severity: Severe, Value: float64(levels), Unit: "levels",
		Sentence: fmt.Sprintf("coarse: %s of the samples sit on isolated amplitudes, %d in all (%.1f bits): quantized before, then scaled or shifted",
			percent(share), levels, math.Log2(float64(levels))),
		Advice: "take the signal before that stage: a design that hits this staircase looks better than it is (a tone locked to the sampling rate looks like this too)",
	}
}

// peak is the largest magnitude on the 16-bit grid, in its steps.
func (g *grid) peak() int {
	p := 0
	for i, n := range g.counts {
		if n > 0 {
			p = max(p, i-1<<15, 1<<15-i)
		}
	}
	return p
}

// within reports whether all samples lie on the set.
func (g *grid) within(set map[int]bool) bool {
	for i, n := range g.counts {
		if n > 0 && !set[i-1<<15] {
			return false
		}
	}
	return true
}

// lonelyShare is the share of the samples other than zero that sit, four or
// more together, on an amplitude whose neighbours on the recording's own grid
// are empty.
func (g *grid) lonelyShare() float64 {
	step := int(g.step() * (1 << 15))
	at := func(i int) int64 {
		if i < 0 || i >= len(g.counts) {
			return 0
		}
		return g.counts[i]
	}
	if step < 1 {
		return 0
	}
	var alone, all int64
	for i, n := range g.counts {
		if i == 1<<15 || n == 0 {
			continue
		}
		all += n
		if n >= lonely && at(i-step) == 0 && at(i+step) == 0 {
			alone += n
		}
	}
	return float64(alone) / float64(max(all, 1))
}
