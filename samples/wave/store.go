package wave

import (
	"fmt"
	"math"
)

// FromWords stores planes of words interleaved as PCM16.
func FromWords(dst []byte, planes [][]int16) {
	for c, plane := range planes {
		at := 2 * c
		for _, v := range plane {
			le.PutUint16(dst[at:], uint16(v))
			at += 2 * len(planes)
		}
	}
}

// FromReals stores planes interleaved as PCM16, PCM24, Float32 or Float64, full
// scale = 1.0. PCM is rounded half away from zero; samples beyond full scale
// are clamped and counted. NaN and infinity, also by overflow of Float32, are
// an error. It panics for other encodings.
func (e Encoding) FromReals(dst []byte, planes [][]float64) (clipped int64, err error) {
	switch e {
	case PCM16:
		return fixed(dst, planes, 15, 2, func(b []byte, v int32) { le.PutUint16(b, uint16(v)) })
	case PCM24:
		return fixed(dst, planes, 23, 3, func(b []byte, v int32) {
			_ = b[2]
			b[0], b[1], b[2] = byte(v), byte(v>>8), byte(v>>16)
		})
	case Float32:
		return 0, floating(dst, planes, 4, math.MaxFloat32, func(b []byte, v float64) { le.PutUint32(b, math.Float32bits(float32(v))) })
	case Float64:
		return 0, floating(dst, planes, 8, math.MaxFloat64, func(b []byte, v float64) { le.PutUint64(b, math.Float64bits(v)) })
	}
	panic("wave: " + e.String() + " samples are not written")
}

// fixed rounds to the grid 2^-bits.
func fixed(dst []byte, planes [][]float64, bits, size int, put func([]byte, int32)) (clipped int64, err error) {
	scale := float64(int64(1) << bits)
	for c, plane := range planes {
		at := c * size
		for i, x := range plane {
			v := x * scale
			if !(v > -scale-0.5 && v < scale-0.5) {
				if math.IsNaN(x) || math.IsInf(x, 0) {
					return clipped, notFinite(i, c)
				}
				clipped++
				v = min(max(v, -scale), scale-1)
			}
			k := int32(v)
			k += int32(2 * (v - float64(k))) // half away from zero, both steps exact
			put(dst[at:at+size:at+size], k)
			at += size * len(planes)
		}
	}
	return clipped, nil
}

// floating stores as it is what does not pass the limit.
func floating(dst []byte, planes [][]float64, size int, limit float64, put func([]byte, float64)) error {
	for c, plane := range planes {
		at := c * size
		for i, x := range plane {
			if !(math.Abs(x) <= limit) {
				return notFinite(i, c)
			}
			put(dst[at:at+size:at+size], x)
			at += size * len(planes)
		}
	}
	return nil
}

func notFinite(i, c int) error {
	return fmt.Errorf("sample %d of channel %d of a block to be written is no finite number", i, c+1)
}
