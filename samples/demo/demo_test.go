package demo

import (
	"crypto/sha256"
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

func TestChecksums(t *testing.T) {
	listed, err := os.ReadFile("checksums.txt")
	if err != nil {
		t.Fatal(err)
	}
	var want strings.Builder
	total := 0
	for _, c := range Clips() {
		total += len(c.Data)
		fmt.Fprintf(&want, "%x  clips/%s\n", sha256.Sum256(c.Data), c.Name)
	}
	if string(listed) != want.String() {
		t.Errorf("checksums.txt lists\n%s\nthe clips are\n%s", listed, want.String())
	}
	if n := len(Clips()); n < 4 || n > 6 || total > 600_000 {
		t.Errorf("%d clips of %d bytes together: want 4 to 6 within 600 KB", n, total)
	}
}

// TestAllAreListed: a clip in the folder that nobody describes is not shown.
func TestAllAreListed(t *testing.T) {
	files, err := fs.Glob(embedded, "clips/*")
	if err != nil || len(files) != len(Clips()) {
		t.Fatalf("%d files embedded, %d clips, %v", len(files), len(Clips()), err)
	}
	for i, c := range Clips() {
		if files[i] != "clips/"+c.Name || c.About == "" {
			t.Errorf("clip %d is %q (%q), the file %q", i, c.Name, c.About, files[i])
		}
	}
	Clips()[0].Data[0] = 'x'
	if Clips()[0].Data[0] != 'R' {
		t.Error("a caller can change the embedded clips")
	}
}

func TestWriteToKeepsWhatIsThere(t *testing.T) {
	dir := t.TempDir()
	paths, err := WriteTo(dir)
	if err != nil || len(paths) != len(Clips()) {
		t.Fatalf("%d paths, %v", len(paths), err)
	}
	for i, c := range Clips() {
		if b, err := os.ReadFile(paths[i]); err != nil || string(b) != string(c.Data) {
			t.Errorf("%s is not the clip %s: %v", paths[i], c.Name, err)
		}
	}
	if _, err := WriteTo(dir); !errors.Is(err, fs.ErrExist) {
		t.Errorf("writing again: %v", err)
	}
}

// TestWriteToLeavesNothing: where one clip cannot be written none is.
func TestWriteToLeavesNothing(t *testing.T) {
	dir := t.TempDir()
	last := Clips()[len(Clips())-1].Name
	own := filepath.Join(dir, last)
	if err := os.WriteFile(own, []byte("mine"), 0o666); err != nil {
		t.Fatal(err)
	}
	if _, err := WriteTo(dir); !errors.Is(err, fs.ErrExist) || !strings.Contains(err.Error(), last) {
		t.Errorf("a file in the way: %v", err)
	}
	if b, _ := os.ReadFile(own); string(b) != "mine" {
		t.Error("a file already there was changed")
	}
	if left, _ := os.ReadDir(dir); len(left) != 1 {
		t.Errorf("%d files are left, want the one that was there", len(left))
	}
	if _, err := WriteTo(filepath.Join(dir, "nowhere")); err == nil {
		t.Error("a folder that is not there is no error")
	}
}
