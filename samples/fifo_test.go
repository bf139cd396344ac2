//go:build linux || darwin

package samples

import (
	"strings"
	"syscall"
	"testing"
	"time"
)

// TestOpenPipe: a named pipe is refused and not waited for.
func TestOpenPipe(t *testing.T) {
	t.Chdir(t.TempDir())
	if err := syscall.Mkfifo("pipe.wav", 0o666); err != nil {
		t.Skipf("no pipes here: %v", err)
	}
	answer := make(chan error)
	go func() { _, err := Open("pipe.wav"); answer <- err }()
	select {
	case err := <-answer:
		if err == nil || !strings.Contains(err.Error(), "not a regular file") {
			t.Error(err)
		}
	case <-time.After(5 * time.Second):
		t.Error("hangs")
	}
}
