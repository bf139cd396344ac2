package measure

import (
	"math"
	"math/rand/v2"
	"testing"
)

// TestLevelsOfKnownSignals: ITU-T G.100.1: a full-scale square wave is 0 dBov,
// a full-scale sine -3.01.
func TestLevelsOfKnownSignals(t *testing.T) {
	var square, sine Levels
	for k := range 8000 {
		square.Add([]float64{1 - 2*float64(k%2)})
		sine.Add([]float64{math.Sin(2 * math.Pi * (float64(k) + 0.5) / 80)})
	}
	near(t, "square wave", square.LevelDBov(), 0, 1e-12)
	near(t, "its crest", square.CrestDB(), 0, 1e-12)
	near(t, "sine", sine.LevelDBov(), -3.0102999566398, 1e-9)
	near(t, "sine's mean", sine.DC(), 0, 1e-15)
	var dc Levels
	dc.AddWords([]int16{-32768, 16384, 16384, 16384})
	near(t, "mean of words", dc.DC(), (-1+1.5)/4, 0)
	near(t, "peak of -32768", dc.PeakDB(), 0, 0)
	if dc.LSB() != 1.0/128 || dc.EffectiveBits() != 8 {
		t.Errorf("grid %g, %d bits", dc.LSB(), dc.EffectiveBits())
	}
}

func TestLevelsGrid(t *testing.T) {
	for _, c := range []struct {
		x    float64
		lsb  float64
		bits int
	}{
		{0, 1.0 / 128, 8},
		{0.5, 1.0 / 128, 8},
		{-3.0 / 32768, 1.0 / 32768, 16},
		{5.0 / (1 << 23), 1.0 / (1 << 23), 24},
		{1.0 / (1 << 31), 1.0 / (1 << 31), 32},
		{1.0 / (1 << 32), 1.0 / (1 << 24), 25},
		{0.1, 1.0 / (1 << 24), 25},
		{5e-324, 1.0 / (1 << 24), 25},
		{3, 1.0 / 128, 8},
	} {
		var l Levels
		l.Add([]float64{0.25, c.x, -0.5})
		if l.LSB() != c.lsb || l.EffectiveBits() != c.bits {
			t.Errorf("%g: grid 2^%g, %d bits, want 2^%g, %d", c.x, math.Log2(l.LSB()), l.EffectiveBits(), math.Log2(c.lsb), c.bits)
		}
	}
}

// TestLevelsInAnyCut: words and floats, whole and in pieces, agree; words
// exactly.
func TestLevelsInAnyCut(t *testing.T) {
	r := rand.New(rand.NewPCG(4, 4))
	words := everyKind(5000, r)
	for i := range words {
		words[i] &^= 7
	}
	var whole, pieces, floats Levels
	whole.AddWords(words)
	floats.Add(toFloat(words))
	for rest := words; len(rest) > 0; {
		n := min(len(rest), 1+r.IntN(900))
		var part Levels
		part.AddWords(rest[:n])
		pieces.Merge(&part)
		rest = rest[n:]
	}
	if whole != pieces {
		t.Errorf("in pieces %+v, whole %+v", pieces, whole)
	}
	if whole.LSB() != 8.0/32768 || floats.LSB() != whole.LSB() || floats.Peak() != whole.Peak() || floats.Zeros != whole.Zeros {
		t.Errorf("floats %+v, words %+v", floats, whole)
	}
	near(t, "level of floats", floats.LevelDBov(), whole.LevelDBov(), 1e-12)
	near(t, "mean of floats", floats.DC(), whole.DC(), 1e-15)
}

// TestEnergyBeyond64Bits: a sum of squares above 2^64 units stays right.
func TestEnergyBeyond64Bits(t *testing.T) {
	var h Histogram
	h.AddCount(-32768, 1<<40)
	l := h.Levels()
	near(t, "energy", l.Energy(), 1<<40, 0)
	near(t, "level", l.LevelDBov(), 0, 0)
}
