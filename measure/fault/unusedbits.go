package fault

import (
	"fmt"
	"math"
)

// bitSamples is how many samples other than zero the judgement needs: by
// chance, a used bit stays clear in all of them once in 2^64.
const bitSamples = 64

// unusedBits reports low bits that are zero in every sample.
func unusedBits(s *Scan, c Context) []Finding {
	step := s.grid.step()
	if step == 0 || s.grid.nonzero() < bitSamples {
		return nil
	}
	used := 1 - int(math.Log2(step))
	f := Finding{Kind: "unused-bits", Value: float64(used), Unit: "bits"}
	switch {
	case used < 16:
		f.Severity = Warning
		f.Sentence = fmt.Sprintf("only %d bits are used: every sample is a multiple of 2^%d of full scale", used, 1-used)
		f.Advice = "take a recording with more bits: it cannot tell apart designs near or beyond its own resolution, which reproduce it without error"
	case used < c.Bits:
		f.Sentence = fmt.Sprintf("%d of %d bits are used: the low %d are zero in every sample", used, c.Bits, c.Bits-used)
		f.Advice = fmt.Sprintf("nothing to do up to about %d bits; the file holds no more than a %d-bit one", used-4, used)
	default:
		return nil
	}
	return one(f)
}
