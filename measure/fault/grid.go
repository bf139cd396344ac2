package fault

import "math/bits"

// grid counts the samples on each of the 65,536 amplitudes of 16-bit audio,
// and keeps the lowest bit ever set on the 32-bit one.
type grid struct {
	counts []int64 // of word w at w + 32768
	off    int64   // samples on no 16-bit amplitude
	low    uint64  // OR of all off-grid samples as integers on 2^-31
	finer  bool    // a sample lies on no 2^-31 amplitude either
	over   int64   // samples beyond full scale
	total  int64
}

func newGrid() grid { return grid{counts: make([]int64, 1<<16)} }

// add counts samples; those that no word expresses go to off as well.
func (g *grid) add(x []float64, off *tops) {
	g.total += int64(len(x))
	for _, v := range x {
		v *= 1 << 15
		if w := int64(v); float64(w) == v && uint64(w+1<<15) < 1<<16 {
			g.counts[w+1<<15]++
			continue
		}
		off.add(v/(1<<15), 1)
		g.addOff(v)
	}
}

func (g *grid) addWords(words []int16) {
	g.total += int64(len(words))
	counts := (*[1 << 16]int64)(g.counts)
	for _, w := range words {
		counts[uint16(w)^0x8000]++
	}
}

// join adds what another grid counted.
func (g *grid) join(o *grid) {
	for i, n := range o.counts {
		g.counts[i] += n
	}
	g.off, g.over, g.total = g.off+o.off, g.over+o.over, g.total+o.total
	g.low |= o.low
	g.finer = g.finer || o.finer
}

func (g *grid) reset() {
	clear(g.counts)
	*g = grid{counts: g.counts}
}

// addOff takes a sample, in 16-bit steps, that no 16-bit word expresses.
func (g *grid) addOff(v float64) {
	g.off++
	if v > 1<<15 || v < -1<<15 {
		g.over++
	}
	v *= 1 << 16
	if i := int64(v); float64(i) == v {
		g.low |= uint64(i)
	} else {
		g.finer = true
	}
}

// nonzero counts the samples other than zero.
func (g *grid) nonzero() int64 { return g.total - g.counts[1<<15] }

// step is the coarsest binary grid, 2^0 to 2^-31, that holds all samples
// (full scale = 1.0); 0 if none does or all are zero.
func (g *grid) step() float64 {
	if g.finer {
		return 0
	}
	low := g.low
	for i, n := range g.counts {
		if n > 0 {
			low |= uint64(i-1<<15) << 16
		}
	}
	if low == 0 {
		return 0
	}
	return float64(uint64(1)<<min(bits.TrailingZeros64(low), 31)) / (1 << 31)
}

// levels counts the 16-bit amplitudes that occur.
func (g *grid) levels() int {
	n := 0
	for _, c := range g.counts {
		if c > 0 {
			n++
		}
	}
	return n
}
