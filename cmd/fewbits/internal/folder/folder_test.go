package folder

import (
	"os"
	"path/filepath"
	"testing"
)

// fill writes the named files through f.
func fill(t *testing.T, f *Folder, names ...string) {
	t.Helper()
	for _, name := range names {
		path, err := f.Path(name)
		if err != nil {
			t.Fatal(err)
		}
		if err := os.WriteFile(path, []byte(name), 0o666); err != nil {
			t.Fatal(err)
		}
	}
}

func open(t *testing.T, out string, replace bool, inputs ...string) *Folder {
	t.Helper()
	f, err := Open(out, replace, inputs)
	if err != nil {
		t.Fatal(err)
	}
	return f
}

func there(path string) bool { _, err := os.Lstat(path); return err == nil }

func TestWholeOrNotAtAll(t *testing.T) {
	out := filepath.Join(t.TempDir(), "deep", "out")
	f := open(t, out, false)
	fill(t, f, "a.txt", "sub/b.txt")
	if there(out) {
		t.Error("the folder appears before Commit")
	}
	f.Abort()
	if left, _ := os.ReadDir(filepath.Dir(out)); len(left) != 0 {
		t.Errorf("Abort leaves %v", left)
	}
	f = open(t, out, false)
	fill(t, f, "a.txt", "sub/b.txt")
	if err := f.Commit(); err != nil {
		t.Fatal(err)
	}
	f.Abort()
	if !there(filepath.Join(out, "sub", "b.txt")) || !there(filepath.Join(out, List)) {
		t.Error("files are missing after Commit")
	}
}

func TestReplaceTakesOnlyItsOwn(t *testing.T) {
	out := filepath.Join(t.TempDir(), "out")
	f := open(t, out, false)
	fill(t, f, "a.txt", "sub/b.txt", "sub/c.txt")
	if err := f.Commit(); err != nil {
		t.Fatal(err)
	}
	foreign := filepath.Join(out, "sub", "mine.txt")
	if err := os.WriteFile(foreign, nil, 0o666); err != nil {
		t.Fatal(err)
	}
	if _, err := Open(out, false, nil); err == nil {
		t.Error("a folder that holds something is taken without replace")
	}
	f = open(t, out, true)
	fill(t, f, "a.txt")
	if err := f.Commit(); err != nil {
		t.Fatal(err)
	}
	if !there(foreign) || !there(filepath.Join(out, "a.txt")) || there(filepath.Join(out, "sub", "b.txt")) {
		t.Error("replace took the wrong files")
	}
}

// TestForeignFilesStay: a new run's file may not land on one that no run wrote.
func TestForeignFilesStay(t *testing.T) {
	out := filepath.Join(t.TempDir(), "out")
	f := open(t, out, false)
	fill(t, f, "a.txt")
	if err := f.Commit(); err != nil {
		t.Fatal(err)
	}
	mine := filepath.Join(out, "b.txt")
	if err := os.WriteFile(mine, []byte("mine"), 0o666); err != nil {
		t.Fatal(err)
	}
	f = open(t, out, true)
	fill(t, f, "b.txt")
	if err := f.Commit(); err == nil {
		t.Error("a foreign file was overwritten")
	}
	f.Abort()
	if b, _ := os.ReadFile(mine); string(b) != "mine" || !there(filepath.Join(out, "a.txt")) {
		t.Error("what was there is harmed")
	}
}

// TestListsThatLeaveAreRefused: a list may not name files outside the folder.
func TestListsThatLeaveAreRefused(t *testing.T) {
	for _, line := range []string{"../victim", "/etc/passwd", "sub/../../victim"} {
		out := t.TempDir()
		if err := os.WriteFile(filepath.Join(out, List), []byte(line+"\n"), 0o666); err != nil {
			t.Fatal(err)
		}
		if _, err := Open(out, true, nil); err == nil {
			t.Errorf("a list with %q is followed", line)
		}
	}
}

func TestInputsAreKeptOff(t *testing.T) {
	out := filepath.Join(t.TempDir(), "out")
	f := open(t, out, false)
	fill(t, f, "audio/x.wav")
	if err := f.Commit(); err != nil {
		t.Fatal(err)
	}
	link := filepath.Join(t.TempDir(), "link.wav")
	if err := os.Symlink(filepath.Join(out, "audio", "x.wav"), link); err != nil {
		t.Skipf("no links here: %v", err)
	}
	for _, input := range []string{out, filepath.Join(out, "audio", "x.wav"), link} {
		if _, err := Open(out, true, []string{input}); err == nil {
			t.Errorf("the input %s would be replaced", input)
		}
	}
}
