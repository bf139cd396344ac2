package measure

import (
	"math"
	"math/bits"
)

// energy is a sum of squares: exact (128 bits, unit 2^-30) for 16-bit words,
// a running float64 sum for other samples.
type energy struct {
	hi, lo uint64
	float  float64
}

func (e *energy) addWordSquares(sum uint64) {
	var carry uint64
	e.lo, carry = bits.Add64(e.lo, sum, 0)
	e.hi += carry
}

// addProduct adds count times square, both below 2^63.
func (e *energy) addProduct(count, square uint64) {
	hi, lo := bits.Mul64(count, square)
	var carry uint64
	e.lo, carry = bits.Add64(e.lo, lo, 0)
	e.hi += hi + carry
}

func (e *energy) merge(o energy) {
	e.addWordSquares(o.lo)
	e.hi += o.hi
	e.float += o.float
}

// value is the sum, full scale = 1.0.
func (e *energy) value() float64 {
	words := math.Ldexp(float64(e.hi), 64) + float64(e.lo)
	return words/(1<<30) + e.float
}

// sumSquares adds the squares of at most 2^33 words; unit 2^-30.
func sumSquares(words []int16) uint64 {
	var a, b, c, d uint64
	for ; len(words) >= 8; words = words[8:] {
		w := (*[8]int16)(words)
		a += square(w[0]) + square(w[4])
		b += square(w[1]) + square(w[5])
		c += square(w[2]) + square(w[6])
		d += square(w[3]) + square(w[7])
	}
	for _, w := range words {
		a += square(w)
	}
	return a + b + c + d
}

func square(w int16) uint64 { return uint64(int64(w) * int64(w)) }

// WordEnergy is sum x^2 of at most 2^33 16-bit words, full scale = 1.0; exact
// but for the last rounding.
func WordEnergy(words []int16) float64 { return float64(sumSquares(words)) / (1 << 30) }

// DB is 10 log10 of a power or energy ratio; -Inf for 0, NaN below.
func DB(ratio float64) float64 { return 10 * math.Log10(ratio) }
