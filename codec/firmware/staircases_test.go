package firmware

import (
	"math"
	"math/rand/v2"
	"slices"

	"fewbits/codec"
)

type example struct {
	name string
	s    *codec.Staircase
}

// even builds n cells of width 2v/n with ties by rule tie.
func even(n int, v float64, tie codec.Tie) *codec.Staircase {
	s := &codec.Staircase{Tie: tie, Lo: -v, Hi: v}
	for k := range n {
		if k > 0 {
			s.Thresholds = append(s.Thresholds, v*float64(2*k-n)/float64(n))
		}
		s.Values = append(s.Values, v*float64(2*k+1-n)/float64(n))
	}
	return s
}

// smoothMu is the smooth mu-law with n cells.
func smoothMu(n int) *codec.Staircase {
	s := even(n, 1, codec.TieOut)
	bend := func(u float64) float64 { return math.Copysign(math.Expm1(math.Abs(u)*math.Log1p(255))/255, u) }
	for i, t := range s.Thresholds {
		s.Thresholds[i] = bend(t)
	}
	for i, y := range s.Values {
		s.Values[i] = bend(y)
	}
	return s
}

// irregular has n cells at random, thresholds partly on words, partly between
// two words, partly beyond full scale.
func irregular(n int, seed uint64, tie codec.Tie) *codec.Staircase {
	rng := rand.New(rand.NewPCG(seed, 2))
	s := &codec.Staircase{Tie: tie}
	for len(s.Thresholds) < n-1 {
		t := 1.1 * (2*rng.Float64() - 1) * math.Pow(rng.Float64(), 3)
		if rng.IntN(2) == 0 {
			t = math.Round(t*32768) / 32768
		}
		s.Thresholds = append(s.Thresholds, t)
		slices.Sort(s.Thresholds)
		s.Thresholds = slices.Compact(s.Thresholds)
	}
	for k := range n {
		lo, hi := -1.2, 1.2
		if k > 0 {
			lo = s.Thresholds[k-1]
		}
		if k < n-1 {
			hi = s.Thresholds[k]
		}
		s.Values = append(s.Values, lo+(hi-lo)*rng.Float64())
	}
	s.MirrorBounds()
	return s
}

// mirroredTable has n cells at random and is its own mirror image.
func mirroredTable(n int, seed uint64) *codec.Staircase {
	s := irregular(n, seed, codec.TieOut)
	for k := range n / 2 {
		s.Values[k] = -s.Values[n-1-k]
	}
	if n%2 == 1 {
		s.Values[n/2] = 0
	}
	for k := range (n - 1) / 2 {
		s.Thresholds[n-2-k] = math.Abs(s.Thresholds[n-2-k]) + float64(n-k)*1e-9
	}
	slices.Sort(s.Thresholds[n/2:])
	for k := range (n - 1) / 2 {
		s.Thresholds[k] = -s.Thresholds[n-2-k]
	}
	if n%2 == 0 && n > 1 {
		s.Thresholds[n/2-1] = 0
	}
	// values follow the thresholds
	for k := n - 1; k > (n-1)/2; k-- {
		lo := s.Thresholds[k-1]
		hi := lo + 0.01
		if k < n-1 {
			hi = s.Thresholds[k]
		}
		s.Values[k] = (lo + hi) / 2
		s.Values[n-1-k] = -s.Values[k]
	}
	s.MirrorBounds()
	return s
}

func examples() []example {
	single := &codec.Staircase{Values: []float64{0.25}}
	single.MirrorBounds()
	return []example{
		{"one level", single},
		{"two levels", even(2, 1, codec.TieOut)},
		{"three levels", even(3, 1, codec.TieUp)},
		{"uniform mid-rise 8 bits", even(256, 1, codec.TieOut)},
		{"uniform mid-tread 5 bits", even(31, 0.5, codec.TieUp)},
		{"uniform 10 bits far beyond full scale", even(1024, 3, codec.TieOut)},
		{"uniform finer than the words", even(4096, 0.01, codec.TieOut)},
		{"smooth mu-law 8 bits", smoothMu(256)},
		{"G.711 mu-law", codec.G711Mu()},
		{"G.711 A-law", codec.G711A()},
		{"irregular 23, ties out", irregular(23, 1, codec.TieOut)},
		{"irregular 64, ties up", irregular(64, 2, codec.TieUp)},
		{"mirror 22", mirroredTable(22, 3)},
		{"mirror 63", mirroredTable(63, 4)},
		{"4096 levels", smoothMu(4096)},
		{"4096 irregular levels", irregular(4096, 5, codec.TieOut)},
	}
}
