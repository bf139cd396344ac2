package flac

import (
	"errors"
	"fmt"
	"io"

	"github.com/mewkiz/flac/frame"

	"fewbits/samples/wave"
)

// agrees checks a block's header against the stream's.
func (d *decoder) agrees(f *frame.Frame) error {
	switch {
	case f.BitsPerSample != d.info.BitsPerSample:
		return fmt.Errorf("a block of %d bits in a stream of %d", f.BitsPerSample, d.info.BitsPerSample)
	case f.Channels.Count() != int(d.info.NChannels):
		return fmt.Errorf("a block of %d channels in a stream of %d", f.Channels.Count(), d.info.NChannels)
	case f.SampleRate != 0 && f.SampleRate != d.info.SampleRate:
		return fmt.Errorf("a block at %d Hz in a stream at %d Hz", f.SampleRate, d.info.SampleRate)
	case f.BlockSize == 0:
		return errors.New("a block of 65536 samples; 65535 is the most")
	}
	return nil
}

// broken settles a block that could not be decoded: the end of the file, or
// damage within it.
func (d *decoder) broken(at int64, err error) error {
	left := d.size - at
	most := int64(d.info.BlockSizeMax)*int64(d.info.NChannels)*4 + 1<<10
	switch {
	case d.in.err != nil:
		return d.in.err
	case d.f.Frames == 0 && left <= 0:
		return d.fault(at, "no samples")
	case left <= 0:
		d.ended = true
	case d.f.Frames > 0 && left < most && (errors.Is(err, io.EOF) || errors.Is(err, io.ErrUnexpectedEOF)):
		d.ended = true
		d.warn(at, "the last block is cut off and left out; %s", complete)
	case d.f.Frames > 0 && errors.Is(err, frame.ErrInvalidSync) && d.info.NSamples == 0 && d.known() && d.matches():
		d.ended = true
		d.warn(at, "%d bytes behind the last block are left out", left)
	default:
		return d.fault(at, "block at sample %d: %v", d.f.Frames, err)
	}
	return nil
}

// write sums a decoded block and writes it out.
func (d *decoder) write(at int64, f *frame.Frame) error {
	n := int(f.BlockSize)
	if most := d.info.NSamples; most > 0 && uint64(d.f.Frames)+uint64(n) > most {
		return d.fault(at, "the blocks hold more than the %d samples that the header says", most)
	}
	if err := d.inRange(at, f, n); err != nil {
		return err
	}
	bits := int(f.BitsPerSample)
	d.plain = interleave(d.plain, f, n, (bits+7)/8, 0)
	d.sum.Write(d.plain)
	d.packed = d.plain
	if stored := d.f.Encoding.Bits(); stored != bits {
		d.packed = interleave(nil, f, n, stored/8, stored-bits)
	}
	if d.limit -= int64(len(d.packed)); d.limit < 0 {
		return &wave.Fault{Offset: at, What: fmt.Sprintf("FLAC: the file unpacks to more than %d MiB and %d times its size", base>>20, ratio),
			Remedy: "convert it to WAV first if it is a recording"}
	}
	d.f.Frames += int64(n)
	_, err := d.out.Write(d.packed)
	return err
}

// inRange checks that a block's samples fit the stream's bits: damage that the
// block's own checksum does not see.
func (d *decoder) inRange(at int64, f *frame.Frame, n int) error {
	top := int32(1) << (f.BitsPerSample - 1)
	for c, s := range f.Subframes {
		if len(s.Samples) != n {
			return d.fault(at, "channel %d of the block has %d of %d samples", c+1, len(s.Samples), n)
		}
		for _, v := range s.Samples {
			if v < -top || v >= top {
				return d.fault(at, "the block's samples leave %d bits", f.BitsPerSample)
			}
		}
	}
	return nil
}

// interleave stores a block little-endian in size bytes a sample, shifted up.
func interleave(b []byte, f *frame.Frame, n, size, shift int) []byte {
	step := size * len(f.Subframes)
	if cap(b) < n*step {
		b = make([]byte, n*step)
	}
	b = b[:n*step]
	for c, s := range f.Subframes {
		for i, v := range s.Samples[:n] {
			v <<= shift
			for k, at := 0, i*step+c*size; k < size; k++ {
				b[at+k] = byte(v >> (8 * k))
			}
		}
	}
	return b
}
