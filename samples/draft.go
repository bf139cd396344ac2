package samples

import (
	"errors"

	"fewbits/samples/wave"
)

// Source makes frames out of another recording's as they are read. Its methods
// are called from several goroutines, with as many planes as it has channels
// and for frames that are there; ReadWords only where Words is true.
type Source interface {
	Words() bool
	ReadWords(dst [][]int16, start int64) error
	Read(dst [][]float64, start int64) error
}

// Derive is the recording of so many frames at r's rate that s makes out of r as
// they are read. It owns r: closing it closes r, too.
func (r *Recording) Derive(s Source, channels int, frames int64, warnings ...string) *Recording {
	d := &Recording{info: r.info, origin: r, made: s}
	d.info.Channels, d.info.Frames = channels, frames
	d.info.Warnings = append(append([]string(nil), r.info.Warnings...), warnings...)
	return d
}

// Draft is a recording being made from another one where that takes too long to
// be done again at each reading: its frames are appended in order to a temporary
// file, so that memory stays constant.
type Draft struct {
	origin *Recording
	made   *Recording
	buf    []byte
}

// Draft starts a recording made from r, with another rate in Hz and number of
// channels.
func (r *Recording) Draft(rate, channels int) (*Draft, error) {
	s, err := newSpool()
	if err != nil {
		return nil, &Error{r.info.Path, err}
	}
	made := &Recording{info: r.info, spool: s, enc: wave.Float64}
	made.info.Rate, made.info.Channels, made.info.Frames = rate, channels, 0
	return &Draft{origin: r, made: made}, nil
}

// Append adds frames, full scale = 1.0; NaN and infinity are an error.
func (d *Draft) Append(planes [][]float64) error {
	b := d.room(len(planes), len(planes[0]), even(planes))
	if _, err := d.made.enc.FromReals(b, planes); err != nil {
		return &Error{d.made.info.Path, err}
	}
	if _, err := d.made.spool.Write(b); err != nil {
		return &Error{d.made.info.Path, err}
	}
	d.made.info.Frames += int64(len(planes[0]))
	return nil
}

// room gives a buffer for frames.
func (d *Draft) room(planes, frames int, same bool) []byte {
	if planes != d.made.info.Channels || !same {
		panic("samples: planes do not fit the draft's channels")
	}
	n := frames * d.made.frameBytes()
	if cap(d.buf) < n {
		d.buf = make([]byte, n)
	}
	return d.buf[:n]
}

// Recording ends the draft. The new recording owns the one it was made from:
// closing it closes both.
func (d *Draft) Recording(warnings ...string) (*Recording, error) {
	err := d.made.spool.flush()
	if err == nil && d.made.info.Frames == 0 {
		err = errors.New("nothing is left after preparation")
	}
	if err != nil {
		d.Drop()
		return nil, &Error{d.made.info.Path, err}
	}
	d.made.origin = d.origin
	d.made.info.Warnings = append(append([]string(nil), d.made.info.Warnings...), warnings...)
	return d.made, nil
}

// Drop gives the draft up; the recording it was to be made from stays open.
func (d *Draft) Drop() { d.made.spool.Close() }
