package design

import (
	"fmt"
	"math"
)

// EntropyOptions say what an entropy-constrained design aims at: the least of
// MSE + Lambda times entropy, or the least MSE at an entropy not above Rate.
type EntropyOptions struct {
	// Lambda is the price of a bit a sample, squared amplitude units, > 0;
	// used where Rate is 0.
	Lambda float64
	// Rate is the largest entropy in bits a sample, > 0.
	Rate float64
	// Levels is the largest number of levels; 0: 4,096.
	Levels int
	// Symmetry asks for a mirror table, with a level or a threshold at 0,
	// whichever serves better.
	Symmetry Symmetry
}

// mostCoded is the default of Levels.
const mostCoded = 4096

func (o *EntropyOptions) check() error {
	if o.Levels == 0 {
		o.Levels = mostCoded
	}
	switch {
	case o.Levels < 1 || o.Levels > 1<<16:
		return fmt.Errorf("at most %d levels: want 1 to 65536", o.Levels)
	case o.Rate == 0 && !(o.Lambda > 0 && o.Lambda <= math.MaxFloat64):
		return fmt.Errorf("lambda %g: want a finite number above 0 (or a rate)", o.Lambda)
	case o.Rate != 0 && !(o.Rate > 0 && o.Rate <= 16):
		return fmt.Errorf("rate %g: want above 0, at most 16 bits", o.Rate)
	case o.Rate != 0 && o.Lambda != 0:
		return fmt.Errorf("both a rate (%g) and lambda (%g): want one of them", o.Rate, o.Lambda)
	}
	return nil
}

// atRate looks for the price at which solve's entropy is nearest below rate:
// a vertex of the lower convex hull of (entropy, MSE). power is the mean
// square, for a first guess (a bit is worth a factor of four at high rates);
// lossless coding is met before 1e-18 of it.
func atRate(rate, power float64, solve func(lambda float64) Solution) Solution {
	var best Solution
	var tried []float64
	found := false
	dear, cheap := math.Inf(1), 0.0 // prices known to be above and below
	lambda := 2 * math.Ln2 * power * math.Exp2(-2*rate)
	for round := 0; round < 60 && lambda > power*1e-18; round++ {
		s := solve(lambda)
		tried = append(tried, s.Entropy)
		if s.Entropy <= rate {
			dear = lambda
			if !found || s.MSE < best.MSE {
				best, found = s, true
			}
		} else {
			cheap = lambda
		}
		if off := rate - s.Entropy; off >= 0 && off < 1e-6 || dear < cheap*(1+1e-5) {
			break
		}
		lambda = nextPrice(lambda, s.Entropy-rate, cheap, dear, round)
	}
	best.Trace, best.TraceOf = tried, "entropy in bits at each price tried"
	return best
}

// nextPrice steps by the high-resolution law, or halves the bracket.
func nextPrice(lambda, excess, cheap, dear float64, round int) float64 {
	step := lambda * math.Pow(4, math.Max(-3, math.Min(3, excess*1.02)))
	switch {
	case math.IsInf(dear, 1):
		return math.Max(step, lambda*math.Exp2(float64(round)/2))
	case cheap == 0:
		return math.Min(step, lambda*math.Exp2(-float64(round)/2))
	case round%3 == 2 || !(step > cheap && step < dear):
		return math.Sqrt(cheap * dear)
	}
	return step
}
