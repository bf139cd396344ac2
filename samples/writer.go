package samples

import (
	"errors"
	"fmt"
	"sync/atomic"

	"fewbits/samples/wave"
)

// Depth is the format of a written file.
type Depth string

// The depths that are written.
const (
	Depth16  Depth = "16"  // PCM 16-bit
	Depth24  Depth = "24"  // PCM 24-bit
	Depth32F Depth = "32f" // 32-bit float
)

var depths = map[Depth]wave.Encoding{Depth16: wave.PCM16, Depth24: wave.PCM24, Depth32F: wave.Float32}

// Writer fills a new WAV file, in any order and from several goroutines; the
// file appears under its name on Commit, whole or not at all.
type Writer struct {
	// Sync asks Commit to force the samples to the disk before the rename.
	Sync bool

	file     *whole
	enc      wave.Encoding
	start    int64
	channels int
	frames   int64
	pad      bool
	written  atomic.Int64
	failed   atomic.Bool
}

// Create starts a WAV file of that many frames (RF64 beyond 4 GiB). It panics
// where rate, channels, frames or depth are none that can be.
func Create(path string, rate, channels int, frames int64, depth Depth) (*Writer, error) {
	enc, ok := depths[depth]
	if !ok {
		panic(fmt.Sprintf("samples: no depth %q", depth))
	}
	head, pad := wave.Header(enc, rate, channels, frames)
	file, err := createWhole(path)
	if err != nil {
		return nil, err
	}
	w := &Writer{file: file, enc: enc, start: int64(len(head)), channels: channels, frames: frames, pad: pad}
	if err := w.put(head, 0); err != nil {
		w.Abort()
		return nil, err
	}
	return w, nil
}

// put writes bytes at an offset of the file and remembers a failure.
func (w *Writer) put(b []byte, at int64) error {
	if _, err := w.file.WriteAt(b, at); err != nil {
		w.failed.Store(true)
		return &Error{w.file.path, fmt.Errorf("cannot be written: %w", plain(err))}
	}
	return nil
}

// check panics where the planes do not fit the file.
func (w *Writer) check(planes, length int, same bool, start int64) {
	if planes != w.channels || !same || start < 0 || int64(length) > w.frames-start {
		panic(fmt.Sprintf("samples: %d planes of %d frames at %d do not fit %d channels of %d frames",
			planes, length, start, w.channels, w.frames))
	}
}

// WriteAt stores planes from frame start on, full scale = 1.0, rounded half away
// from zero to the depth's grid. PCM samples beyond full scale are clamped and
// counted; 32-bit float holds them as they are. NaN and infinity are an error.
func (w *Writer) WriteAt(planes [][]float64, start int64) (clipped int64, err error) {
	w.check(len(planes), len(planes[0]), even(planes), start)
	err = store(w, planes, start, func(b []byte, part [][]float64) error {
		n, err := w.enc.FromReals(b, part)
		clipped += n
		return err
	})
	return clipped, err
}

// WriteWordsAt stores planes of words, value = word/2^15, from frame start on.
// The file must be of 16 bits; it panics otherwise.
func (w *Writer) WriteWordsAt(planes [][]int16, start int64) error {
	if w.enc != wave.PCM16 {
		panic("samples: WriteWordsAt of a file that is not of 16 bits")
	}
	w.check(len(planes), len(planes[0]), even(planes), start)
	if len(planes) == 1 && littleEndian {
		w.written.Add(int64(len(planes[0])))
		return w.put(asBytes(planes[0]), w.start+2*start)
	}
	return store(w, planes, start, func(b []byte, part [][]int16) error {
		wave.FromWords(b, part)
		return nil
	})
}

// store converts and writes, a block at a time.
func store[T any](w *Writer, planes [][]T, start int64, convert func([]byte, [][]T) error) error {
	buf := buffers.Get().(*[]byte)
	defer buffers.Put(buf)
	frame := w.channels * w.enc.Bytes()
	step := blockFrames(frame)
	part := make([][]T, len(planes))
	for at, n := 0, len(planes[0]); at < n; at += step {
		end := min(at+step, n)
		for c := range planes {
			part[c] = planes[c][at:end]
		}
		b := (*buf)[:(end-at)*frame]
		if err := convert(b, part); err != nil {
			w.failed.Store(true)
			return &Error{w.file.path, err}
		}
		if err := w.put(b, w.start+(start+int64(at))*int64(frame)); err != nil {
			return err
		}
		w.written.Add(int64(end - at))
	}
	return nil
}

// Commit gives the file its name. Where a write had failed, or frames are
// missing, it removes the file and says so.
func (w *Writer) Commit() error {
	if w.failed.Load() {
		w.Abort()
		return &Error{w.file.path, errors.New("cannot be written: an earlier write failed")}
	}
	if n := w.written.Load(); n != w.frames {
		w.Abort()
		return &Error{w.file.path, fmt.Errorf("not written: %d of %d frames were stored", n, w.frames)}
	}
	if w.pad {
		if err := w.put([]byte{0}, w.start+w.frames*int64(w.channels*w.enc.Bytes())); err != nil {
			w.Abort()
			return err
		}
	}
	return w.file.commit(w.Sync)
}

// Abort removes what was written; harmless after Commit.
func (w *Writer) Abort() { w.file.abort() }
