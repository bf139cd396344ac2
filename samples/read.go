package samples

import (
	"errors"
	"fmt"
	"io"
	"sync"
	"unsafe"
)

// blockBytes is about how much is read at a time: it stays in the cache.
const blockBytes = 1 << 17

var buffers = sync.Pool{New: func() any { b := make([]byte, blockBytes); return &b }}

// blockFrames is how many frames are worked on at a time.
func blockFrames(frameBytes int) int { return max(1, blockBytes/frameBytes) }

func (r *Recording) frameBytes() int { return r.info.Channels * r.enc.Bytes() }

// bytes fills b with stored samples from an offset behind the first one.
func (r *Recording) bytes(b []byte, at int64) error {
	var src io.ReaderAt = r.file
	if r.spool != nil {
		src = r.spool.file
	}
	if _, err := src.ReadAt(b, r.start+at); err != nil {
		if errors.Is(err, io.EOF) {
			return fmt.Errorf("byte %d: the file became shorter while it was read: run again when it is complete", r.start+at)
		}
		return plain(err)
	}
	return nil
}

// check panics where the caller asks for frames that are not there.
func (r *Recording) check(planes, length int, same bool, start int64) {
	switch {
	case planes != r.info.Channels:
		panic(fmt.Sprintf("samples: %d planes for %d channels", planes, r.info.Channels))
	case !same:
		panic("samples: planes of different lengths")
	case start < 0 || int64(length) > r.info.Frames-start:
		panic(fmt.Sprintf("samples: frames %d to %d of %d", start, start+int64(length), r.info.Frames))
	}
}

// ReadWords reads as many frames as the planes are long, from frame start on,
// value = word/2^15. It panics where Words is false, the planes do not fit the
// channels, or the frames are not there.
func (r *Recording) ReadWords(dst [][]int16, start int64) error {
	if !r.Words() {
		panic("samples: ReadWords of samples off the 16-bit grid")
	}
	r.check(len(dst), len(dst[0]), even(dst), start)
	if r.made != nil {
		return r.made.ReadWords(dst, start)
	}
	if r.enc.Bits() == 16 && len(dst) == 1 && littleEndian {
		return r.wrap(r.bytes(asBytes(dst[0]), 2*start))
	}
	return r.wrap(blocks(r, dst, start, r.enc.Words))
}

// Read reads as many frames as the planes are long, from frame start on, full
// scale = 1.0; the values are finite. It panics like ReadWords.
func (r *Recording) Read(dst [][]float64, start int64) error {
	r.check(len(dst), len(dst[0]), even(dst), start)
	if r.made != nil {
		return r.made.Read(dst, start)
	}
	return r.wrap(blocks(r, dst, start, r.enc.Reals))
}

func (r *Recording) wrap(err error) error {
	if err != nil {
		return &Error{r.info.Path, err}
	}
	return nil
}

// even says whether all planes are of one length.
func even[T any](planes [][]T) bool {
	for _, p := range planes {
		if len(p) != len(planes[0]) {
			return false
		}
	}
	return true
}

// blocks reads and converts, a block at a time.
func blocks[T any](r *Recording, dst [][]T, start int64, convert func([][]T, []byte)) error {
	buf := buffers.Get().(*[]byte)
	defer buffers.Put(buf)
	frame := r.frameBytes()
	step := blockFrames(frame)
	part := make([][]T, len(dst))
	for at, n := 0, len(dst[0]); at < n; at += step {
		end := min(at+step, n)
		for c := range dst {
			part[c] = dst[c][at:end]
		}
		b := (*buf)[:(end-at)*frame]
		if err := r.bytes(b, (start+int64(at))*int64(frame)); err != nil {
			return err
		}
		convert(part, b)
	}
	return nil
}

// littleEndian says whether memory holds words as files do.
var littleEndian = func() bool { w := uint16(1); return *(*byte)(unsafe.Pointer(&w)) == 1 }()

// asBytes is the memory of words.
func asBytes(w []int16) []byte {
	if len(w) == 0 {
		return nil
	}
	return unsafe.Slice((*byte)(unsafe.Pointer(&w[0])), 2*len(w))
}
