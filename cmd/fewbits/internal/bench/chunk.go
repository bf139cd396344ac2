package bench

import (
	"fewbits/samples"
)

// chunkSamples is about how many samples of each channel are worked on at a
// time: small enough for the caches and for an even load, large enough that
// the seams cost nothing. Results do not depend on the number of workers, but
// on this number their last bits do.
const chunkSamples = 1 << 17

// chunk is a stretch of a recording: whole frames, but for the last chunk.
type chunk struct {
	start, samples int64
}

// cuts are where a recording of total samples a channel is cut.
type cuts struct{ total, size int64 }

// cutsOf cuts at frame borders.
func cutsOf(total int64, frame int) cuts {
	return cuts{total, int64(max(1, chunkSamples/frame) * frame)}
}

func (c cuts) count() int { return int((c.total + c.size - 1) / c.size) }

func (c cuts) at(i int) chunk {
	start := int64(i) * c.size
	return chunk{start, min(c.size, c.total-start)}
}

// planes are the samples of a chunk, one slice a channel: words where the
// recording lies on the 16-bit grid, real numbers elsewhere.
type planes struct {
	words [][]int16
	reals [][]float64
}

// spareWords and spareReals hold planes that are done with.
var (
	spareWords shelf[[]int16]
	spareReals shelf[[]float64]
)

// plane takes a slice of n samples from a shelf, or makes one.
func plane[T int16 | float64](spare *shelf[[]T], n int64) []T {
	if s, ok := spare.take(); ok && int64(cap(s)) >= n {
		return s[:n]
	}
	return make([]T, n, max(n, chunkSamples+chunkSamples/4))
}

// read fetches a stretch of a recording; done gives the planes back.
func read(r *samples.Recording, start, n int64) (p planes, err error) {
	channels := r.Info().Channels
	if r.Words() {
		p.words = make([][]int16, channels)
		for c := range p.words {
			p.words[c] = plane(&spareWords, n)
		}
		return p, r.ReadWords(p.words, start)
	}
	p.reals = make([][]float64, channels)
	for c := range p.reals {
		p.reals[c] = plane(&spareReals, n)
	}
	return p, r.Read(p.reals, start)
}

// done allows the planes to be used again; nothing may hold on to them.
func (p planes) done() {
	for _, w := range p.words {
		spareWords.put(w)
	}
	for _, x := range p.reals {
		spareReals.put(x)
	}
}

// samples is the length of each plane.
func (p planes) samples() int {
	if p.words != nil {
		return len(p.words[0])
	}
	return len(p.reals[0])
}

// from is what follows the first n samples.
func (p planes) from(n int) (rest planes) {
	for _, w := range p.words {
		rest.words = append(rest.words, w[n:])
	}
	for _, x := range p.reals {
		rest.reals = append(rest.reals, x[n:])
	}
	return rest
}
