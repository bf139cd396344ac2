package bench

import (
	"fmt"
	"math"
	"math/bits"
	"strings"

	"fewbits/codec"
	"fewbits/codec/family"
)

// made is a design ready to code with.
type made struct {
	Design
	spec  family.Spec
	stair *codec.Staircase
	grid  codec.Grid
}

// makeDesigns turns the plan's specs into staircases on the given material,
// several at once. who says on which recordings fitted ones were made.
func (e *engine) makeDesigns(m family.Material, who string) ([]made, error) {
	specs := e.plan.Specs
	out := make([]made, len(specs))
	names := map[string]bool{}
	type attempt struct {
		made
		err error // the first in order of the specs ends it
	}
	err := inOrder(e.ctx, len(specs), e.plan.Workers,
		func(i int) (attempt, error) {
			got, err := specs[i].Family.Make(specs[i], m)
			if err != nil {
				return attempt{err: err}, nil
			}
			return attempt{made: finish(specs[i], got, who)}, nil
		},
		func(i int, a attempt) error {
			if a.err != nil {
				return fmt.Errorf("design %q: %w", specs[i].Text, a.err)
			}
			out[i] = a.made
			out[i].Name = unique(specs[i].Name(), names)
			e.designed()
			return nil
		})
	if err != nil {
		return nil, err
	}
	return out, nil
}

// finish describes a staircase for the results.
func finish(spec family.Spec, got family.Made, who string) made {
	s := got.Stair
	d := Design{
		Spec: spec.Text, Family: spec.Family.Name, Bits: bits.Len(uint(s.Cells() - 1)), Levels: s.Cells(),
		MadeOn: "fixed", Thresholds: s.Thresholds, Values: s.Values, Lo: Num(s.Lo), Hi: Num(s.Hi),
		Residual: Num(math.NaN()), Notes: append([]string{}, got.Notes...),
	}
	d.TableBytes, d.Comparisons = cost(s, got.Arithmetic)
	if spec.Need() != family.Nothing {
		d.MadeOn = got.From + ", " + who
	}
	if sol := got.Solution; sol != nil {
		d.Proof, d.Rounds, d.Residual = sol.Claim(), sol.Rounds, Num(sol.Residual)
	}
	return made{Design: d, spec: spec, stair: s, grid: s.Grid()}
}

// cost is what coding by a table takes: bytes at 16 bits a number, thresholds
// and values, the mirror half stored once; comparisons per sample of a binary
// search. A uniform staircase needs neither.
func cost(s *codec.Staircase, arithmetic bool) (bytes, comparisons int) {
	if arithmetic {
		return 0, 0
	}
	n, t := s.Cells(), s.Cells()-1
	if s.IsMirror(1e-9) {
		n, t = (n+1)/2, t/2
	}
	return 2 * (n + t), bits.Len(uint(s.Cells() - 1))
}

// unique makes a name that no file system takes for one already used: letters
// that differ in case only count as the same.
func unique(name string, used map[string]bool) string {
	out := name
	for n := 2; used[strings.ToLower(out)]; n++ {
		out = fmt.Sprintf("%s-%d", name, n)
	}
	used[strings.ToLower(out)] = true
	return out
}
