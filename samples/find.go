package samples

import (
	"errors"
	"fmt"
	"os"
	"path/filepath"
	"sort"
	"strings"
)

// Find lists the recordings among files and folders, sorted by path. Folders are
// searched with their subfolders for .wav and .flac in any case (linked folders
// are not followed); files named directly are taken whatever their name. What
// cannot be used is refused with a reason: nothing there, a folder without
// recordings, the same file a second time (also through links). The error is
// for no paths at all.
func Find(paths []string) (files []string, refused []Refusal, err error) {
	if len(paths) == 0 {
		return nil, nil, errors.New("no recordings given: name files or folders")
	}
	var s search
	for _, p := range paths {
		s.add(filepath.Clean(p))
	}
	s.single()
	sort.SliceStable(s.refused, func(i, j int) bool { return s.refused[i].Path < s.refused[j].Path })
	return s.files, s.refused, nil
}

// search collects what is found.
type search struct {
	files   []string
	refused []Refusal
}

func (s *search) refuse(path, format string, args ...any) {
	s.refused = append(s.refused, Refusal{path, fmt.Sprintf(format, args...)})
}

// add takes what the user named.
func (s *search) add(path string) {
	stat, err := os.Stat(path)
	switch {
	case err != nil:
		s.refuse(path, "%v", plain(err))
	case !stat.IsDir():
		s.files = append(s.files, path)
	default:
		before := len(s.files) + len(s.refused)
		s.folder(path)
		if len(s.files)+len(s.refused) == before {
			s.refuse(path, "no .wav or .flac file in this folder or below: give another folder")
		}
	}
}

// folder takes the recordings below a folder.
func (s *search) folder(path string) {
	entries, err := os.ReadDir(path)
	if err != nil {
		s.refuse(path, "%v", plain(err))
	}
	for _, e := range entries {
		name := filepath.Join(path, e.Name())
		if e.IsDir() {
			s.folder(name)
			continue
		}
		if ext := strings.ToLower(filepath.Ext(name)); ext != ".wav" && ext != ".flac" {
			continue
		}
		if stat, err := os.Stat(name); err != nil {
			s.refuse(name, "%v", plain(err))
		} else if !stat.IsDir() {
			s.files = append(s.files, name)
		}
	}
}

// single sorts the files and refuses each that was listed before.
func (s *search) single() {
	sort.Strings(s.files)
	type key struct {
		size int64
		time int64
	}
	type known struct {
		path string
		stat os.FileInfo
	}
	seen := map[key][]known{} // the same file has the same size and time
	var files []string
next:
	for _, path := range s.files {
		stat, err := os.Stat(path)
		if err != nil {
			s.refuse(path, "%v", plain(err))
			continue
		}
		k := key{stat.Size(), stat.ModTime().UnixNano()}
		for _, other := range seen[k] {
			if os.SameFile(stat, other.stat) {
				s.refuse(path, "%s: give it once", again(path, other.path))
				continue next
			}
		}
		seen[k] = append(seen[k], known{path, stat})
		files = append(files, path)
	}
	s.files = files
}

func again(path, other string) string {
	if path == other {
		return "given twice"
	}
	return fmt.Sprintf("the same file as %q", other)
}
