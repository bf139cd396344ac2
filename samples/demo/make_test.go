package demo

import (
	"os"
	"os/exec"
	"path/filepath"
	"runtime"
	"strings"
	"testing"
)

// TestMaking runs the making script again and compares every byte, where the
// programs it was written for are installed.
func TestMaking(t *testing.T) {
	for _, p := range []struct{ name, version string }{{"espeak-ng", "1.51 "}, {"sox", "v14.4.2"}} {
		out, err := exec.Command(p.name, "--version").CombinedOutput()
		if err != nil {
			t.Skipf("the clips are not made again: %s: %v", p.name, err)
		}
		if !strings.Contains(string(out), p.version) {
			t.Skipf("the clips are not made again: %s is not %s but %s", p.name, p.version, out)
		}
	}
	if runtime.GOOS != "linux" || runtime.GOARCH != "amd64" {
		t.Skip("the clips are not made again: floating-point rounding of another machine may change bytes")
	}
	script, err := filepath.Abs("make.sh")
	if err != nil {
		t.Fatal(err)
	}
	dir := t.TempDir()
	made := exec.Command("sh", script)
	made.Dir = dir
	if out, err := made.CombinedOutput(); err != nil {
		t.Fatalf("make.sh: %v\n%s", err, out)
	}
	for _, c := range Clips() {
		if b, err := os.ReadFile(filepath.Join(dir, "clips", c.Name)); err != nil || string(b) != string(c.Data) {
			t.Errorf("make.sh makes another %s, %v", c.Name, err)
		}
	}
}
