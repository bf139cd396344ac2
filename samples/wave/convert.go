package wave

import (
	"math"
)

// Words converts interleaved samples to the 16-bit grid, value = word/2^15, one
// plane a channel, all of the same length; src holds as many frames. It panics
// where the encoding does not lie on that grid.
func (e Encoding) Words(dst [][]int16, src []byte) {
	switch e {
	case PCM8:
		each(dst, src, 1, func(b []byte) int16 { return (int16(b[0]) - 128) << 8 })
	case PCM16:
		each(dst, src, 2, func(b []byte) int16 { return int16(le.Uint16(b)) })
	case MuLaw:
		each(dst, src, 1, func(b []byte) int16 { return muWords[b[0]] })
	case ALaw:
		each(dst, src, 1, func(b []byte) int16 { return aWords[b[0]] })
	default:
		panic("wave: " + e.String() + " samples are not on the 16-bit grid")
	}
}

// Reals converts interleaved samples to real numbers, full scale = 1.0, one
// plane a channel, all of the same length; src holds as many frames.
func (e Encoding) Reals(dst [][]float64, src []byte) {
	switch e {
	case PCM8:
		each(dst, src, 1, func(b []byte) float64 { return (float64(b[0]) - 128) / (1 << 7) })
	case PCM16:
		each(dst, src, 2, func(b []byte) float64 { return float64(int16(le.Uint16(b))) / (1 << 15) })
	case PCM24:
		each(dst, src, 3, func(b []byte) float64 {
			return float64(int32(uint32(b[0])<<8|uint32(b[1])<<16|uint32(b[2])<<24)) / (1 << 31)
		})
	case PCM32:
		each(dst, src, 4, func(b []byte) float64 { return float64(int32(le.Uint32(b))) / (1 << 31) })
	case Float32:
		each(dst, src, 4, func(b []byte) float64 { return float64(math.Float32frombits(le.Uint32(b))) })
	case Float64:
		each(dst, src, 8, func(b []byte) float64 { return math.Float64frombits(le.Uint64(b)) })
	case MuLaw:
		each(dst, src, 1, func(b []byte) float64 { return float64(muWords[b[0]]) / (1 << 15) })
	case ALaw:
		each(dst, src, 1, func(b []byte) float64 { return float64(aWords[b[0]]) / (1 << 15) })
	}
}

// each spreads interleaved samples of size bytes over the planes.
func each[T any](dst [][]T, src []byte, size int, value func([]byte) T) {
	step := size * len(dst)
	for c, plane := range dst {
		at := c * size
		for i := range plane {
			plane[i] = value(src[at : at+size : at+size])
			at += step
		}
	}
}

// NotFinite gives the index of the first NaN or infinity among stored float
// samples, -1 where there is none; other encodings have none.
func (e Encoding) NotFinite(src []byte) int {
	switch e {
	case Float32:
		for i := 0; i+4 <= len(src); i += 4 {
			if le.Uint32(src[i:])&0x7F800000 == 0x7F800000 {
				return i / 4
			}
		}
	case Float64:
		for i := 0; i+8 <= len(src); i += 8 {
			if le.Uint64(src[i:])>>52&0x7FF == 0x7FF {
				return i / 8
			}
		}
	}
	return -1
}
