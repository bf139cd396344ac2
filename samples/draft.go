package samples

import (
	"errors"

	"fewbits/samples/wave"
)

// Draft is a recording being made from another one: its frames are appended in
// order to a temporary file, so that memory stays constant.
type Draft struct {
	origin *Recording
	made   *Recording
	buf    []byte
}

// Draft starts a recording made from r, with another rate in Hz and number of
// channels: of words where words is set, else of real numbers in 64 bits.
func (r *Recording) Draft(rate, channels int, words bool) (*Draft, error) {
	s, err := newSpool()
	if err != nil {
		return nil, &Error{r.info.Path, err}
	}
	made := &Recording{info: r.info, spool: s, enc: wave.Float64}
	if words {
		made.enc = wave.PCM16
	}
	made.info.Rate, made.info.Channels, made.info.Frames = rate, channels, 0
	made.info.Warnings = append([]string(nil), r.info.Warnings...)
	return &Draft{origin: r, made: made}, nil
}

// AppendWords adds frames, value = word/2^15; it panics in a draft of reals.
func (d *Draft) AppendWords(planes [][]int16) error {
	if d.made.enc != wave.PCM16 {
		panic("samples: words appended to a draft of reals")
	}
	b := d.room(len(planes), len(planes[0]), even(planes))
	wave.FromWords(b, planes)
	return d.append(b, len(planes[0]))
}

// Append adds frames, full scale = 1.0; NaN and infinity are an error. It panics
// in a draft of words.
func (d *Draft) Append(planes [][]float64) error {
	if d.made.enc != wave.Float64 {
		panic("samples: reals appended to a draft of words")
	}
	b := d.room(len(planes), len(planes[0]), even(planes))
	if _, err := d.made.enc.FromReals(b, planes); err != nil {
		return &Error{d.made.info.Path, err}
	}
	return d.append(b, len(planes[0]))
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

func (d *Draft) append(b []byte, frames int) error {
	if _, err := d.made.spool.Write(b); err != nil {
		return &Error{d.made.info.Path, err}
	}
	d.made.info.Frames += int64(frames)
	return nil
}

// Warn adds a warning to the new recording's.
func (d *Draft) Warn(text string) { d.made.info.Warnings = append(d.made.info.Warnings, text) }

// Recording ends the draft. The new recording owns the one it was made from:
// closing it closes both.
func (d *Draft) Recording() (*Recording, error) {
	err := d.made.spool.flush()
	if err == nil && d.made.info.Frames == 0 {
		err = errors.New("nothing is left after preparation")
	}
	if err != nil {
		d.Drop()
		return nil, &Error{d.made.info.Path, err}
	}
	d.made.origin = d.origin
	return d.made, nil
}

// Drop gives the draft up; the recording it was to be made from stays open.
func (d *Draft) Drop() { d.made.spool.Close() }
