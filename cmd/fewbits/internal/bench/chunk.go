package bench

import (
	"sync"

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

// chunksOf cuts a recording of n samples a channel at frame borders.
func chunksOf(n int64, frame int) []chunk {
	size := int64(max(1, chunkSamples/frame) * frame)
	var out []chunk
	for at := int64(0); at < n; at += size {
		out = append(out, chunk{at, min(size, n-at)})
	}
	return out
}

// planes are the samples of a chunk, one slice a channel: words where the
// recording lies on the 16-bit grid, real numbers elsewhere.
type planes struct {
	words [][]int16
	reals [][]float64
}

// spareWords and spareReals hold planes that are done with.
var spareWords, spareReals sync.Pool

// plane takes a slice of n samples from a pool, or makes one.
func plane[T int16 | float64](spare *sync.Pool, n int64) []T {
	if s, ok := spare.Get().(*[]T); ok && int64(cap(*s)) >= n {
		return (*s)[:n]
	}
	return make([]T, n, max(n, chunkSamples+chunkSamples/4))
}

// read fetches a stretch of a recording; done gives the planes back.
func read(r *samples.Recording, start, n int64) (p planes, err error) {
	channels := r.Info().Channels
	if r.Words() {
		p.words = make([][]int16, channels)
		for c := range p.words {
			p.words[c] = plane[int16](&spareWords, n)
		}
		return p, r.ReadWords(p.words, start)
	}
	p.reals = make([][]float64, channels)
	for c := range p.reals {
		p.reals[c] = plane[float64](&spareReals, n)
	}
	return p, r.Read(p.reals, start)
}

// done allows the planes to be used again; nothing may hold on to them.
func (p planes) done() {
	for _, w := range p.words {
		spareWords.Put(&w)
	}
	for _, x := range p.reals {
		spareReals.Put(&x)
	}
}

// samples is the length of each plane.
func (p planes) samples() int {
	if p.words != nil {
		return len(p.words[0])
	}
	return len(p.reals[0])
}
