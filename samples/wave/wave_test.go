package wave

import (
	"bytes"
	"io"
	"math"
	"testing"

	"github.com/google/go-cmp/cmp"
	"github.com/zaf/g711"
	"pgregory.net/rapid"
)

// TestG711 against the library zaf/g711, all codes; its values are 16-bit.
func TestG711(t *testing.T) {
	codes := make([]byte, 256)
	for i := range codes {
		codes[i] = byte(i)
	}
	mu, a := [][]int16{make([]int16, 256)}, [][]int16{make([]int16, 256)}
	MuLaw.Words(mu, codes)
	ALaw.Words(a, codes)
	for i := range codes {
		if want := g711.DecodeUlawFrame(codes[i]); mu[0][i] != want {
			t.Errorf("mu-law code 0x%02x is %d, want %d", i, mu[0][i], want)
		}
		if want := g711.DecodeAlawFrame(codes[i]); a[0][i] != want {
			t.Errorf("A-law code 0x%02x is %d, want %d", i, a[0][i], want)
		}
	}
}

// TestG711Published: output values of ITU-T G.711, tables 1a, 1b, 2a and 2b: the
// ends of the first and last segments of both signs.
func TestG711Published(t *testing.T) {
	for _, c := range []struct {
		e     Encoding
		code  byte
		value float64
	}{
		{MuLaw, 0x80, 8031. / 8192}, {MuLaw, 0x8F, 4191. / 8192}, {MuLaw, 0xFE, 2. / 8192}, {MuLaw, 0xFF, 0},
		{MuLaw, 0x00, -8031. / 8192}, {MuLaw, 0x7E, -2. / 8192}, {MuLaw, 0x7F, 0},
		{ALaw, 0x80 ^ 0x55 | 0x80, 1. / 4096}, {ALaw, 0xFF ^ 0x55, 4032. / 4096}, {ALaw, 0xF0 ^ 0x55, 2112. / 4096},
		{ALaw, 0x7F ^ 0x55, -4032. / 4096}, {ALaw, 0x00 ^ 0x55, -1. / 4096},
	} {
		got := [][]float64{{9}}
		c.e.Reals(got, []byte{c.code})
		if got[0][0] != c.value {
			t.Errorf("%v code 0x%02x is %g, want %g", c.e, c.code, got[0][0], c.value)
		}
	}
}

// sparse is a file of a header, a tail, and zeros between, of any size.
type sparse struct {
	head []byte
	size int64
}

func (s sparse) ReadAt(b []byte, at int64) (int, error) {
	n := int(min(int64(len(b)), s.size-at))
	if n < len(b) {
		return 0, io.EOF
	}
	clear(b)
	if at < int64(len(s.head)) {
		copy(b, s.head[at:])
	}
	return n, nil
}

// TestHeaderWalk: every header that is written is read back, with no warning,
// from a byte to far beyond 4 GiB.
func TestHeaderWalk(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		e := rapid.SampledFrom([]Encoding{PCM16, PCM24, PCM32, Float32, Float64}).Draw(t, "encoding")
		rate := rapid.IntRange(MinRate, MaxRate).Draw(t, "rate")
		channels := rapid.IntRange(1, MaxChannels).Draw(t, "channels")
		frames := rapid.OneOf(rapid.Int64Range(1, 1000), rapid.Int64Range(1, 1<<40)).Draw(t, "frames")
		head, pad := Header(e, rate, channels, frames)
		data := frames * int64(channels*e.Bytes())
		size := int64(len(head)) + data
		if pad {
			size++
		}
		if size%2 == 1 {
			t.Fatalf("%d bytes", size)
		}
		f, err := Walk(sparse{head, size}, size)
		if err != nil {
			t.Fatal(err)
		}
		want := &Format{Container: "WAV", Encoding: e, Rate: rate, Channels: channels, ValidBits: e.Bits(), DataStart: int64(len(head)), Frames: frames}
		if size > math.MaxUint32+7 {
			want.Container = "RF64"
		}
		if d := cmp.Diff(want, f); d != "" {
			t.Fatal(d)
		}
	})
}

// TestHeaderBytes: a mono 16-bit file at 8 kHz, field by field as in Microsoft and
// IBM (1991), chapter 3; 32-bit float adds the size of its extension and a fact
// chunk (the 1994 revision).
func TestHeaderBytes(t *testing.T) {
	head, pad := Header(PCM16, 8000, 1, 4)
	want := []byte("RIFF\x2c\x00\x00\x00WAVEfmt \x10\x00\x00\x00\x01\x00\x01\x00\x40\x1f\x00\x00\x80\x3e\x00\x00\x02\x00\x10\x00data\x08\x00\x00\x00")
	if !bytes.Equal(head, want) || pad {
		t.Errorf("%q", head)
	}
	head, _ = Header(Float32, 8000, 2, 5)
	want = []byte("RIFF\x5a\x00\x00\x00WAVEfmt \x12\x00\x00\x00\x03\x00\x02\x00\x40\x1f\x00\x00\x00\xfa\x00\x00\x08\x00\x20\x00\x00\x00fact\x04\x00\x00\x00\x05\x00\x00\x00data\x28\x00\x00\x00")
	if !bytes.Equal(head, want) {
		t.Errorf("%q", head)
	}
	if _, pad := Header(PCM24, 8000, 1, 3); !pad {
		t.Error("9 bytes of samples without a pad byte")
	}
}

