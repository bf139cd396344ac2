package fault

import (
	"math"
	"testing"

	"github.com/zaf/g711"
)

// through codes and decodes by an independent G.711 implementation.
func through(words []int16, encode func(int16) uint8, decode func(uint8) int16) []int16 {
	out := make([]int16, len(words))
	for i, w := range words {
		out[i] = decode(encode(w))
	}
	return out
}

// Coded and decoded by zaf/g711 v1.4.0, an implementation from elsewhere.
func TestCompanded(t *testing.T) {
	clean := talk(4, 11)
	mu := through(clean, g711.EncodeUlawFrame, g711.DecodeUlawFrame)
	a := through(clean, g711.EncodeAlawFrame, g711.DecodeAlawFrame)
	for _, tc := range []struct {
		name       string
		words      []int16
		want, none []string
	}{
		{"mu-law", mu, []string{"companded"}, []string{"coarse"}},
		{"A-law", a, []string{"companded"}, []string{"coarse"}},
		{"mu-law, half a second", mu[8000:16000], []string{"companded"}, nil},
		{"mu-law, one sample off", mapped(mu, func(i int, w float64) float64 {
			if i == 9000 {
				return w + 1
			}
			return w
		}), []string{"coarse"}, []string{"companded"}},
		{"A-law, 3 dB down", mapped(a, func(_ int, w float64) float64 { return 0.708 * w }), []string{"coarse"}, []string{"companded"}},
		{"mu-law, DC removed", mapped(mu, func(_ int, w float64) float64 { return w - 3 }), []string{"coarse"}, []string{"companded"}},
		{"mu-law, then noise", mapped(mu, func(i int, w float64) float64 { return w + 4*math.Sin(float64(i*i)) }), nil, []string{"coarse", "companded"}},
		{"quiet 13 bits, within the first segment", mapped(clean, func(_ int, w float64) float64 {
			return 8 * math.Round(max(-120, min(120, w))/8)
		}), nil, []string{"coarse", "companded"}},
		{"16 bits and a click", clicked(), nil, []string{"coarse", "companded"}},
	} {
		expect(t, tc.name, findingsOf(tc.words), tc.want, tc.none)
	}
}

// clicked is quiet contiguous noise with a few far outliers.
func clicked() []int16 {
	words := mapped(talk(4, 5), func(_ int, w float64) float64 { return w / 60 })
	for i := range 40 {
		words[20000+i] = int16(30000 - 700*i)
	}
	return words
}

// All output values, against the decoders of zaf/g711 v1.4.0.
func TestG711Outputs(t *testing.T) {
	for _, tc := range []struct {
		mu     bool
		decode func(uint8) int16
		values int
	}{{true, g711.DecodeUlawFrame, 255}, {false, g711.DecodeAlawFrame, 256}} {
		set := g711Outputs(tc.mu)
		if len(set) != tc.values {
			t.Errorf("mu=%v: %d values, want %d", tc.mu, len(set), tc.values)
		}
		for code := range 256 {
			if v := int(tc.decode(uint8(code))); !set[v] {
				t.Errorf("mu=%v: output %d of code %#x is missing", tc.mu, v, code)
			}
		}
	}
}
