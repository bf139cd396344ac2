package listening

import (
	"fmt"
	"math"

	"fewbits/samples"
)

const (
	gapSeconds = 0.5 // of silence between the sides

	// blockSamples of all channels together are held at a time.
	blockSamples = 1 << 16

	// mostReach is refused to be passed: taking all files down by more would bury
	// the set under the 24-bit grid.
	mostReach = 1 << 12

	// Full scale of the 24-bit grid.
	most  = 1 - 1.0/(1<<23)
	least = -1.0
)

// room gives planes of about blockSamples together.
func room(channels int) [][]float64 {
	planes := make([][]float64, channels)
	for c := range planes {
		planes[c] = make([]float64, max(1, blockSamples/channels))
	}
	return planes
}

// cut shortens planes to n frames, if they are longer.
func cut(planes, part [][]float64, n int64) [][]float64 {
	for c, p := range planes {
		part[c] = p[:min(int64(len(p)), n)]
	}
	return part
}

// open opens a reconstruction.
func open(path string) (*samples.Recording, error) {
	r, err := samples.Open(path)
	if err != nil {
		return nil, fmt.Errorf("%w; the run must have written audio (no --no-audio)", err)
	}
	return r, nil
}

// walk shows a recording to f, a block at a time.
func walk(path string, f func(planes [][]float64, start int64) error) (samples.Info, error) {
	r, err := open(path)
	if err != nil {
		return samples.Info{}, err
	}
	defer r.Close()
	info := r.Info()
	planes, part := room(info.Channels), make([][]float64, info.Channels)
	for at := int64(0); at < info.Frames; at += int64(len(part[0])) {
		cut(planes, part, info.Frames-at)
		if err := r.Read(part, at); err != nil {
			return info, err
		}
		if err := f(part, at); err != nil {
			return info, err
		}
	}
	return info, nil
}

// soundOf is what is known of a pair's two sides before they are written.
type soundOf struct {
	info  samples.Info // of either side
	reach float64      // the largest sample of both sides matched, 1 is full scale
	power float64      // mean square of the louder side, matched
}

// examine checks a pair and measures it at the gains 1/b.
func examine(p Pair) (soundOf, error) {
	for _, b := range []float64{p.B1, p.B2} {
		if !(b > 0 && b <= math.MaxFloat64 && 1/b <= math.MaxFloat64) {
			return soundOf{}, fmt.Errorf("%s: levels cannot be matched by 1/b, b = %g: leave the clip out", p.Clip, b)
		}
	}
	a, err := hear(p.PathA, 1/p.B1)
	if err != nil {
		return a, err
	}
	b, err := hear(p.PathB, 1/p.B2)
	if err != nil {
		return a, err
	}
	if x, y := a.info, b.info; x.Rate != y.Rate || x.Channels != y.Channels || x.Frames != y.Frames {
		return a, fmt.Errorf("%s (%d Hz, %d channels, %d frames) and %s (%d Hz, %d channels, %d frames) are not one clip's: run again",
			p.PathA, x.Rate, x.Channels, x.Frames, p.PathB, y.Rate, y.Channels, y.Frames)
	}
	if reach := max(a.reach, b.reach); !(reach <= mostReach) {
		return a, fmt.Errorf("%s: matched by 1/b with b = %g and %g it would be %g times full scale: leave the clip out", p.Clip, p.B1, p.B2, reach)
	}
	a.reach, a.power = max(a.reach, b.reach), max(a.power, b.power)
	return a, nil
}

// hear measures one side.
func hear(path string, gain float64) (s soundOf, err error) {
	high, low, sum := 0.0, 0.0, 0.0
	s.info, err = walk(path, func(planes [][]float64, _ int64) error {
		for _, p := range planes {
			for _, x := range p {
				high, low = max(high, x), min(low, x)
				sum += x * x
			}
		}
		return nil
	})
	s.reach = gain * max(high/most, low/least)
	s.power = gain * gain * sum / (float64(s.info.Frames) * float64(s.info.Channels))
	return s, err
}

// commonGain is 1, or what takes the largest sample of all to full scale.
func commonGain(all []soundOf) float64 {
	reach := 1.0
	for _, s := range all {
		reach = max(reach, s.reach)
	}
	return 1 / reach
}

// writePair writes one file, first, silence, second, and gives its SHA-256.
func writePair(path string, it item) (sum string, err error) {
	gap := int64(math.Round(gapSeconds * float64(it.info.Rate)))
	w, err := samples.Create(path, it.info.Rate, it.info.Channels, 2*it.info.Frames+gap, samples.Depth24)
	if err != nil {
		return "", err
	}
	defer w.Abort()
	if err := play(w, it.first, it.info, 0); err != nil {
		return "", err
	}
	if err := silence(w, it.info.Channels, it.info.Frames, gap); err != nil {
		return "", err
	}
	if err := play(w, it.second, it.info, it.info.Frames+gap); err != nil {
		return "", err
	}
	if err := w.Commit(); err != nil {
		return "", err
	}
	r, err := samples.Open(path)
	if err != nil {
		return "", err
	}
	defer r.Close()
	return r.SHA256()
}

// play copies one side to its place, at its gain.
func play(w *samples.Writer, s side, want samples.Info, at int64) error {
	changed := fmt.Errorf("%s changed while it was read: run again when nothing writes to it", s.path)
	info, err := walk(s.path, func(planes [][]float64, start int64) error {
		if len(planes) != want.Channels || start+int64(len(planes[0])) > want.Frames {
			return changed
		}
		for _, p := range planes {
			for i := range p {
				p[i] *= s.gain
			}
		}
		clipped, err := w.WriteAt(planes, at+start)
		if err == nil && clipped > 0 {
			return changed
		}
		return err
	})
	if err == nil && info.Frames != want.Frames {
		return changed
	}
	return err
}

// silence writes n frames of zeros.
func silence(w *samples.Writer, channels int, at, n int64) error {
	planes, part := room(channels), make([][]float64, channels)
	for end := at + n; at < end; at += int64(len(part[0])) {
		if _, err := w.WriteAt(cut(planes, part, end-at), at); err != nil {
			return err
		}
	}
	return nil
}
