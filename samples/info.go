package samples

import (
	"fmt"

	"fewbits/samples/wave"
)

// Limits of what is read; beyond them lie damaged headers rather than recordings.
const (
	MinRate     = wave.MinRate // Hz
	MaxRate     = wave.MaxRate // Hz
	MaxChannels = wave.MaxChannels
)

// Info is what is known of a recording without listening to it.
type Info struct {
	Path      string
	Container string   // "WAV", "RF64", "BW64" or "FLAC"
	Encoding  string   // "PCM", "float", "G.711 mu-law" or "G.711 A-law"
	Rate      int      // Hz
	Channels  int      // 1 to 256
	Bits      int      // stored for one sample
	ValidBits int      // of them significant
	Frames    int64    // samples per channel, at least 1
	Bytes     int64    // size of the file
	Warnings  []string // in plain language; what was odd, where, what was done
}

// Format says it in words: "WAV, PCM 16-bit", "WAV, PCM 12-bit in 16".
func (i Info) Format() string {
	s := i.Container + ", " + i.Encoding
	switch {
	case i.ValidBits != i.Bits:
		return fmt.Sprintf("%s %d-bit in %d", s, i.ValidBits, i.Bits)
	case i.Encoding == "PCM":
		return fmt.Sprintf("%s %d-bit", s, i.Bits)
	case i.Encoding == "float":
		return fmt.Sprintf("%s %d", s, i.Bits)
	}
	return s
}

// Seconds is the recording's length.
func (i Info) Seconds() float64 { return float64(i.Frames) / float64(i.Rate) }

func infoOf(path, container string, size int64, f *wave.Format) Info {
	bits := f.Encoding.Bits()
	if container == "FLAC" {
		bits = f.ValidBits // it stores no more
	}
	return Info{
		Path: path, Container: container, Encoding: f.Encoding.String(),
		Rate: f.Rate, Channels: f.Channels, Bits: bits, ValidBits: f.ValidBits,
		Frames: f.Frames, Bytes: size, Warnings: f.Warnings,
	}
}

// Error says why one recording cannot be used.
type Error struct {
	Path string
	Err  error // often a *wave.Fault, with the byte
}

// Error reads "harbour.wav: byte 36: what: what to do".
func (e *Error) Error() string { return e.Path + ": " + e.Err.Error() }

// Unwrap gives the cause.
func (e *Error) Unwrap() error { return e.Err }

// Refusal is one input that is not used, and why (without its path).
type Refusal struct {
	Path   string
	Reason string
}
