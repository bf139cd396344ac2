// Package folder gives a command an output folder that appears whole or not at
// all: everything is written beside it first and moved in at the end. A list
// of what was written (written.txt) lets a later run replace just that.
package folder

import (
	"bufio"
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"
	"slices"
	"strings"
)

// List is the file that names what a run wrote, one relative path a line.
const List = "written.txt"

// Folder is an output folder being filled.
type Folder struct {
	out, stage string
	old        []string // what a former run wrote, relative to out
}

// Open prepares out. A folder that holds anything is refused unless replace is
// set; then what a former run listed as written is removed when the new run
// commits, and nothing else. inputs must not lie where the run writes.
func Open(out string, replace bool, inputs []string) (*Folder, error) {
	f := &Folder{out: filepath.Clean(out)}
	if err := f.examine(replace); err != nil {
		return nil, err
	}
	if err := f.keepOff(inputs); err != nil {
		return nil, err
	}
	parent := filepath.Dir(f.out)
	if err := os.MkdirAll(parent, 0o777); err != nil {
		return nil, fmt.Errorf("output folder %q: %w; choose another with --out", out, err)
	}
	var err error
	if f.stage, err = os.MkdirTemp(parent, ".fewbits-unfinished-*"); err != nil {
		return nil, fmt.Errorf("output folder %q: cannot write beside it: %w; choose another with --out", out, err)
	}
	return f, os.Chmod(f.stage, 0o777&^umask())
}

// examine looks at what is there already.
func (f *Folder) examine(replace bool) error {
	entries, err := os.ReadDir(f.out)
	switch {
	case errors.Is(err, fs.ErrNotExist):
		return nil
	case err != nil:
		return fmt.Errorf("output folder %q: %w; choose another with --out", f.out, err)
	case len(entries) == 0:
		return nil
	case !replace:
		return fmt.Errorf("output folder %q is not empty: choose another with --out, or --replace what a former run wrote there", f.out)
	}
	f.old, err = readList(filepath.Join(f.out, List))
	if errors.Is(err, fs.ErrNotExist) {
		return fmt.Errorf("output folder %q holds no %s, so nothing there is known to be a former run's: choose another with --out", f.out, List)
	}
	return err
}

// readList reads a former run's list; paths that leave the folder are refused.
func readList(path string) ([]string, error) {
	file, err := os.Open(path)
	if err != nil {
		return nil, err
	}
	defer file.Close()
	var names []string
	lines := bufio.NewScanner(file)
	for n := 1; lines.Scan(); n++ {
		name := filepath.FromSlash(lines.Text())
		if !filepath.IsLocal(name) {
			return nil, fmt.Errorf("%s: line %d: %q leaves the folder: not replacing anything", path, n, lines.Text())
		}
		names = append(names, name)
	}
	return names, lines.Err()
}

// keepOff refuses an output folder whose listed files are among the inputs, or
// that is an input itself, also through links.
func (f *Folder) keepOff(inputs []string) error {
	root := resolve(f.out)
	for _, in := range inputs {
		real := resolve(in)
		if real == root {
			return fmt.Errorf("output folder %q is the input %q: choose another with --out", f.out, in)
		}
		rel, err := filepath.Rel(root, real)
		if err == nil && slices.Contains(f.old, rel) {
			return fmt.Errorf("output folder %q would replace the input %q: choose another with --out", f.out, in)
		}
	}
	return nil
}

// resolve follows links as far as the path exists.
func resolve(path string) string {
	abs, err := filepath.Abs(path)
	if err != nil {
		return path
	}
	if real, err := filepath.EvalSymlinks(abs); err == nil {
		return real
	}
	if dir := filepath.Dir(abs); dir != abs {
		return filepath.Join(resolve(dir), filepath.Base(abs))
	}
	return abs
}

// Path joins names to the place where the run writes for now, making folders.
func (f *Folder) Path(names ...string) (string, error) {
	path := filepath.Join(append([]string{f.stage}, names...)...)
	return path, os.MkdirAll(filepath.Dir(path), 0o777)
}

// Out is the folder as the user named it.
func (f *Folder) Out() string { return f.out }

// Abort removes everything written so far; harmless after Commit.
func (f *Folder) Abort() { os.RemoveAll(f.stage) }

// Commit writes the list and moves everything into place.
func (f *Folder) Commit() error {
	names, err := f.written()
	if err != nil {
		return err
	}
	for _, name := range names {
		if _, err := os.Lstat(filepath.Join(f.out, name)); err == nil && !slices.Contains(f.old, name) {
			return fmt.Errorf("%q is there and no former run wrote it: choose another folder with --out", filepath.Join(f.out, name))
		}
	}
	list, err := f.Path(List)
	if err != nil {
		return err
	}
	text := filepath.ToSlash(strings.Join(names, "\n")) + "\n"
	if err := os.WriteFile(list, []byte(text), 0o666); err != nil {
		return err
	}
	if err := f.moveIn(append(names, List)); err != nil {
		return fmt.Errorf("output folder %q: %w", f.out, err)
	}
	return os.RemoveAll(f.stage)
}

// written lists the files below the stage.
func (f *Folder) written() ([]string, error) {
	var names []string
	err := filepath.WalkDir(f.stage, func(path string, d fs.DirEntry, err error) error {
		if err == nil && !d.IsDir() {
			rel, _ := filepath.Rel(f.stage, path)
			names = append(names, rel)
		}
		return err
	})
	return names, err
}

// moveIn takes a former run's files away and renames the new ones into place.
func (f *Folder) moveIn(names []string) error {
	if _, err := os.Lstat(f.out); errors.Is(err, fs.ErrNotExist) {
		return os.Rename(f.stage, f.out)
	}
	for _, name := range f.old {
		os.Remove(filepath.Join(f.out, name))
	}
	for _, name := range f.old {
		for dir := filepath.Dir(name); dir != "."; dir = filepath.Dir(dir) {
			os.Remove(filepath.Join(f.out, dir)) // only when empty
		}
	}
	for _, name := range names {
		to := filepath.Join(f.out, name)
		if err := os.MkdirAll(filepath.Dir(to), 0o777); err != nil {
			return err
		}
		if err := os.Rename(filepath.Join(f.stage, name), to); err != nil {
			return err
		}
	}
	return nil
}
