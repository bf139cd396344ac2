package samples

import (
	"errors"
	"os"
	"path/filepath"
	"syscall"
	"testing"
)

// TestDiskFull fills a small disk: nothing half-written stays, and what was
// there before is untouched.
func TestDiskFull(t *testing.T) {
	dir := t.TempDir()
	if err := syscall.Mount("tmpfs", dir, "tmpfs", 0, "size=64k"); err != nil {
		t.Skipf("a small disk needs the right to mount one: %v", err)
	}
	defer syscall.Unmount(dir, 0)
	path := filepath.Join(dir, "a.wav")
	if err := os.WriteFile(path, []byte("before"), 0o666); err != nil {
		t.Fatal(err)
	}
	const n = 1 << 17
	for _, depth := range []Depth{Depth16, Depth24, Depth32F} {
		w := create(t, path, 1, n, depth)
		if _, err := w.WriteAt([][]float64{make([]float64, n)}, 0); !errors.Is(err, syscall.ENOSPC) {
			t.Errorf("%s: %v", depth, err)
		}
		if err := w.Commit(); err == nil {
			t.Errorf("%s: committed on a full disk", depth)
		}
	}
	w := create(t, path, 1, n, Depth16)
	if err := w.WriteWordsAt([][]int16{make([]int16, n)}, 0); !errors.Is(err, syscall.ENOSPC) {
		t.Errorf("words: %v", err)
	}
	w.Abort()
	entries, _ := os.ReadDir(dir)
	if b, _ := os.ReadFile(path); len(entries) != 1 || string(b) != "before" {
		t.Errorf("%d files, %q", len(entries), b)
	}

	t.Setenv("TMPDIR", dir)
	flac := put(t, "x.flac", flacOf(t, 16, 8000, noise(n, 16, 3)))
	if _, err := Open(flac); !errors.Is(err, syscall.ENOSPC) {
		t.Errorf("decoding to a full disk: %v", err)
	}
	if entries, _ = os.ReadDir(dir); len(entries) != 1 {
		t.Errorf("%d files after decoding", len(entries))
	}
}
