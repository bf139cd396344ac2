package measure

// Occurrences is a Histogram without the words that never occur: 10 bytes for
// each that does, so that many can be kept.
type Occurrences struct {
	words  []int16 // ascending
	counts []int64
}

// Occurrences copies h.
func (h *Histogram) Occurrences() Occurrences {
	counts := h.Counts()
	n := 0
	for _, c := range counts {
		if c != 0 {
			n++
		}
	}
	o := Occurrences{make([]int16, 0, n), make([]int64, 0, n)}
	for i, c := range counts {
		if c != 0 {
			o.words = append(o.words, int16(i-words16/2))
			o.counts = append(o.counts, c)
		}
	}
	return o
}

// AddTo adds the counts to h.
func (o Occurrences) AddTo(h *Histogram) {
	for i, w := range o.words {
		h.AddCount(w, o.counts[i])
	}
}
