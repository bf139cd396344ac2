package measure

import "math"

// Units are the values a comparison rests on: one figure for each design and
// each unit (a clip, or a block of frames where clips are few).
type Units struct {
	// Values[d][u] is the figure of design d on unit u, dB. A unit where any
	// design's figure is undefined (NaN, Inf) is left out for all.
	Values [][]float64
	// Weights of the units (frames in range, say, to compare pooled figures);
	// nil: equal.
	Weights []float64
	// Groups names what each unit comes from (a talker): units of one group
	// are taken as one observation; nil: every unit its own.
	Groups []string
	// Blocks: the units are blocks of frames within a few recordings; what is
	// inferred holds for these recordings only.
	Blocks bool
}

// observations returns the weighted means and, for each design, one value per
// group whose plain mean is that mean:
//
//	u_g = m + (G/W) sum over the units of g of w (v - m)
//
// the linearised weighted mean (the estimator of survey sampling for a ratio
// mean of clusters; W. G. Cochran, Sampling Techniques, 3rd ed. 1977, ch. 9A,
// from memory).
func (u Units) observations() (means []float64, values [][]float64) {
	keep := u.defined()
	group, groups := u.grouped(keep)
	means, values = make([]float64, len(u.Values)), make([][]float64, len(u.Values))
	for d, row := range u.Values {
		var sum, weights float64
		for _, i := range keep {
			sum += float64(u.weight(i) * row[i])
			weights += u.weight(i)
		}
		means[d] = sum / weights
		values[d] = make([]float64, groups)
		for k, i := range keep {
			values[d][group[k]] += float64(u.weight(i) * (row[i] - means[d]))
		}
		for g := range values[d] {
			values[d][g] = means[d] + values[d][g]*float64(groups)/weights
		}
	}
	return means, values
}

// defined lists the units that count.
func (u Units) defined() (keep []int) {
	if len(u.Values) == 0 {
		return nil
	}
	for i := range u.Values[0] {
		ok := u.weight(i) > 0
		for _, row := range u.Values {
			ok = ok && !math.IsNaN(row[i]) && !math.IsInf(row[i], 0)
		}
		if ok {
			keep = append(keep, i)
		}
	}
	return keep
}

// grouped numbers the groups of the kept units in order of appearance.
func (u Units) grouped(keep []int) (group []int, groups int) {
	seen := map[string]int{}
	for k, i := range keep {
		if u.Groups == nil {
			group = append(group, k)
			continue
		}
		g, ok := seen[u.Groups[i]]
		if !ok {
			g = len(seen)
			seen[u.Groups[i]] = g
		}
		group = append(group, g)
	}
	if u.Groups == nil {
		return group, len(keep)
	}
	return group, len(seen)
}

func (u Units) weight(i int) float64 {
	if u.Weights == nil {
		return 1
	}
	return u.Weights[i]
}

// BlockFrames is the usual length of a block: a second of frames of 20 ms, so
// that neighbouring blocks depend little on each other.
const BlockFrames = 50

// maxBlocks bounds how many blocks are kept; beyond, neighbours are joined.
const maxBlocks = 512

// BlockMeans averages the frames of one or more clips in contiguous blocks:
// units for a comparison within few recordings. At most 512 blocks are kept:
// beyond that their length doubles.
type BlockMeans struct {
	length int
	sums   [][]float64 // [block][design]
	frames []int
}

// NewBlockMeans starts blocks of the given number of frames.
func NewBlockMeans(frames int) *BlockMeans {
	if frames <= 0 {
		panic("measure: NewBlockMeans with blocks of no frames")
	}
	return &BlockMeans{length: frames}
}

// Add adds the next frame's value for every design.
func (b *BlockMeans) Add(values []float64) {
	last := len(b.frames) - 1
	if last < 0 || b.frames[last] == b.length {
		if len(b.frames) == maxBlocks {
			b.join()
		}
		b.frames = append(b.frames, 0)
		b.sums = append(b.sums, make([]float64, len(values)))
		last = len(b.frames) - 1
	}
	for d, v := range values {
		b.sums[last][d] += v
	}
	b.frames[last]++
}

// join merges blocks by twos.
func (b *BlockMeans) join() {
	half := len(b.frames) / 2
	for i := range half {
		for d := range b.sums[2*i] {
			b.sums[2*i][d] += b.sums[2*i+1][d]
		}
		b.sums[i], b.frames[i] = b.sums[2*i], b.frames[2*i]+b.frames[2*i+1]
	}
	b.sums, b.frames, b.length = b.sums[:half], b.frames[:half], 2*b.length
}

// Units returns the blocks weighted by their frames, so that the mean over
// blocks is the mean over frames.
func (b *BlockMeans) Units() Units {
	if len(b.frames) == 0 {
		return Units{}
	}
	u := Units{Values: make([][]float64, len(b.sums[0])), Weights: make([]float64, len(b.frames)), Blocks: true}
	for i, n := range b.frames {
		u.Weights[i] = float64(n)
		for d, s := range b.sums[i] {
			u.Values[d] = append(u.Values[d], s/float64(n))
		}
	}
	return u
}
