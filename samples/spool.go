package samples

import (
	"bufio"
	"fmt"
	"os"
)

// spool is a temporary file of raw samples. Where the system allows it has no
// name any more, so that nothing stays behind even after a crash.
type spool struct {
	file  *os.File
	buf   *bufio.Writer
	named bool
}

func newSpool() (*spool, error) {
	f, err := os.CreateTemp("", "fewbits-*.raw")
	if err != nil {
		return nil, fmt.Errorf("no temporary file: %w; make room there or set %s to another folder", plain(err), tempVariable)
	}
	return &spool{file: f, buf: bufio.NewWriterSize(f, 1<<18), named: os.Remove(f.Name()) != nil}, nil
}

// Write appends.
func (s *spool) Write(b []byte) (int, error) {
	n, err := s.buf.Write(b)
	if err != nil {
		err = fmt.Errorf("temporary file: %w; make room there or set %s to another folder", plain(err), tempVariable)
	}
	return n, err
}

func (s *spool) flush() error {
	_, err := s.Write(nil)
	if err == nil {
		if err = s.buf.Flush(); err != nil {
			err = fmt.Errorf("temporary file: %w; make room there or set %s to another folder", plain(err), tempVariable)
		}
	}
	return err
}

// Close removes the file.
func (s *spool) Close() error {
	err := s.file.Close()
	if s.named {
		err = os.Remove(s.file.Name())
	}
	return err
}
