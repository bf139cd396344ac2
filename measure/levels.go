package measure

import (
	"math"
	"math/bits"
)

// Levels gathers level, peak, mean and grid of one channel, block by block.
// The zero value is ready. Sums of 16-bit words are exact in any order; those
// of float samples run in the order of Add and Merge.
type Levels struct {
	Samples int64
	Zeros   int64 // samples that are exactly zero

	squares  energy
	wordSum  int64
	sum      float64
	peak     float64
	finest   int // lowest set bit 2^-finest of any sample; 0 = none seen
	wordBits uint16
}

const (
	coarsestGrid = 7  // 8-bit audio
	finestGrid   = 31 // 32-bit audio
	floatGrid    = 24 // the mantissa of float32: what float audio counts as
)

// AddWords adds 16-bit samples, full scale = 32768.
func (l *Levels) AddWords(words []int16) {
	var sum int64
	var low, high int16
	var zeros int64
	var set uint16
	for _, w := range words {
		sum += int64(w)
		low, high = min(low, w), max(high, w)
		set |= uint16(w)
		if w == 0 {
			zeros++
		}
	}
	l.Samples += int64(len(words))
	l.Zeros += zeros
	l.wordSum += sum
	l.squares.addWordSquares(sumSquares(words))
	l.wordBits |= set
	l.peak = max(l.peak, -float64(low)/32768, float64(high)/32768)
}

// Add adds samples, full scale = 1.0, finite.
func (l *Levels) Add(x []float64) {
	for _, v := range x {
		l.sum += v
		l.squares.float += float64(v * v)
		l.peak = max(l.peak, math.Abs(v))
		if v == 0 {
			l.Zeros++
			continue
		}
		l.finest = max(l.finest, lowestBit(v))
	}
	l.Samples += int64(len(x))
}

// lowestBit returns n where 2^-n is the lowest set bit of v's binary form;
// v is finite and not 0.
func lowestBit(v float64) int {
	u := math.Float64bits(v)
	exp := int(u >> 52 & 0x7FF)
	frac := u & (1<<52 - 1)
	if exp == 0 {
		return math.MaxInt16 // subnormal: on no grid
	}
	return 1023 + 52 - exp - bits.TrailingZeros64(frac|1<<52)
}

// Merge adds what o gathered after l.
func (l *Levels) Merge(o *Levels) {
	l.Samples += o.Samples
	l.Zeros += o.Zeros
	l.squares.merge(o.squares)
	l.wordSum += o.wordSum
	l.sum += o.sum
	l.peak = max(l.peak, o.peak)
	l.finest = max(l.finest, o.finest)
	l.wordBits |= o.wordBits
}

// Energy is sum x^2, full scale = 1.0.
func (l *Levels) Energy() float64 { return l.squares.value() }

// MeanSquare is mean x^2, full scale = 1.0; NaN without samples.
func (l *Levels) MeanSquare() float64 { return l.Energy() / float64(l.Samples) }

// LevelDBov is 10 log10(mean x^2) (ITU-T G.100.1): 0 for a full-scale square
// wave, -3.01 for a full-scale sine, -Inf for silence, NaN without samples.
func (l *Levels) LevelDBov() float64 { return DB(l.MeanSquare()) }

// Peak is max |x|, full scale = 1.0; 0 without samples.
func (l *Levels) Peak() float64 { return l.peak }

// PeakDB is 20 log10 max |x|, dB re full scale; -Inf for silence.
func (l *Levels) PeakDB() float64 { return 20 * math.Log10(l.peak) }

// CrestDB is peak less level in dB; NaN for silence.
func (l *Levels) CrestDB() float64 { return l.PeakDB() - l.LevelDBov() }

// DC is the mean, full scale = 1.0; NaN without samples.
func (l *Levels) DC() float64 {
	return (float64(l.wordSum)/32768 + l.sum) / float64(l.Samples)
}

// ZeroShare is the share of samples that are exactly zero; NaN without any.
func (l *Levels) ZeroShare() float64 { return float64(l.Zeros) / float64(l.Samples) }

// LSB is the coarsest of the grids 2^-7 to 2^-31 that holds all samples;
// 2^-24, the precision of float32, where none does.
func (l *Levels) LSB() float64 { return math.Ldexp(1, -l.grid()) }

// EffectiveBits is the word length that the grid needs: 16 for 2^-15.
func (l *Levels) EffectiveBits() int { return l.grid() + 1 }

func (l *Levels) grid() int {
	n := max(coarsestGrid, l.finest)
	if l.wordBits != 0 {
		n = max(n, 15-bits.TrailingZeros16(l.wordBits))
	}
	if n > finestGrid {
		return floatGrid
	}
	return n
}
