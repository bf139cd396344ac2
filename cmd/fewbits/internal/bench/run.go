package bench

import (
	"context"
	"errors"
	"fmt"

	"fewbits/codec/family"
	"fewbits/measure"
)

// Version of the program, set by cmd.
var Version = "devel"

// Run does what the plan says: surveys the recordings, makes the designs,
// codes and measures.
func Run(ctx context.Context, plan Plan) (*Results, *Traces, error) {
	e := newEngine(ctx, plan)
	surveys, refused, err := e.openAll(plan.Inputs, map[string]bool{})
	if err != nil {
		return nil, nil, err
	}
	defer closeAll(surveys)
	if len(surveys) == 0 {
		return nil, nil, noneLeft(refused)
	}
	r := e.results(surveys, refused)
	sets, err := e.designs(r, surveys)
	if err != nil {
		return nil, nil, err
	}
	outcomes, err := e.measureAll(surveys, sets)
	if err != nil {
		return nil, nil, err
	}
	if err := e.joinRows(surveys, r.Designs); err != nil {
		return nil, nil, err
	}
	e.collect(r, surveys, outcomes)
	if err := e.optimism(r, surveys); err != nil {
		return nil, nil, err
	}
	t, err := e.traces(r, surveys, outcomes, sets)
	return r, t, err
}

func closeAll(surveys []*survey) {
	for _, s := range surveys {
		s.rec.Close()
	}
}

// noneLeft says why there is nothing to measure.
func noneLeft(refused []Refusal) error {
	if len(refused) == 0 {
		return errors.New("no recordings given")
	}
	err := fmt.Errorf("%s: %s", refused[0].File, refused[0].Reason)
	for _, r := range refused[1:] {
		err = fmt.Errorf("%w\nfewbits: %s: %s", err, r.File, r.Reason)
	}
	return err
}

// results begins the record of the run.
func (e *engine) results(surveys []*survey, refused []Refusal) *Results {
	r := &Results{
		Schema: Schema, Version: Version, Command: append([]string{}, e.plan.Command...),
		Settings: e.plan.Settings, Refused: append([]Refusal{}, refused...), Warnings: []string{},
	}
	r.Settings.Preparation, r.Settings.TrainedOn = append([]string{}, e.plan.Preparation...), append([]string{}, e.plan.Train...)
	for _, m := range measure.Register {
		r.Definitions = append(r.Definitions, Definition{Name: m.Name, Unit: m.Unit, Means: m.Means})
	}
	r.Definitions = append(r.Definitions, idleDefinitions...)
	for _, s := range surveys {
		r.Clips = append(r.Clips, s.clip)
	}
	return r
}

// designs makes the staircases: one set for all clips, or with hold-out one
// for each clip. Results name the set made on everything.
func (e *engine) designs(r *Results, surveys []*survey) ([][]made, error) {
	source, who := surveys, "the recordings it is tested on"
	if len(e.plan.Train) > 0 {
		train, refused, err := e.openAll(e.plan.Train, map[string]bool{})
		if err != nil {
			return nil, err
		}
		defer closeAll(train)
		if len(train) == 0 {
			return nil, fmt.Errorf("--train: %w", noneLeft(refused))
		}
		r.Refused = append(r.Refused, refused...)
		source, who = train, "other recordings (--train)"
	}
	e.toMake = int64(len(e.plan.Specs))
	if e.plan.HoldOut && e.needs(family.Level) {
		e.toMake *= int64(len(surveys)) + 2 // on all, without each, and for the optimism
	}
	all, err := e.makeOn(source, who)
	if err != nil {
		return nil, err
	}
	for i := range all {
		all[i].tryIdle(surveys)
		r.Designs = append(r.Designs, all[i].Design)
	}
	e.warnAboutTraining(r)
	sets := make([][]made, len(surveys))
	for i := range sets {
		sets[i] = all
	}
	if e.plan.HoldOut && e.needs(family.Level) {
		return sets, e.holdOut(r, surveys, sets)
	}
	return sets, nil
}

// makeOn makes every design on the given recordings.
func (e *engine) makeOn(source []*survey, who string) ([]made, error) {
	p := newPool(source)
	if err := e.refine(p); err != nil {
		return nil, err
	}
	m, err := p.material()
	if err != nil && e.needs(family.Level) {
		return nil, err
	}
	e.designing()
	return e.makeDesigns(m, who)
}

// holdOut makes the set of each clip without that clip.
func (e *engine) holdOut(r *Results, surveys []*survey, sets [][]made) error {
	if len(surveys) < 2 {
		return errors.New("--hold-out needs two recordings or more")
	}
	for i := range surveys {
		others := append(append([]*survey{}, surveys[:i]...), surveys[i+1:]...)
		set, err := e.makeOn(others, "all recordings but the one it is tested on (--hold-out)")
		if err != nil {
			return err
		}
		sets[i] = set
	}
	for i := range r.Designs {
		r.Designs[i].MadeOn = sets[0][i].MadeOn
	}
	return nil
}

// warnAboutTraining tells when designs have seen what they are tested on.
func (e *engine) warnAboutTraining(r *Results) {
	if e.needs(family.Level) && len(e.plan.Train) == 0 && !e.plan.HoldOut {
		r.Warnings = append(r.Warnings,
			"fitted designs were made on the recordings they are tested on, which flatters them: use --train or --hold-out for a fair figure")
	}
}

// measureAll codes every clip with its set of designs.
func (e *engine) measureAll(surveys []*survey, sets [][]made) ([]*outcome, error) {
	var total int64
	for _, s := range surveys {
		total += s.levels.Samples
	}
	e.begin("measuring", total)
	out := make([]*outcome, len(surveys))
	e.spread = newSpread(len(sets[0]))
	err := inOrder(e.ctx, len(surveys), e.plan.Workers,
		func(i int) (*outcome, error) { return e.measure(surveys[i], sets[i]) },
		func(i int, o *outcome) error {
			e.spread.merge(o.spread)
			o.spread = nil
			if i >= mostTraces {
				o.trace = ClipTrace{}
			}
			if len(surveys) >= measure.FewClips {
				o.blocks = nil
			}
			out[i] = o
			return nil
		})
	return out, err
}
