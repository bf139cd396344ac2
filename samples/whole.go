package samples

import (
	"bufio"
	"errors"
	"fmt"
	"io"
	"io/fs"
	"math/rand/v2"
	"os"
	"path/filepath"
)

// whole is a file that appears under its name whole or not at all: it is filled
// under another name in the same folder and renamed.
type whole struct {
	*os.File
	path string
}

// createWhole starts a file; its mode follows the umask, as os.Create's does.
func createWhole(path string) (*whole, error) {
	dir, name := filepath.Split(path)
	for {
		temp := filepath.Join(dir, fmt.Sprintf(".%s.%08x.part", name, rand.Uint32()))
		f, err := os.OpenFile(temp, os.O_RDWR|os.O_CREATE|os.O_EXCL, 0o666)
		if err == nil {
			return &whole{f, path}, nil
		}
		if !errors.Is(err, fs.ErrExist) {
			return nil, &Error{path, fmt.Errorf("cannot be written: %w", plain(err))}
		}
	}
}

// commit closes the file and gives it its name; sync asks that it survives a
// loss of power.
func (w *whole) commit(sync bool) error {
	var err error
	if sync {
		err = w.Sync()
	}
	err = errors.Join(err, w.Close())
	if err == nil {
		err = os.Rename(w.Name(), w.path)
	}
	if err != nil {
		os.Remove(w.Name())
		return &Error{w.path, fmt.Errorf("cannot be written: %w", plain(err))}
	}
	return nil
}

// abort takes the file away.
func (w *whole) abort() {
	w.Close()
	os.Remove(w.Name())
}

// WriteFile writes a file that appears whole or not at all, replacing one of
// that name: fill writes the content, and where it or the disk fails nothing
// stays behind. For text files; audio has Create.
func WriteFile(path string, fill func(io.Writer) error) error {
	w, err := createWhole(path)
	if err != nil {
		return err
	}
	b := bufio.NewWriter(w)
	if err = fill(b); err == nil {
		err = b.Flush()
	}
	if err != nil {
		w.abort()
		return &Error{path, fmt.Errorf("cannot be written: %w", plain(err))}
	}
	return w.commit(false)
}
