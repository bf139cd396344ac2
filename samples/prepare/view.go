package prepare

import "fewbits/samples"

// view is the stretch and the channels of a recording that a plan keeps, less
// each channel's DC, times a gain: made as it is read.
type view struct {
	r        *samples.Recording
	from     int64
	frames   int64
	channels int
	first    bool      // only the first channel
	mix      bool      // the mean of all
	dc       []float64 // a channel; nil: nothing to subtract
	gain     float64   // 0: none
}

var _ samples.Source = (*view)(nil)

func newView(r *samples.Recording, channel string, from, to int64) *view {
	i := r.Info()
	v := &view{r: r, from: from, frames: to - from, channels: i.Channels}
	if i.Channels > 1 && (channel == "first" || channel == "mix") {
		v.first, v.mix, v.channels = channel == "first", channel == "mix", 1
	}
	return v
}

// Words says whether the view lies on the 16-bit grid.
func (v *view) Words() bool { return v.r.Words() && !v.mix && v.dc == nil && v.gain == 0 }

// ReadWords fills planes from frame at of the view on.
func (v *view) ReadWords(dst [][]int16, at int64) error {
	if !v.first {
		return v.r.ReadWords(dst, v.from+at)
	}
	return merge(v, dst[0], at, v.r.ReadWords, func(int16, int) int16 { panic("prepare: words are not mixed") })
}

// Read fills planes from frame at of the view on.
func (v *view) Read(dst [][]float64, at int64) error {
	if err := v.channel(dst, at); err != nil {
		return err
	}
	for c, dc := range v.dc {
		for i := range dst[c] {
			dst[c][i] -= dc
		}
	}
	if v.gain != 0 {
		for _, p := range dst {
			for i := range p {
				p[i] *= v.gain
			}
		}
	}
	return nil
}

// channel reads with the channels chosen or mixed.
func (v *view) channel(dst [][]float64, at int64) error {
	if !v.first && !v.mix {
		return v.r.Read(dst, v.from+at)
	}
	return merge(v, dst[0], at, v.r.Read, func(sum float64, n int) float64 { return sum / float64(n) })
}

// merge makes one plane of all channels, a block at a time: the first, or for a
// mix the mean of their sum.
func merge[T int16 | float64](v *view, dst []T, at int64, read func([][]T, int64) error, mean func(T, int) T) error {
	const block = 4096
	n := v.r.Info().Channels
	planes := grid[T](n, min(block, len(dst)))
	for lo := 0; lo < len(dst); lo += block {
		part := shorten(planes, int64(len(dst)-lo))
		if err := read(part, v.from+at+int64(lo)); err != nil {
			return err
		}
		out := dst[lo : lo+len(part[0])]
		copy(out, part[0])
		for i := range out {
			if !v.mix {
				break
			}
			for _, p := range part[1:] {
				out[i] += p[i]
			}
			out[i] = mean(out[i], n)
		}
	}
	return nil
}

// padded fills planes from frame at on, also outside the view, where 0 is.
func (v *view) padded(dst [][]float64, at int64) error {
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
	return v.Read(inside, at+lo)
}

// removeDC measures each channel's mean and subtracts it from now on.
func (v *view) removeDC() error {
	sums := make([]float64, v.channels)
	err := v.blocks(func(planes [][]float64) {
		for c, p := range planes {
			block := 0.0
			for _, x := range p {
				block += x
			}
			sums[c] += block
		}
	})
	for c := range sums {
		sums[c] /= float64(v.frames)
	}
	v.dc = sums
	return err
}

// blocks goes through the view.
func (v *view) blocks(do func(planes [][]float64)) error {
	size := blockSize(v.channels)
	planes := grid[float64](v.channels, size)
	for at := int64(0); at < v.frames; at += int64(size) {
		part := shorten(planes, v.frames-at)
		if err := v.Read(part, at); err != nil {
			return err
		}
		do(part)
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
