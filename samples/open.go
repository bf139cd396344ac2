package samples

import (
	"errors"
	"fmt"
	"io/fs"
	"os"

	"fewbits/samples/flac"
	"fewbits/samples/wave"
)

// Open opens a WAV or FLAC file, told apart by content. What cannot be used
// gives an *Error.
func Open(path string) (*Recording, error) {
	r, err := open(path)
	if err != nil {
		return nil, &Error{path, plain(err)}
	}
	return r, nil
}

func open(path string) (*Recording, error) {
	file, size, err := openFile(path)
	if err != nil {
		return nil, err
	}
	r := &Recording{file: file}
	if err := r.recognize(path, size); err != nil {
		r.Close()
		return nil, err
	}
	return r, nil
}

// openFile opens a regular file; anything else might make the program wait.
func openFile(path string) (*os.File, int64, error) {
	stat, err := os.Stat(path)
	if err != nil {
		return nil, 0, err
	}
	if !stat.Mode().IsRegular() {
		return nil, 0, errors.New("not a regular file: give a recording or a folder of recordings")
	}
	file, err := os.Open(path)
	return file, stat.Size(), err
}

// recognize finds out where and how the samples are stored.
func (r *Recording) recognize(path string, size int64) (err error) {
	if flac.Is(r.file) {
		return r.unpack(path, size)
	}
	f, err := wave.Walk(r.file, size)
	if err != nil {
		return err
	}
	r.info, r.enc, r.start = infoOf(path, f.Container, size, f), f.Encoding, f.DataStart
	return r.checkFinite()
}

// Peek tells what a file's header says, without a look at its samples: quick,
// but Open may still refuse it. Frames is 0 where a FLAC file does not say.
func Peek(path string) (Info, error) {
	file, size, err := openFile(path)
	if err != nil {
		return Info{}, &Error{path, plain(err)}
	}
	defer file.Close()
	container, f := "FLAC", (*wave.Format)(nil)
	if flac.Is(file) {
		f, err = flac.Header(file, size)
	} else if f, err = wave.Walk(file, size); err == nil {
		container = f.Container
	}
	if err != nil {
		return Info{}, &Error{path, plain(err)}
	}
	return infoOf(path, container, size, f), nil
}

// unpack decodes a FLAC file into a spool.
func (r *Recording) unpack(path string, size int64) (err error) {
	if r.spool, err = newSpool(); err != nil {
		return err
	}
	f, err := flac.Decode(r.file, size, r.spool)
	if err != nil {
		return err
	}
	r.info, r.enc = infoOf(path, "FLAC", size, f), f.Encoding
	return r.spool.flush()
}

// checkFinite refuses float samples that are no numbers.
func (r *Recording) checkFinite() error {
	if !r.enc.Float() {
		return nil
	}
	frames := make([]byte, blockFrames(r.frameBytes())*r.frameBytes())
	for at, end := int64(0), r.info.Frames*int64(r.frameBytes()); at < end; at += int64(len(frames)) {
		frames = frames[:min(int64(len(frames)), end-at)]
		if err := r.bytes(frames, at); err != nil {
			return err
		}
		if i := r.enc.NotFinite(frames); i >= 0 {
			at += int64(i * r.enc.Bytes())
			return &wave.Fault{Offset: r.start + at, Remedy: "export it again from the program that made it",
				What: fmt.Sprintf("sample %d of channel %d is NaN or infinite", at/int64(r.frameBytes()), i%r.info.Channels+1)}
		}
	}
	return nil
}

// plain takes the path out of a file system's error; it stands before anyway.
func plain(err error) error {
	var l *os.LinkError
	if errors.As(err, &l) {
		return l.Err
	}
	var p *fs.PathError
	if errors.As(err, &p) {
		switch {
		case errors.Is(err, fs.ErrNotExist):
			return fmt.Errorf("no such file or folder: check the name")
		case errors.Is(err, fs.ErrPermission):
			return fmt.Errorf("permission denied: make it readable for you")
		}
		return p.Err
	}
	return err
}
