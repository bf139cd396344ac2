package samples

import (
	"os"
	"path/filepath"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
)

// tree makes files (a name that ends in / is a folder) and goes there.
func tree(t *testing.T, names ...string) {
	t.Helper()
	t.Chdir(t.TempDir())
	for i, n := range names {
		dir, file := filepath.Split(n)
		if err := os.MkdirAll(filepath.Join(".", dir), 0o777); err != nil {
			t.Fatal(err)
		}
		if file == "" {
			continue
		}
		if err := os.WriteFile(n, riff(mono16, ck("data", make([]byte, 2*i+2))), 0o666); err != nil {
			t.Fatal(err)
		}
	}
}

func link(t *testing.T, make func(string, string) error, from, to string) {
	t.Helper()
	if err := make(from, to); err != nil {
		t.Skipf("no links here: %v", err)
	}
}

// TestFind: folders below and names in any case, sorted; each refusal with its
// reason.
func TestFind(t *testing.T) {
	tree(t, "b/two.WAV", "b/deep/er/one.Flac", "b/notes.txt", "b/.wav/", "a.wav", "odd.bin", "none/x.mp3", "empty/")
	link(t, os.Symlink, "../a.wav", "b/link.wav")
	link(t, os.Symlink, "nowhere", "b/dangling.wav")
	link(t, os.Symlink, "..", "b/up.wav") // a folder linked into itself
	link(t, os.Link, "odd.bin", "hard.wav")
	files, refused, err := Find([]string{"odd.bin", "b/", "./a.wav", "a.wav", "none", "empty", "hard.wav", "missing.wav"})
	if err != nil {
		t.Fatal(err)
	}
	if d := cmp.Diff([]string{"a.wav", "b/deep/er/one.Flac", "b/two.WAV", "hard.wav"}, slashes(files)); d != "" {
		t.Error(d)
	}
	var got []string
	for _, r := range refused {
		got = append(got, filepath.ToSlash(r.Path)+": "+r.Reason)
	}
	want := []string{
		"a.wav: given twice: give it once",
		"b/dangling.wav: no such file or folder: check the name",
		`b/link.wav: the same file as "a.wav": give it once`,
		"empty: no .wav or .flac file in this folder or below: give another folder",
		"missing.wav: no such file or folder: check the name",
		"none: no .wav or .flac file in this folder or below: give another folder",
		`odd.bin: the same file as "hard.wav": give it once`,
	}
	if d := cmp.Diff(want, got); d != "" {
		t.Error(d)
	}
	if _, _, err := Find(nil); err == nil {
		t.Error("no paths accepted")
	}
}

func slashes(paths []string) (out []string) {
	for _, p := range paths {
		out = append(out, filepath.ToSlash(p))
	}
	return out
}

// TestOpenNoFile: what is no readable file is refused, and nothing waits.
func TestOpenNoFile(t *testing.T) {
	tree(t, "folder.wav/")
	for path, want := range map[string]string{
		"missing.wav": "missing.wav: no such file or folder: check the name",
		"folder.wav":  "folder.wav: not a regular file: give a recording or a folder of recordings",
		os.DevNull:    os.DevNull + ": not a regular file",
	} {
		if _, err := Open(path); err == nil || !strings.HasPrefix(err.Error(), want) {
			t.Errorf("%s: %v", path, err)
		}
	}
}

// TestOpenUnreadable: permissions are named.
func TestOpenUnreadable(t *testing.T) {
	tree(t, "locked.wav")
	if os.Geteuid() == 0 {
		t.Skip("the administrator may read everything, so an unreadable file cannot be had")
	}
	os.Chmod("locked.wav", 0)
	if _, err := Open("locked.wav"); err == nil || !strings.Contains(err.Error(), "permission denied: make it readable for you") {
		t.Errorf("unreadable: %v", err)
	}
}
