package bench

import (
	"bufio"
	"os"
	"strconv"

	"fewbits/measure"
)

// frameRows writes a clip's part of frames.csv; nil writes nothing.
type frameRows struct {
	file  *os.File
	out   *bufio.Writer
	specs []string
}

// rowsPart is the file that holds one clip's rows until all are joined.
func rowsPart(name string) []string { return []string{"frames-" + name + ".part"} }

func (e *engine) openRows(s *survey, designs []made) (*frameRows, error) {
	if !e.plan.FramesCSV {
		return nil, nil
	}
	path, err := e.plan.Place(rowsPart(s.clip.Name)...)
	if err != nil {
		return nil, err
	}
	f, err := os.Create(path)
	if err != nil {
		return nil, err
	}
	r := &frameRows{file: f, out: bufio.NewWriterSize(f, 1<<16)}
	for _, d := range designs {
		r.specs = append(r.specs, d.Spec)
	}
	return r, nil
}

// format writes a line per frame and channel: clip, channel, frame, start in
// seconds, level in dBov, in range, then each design's SNR in dB, unlimited;
// empty where there is no signal, "lossless" where there is no error.
func (r *frameRows) format(s *survey, c chunk, got coded) (out []byte) {
	if r == nil {
		return nil
	}
	d := len(r.specs)
	for f := range got.frames {
		for ch := range s.clip.Channels {
			k := ch*got.frames + f
			sig := got.signal[k]
			at := c.start + int64(f*s.frame)
			out = append(out, csvField(s.clip.File)...)
			out = strconv.AppendInt(append(out, ','), int64(ch+1), 10)
			out = strconv.AppendInt(append(out, ','), at/int64(s.frame), 10)
			out = strconv.AppendFloat(append(out, ','), float64(at)/float64(s.clip.RateHz), 'f', 6, 64)
			out = appendDB(append(out, ','), sig, float64(s.frame))
			out = strconv.AppendBool(append(out, ','), measure.InRange(sig, s.frame, s.inRange[ch]))
			for i := range d {
				out = appendDB(append(out, ','), sig, got.errs[k*d+i])
			}
			out = append(out, '\n')
		}
	}
	return out
}

// appendDB writes 10 log10(a/b) in full precision.
func appendDB(out []byte, a, b float64) []byte {
	switch {
	case a == 0:
		return out
	case b == 0:
		return append(out, "lossless"...)
	}
	return strconv.AppendFloat(out, measure.DB(a/b), 'g', -1, 64)
}

func (r *frameRows) write(b []byte) error {
	if r == nil {
		return nil
	}
	_, err := r.out.Write(b)
	return err
}

func (r *frameRows) flush() error {
	if r == nil {
		return nil
	}
	return r.out.Flush()
}

func (r *frameRows) close() {
	if r != nil {
		r.file.Close()
	}
}
