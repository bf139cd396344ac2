// Package demo holds short invented messages of a harbour's traffic intercom,
// embedded in the program: speech synthesised for this project over made-up
// engine noise. PROVENANCE.md says how they were made, checksums.txt what they
// are, make.sh makes them anew.
package demo

import (
	"embed"
	"errors"
	"fmt"
	"io"
	"io/fs"
	"os"
	"path/filepath"

	"fewbits/samples"
)

//go:embed clips/*.wav
var embedded embed.FS

// about lists the clips by file name, with what each is there for.
var about = []struct{ name, text string }{
	{"berth-nine.wav", "ordinary message over an idling diesel; first talker, 8 kHz"},
	{"crane-hot.wav", "hot: an automatic gain holds it near full scale, nothing clips; second talker, 16 kHz"},
	{"faint-launch.wav", "faint: 20 dB below the ordinary ones; first talker, 8 kHz"},
	{"quiet-water.wav", "ordinary level, little noise, much silence; first talker, 16 kHz"},
	{"stand-by.wav", "ordinary message, much engine noise; second talker, 8 kHz"},
}

// Clip is one embedded recording.
type Clip struct {
	Name  string // file name: "berth-nine.wav"
	Data  []byte // a WAV file: mono, PCM 16-bit, 8000 or 16000 Hz
	About string // what it is there for, in a few words
}

// Clips returns the clips sorted by name; Data is the caller's own copy.
func Clips() []Clip {
	var out []Clip
	for _, a := range about {
		data, err := embedded.ReadFile("clips/" + a.name)
		if err != nil {
			panic("demo: " + err.Error())
		}
		out = append(out, Clip{Name: a.name, Data: data, About: a.text})
	}
	return out
}

// WriteTo writes the clips into a folder that is there and returns their paths,
// sorted. A file already there is an error that matches fs.ErrExist and stays as
// it is. Each clip appears whole; on failure none of them stays.
func WriteTo(dir string) ([]string, error) {
	clips := Clips()
	for _, c := range clips {
		path := filepath.Join(dir, c.Name)
		if _, err := os.Lstat(path); err == nil {
			return nil, fmt.Errorf("%q is there already and is not replaced: choose another folder: %w", path, fs.ErrExist)
		} else if !errors.Is(err, fs.ErrNotExist) {
			return nil, err
		}
	}
	var paths []string
	for _, c := range clips {
		path := filepath.Join(dir, c.Name)
		err := samples.WriteFile(path, func(w io.Writer) error { _, err := w.Write(c.Data); return err })
		if err != nil {
			for _, p := range paths {
				os.Remove(p)
			}
			return nil, err
		}
		paths = append(paths, path)
	}
	return paths, nil
}
