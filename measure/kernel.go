package measure

import "fmt"

// Lookup is a quantizer tabulated on the 65,536 values of a 16-bit sample.
type Lookup struct {
	// Index[int(w)+32768] is the cell of word w.
	Index []uint16
	// Values are the reconstruction values, full scale = 1.0.
	Values []float64
	// Lo and Hi bound the range without overload, full scale = 1.0.
	Lo, Hi float64
}

// error is x - y of table row i.
func (l *Lookup) error(i int) float64 {
	return float64(i-words16/2)/(words16/2) - l.Values[l.Index[i]]
}

func (l *Lookup) check() {
	if len(l.Index) != words16 {
		panic(fmt.Sprintf("measure: Lookup with %d indices, want %d", len(l.Index), words16))
	}
}

// Kernel measures the squared error of several quantizers on 16-bit samples
// in one walk. Its table is value-major: the squared errors of all designs for
// one value lie side by side, so that a sample touches few cache lines, and
// speech, which lives near zero, stays in the cache.
type Kernel struct {
	designs int
	stride  int // designs rounded up to whole tiles
	table   []float64
}

// tile is the least number of designs that are summed side by side.
const tile = 4

// NewKernel tabulates the designs: 512 KB for each, rounded up to a multiple
// of four.
func NewKernel(designs []Lookup) *Kernel {
	d := len(designs)
	k := &Kernel{designs: d, stride: (d + tile - 1) / tile * tile}
	k.table = make([]float64, words16*k.stride)
	for j := range designs {
		l := &designs[j]
		l.check()
		for i := range l.Index {
			e := l.error(i)
			k.table[i*k.stride+j] = float64(e * e)
		}
	}
	return k
}

// Designs is the number of designs D.
func (k *Kernel) Designs() int { return k.designs }

// Frames cuts words into frames of the given length and writes for frame f the
// signal energy sum x^2 to signal[f] (exact) and the error energy sum e^2 of
// design d to errs[f*D+d], full scale = 1.0, summed in the order of the
// samples. A partial last frame is left out. signal holds at least
// len(words)/frame values, errs D times as many. It returns the number of
// frames.
func (k *Kernel) Frames(words []int16, frame int, signal, errs []float64) int {
	if frame <= 0 {
		panic("measure: Kernel.Frames with a frame of no samples")
	}
	n := len(words) / frame
	signal, errs = signal[:n], errs[:n*k.designs]
	var row [12]float64
	for f := range n {
		block := words[f*frame : (f+1)*frame]
		signal[f] = float64(sumSquares(block)) / (1 << 30)
		out := errs[f*k.designs : (f+1)*k.designs]
		for d := 0; d < k.stride; {
			wide := k.tile(block, d, &row)
			out = out[copy(out, row[:wide]):]
			d += wide
		}
	}
	return n
}

// tile sums as many designs from d on as fit one walk and returns how many.
func (k *Kernel) tile(words []int16, d int, sums *[12]float64) int {
	switch k.stride - d {
	case 4:
		k.tile4(words, d, sums)
		return 4
	case 8, 16:
		k.tile8(words, d, sums)
		return 8
	}
	k.tile12(words, d, sums)
	return 12
}

func (k *Kernel) tile4(words []int16, d int, sums *[12]float64) {
	var s0, s1, s2, s3 float64
	table, stride := k.table[d:], k.stride
	for _, w := range words {
		r := (*[4]float64)(table[(int(w)+words16/2)*stride:])
		s0 += r[0]
		s1 += r[1]
		s2 += r[2]
		s3 += r[3]
	}
	*sums = [12]float64{s0, s1, s2, s3}
}

func (k *Kernel) tile8(words []int16, d int, sums *[12]float64) {
	var s0, s1, s2, s3, s4, s5, s6, s7 float64
	table, stride := k.table[d:], k.stride
	for _, w := range words {
		r := (*[8]float64)(table[(int(w)+words16/2)*stride:])
		s0 += r[0]
		s1 += r[1]
		s2 += r[2]
		s3 += r[3]
		s4 += r[4]
		s5 += r[5]
		s6 += r[6]
		s7 += r[7]
	}
	*sums = [12]float64{s0, s1, s2, s3, s4, s5, s6, s7}
}

func (k *Kernel) tile12(words []int16, d int, sums *[12]float64) {
	var s0, s1, s2, s3, s4, s5, s6, s7, s8, s9, s10, s11 float64
	table, stride := k.table[d:], k.stride
	for _, w := range words {
		r := (*[12]float64)(table[(int(w)+words16/2)*stride:])
		s0 += r[0]
		s1 += r[1]
		s2 += r[2]
		s3 += r[3]
		s4 += r[4]
		s5 += r[5]
		s6 += r[6]
		s7 += r[7]
		s8 += r[8]
		s9 += r[9]
		s10 += r[10]
		s11 += r[11]
	}
	*sums = [12]float64{s0, s1, s2, s3, s4, s5, s6, s7, s8, s9, s10, s11}
}
