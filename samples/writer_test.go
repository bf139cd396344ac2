package samples

import (
	"errors"
	"io"
	"math"
	"os"
	"path/filepath"
	"strings"
	"sync"
	"testing"
)

func create(t testing.TB, path string, channels int, frames int64, depth Depth) *Writer {
	t.Helper()
	w, err := Create(path, 8000, channels, frames, depth)
	if err != nil {
		t.Fatal(err)
	}
	return w
}

func empty(t *testing.T, dir string) {
	t.Helper()
	entries, err := os.ReadDir(dir)
	if err != nil {
		t.Fatal(err)
	}
	for _, e := range entries {
		t.Errorf("%s stayed behind", e.Name())
	}
}

// TestWriterRounding: half away from zero on the depth's grid, beyond full scale
// clamped and counted, NaN and infinity an error.
func TestWriterRounding(t *testing.T) {
	const lsb = 1.0 / (1 << 15)
	path := filepath.Join(t.TempDir(), "a.wav")
	in := []float64{0.5 * lsb, -0.5 * lsb, 1.5 * lsb, -1.5 * lsb, 0.49 * lsb, 1, -1, 1 - lsb, 1 - 0.5*lsb, -1 - 0.49*lsb, -1 - 0.5*lsb, 1e300, -7}
	want := []int16{1, -1, 2, -2, 0, 32767, -32768, 32767, 32767, -32768, -32768, 32767, -32768}
	w := create(t, path, 1, int64(len(in)), Depth16)
	clipped, err := w.WriteAt([][]float64{in}, 0)
	if err != nil || clipped != 5 {
		t.Errorf("%d clipped, %v; want 5: 1, 1-lsb/2, -1-lsb/2, 1e300, -7", clipped, err)
	}
	if err := w.Commit(); err != nil {
		t.Fatal(err)
	}
	r, err := Open(path)
	if err != nil {
		t.Fatal(err)
	}
	defer r.Close()
	got := make([]int16, len(in))
	if err := r.ReadWords([][]int16{got}, 0); err != nil {
		t.Fatal(err)
	}
	for i := range want {
		if got[i] != want[i] {
			t.Errorf("%g lsb: %d, want %d", in[i]/lsb, got[i], want[i])
		}
	}
	for _, x := range []float64{math.NaN(), math.Inf(1)} {
		for _, depth := range []Depth{Depth16, Depth24, Depth32F} {
			dir := t.TempDir()
			w := create(t, filepath.Join(dir, "b.wav"), 1, 2, depth)
			if _, err := w.WriteAt([][]float64{{0, x}}, 0); err == nil || !strings.Contains(err.Error(), "sample 1 of channel 1") {
				t.Errorf("%g at %s: %v", x, depth, err)
			}
			if err := w.Commit(); err == nil {
				t.Errorf("committed after %g", x)
			}
			empty(t, dir)
		}
	}
	w = create(t, filepath.Join(t.TempDir(), "b.wav"), 1, 1, Depth32F)
	defer w.Abort()
	if _, err := w.WriteAt([][]float64{{1e39}}, 0); err == nil {
		t.Error("1e39 stored as 32-bit float")
	}
}

// TestWriterGoroutines: many fill one file, in any order; it appears on Commit.
func TestWriterGoroutines(t *testing.T) {
	dir := t.TempDir()
	path := filepath.Join(dir, "a.wav")
	const n, part = 100_000, 777
	w := create(t, path, 2, n, Depth16)
	word := func(c, i int) int16 { return int16(i*31 + c*7) }
	var wait sync.WaitGroup
	for at := 0; at < n; at += part {
		wait.Go(func() {
			planes := [][]int16{make([]int16, min(part, n-at)), make([]int16, min(part, n-at))}
			for c := range planes {
				for i := range planes[c] {
					planes[c][i] = word(c, at+i)
				}
			}
			if err := w.WriteWordsAt(planes, int64(at)); err != nil {
				t.Error(err)
			}
		})
	}
	wait.Wait()
	if _, err := os.Stat(path); err == nil {
		t.Error("there before Commit")
	}
	if err := w.Commit(); err != nil {
		t.Fatal(err)
	}
	w.Abort() // harmless
	r, err := Open(path)
	if err != nil {
		t.Fatal(err)
	}
	defer r.Close()
	got := [][]int16{make([]int16, n), make([]int16, n)}
	if err := r.ReadWords(got, 0); err != nil {
		t.Fatal(err)
	}
	for c := range got {
		for i, v := range got[c] {
			if v != word(c, i) {
				t.Fatalf("channel %d sample %d is %d", c, i, v)
			}
		}
	}
	os.Remove(path)
	empty(t, dir)
}

