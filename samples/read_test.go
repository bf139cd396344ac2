package samples

import (
	"fmt"
	"os"
	"slices"
	"testing"

	"pgregory.net/rapid"

	"fewbits/samples/wave"
)

// TestReadAnywhere: any stretch is that part of the whole, also when many read at
// once, for every encoding and over the borders of blocks.
func TestReadAnywhere(t *testing.T) {
	const n = 100_000
	for name, file := range map[string][]byte{
		"16-bit mono":   riff(ck("fmt ", fmtOf(1, 1, 8000, 2, 16)), ck("data", bytesOf(2*n))),
		"16-bit stereo": riff(ck("fmt ", fmtOf(1, 2, 8000, 4, 16)), ck("data", bytesOf(4*n))),
		"24-bit, 3":     riff(ck("fmt ", fmtOf(1, 3, 8000, 9, 24)), ck("data", bytesOf(9*n))),
		"mu-law":        riff(ck("fmt ", fmtOf(7, 1, 8000, 1, 8)), ck("data", bytesOf(n))),
		"FLAC":          flacOf(t, 20, 8000, noise(n, 20, 1), noise(n, 20, 2)),
	} {
		t.Run(name, func(t *testing.T) {
			r, whole := read(t, put(t, "x.wav", file))
			for k := range 2 {
				t.Run(fmt.Sprint(k), func(t *testing.T) {
					t.Parallel()
					rapid.Check(t, func(t *rapid.T) { anywhere(t, r, whole) })
				})
			}
		})
	}
}

// anywhere reads a stretch and compares.
func anywhere(t *rapid.T, r *Recording, whole [][]float64) {
	n := len(whole[0])
	start := rapid.IntRange(0, n).Draw(t, "start")
	length := rapid.IntRange(0, n-start).Draw(t, "length")
	got := make([][]float64, len(whole))
	for c := range got {
		got[c] = make([]float64, length)
	}
	if err := r.Read(got, int64(start)); err != nil {
		t.Fatal(err)
	}
	for c := range got {
		if !slices.Equal(got[c], whole[c][start:start+length]) {
			t.Fatalf("channel %d differs", c)
		}
	}
}

// TestBeyond4GiB reads the last samples of an RF64 file with a hole in it.
func TestBeyond4GiB(t *testing.T) {
	const frames = 3 << 30
	head, _ := wave.Header(wave.PCM16, 8000, 1, frames)
	path := put(t, "long.wav", head)
	size := int64(len(head)) + 2*frames
	if err := os.Truncate(path, size); err != nil {
		t.Skipf("no files with holes here: %v", err)
	}
	file, err := os.OpenFile(path, os.O_WRONLY, 0)
	if err != nil {
		t.Fatal(err)
	}
	defer file.Close()
	if _, err := file.WriteAt(four, size-8); err != nil {
		t.Skipf("no files with holes here: %v", err)
	}
	r, err := Open(path)
	if err != nil {
		t.Fatal(err)
	}
	defer r.Close()
	if i := r.Info(); i.Frames != frames || i.Format() != "RF64, PCM 16-bit" || len(i.Warnings) > 0 {
		t.Errorf("%+v", i)
	}
	words, reals := [][]int16{make([]int16, 5)}, [][]float64{make([]float64, 5)}
	if err := r.ReadWords(words, frames-5); err != nil {
		t.Fatal(err)
	}
	if err := r.Read(reals, frames-5); err != nil {
		t.Fatal(err)
	}
	if !slices.Equal(words[0], []int16{0, 100, -200, 300, -400}) || reals[0][4] != -400./32768 {
		t.Errorf("%v, %v", words, reals)
	}
}

func bytesOf(n int) []byte {
	b := make([]byte, n)
	for i, v := range noise(n, 8, 5) {
		b[i] = byte(v)
	}
	return b
}

// TestShrinks: a file that is cut while it is open gives an error, not samples.
func TestShrinks(t *testing.T) {
	path := put(t, "x.wav", riff(mono16, ck("data", four)))
	r, err := Open(path)
	if err != nil {
		t.Fatal(err)
	}
	defer r.Close()
	if err := os.Truncate(path, 46); err != nil {
		t.Skipf("an open file cannot be cut here: %v", err)
	}
	words, reals := [][]int16{make([]int16, 4)}, [][]float64{make([]float64, 4)}
	for _, err := range []error{r.ReadWords(words, 0), r.Read(reals, 0)} {
		if err == nil || err.Error() != path+": byte 44: the file became shorter while it was read: run again when it is complete" {
			t.Errorf("%v", err)
		}
	}
}
