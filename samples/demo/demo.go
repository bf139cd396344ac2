// Package demo holds short invented messages of a harbour's traffic intercom,
// embedded in the program: speech synthesised for this project over made-up
// engine noise. PROVENANCE.md says how they were made, checksums.txt what they
// are.
package demo

import (
	"embed"
	"io"
	"os"
	"path/filepath"

	"fewbits/samples"
)

//go:embed clips/*.wav
var clips embed.FS

// Clip is one embedded recording, a WAV file.
type Clip struct {
	Name string // file name
	Data []byte
}

// Clips returns the clips sorted by name.
func Clips() []Clip {
	entries, err := clips.ReadDir("clips")
	if err != nil {
		panic("demo: " + err.Error())
	}
	var out []Clip
	for _, e := range entries {
		data, err := clips.ReadFile("clips/" + e.Name())
		if err != nil {
			panic("demo: " + err.Error())
		}
		out = append(out, Clip{Name: e.Name(), Data: data})
	}
	return out
}

// WriteTo writes the clips into a folder that is there and returns their
// paths. A file already there is an error and stays as it is.
func WriteTo(dir string) ([]string, error) {
	var paths []string
	for _, c := range Clips() {
		path := filepath.Join(dir, c.Name)
		if _, err := os.Lstat(path); err == nil {
			return nil, &os.PathError{Op: "write", Path: path, Err: os.ErrExist}
		}
		err := samples.WriteFile(path, func(w io.Writer) error { _, err := w.Write(c.Data); return err })
		if err != nil {
			return nil, err
		}
		paths = append(paths, path)
	}
	return paths, nil
}
