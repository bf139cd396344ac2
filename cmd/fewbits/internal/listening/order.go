package listening

import "math/rand/v2"

// stream keeps the draw apart from other uses of the same seed.
const stream = 0x6c697374656e

// order says for each pair whether B comes first: as often as not, up to one,
// and which has the one more is drawn, too.
func order(n int, seed uint64) []bool {
	r := rand.New(rand.NewPCG(seed, stream))
	swapped := n / 2
	if n%2 == 1 {
		swapped += r.IntN(2)
	}
	out := make([]bool, n)
	for i := range swapped {
		out[i] = true
	}
	r.Shuffle(n, func(i, j int) { out[i], out[j] = out[j], out[i] })
	return out
}