// TestStoreRead: what is stored comes back: exactly for floats, on the grid for
// PCM, words bit by bit.
func TestStoreRead(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		channels := rapid.IntRange(1, 5).Draw(t, "channels")
		frames := rapid.IntRange(0, 50).Draw(t, "frames")
		planes := make([][]float64, channels)
		for c := range planes {
			planes[c] = rapid.SliceOfN(rapid.Float64Range(-1, 1), frames, frames).Draw(t, "plane")
		}
		for e, half := range map[Encoding]float64{PCM16: 0.5 / (1 << 15), PCM24: 0.5 / (1 << 23), Float32: 0.5 / (1 << 24), Float64: 0} {
			b := make([]byte, frames*channels*e.Bytes())
			clipped, err := e.FromReals(b, planes)
			if err != nil {
				t.Fatal(err)
			}
			got := make([][]float64, channels)
			for c := range got {
				got[c] = make([]float64, frames)
			}
			e.Reals(got, b)
			for c := range got {
				for i, x := range planes[c] {
					if d := math.Abs(got[c][i] - x); d > half && !(clipped > 0 && d <= 2*half && x > 0.99) {
						t.Fatalf("%v: %g became %g", e, x, got[c][i])
					}
				}
			}
		}
	})
}

// TestRounding against math.Round, at halves and their neighbours.
func TestRounding(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		x := float64(rapid.IntRange(-1<<16-4, 1<<16+4).Draw(t, "halves")) / 2
		switch rapid.IntRange(0, 2).Draw(t, "side") {
		case 1:
			x = math.Nextafter(x, math.Inf(1))
		case 2:
			x = math.Nextafter(x, math.Inf(-1))
		}
		want := min(max(math.Round(x), -1<<15), 1<<15-1)
		b := make([]byte, 2)
		clipped, err := PCM16.FromReals(b, [][]float64{{x / (1 << 15)}})
		if got := int16(le.Uint16(b)); err != nil || float64(got) != want || (clipped == 1) != (want != math.Round(x)) {
			t.Fatalf("%.17g: %d, %d clipped, %v", x, got, clipped, err)
		}
	})
}

// TestWordsStoreRead for words.
func TestWordsStoreRead(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		channels, frames := rapid.IntRange(1, 5).Draw(t, "channels"), rapid.IntRange(0, 50).Draw(t, "frames")
		planes, got := make([][]int16, channels), make([][]int16, channels)
		for c := range planes {
			planes[c] = rapid.SliceOfN(rapid.Int16(), frames, frames).Draw(t, "plane")
			got[c] = make([]int16, frames)
		}
		b := make([]byte, frames*channels*2)
		FromWords(b, planes)
		PCM16.Words(got, b)
		if d := cmp.Diff(planes, got); d != "" {
			t.Fatal(d)
		}
	})
}

// FuzzWalk: no file makes the walk panic, hang, or name samples that are not
// there.
func FuzzWalk(f *testing.F) {
	head, _ := Header(PCM16, 8000, 1, 4)
	f.Add(append(head, 1, 2, 3, 4, 5, 6, 7, 8))
	float, _ := Header(Float32, 48000, 2, 1)
	f.Add(append(float, 0, 0, 0, 0, 0, 0, 192, 127))
	wide, _ := Header(PCM24, 8000, 3, 1<<40)
	f.Add(append(wide, 1, 2, 3, 4, 5, 6, 7, 8, 9))
	lying := append([]byte(nil), head[:12]...)
	lying = append(lying, chunk("LIST", []byte("INFO"))...)
	lying = append(lying, head[12:]...)
	le.PutUint32(lying[16:], math.MaxUint32)
	f.Add(append(lying, 1, 2, 3, 4, 5, 6, 7, 8))
	f.Fuzz(func(t *testing.T, b []byte) {
		size := int64(len(b))
		w, err := Walk(bytes.NewReader(b), size)
		if err != nil {
			if _, ok := err.(*Fault); !ok {
				t.Errorf("%T: %v", err, err)
			}
			return
		}
		end := w.DataStart + w.Frames*int64(w.FrameBytes())
		if w.Frames < 1 || w.DataStart < 20 || end > size || w.Channels < 1 || w.Channels > MaxChannels || w.Rate < MinRate || w.Rate > MaxRate || w.ValidBits < 1 || w.ValidBits > w.Encoding.Bits() {
			t.Fatalf("%+v of %d bytes", w, size)
		}
		planes := make([][]float64, w.Channels)
		for c := range planes {
			planes[c] = make([]float64, w.Frames)
		}
		data := b[w.DataStart:end]
		w.Encoding.Reals(planes, data)
		if bad := w.Encoding.NotFinite(data); w.Encoding.Float() {
			for i := range w.Frames * int64(w.Channels) {
				x := planes[i%int64(w.Channels)][i/int64(w.Channels)]
				if finite := !math.IsNaN(x) && !math.IsInf(x, 0); finite == (int(i) == bad) {
					t.Fatalf("sample %d is %g, first not finite %d", i, x, bad)
				} else if !finite {
					break
				}
			}
		}
	})
}
