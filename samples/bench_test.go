package samples

import (
	"fmt"
	"path/filepath"
	"testing"

	"fewbits/samples/wave"
)

const benchFrames = 1 << 22

// made writes a file of noise and opens it.
func made(b *testing.B, channels int, depth Depth) *Recording {
	b.Helper()
	path := filepath.Join(b.TempDir(), "a.wav")
	w := create(b, path, channels, benchFrames, depth)
	planes := make([][]float64, channels)
	for c := range planes {
		planes[c] = make([]float64, benchFrames)
		for i, v := range noise(benchFrames, 16, uint32(c)) {
			planes[c][i] = float64(v) / (1 << 15)
		}
	}
	if _, err := w.WriteAt(planes, 0); err != nil {
		b.Fatal(err)
	}
	if err := w.Commit(); err != nil {
		b.Fatal(err)
	}
	r, err := Open(path)
	if err != nil {
		b.Fatal(err)
	}
	b.Cleanup(func() { r.Close() })
	return r
}

// chunk is what is read at a time.
const chunk = 1 << 17

// BenchmarkReadWords counts bytes of the file.
func BenchmarkReadWords(b *testing.B) {
	for _, channels := range []int{1, 2} {
		b.Run(fmt.Sprint(channels), func(b *testing.B) {
			r := made(b, channels, Depth16)
			planes := make([][]int16, channels)
			for c := range planes {
				planes[c] = make([]int16, chunk)
			}
			b.SetBytes(2 * int64(channels) * benchFrames)
			for b.Loop() {
				for at := int64(0); at < benchFrames; at += chunk {
					if err := r.ReadWords(planes, at); err != nil {
						b.Fatal(err)
					}
				}
			}
		})
	}
}

// BenchmarkRead counts bytes of the file.
func BenchmarkRead(b *testing.B) {
	for _, depth := range []Depth{Depth16, Depth24, Depth32F} {
		for _, channels := range []int{1, 2} {
			b.Run(fmt.Sprintf("%s/%d", depth, channels), func(b *testing.B) {
				r := made(b, channels, depth)
				planes := make([][]float64, channels)
				for c := range planes {
					planes[c] = make([]float64, chunk)
				}
				b.SetBytes(int64(r.frameBytes()) * benchFrames)
				for b.Loop() {
					for at := int64(0); at < benchFrames; at += chunk {
						if err := r.Read(planes, at); err != nil {
							b.Fatal(err)
						}
					}
				}
			})
		}
	}
}

// BenchmarkWrite counts bytes of the file.
func BenchmarkWrite(b *testing.B) {
	for _, depth := range []Depth{Depth16, Depth24, Depth32F} {
		b.Run(string(depth), func(b *testing.B) {
			plane := make([]float64, chunk)
			for i, v := range noise(chunk, 16, 1) {
				plane[i] = float64(v) / (1 << 15)
			}
			path := filepath.Join(b.TempDir(), "a.wav")
			b.SetBytes(int64(depths[depth].Bytes()) * benchFrames)
			for b.Loop() {
				w := create(b, path, 1, benchFrames, depth)
				for at := int64(0); at < benchFrames; at += chunk {
					if _, err := w.WriteAt([][]float64{plane}, at); err != nil {
						b.Fatal(err)
					}
				}
				if err := w.Commit(); err != nil {
					b.Fatal(err)
				}
			}
		})
	}
	b.Run("words", func(b *testing.B) {
		plane := make([]int16, chunk)
		path := filepath.Join(b.TempDir(), "a.wav")
		b.SetBytes(2 * benchFrames)
		for b.Loop() {
			w := create(b, path, 1, benchFrames, Depth16)
			for at := int64(0); at < benchFrames; at += chunk {
				if err := w.WriteWordsAt([][]int16{plane}, at); err != nil {
					b.Fatal(err)
				}
			}
			if err := w.Commit(); err != nil {
				b.Fatal(err)
			}
		}
	})
}

// BenchmarkOpenFLAC counts bytes of decoded audio.
func BenchmarkOpenFLAC(b *testing.B) {
	path := put(b, "a.flac", flacOf(b, 16, 16000, noise(1<<20, 12, 1)))
	b.SetBytes(2 << 20)
	for b.Loop() {
		r, err := Open(path)
		if err != nil {
			b.Fatal(err)
		}
		r.Close()
	}
}

// BenchmarkConvert is the conversion alone; bytes of the file.
func BenchmarkConvert(b *testing.B) {
	src := make([]byte, 1<<17)
	for _, e := range []wave.Encoding{wave.PCM16, wave.PCM24, wave.Float32, wave.MuLaw} {
		b.Run(fmt.Sprint(e, e.Bits()), func(b *testing.B) {
			n := len(src) / e.Bytes()
			planes := [][]float64{make([]float64, n)}
			b.SetBytes(int64(n * e.Bytes()))
			for b.Loop() {
				e.Reals(planes, src)
			}
		})
	}
}