// TestWriterFails: whatever fails, nothing stays behind and nothing is replaced.
func TestWriterFails(t *testing.T) {
	dir := t.TempDir()
	path := filepath.Join(dir, "a.wav")

	w := create(t, path, 1, 10, Depth24)
	w.Abort()
	empty(t, dir)

	w = create(t, path, 1, 10, Depth24)
	w.WriteAt([][]float64{make([]float64, 9)}, 0)
	if err := w.Commit(); err == nil || !strings.Contains(err.Error(), "9 of 10 frames") {
		t.Errorf("incomplete: %v", err)
	}
	empty(t, dir)

	w = create(t, path, 1, 10, Depth16)
	w.file.Close() // as a disk that goes away
	if err := w.WriteWordsAt([][]int16{make([]int16, 10)}, 0); err == nil || !strings.HasPrefix(err.Error(), path+": cannot be written: ") {
		t.Errorf("broken disk: %v", err)
	}
	if err := w.Commit(); err == nil {
		t.Error("committed on a broken disk")
	}
	empty(t, dir)

	if _, err := Create(filepath.Join(dir, "no", "folder", "a.wav"), 8000, 1, 1, Depth16); err == nil {
		t.Error("written into no folder")
	}
	if err := WriteFile(path, func(io.Writer) error { return errors.New("no content") }); err == nil {
		t.Error("written without content")
	}
	empty(t, dir)
}

// TestWriteFile replaces a file whole and keeps it where the content fails.
func TestWriteFile(t *testing.T) {
	path := filepath.Join(t.TempDir(), "a.txt")
	for _, text := range []string{"first", "second"} {
		if err := WriteFile(path, func(w io.Writer) error { _, err := io.WriteString(w, text); return err }); err != nil {
			t.Fatal(err)
		}
		WriteFile(path, func(w io.Writer) error { io.WriteString(w, "half"); return io.ErrUnexpectedEOF })
		if b, _ := os.ReadFile(path); string(b) != text {
			t.Errorf("%q", b)
		}
	}
}

// TestMisuse: a caller's bug panics with the package's name.
func TestMisuse(t *testing.T) {
	r, err := Open(put(t, "a.wav", riff(ck("fmt ", fmtOf(1, 1, 8000, 3, 24)), ck("data", make([]byte, 30)))))
	if err != nil {
		t.Fatal(err)
	}
	defer r.Close()
	w := create(t, filepath.Join(t.TempDir(), "b.wav"), 2, 5, Depth24)
	defer w.Abort()
	for name, f := range map[string]func(){
		"words of 24 bits":   func() { r.ReadWords([][]int16{make([]int16, 1)}, 0) },
		"two planes of one":  func() { r.Read([][]float64{{0}, {0}}, 0) },
		"beyond the end":     func() { r.Read([][]float64{make([]float64, 5)}, 6) },
		"before the start":   func() { r.Read([][]float64{make([]float64, 5)}, -1) },
		"far beyond the end": func() { r.Read([][]float64{make([]float64, 5)}, math.MaxInt64) },
		"write too much":     func() { w.WriteAt([][]float64{make([]float64, 6), make([]float64, 6)}, 0) },
		"uneven planes":      func() { w.WriteAt([][]float64{make([]float64, 1), make([]float64, 2)}, 0) },
		"words to 24 bits":   func() { w.WriteWordsAt([][]int16{{0}, {0}}, 0) },
		"no depth":           func() { Create("c.wav", 8000, 1, 1, "12") },
	} {
		func() {
			defer func() {
				if p, _ := recover().(string); !strings.HasPrefix(p, "samples: ") {
					t.Errorf("%s: %q", name, p)
				}
			}()
			f()
		}()
	}
}
