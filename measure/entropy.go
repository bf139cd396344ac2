package measure

import "math"

var entropyBits = Measure{
	Name: "entropy_bits", Unit: "bits/sample",
	Means: "first-order empirical entropy of the indices",
	Of:    func(t *Tally) float64 { return Entropy(t.Indices) },
}

// Entropy is the first-order entropy of counts in bits; NaN without counts.
// Source: C. E. Shannon, Bell Syst. Tech. J. 27 (1948).
func Entropy(counts []int64) float64 {
	var total int64
	var sum float64
	for _, n := range counts {
		total += n
		if n > 0 {
			sum += float64(n) * math.Log2(float64(n))
		}
	}
	if total == 0 {
		return math.NaN()
	}
	n := float64(total)
	return max(0, math.Log2(n)-sum/n)
}
