package listening

import (
	"errors"
	"fmt"
	"io"
	"io/fs"
	"os"
	"path/filepath"

	"fewbits/samples"
)

// material is the folder being filled.
type material struct {
	dir  string
	made []string
}

// write fills the folder, the key last.
func (m *material) write(s set, seed uint64) error {
	for _, name := range append([]string{SheetFile, AnswersFile, KeyFile}, s.report.Files...) {
		if err := m.vacant(name); err != nil {
			return err
		}
	}
	sums := make([]string, len(s.items))
	for i, it := range s.items {
		err := m.put(it.file, func(path string) (err error) {
			sums[i], err = writePair(path, it)
			return err
		})
		if err != nil {
			return err
		}
	}
	texts := []struct {
		name string
		fill func(io.Writer) error
	}{
		{SheetFile, func(w io.Writer) error { return sheet(w, s.report) }},
		{AnswersFile, func(w io.Writer) error { return blank(w, s.report.Files) }},
		{KeyFile, func(w io.Writer) error { return writeKey(w, s.items, sums, seed) }},
	}
	for _, f := range texts {
		if err := m.put(f.name, func(path string) error { return samples.WriteFile(path, f.fill) }); err != nil {
			return err
		}
	}
	return nil
}

// vacant refuses a name that is taken.
func (m *material) vacant(name string) error {
	path := filepath.Join(m.dir, name)
	switch _, err := os.Lstat(path); {
	case err == nil:
		return fmt.Errorf("%q is there already and is not replaced: choose another folder: %w", path, fs.ErrExist)
	case !errors.Is(err, fs.ErrNotExist):
		return err
	}
	return nil
}

// put makes one file and remembers it.
func (m *material) put(name string, make func(path string) error) error {
	path := filepath.Join(m.dir, name)
	if err := make(path); err != nil {
		return err
	}
	m.made = append(m.made, path)
	return nil
}

// remove takes away what was made.
func (m *material) remove() {
	for _, path := range m.made {
		os.Remove(path)
	}
}
