package demo

import (
	"crypto/sha256"
	"fmt"
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
	total := 0
	for _, c := range Clips() {
		total += len(c.Data)
		line := fmt.Sprintf("%x  clips/%s", sha256.Sum256(c.Data), c.Name)
		if !strings.Contains(string(listed), line) {
			t.Errorf("%s is not what checksums.txt lists", c.Name)
		}
	}
	if n := len(Clips()); n < 4 || n > 6 || total > 600_000 {
		t.Errorf("%d clips of %d bytes together: want 4 to 6 within 600 KB", n, total)
	}
}

func TestWriteToKeepsWhatIsThere(t *testing.T) {
	dir := t.TempDir()
	paths, err := WriteTo(dir)
	if err != nil || len(paths) != len(Clips()) {
		t.Fatalf("%d paths, %v", len(paths), err)
	}
	own := filepath.Join(dir, Clips()[0].Name)
	if err := os.WriteFile(own, []byte("mine"), 0o666); err != nil {
		t.Fatal(err)
	}
	if _, err := WriteTo(dir); err == nil {
		t.Error("a file already there was overwritten")
	}
	if b, _ := os.ReadFile(own); string(b) != "mine" {
		t.Error("a file already there was changed")
	}
}
