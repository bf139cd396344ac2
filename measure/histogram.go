package measure

import "math"

// words16 is the number of values of a 16-bit sample.
const words16 = 1 << 16

// Histogram counts 16-bit samples, one bin a value, in 64 bits. The zero
// value is ready; it takes 1.5 MB.
//
// Neighbouring samples often share a bin, and a processor must wait for its
// own store before it can count the same bin again: four narrow lanes take
// turns and are folded before they could overflow.
type Histogram struct {
	counts [words16]int64
	lanes  [4][words16]uint32
	queued int64 // samples in lanes
}

// foldAt keeps every lane counter below 2^32.
const foldAt = 1 << 31

// AddWords counts words.
func (h *Histogram) AddWords(words []int16) {
	for len(words) > 0 {
		n := int(min(int64(len(words)), foldAt-h.queued))
		h.count(words[:n])
		words = words[n:]
		if h.queued += int64(n); h.queued == foldAt {
			h.fold()
		}
	}
}

func (h *Histogram) count(words []int16) {
	a, b, c, d := &h.lanes[0], &h.lanes[1], &h.lanes[2], &h.lanes[3]
	for len(words) >= 4 {
		a[uint16(words[0])^0x8000]++
		b[uint16(words[1])^0x8000]++
		c[uint16(words[2])^0x8000]++
		d[uint16(words[3])^0x8000]++
		words = words[4:]
	}
	for _, w := range words {
		a[uint16(w)^0x8000]++
	}
}

// Add counts float samples, full scale = 1.0, each in the bin of the nearest
// 16-bit value (half away from zero); beyond the ends in the outermost bins.
func (h *Histogram) Add(x []float64) {
	for _, v := range x {
		w := max(-words16/2, min(words16/2-1, math.Round(v*(words16/2))))
		h.counts[int(w)+words16/2]++
	}
}

// fold moves the lanes into the counts.
func (h *Histogram) fold() {
	if h.queued == 0 {
		return
	}
	for l := range h.lanes {
		lane := &h.lanes[l]
		for i, n := range lane {
			h.counts[i] += int64(n)
		}
		clear(lane[:])
	}
	h.queued = 0
}

// AddCount counts word n times.
func (h *Histogram) AddCount(word int16, n int64) { h.counts[int(word)+words16/2] += n }

// AddCounts adds 65,536 counts, that of word w at int(w)+32768.
func (h *Histogram) AddCounts(counts []int64) {
	for i, n := range counts[:words16] {
		h.counts[i] += n
	}
}

// Merge adds the counts of o, whose counts stay the same.
func (h *Histogram) Merge(o *Histogram) {
	o.fold()
	for i, n := range &o.counts {
		h.counts[i] += n
	}
}

// Subtract takes the counts of o away; o must count a part of what h does.
func (h *Histogram) Subtract(o *Histogram) {
	h.fold()
	o.fold()
	for i, n := range &o.counts {
		h.counts[i] -= n
	}
}

// Reset sets all counts to zero.
func (h *Histogram) Reset() {
	clear(h.counts[:])
	for l := range h.lanes {
		clear(h.lanes[l][:])
	}
	h.queued = 0
}

// Counts returns the 65,536 counts, that of word w at int(w)+32768; valid
// until samples are added. Read only.
func (h *Histogram) Counts() []int64 {
	h.fold()
	return h.counts[:]
}

// Total is the number of samples counted.
func (h *Histogram) Total() int64 {
	var n int64
	for _, c := range h.Counts() {
		n += c
	}
	return n
}

// Sparse returns the values that occur, ascending, full scale = 1.0, and how
// often each does.
func (h *Histogram) Sparse() (values []float64, counts []int64) {
	for i, n := range h.Counts() {
		if n != 0 {
			values = append(values, float64(i-words16/2)/(words16/2))
			counts = append(counts, n)
		}
	}
	return values, counts
}

// Levels is what Levels.AddWords would have gathered from the samples.
func (h *Histogram) Levels() Levels { return LevelsOf(h.Counts()) }

// LevelsOf is the same from 65,536 counts, that of word w at int(w)+32768.
func LevelsOf(counts []int64) Levels {
	var l Levels
	for i, n := range counts[:words16] {
		if n == 0 {
			continue
		}
		w := int64(i - words16/2)
		l.Samples += n
		l.wordSum += n * w
		l.squares.addProduct(uint64(n), uint64(w*w))
		l.wordBits |= uint16(w)
		l.peak = max(l.peak, math.Abs(float64(w))/(words16/2))
	}
	l.Zeros = counts[words16/2]
	return l
}
