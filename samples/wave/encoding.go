package wave

import "fmt"

// Encoding is how one sample is stored, little-endian.
type Encoding uint8

// The encodings that are read. PCM8 is offset binary, the other PCM are two's
// complement with the valid bits at the top.
const (
	PCM8 Encoding = iota + 1
	PCM16
	PCM24
	PCM32
	Float32
	Float64
	MuLaw
	ALaw
)

var encodings = [...]struct {
	name  string
	bytes int
}{
	PCM8: {"PCM", 1}, PCM16: {"PCM", 2}, PCM24: {"PCM", 3}, PCM32: {"PCM", 4},
	Float32: {"float", 4}, Float64: {"float", 8},
	MuLaw: {"G.711 mu-law", 1}, ALaw: {"G.711 A-law", 1},
}

// Bytes is the size of a stored sample.
func (e Encoding) Bytes() int { return encodings[e].bytes }

// Bits is the size of a stored sample in bits.
func (e Encoding) Bits() int { return 8 * encodings[e].bytes }

// String is the trade's name without the size: "PCM", "float", "G.711 mu-law".
func (e Encoding) String() string { return encodings[e].name }

// OnWords says whether every sample lies on the 16-bit grid k/2^15.
func (e Encoding) OnWords() bool { return e == PCM8 || e == PCM16 || e == MuLaw || e == ALaw }

// Float says whether samples may lie beyond full scale.
func (e Encoding) Float() bool { return e == Float32 || e == Float64 }

// pcm is the encoding of PCM samples in containers of that many bytes.
func pcm(bytes int) Encoding { return PCM8 + Encoding(bytes-1) }

// Format is what a file says about its samples, checked against the file.
type Format struct {
	Container string // "WAV", "RF64" or "BW64"
	Encoding  Encoding
	Rate      int   // Hz, 100 to 1,000,000
	Channels  int   // 1 to 256
	ValidBits int   // significant bits of a sample, at most Encoding.Bits()
	DataStart int64 // offset of the first sample
	Frames    int64 // samples per channel, at least 1
	Warnings  []string
}

// FrameBytes is the size of one sample of every channel.
func (f *Format) FrameBytes() int { return f.Channels * f.Encoding.Bytes() }

func (f *Format) warn(at int64, format string, args ...any) {
	f.Warnings = append(f.Warnings, fmt.Sprintf("byte %d: ", at)+fmt.Sprintf(format, args...))
}
