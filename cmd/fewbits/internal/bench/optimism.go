package bench

import (
	"fmt"

	"fewbits/measure"
)

// optimism measures, in a run with hold-out, what each fitted design would
// have seemed to be worth had it been made on the recordings it is tested on,
// and enters the difference in the leading figure.
func (e *engine) optimism(r *Results, surveys []*survey) error {
	if !e.plan.HoldOut {
		return nil
	}
	all, err := e.makeOn(surveys, "the recordings it is tested on")
	if err != nil {
		return err
	}
	plain := &engine{ctx: e.ctx, plan: e.plan, tokens: e.tokens}
	plain.plan.Audio, plain.plan.FramesCSV = false, false
	sets := make([][]made, len(surveys))
	for i := range sets {
		sets[i] = all
	}
	outcomes, err := plain.measureAll(surveys, sets)
	if err != nil {
		return err
	}
	figure, _ := measure.ByName(r.Leading)
	for d := range r.Designs {
		if r.Designs[d].MadeOn == "fixed" {
			continue
		}
		var sum measure.Tally
		for _, o := range outcomes {
			sum.Merge(&o.tallies[d])
		}
		gain := figure.Of(&sum) - float64(r.Pooled[d].Figures[r.Leading])
		if !Num(gain).Defined() {
			continue
		}
		r.Designs[d].Extra = map[string]float64{"optimism_db": gain}
		r.Designs[d].Notes = append(r.Designs[d].Notes, fmt.Sprintf(
			"made on the recordings it is tested on it would seem %.2f dB better by %s", gain, r.Leading))
	}
	return nil
}
