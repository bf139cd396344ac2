package design

import (
	"fmt"
	"math"
	"slices"
)

// SegOptions steer SegSNR; the zero value is the customary choice.
type SegOptions struct {
	// Rounds limits the rounds of each start; 0 means 60.
	Rounds int
	// Trace asks for the measure (dB) after each round of the winning start.
	Trace bool
}

// SegSNR returns the n-level staircase with the largest mean limited frame
// SNR found: segsnr_db of f, or segsnr_open_db with open. The measure reached,
// in dB, is Solution.Aim; MSE and Entropy are those of all samples of f.
// Proof: Local, with the number of starts.
//
// Method: majorise and minimise. The mean of ln(E + c) over frames, E a
// frame's error energy, is concave in the energies, so its tangent lies above
// it: with weights 1/(E + c) on the frames' histograms the exact weighted
// optimum can't be worse in that smooth aim, and rounds of it never are. c is
// the error at the upper limit (and at least the floor, open: the floor
// alone); it stands for the limit, beyond which less error earns nothing.
// Frames at the lower limit have weight 0. The best round by the exact
// measure is kept.
//
// Starts, followed on at most 4,096 evenly taken frames: mu-law, companders
// after p^(1/3), p^(1/2), p^0.7 of the pooled data, the exact optima for
// frames weighted by their energy to the power 0, -1/2, -1, and the best of
// these with its weights shaken by seeded noise, 12 times. The best two go on
// with all frames and with c, c/3, c/10, ever closer to the exact limit.
// (Moving single levels by trial afterwards gained nothing on speech.)
// Source of the principle: D. R. Hunter, K. Lange, Amer. Statist. 58 (2004).
func SegSNR(f Frames, n int, sym Symmetry, open bool, opt SegOptions) (Solution, error) {
	if n < 2 || n > 1<<15 {
		return Solution{}, fmt.Errorf("%d levels: want 2 to 32768", n)
	}
	if f.Len() == 0 {
		return Solution{}, fmt.Errorf("no frames: a segmental aim needs frames in range with signal")
	}
	if opt.Rounds <= 0 {
		opt.Rounds = 60
	}
	a := newSegAim(f, n, sym, open)
	some := a.some(4096)
	starts := some.starts()
	runs := inParallel(len(starts), func(i int) segRun { return some.climb(starts[i], 1, opt.Rounds) })
	best := runs[bestFirst(runs)[0]].table
	runs = append(runs, inParallel(shaken, func(i int) segRun {
		return some.climb(some.shake(best, uint64(i)), 1./3, opt.Rounds)
	})...)
	if some.f.Len() < a.f.Len() {
		runs = inParallel(len(runs), func(i int) segRun { return a.again(runs[i]) })
	}
	order := bestFirst(runs)
	order = order[:min(2, len(order))]
	finals := inParallel(len(order), func(i int) segRun { return a.sharpen(runs[order[i]], opt.Rounds) })
	won := finals[bestFirst(finals)[0]]
	s := Solution{Proof: Local, Starts: len(runs), Rounds: won.rounds, Aim: won.table.db}
	s.Values, s.Thresholds = won.table.values, won.table.thresholds
	if sym == Mirror {
		s.Values, s.Thresholds = unfold(s.Values, s.Thresholds, a.pinned)
	}
	s.MSE, s.Entropy = EvaluateData(f.Histogram(), s.Thresholds, s.Values)
	if opt.Trace {
		s.Trace, s.TraceOf = won.trace, "mean frame SNR in dB"
	}
	return s, nil
}

// shaken is the number of starts by shaking the best.
const shaken = 12

// segRun is one start followed to its end.
type segRun struct {
	table  segTable
	rounds int
	trace  []float64
}

// bestFirst orders runs by the measure, equal ones as they came.
func bestFirst(runs []segRun) []int {
	order := make([]int, len(runs))
	for i := range order {
		order[i] = i
	}
	slices.SortStableFunc(order, func(i, j int) int {
		switch a, b := runs[i].table.db, runs[j].table.db; {
		case a > b:
			return -1
		case a < b:
			return 1
		}
		return 0
	})
	return order
}

// climb repeats weighting and exact optimum from t, keeping the best table by
// the exact measure; soft scales the constant c.
func (a *segAim) climb(t segTable, soft float64, rounds int) segRun {
	run := segRun{table: t, trace: []float64{t.db}}
	smooth := a.smooth(t.errors, soft)
	for run.rounds < rounds {
		run.rounds++
		t = a.optimum(a.weights(t.errors, soft))
		run.trace = append(run.trace, t.db)
		if t.db > run.table.db {
			run.table = t
		}
		now := a.smooth(t.errors, soft)
		if now <= smooth+1e-4 {
			break
		}
		smooth = now
	}
	return run
}

// again measures the end of a run on all frames.
func (a *segAim) again(run segRun) segRun {
	run.table = a.code(run.table.values, run.table.thresholds)
	run.trace = []float64{run.table.db}
	return run
}

// sharpen goes on from a run with smaller constants.
func (a *segAim) sharpen(run segRun, rounds int) segRun {
	for _, soft := range [3]float64{1, 1. / 3, 1. / 10} {
		next := a.climb(run.table, soft, rounds)
		run.rounds += next.rounds
		run.trace = append(run.trace, next.trace[1:]...)
		run.table = next.table
	}
	return run
}

// smooth is the smooth aim in dB: the mean of S/(E + soft c), not below the
// lower limit.
func (a *segAim) smooth(errors []float64, soft float64) float64 {
	least := math.Pow(10, a.f.Lower/10)
	sum := 0.0
	for i, e := range errors {
		sum += math.Log10(math.Max(least, a.f.Signal[i]/(e+soft*a.c[i])))
	}
	return 10 * sum / float64(len(errors))
}
