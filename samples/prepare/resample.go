package prepare

import (
	"runtime"
	"sync"
)

// resample gives a view at another rate to do, block by block.
func (f *filter) resample(v *view, do func(planes [][]float64) error) error {
	// As much input at a time as the taps need, or a block.
	size := max(1, int64(blockSize(v.channels))*f.up/max(f.up, f.down))
	for m, n := int64(0), f.length(v.frames); m < n; m += size {
		out := grid[float64](v.channels, int(min(size, n-m)))
		last := m + int64(len(out[0])) - 1
		first := m*f.down/f.up - int64(f.back)
		in := grid[float64](v.channels, int(last*f.down/f.up-int64(f.back)-first)+f.taps)
		if err := v.padded(in, first); err != nil {
			return err
		}
		f.run(out, in, m, first)
		if err := do(out); err != nil {
			return err
		}
	}
	return nil
}

// run computes outputs from m on out of inputs from first on, shared out among
// the cores: each output is one sum, so their number changes nothing.
func (f *filter) run(out, in [][]float64, m, first int64) {
	n := len(out[0])
	part := (n + runtime.GOMAXPROCS(0) - 1) / runtime.GOMAXPROCS(0)
	var wait sync.WaitGroup
	for at := 0; at < n; at += part {
		wait.Go(func() {
			for c := range out {
				for i := at; i < min(at+part, n); i++ {
					t := (m + int64(i)) * f.down
					k := t/f.up - int64(f.back) - first
					out[c][i] = dot(f.phases[t%f.up], in[c][k:k+int64(f.taps)])
				}
			}
		})
	}
	wait.Wait()
}

// dot is the sum of products, in four interleaved sums so that the processor
// need not wait; products are rounded so that all machines agree.
func dot(a, b []float64) float64 {
	var s0, s1, s2, s3 float64
	b = b[:len(a)]
	i := 0
	for ; i+4 <= len(a); i += 4 {
		s0 += float64(a[i] * b[i])
		s1 += float64(a[i+1] * b[i+1])
		s2 += float64(a[i+2] * b[i+2])
		s3 += float64(a[i+3] * b[i+3])
	}
	for ; i < len(a); i++ {
		s0 += float64(a[i] * b[i])
	}
	return (s0 + s1) + (s2 + s3)
}
