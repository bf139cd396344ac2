package measure_test

import (
	"slices"
	"testing"

	"pgregory.net/rapid"

	"fewbits/measure"
)

// TestOccurrencesRoundTrip: nothing is lost, and adding twice counts twice.
func TestOccurrencesRoundTrip(t *testing.T) {
	rapid.Check(t, func(rt *rapid.T) {
		words := rapid.SliceOf(rapid.Int16()).Draw(rt, "words")
		var h, twice, back measure.Histogram
		h.AddWords(append(words, -32768, 32767, 0))
		o := h.Occurrences()
		o.AddTo(&back)
		o.AddTo(&twice)
		o.AddTo(&twice)
		if !slices.Equal(back.Counts(), h.Counts()) || twice.Total() != 2*h.Total() {
			rt.Errorf("%d samples came back as %d, twice as %d", h.Total(), back.Total(), twice.Total())
		}
	})
}
