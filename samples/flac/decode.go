package flac

import (
	"crypto/md5"
	"fmt"
	"hash"
	"io"

	lib "github.com/mewkiz/flac"
	"github.com/mewkiz/flac/frame"
	"github.com/mewkiz/flac/meta"

	"fewbits/samples/wave"
)

// A file may unpack to base bytes, and beyond that to ratio times its size:
// more than digital silence packs to in the usual blocks of 4096 samples.
const ratio = 1200

var base int64 = 256 << 20 // a variable for the tests

const (
	damaged  = "the file is damaged; get a good copy"
	complete = "get a complete copy if the tail matters"
)

// decoder is a file being decoded.
type decoder struct {
	in     *counter
	start  int64 // of the stream in the file
	size   int64
	out    io.Writer
	info   *meta.StreamInfo
	sum    hash.Hash
	f      wave.Format
	packed []byte // a block as it is written
	plain  []byte // a block as it is summed
	limit  int64  // bytes that may still be written
	ended  bool
}

// Decode writes the samples of the FLAC file of size bytes behind r to w,
// interleaved, two's complement with the valid bits at the top, and says what
// they are: PCM16 up to 16 bits, PCM24 up to 24. A file that cannot be used
// gives a *wave.Fault; a failure of r or w its own error. A file that ends early
// is decoded as far as it goes, with a warning.
func Decode(r io.ReaderAt, size int64, w io.Writer) (f *wave.Format, err error) {
	d := newDecoder(r, size)
	d.out, d.sum, d.limit = w, md5.New(), base+ratio*size
	defer d.caught(&f, &err)
	if err := d.open(); err != nil {
		return nil, err
	}
	for err == nil && !d.ended {
		err = d.block()
	}
	if err != nil {
		return nil, err
	}
	return d.settle()
}

// Header tells what Decode would, from the stream's header alone: with as many
// frames as it claims, 0 where it does not say.
func Header(r io.ReaderAt, size int64) (f *wave.Format, err error) {
	d := newDecoder(r, size)
	defer d.caught(&f, &err)
	if err := d.open(); err != nil {
		return nil, err
	}
	d.f.Frames = int64(d.info.NSamples)
	return &d.f, nil
}

func newDecoder(r io.ReaderAt, size int64) *decoder {
	quieten()
	start := max(0, tagged(r))
	return &decoder{in: newCounter(r, start, size), start: start, size: size}
}

// caught turns a panic within the library into an error.
func (d *decoder) caught(f **wave.Format, err *error) {
	if p := recover(); p != nil {
		*f, *err = nil, d.fault(d.in.at(), "the decoder failed (%v)", p)
	}
}

func (d *decoder) fault(at int64, format string, args ...any) error {
	return &wave.Fault{Offset: at, What: "FLAC: " + fmt.Sprintf(format, args...), Remedy: damaged}
}

// open reads the stream's header.
func (d *decoder) open() error {
	start := d.start
	// "fLaC", the mark of the first metadata block, its length: the library
	// would read whatever else stands there, too.
	if b, _ := d.in.r.Peek(8); len(b) < 8 || b[4]&0x7F != 0 || b[5] != 0 || b[6] != 0 || b[7] != 34 {
		return d.fault(start, "no usable stream header")
	}
	stream, err := lib.New(d.in.r)
	if err != nil {
		return d.fault(start, "no usable stream header (%v)", err)
	}
	d.info = stream.Info
	i := d.info
	switch {
	case i.BitsPerSample < 4 || i.BitsPerSample > 24:
		return &wave.Fault{Offset: start + 20, What: fmt.Sprintf("FLAC samples of %d bits are not read", i.BitsPerSample),
			Remedy: "convert it to 24 bits or to WAV first"}
	case i.SampleRate < wave.MinRate || i.SampleRate > wave.MaxRate:
		return d.fault(start+18, "the header says %d Hz; %d to %d Hz are read", i.SampleRate, wave.MinRate, wave.MaxRate)
	}
	d.f = wave.Format{Encoding: wave.PCM16, Rate: int(i.SampleRate), Channels: int(i.NChannels), ValidBits: int(i.BitsPerSample)}
	if i.BitsPerSample > 16 {
		d.f.Encoding = wave.PCM24
	}
	return nil
}

// block decodes one block of samples, or sees that there are no more.
func (d *decoder) block() error {
	if n := int64(d.info.NSamples); n > 0 && d.f.Frames >= n {
		d.ended = true
		if rest := d.size - d.in.at(); rest > 0 {
			d.warn(d.in.at(), "%d bytes behind the last block are left out", rest)
		}
		return nil
	}
	at := d.in.at()
	f, err := frame.New(d.in.r)
	if err == nil {
		if f.BitsPerSample == 0 {
			f.BitsPerSample = d.info.BitsPerSample // the library leaves that to its caller
		}
		if err = d.agrees(f); err == nil {
			err = f.Parse()
		}
	}
	if err != nil {
		return d.broken(at, err)
	}
	return d.write(at, f)
}

func (d *decoder) warn(at int64, format string, args ...any) {
	d.f.Warnings = append(d.f.Warnings, fmt.Sprintf("byte %d: ", at)+fmt.Sprintf(format, args...))
}

func (d *decoder) known() bool   { return d.info.MD5sum != [md5.Size]byte{} }
func (d *decoder) matches() bool { return [md5.Size]byte(d.sum.Sum(nil)) == d.info.MD5sum }

// settle compares what was decoded with what the header promised.
func (d *decoder) settle() (*wave.Format, error) {
	n := int64(d.info.NSamples)
	switch {
	case d.f.Frames == 0:
		return nil, d.fault(d.size, "no samples")
	case d.f.Frames < n:
		d.warn(d.size, "the file ends after %d of %d samples, so its checksum cannot be checked; %s", d.f.Frames, n, complete)
	case !d.known():
		d.warn(0, "the file carries no checksum of its audio, so damage would not be seen")
	case !d.matches():
		return nil, d.fault(0, "the decoded audio does not match the file's checksum")
	}
	return &d.f, nil
}
