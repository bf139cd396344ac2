package prepare

import "fewbits/samples"

// view is the stretch and the channels of a recording that a plan keeps, less
// each channel's DC.
type view struct {
	r        *samples.Recording
	from     int64
	frames   int64
	channels int
	first    bool      // only the first channel
	mix      bool      // the mean of all
	dc       []float64 // a channel; nil: nothing to subtract
	planes   [][]float64
}

func newView(r *samples.Recording, channel string, from, to int64) *view {
	i := r.Info()
	v := &view{r: r, from: from, frames: to - from, channels: i.Channels}
	if i.Channels > 1 && (channel == "first" || channel == "mix") {
		v.first, v.mix, v.channels = channel == "first", channel == "mix", 1
	}
	return v
}

// words says whether the view lies on the 16-bit grid.
func (v *view) words() bool { return v.r.Words() && !v.mix && v.dc == nil }

// readWords fills planes from frame at of the view on.
func (v *view) readWords(dst [][]int16, at int64) error {
	if !v.first {
		return v.r.ReadWords(dst, v.from+at)
	}
	all := grid[int16](v.r.Info().Channels, len(dst[0]))
	all[0] = dst[0]
	return v.r.ReadWords(all, v.from+at)
}

// read fills planes from frame at of the view on; frames outside are 0.
func (v *view) read(dst [][]float64, at int64) error {
	lo, hi := max(0, -at), min(int64(len(dst[0])), v.frames-at)
	inside := make([][]float64, len(dst))
	for c, p := range dst {
		clear(p)
		if lo < hi {
			inside[c] = p[lo:hi]
		}
	}
	if lo >= hi {
		return nil
	}
	if err := v.inside(inside, v.from+at+lo); err != nil {
		return err
	}
	for c, dc := range v.dc {
		for i := range inside[c] {
			inside[c][i] -= dc
		}
	}
	return nil
}

// inside reads frames of the recording and chooses or mixes the channels.
func (v *view) inside(dst [][]float64, at int64) error {
	if !v.first && !v.mix {
		return v.r.Read(dst, at)
	}
	n := v.r.Info().Channels
	if len(v.planes) == 0 || len(v.planes[0]) < len(dst[0]) {
		v.planes = grid[float64](n, len(dst[0]))
	}
	all := make([][]float64, n)
	for c := range all {
		all[c] = v.planes[c][:len(dst[0])]
	}
	err := v.r.Read(all, at)
	copy(dst[0], all[0])
	if v.mix {
		for i := range dst[0] {
			for c := 1; c < n; c++ {
				dst[0][i] += all[c][i]
			}
			dst[0][i] /= float64(n)
		}
	}
	return err
}

// removeDC measures each channel's mean and subtracts it from now on.
func (v *view) removeDC() error {
	sums := make([]float64, v.channels)
	err := v.blocks(func(planes [][]float64, _ int64) error {
		for c, p := range planes {
			block := 0.0
			for _, x := range p {
				block += x
			}
			sums[c] += block
		}
		return nil
	})
	for c := range sums {
		sums[c] /= float64(v.frames)
	}
	v.dc = sums
	return err
}

// blocks goes through the view.
func (v *view) blocks(do func(planes [][]float64, at int64) error) error {
	size := blockSize(v.channels)
	planes := grid[float64](v.channels, size)
	for at := int64(0); at < v.frames; at += int64(size) {
		part := shorten(planes, v.frames-at)
		if err := v.read(part, at); err != nil {
			return err
		}
		if err := do(part, at); err != nil {
			return err
		}
	}
	return nil
}

// blockSize is how many frames are worked on at a time.
func blockSize(channels int) int { return max(1, 1<<16/channels) }

func grid[T any](channels, frames int) [][]T {
	planes := make([][]T, channels)
	for c := range planes {
		planes[c] = make([]T, frames)
	}
	return planes
}

// shorten gives the planes' first n frames, or all where they are shorter.
func shorten[T any](planes [][]T, n int64) [][]T {
	part := make([][]T, len(planes))
	for c, p := range planes {
		part[c] = p[:min(n, int64(len(p)))]
	}
	return part
}
