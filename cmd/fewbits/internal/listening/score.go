package listening

import (
	"fmt"
	"io"
	"math"
	"os"

	"gonum.org/v1/gonum/mathext"
)

// Scores counts answers.
type Scores struct {
	A, B             string // the designs, A named first when the set was made
	PreferA, PreferB int
	None             int // no difference heard
	Unanswered       int
	First, Second    int // the same preferences by place

	// P is the two-sided exact sign test of PreferA against PreferB, answers of
	// no difference left out: the chance of a split at least as uneven where no
	// design is preferred. In (0, 1]; NaN where nobody preferred any. It takes
	// answers as independent, which several answers of one listener are only
	// nearly.
	P float64

	// PlaceP is the same for First against Second: a small value says that
	// listeners went by the place, which balanced order keeps out of P.
	PlaceP float64
}

// Score reads a set's key and the filled tables of its listeners, one file each
// with the columns pair and preferred (first, second, none or nothing), and
// counts over all. Errors name file and line.
func Score(keyPath string, answerPaths ...string) (Scores, error) {
	var key answerKey
	if err := read(keyPath, func(r io.Reader) (err error) { key, err = readKey(r); return err }); err != nil {
		return Scores{}, err
	}
	s := Scores{A: key.a, B: key.b}
	for _, path := range answerPaths {
		var said map[string]answer
		if err := read(path, func(r io.Reader) (err error) { said, err = readAnswers(r, key); return err }); err != nil {
			return Scores{}, err
		}
		s.count(key, said)
	}
	s.P, s.PlaceP = signTest(s.PreferA, s.PreferB), signTest(s.First, s.Second)
	return s, nil
}

// read gives a file to a parser and names it where that fails.
func read(path string, parse func(io.Reader) error) error {
	f, err := os.Open(path)
	if err != nil {
		return err
	}
	defer f.Close()
	if err := parse(f); err != nil {
		return fmt.Errorf("%s: %w", path, err)
	}
	return nil
}

// count adds one listener's answers.
func (s *Scores) count(key answerKey, said map[string]answer) {
	for name, aFirst := range key.pairs {
		switch a := said[name]; {
		case a == none:
			s.None++
		case a == unanswered:
			s.Unanswered++
		default:
			if a == first {
				s.First++
			} else {
				s.Second++
			}
			if (a == first) == aFirst {
				s.PreferA++
			} else {
				s.PreferB++
			}
		}
	}
}

// signTest is min(1, 2 P(X >= max(a, b))), X binomial of a+b fair trials; the
// tail is the regularized incomplete beta function I(1/2; k, n-k+1) (NIST DLMF
// 8.17.5). NaN without trials.
func signTest(a, b int) float64 {
	n, k := a+b, max(a, b)
	if n == 0 {
		return math.NaN()
	}
	if a == b {
		return 1
	}
	return min(1, 2*mathext.RegIncBeta(float64(k), float64(n-k+1), 0.5))
}
