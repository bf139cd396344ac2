package prepare

import (
	"errors"
	"fmt"
	"math"
	"strings"

	"fewbits/samples"
)

// Apply carries out a plan. It gives the prepared recording, which then owns r
// (closing it closes r too), and what was done, a line a step. Where nothing
// was to be done it gives r itself and no lines. After an error r is still the
// caller's.
func Apply(r *samples.Recording, p Plan) (*samples.Recording, []string, error) {
	made, done, err := apply(r, p)
	if known := (*samples.Error)(nil); err != nil && !errors.As(err, &known) {
		err = &samples.Error{Path: r.Info().Path, Err: err}
	}
	if err != nil {
		return nil, nil, err
	}
	return made, done, nil
}

func apply(r *samples.Recording, p Plan) (*samples.Recording, []string, error) {
	if err := p.Check(); err != nil {
		return nil, nil, err
	}
	from, to, err := p.stretch(r.Info())
	if err != nil {
		return nil, nil, err
	}
	j := &job{r: r, plan: p, view: newView(r, p.Channel, from, to)}
	if err := j.prepare(); err != nil {
		return nil, nil, err
	}
	if len(j.done) == 0 {
		return r, nil, nil
	}
	made, err := j.make()
	return made, j.done, err
}

// job is a plan being carried out.
type job struct {
	r      *samples.Recording
	plan   Plan
	view   *view
	filter *filter
	gain   float64 // 0: none
	over   int64   // samples that the gain takes beyond full scale
	done   []string
}

func (j *job) did(format string, args ...any) { j.done = append(j.done, fmt.Sprintf(format, args...)) }

// prepare settles each step and says what it will have done.
func (j *job) prepare() (err error) {
	i, v, p := j.r.Info(), j.view, j.plan
	if v.frames != i.Frames {
		j.did("cut to %.6g ... %.6g s", float64(v.from)/float64(i.Rate), float64(v.from+v.frames)/float64(i.Rate))
	}
	switch {
	case v.first:
		j.did("first of %d channels", i.Channels)
	case v.mix:
		j.did("mean of %d channels", i.Channels)
	}
	if p.RemoveDC {
		if err = v.removeDC(); err != nil {
			return err
		}
		j.did("DC of %s removed", list(v.dc))
	}
	if p.Rate != 0 && p.Rate != i.Rate {
		if j.filter, err = newFilter(i.Rate, p.Rate, v.channels); err != nil {
			return err
		}
		j.did("resampled from %d to %d Hz (pass band to %.0f Hz, stop band -100 dB from %.0f Hz)", i.Rate, p.Rate,
			passEdge*float64(min(i.Rate, p.Rate))/2, float64(min(i.Rate, p.Rate))/2)
	}
	if p.GainDB != 0 {
		j.gain = math.Pow(10, p.GainDB/20)
		j.did("gain of %+.2f dB", p.GainDB)
	}
	return nil
}

// list shows one figure a channel.
func list(x []float64) string {
	shown := make([]string, len(x))
	for c, v := range x {
		shown[c] = fmt.Sprintf("%+.3g", v)
	}
	return strings.Join(shown, ", ")
}

// make gives the new recording: made as it is read, but for a change of rate.
func (j *job) make() (*samples.Recording, error) {
	if j.filter != nil {
		return j.resampled()
	}
	if j.gain != 0 {
		if err := j.view.blocks(func(planes [][]float64) { j.amplify(planes) }); err != nil {
			return nil, err
		}
		j.view.gain = j.gain
	}
	return j.r.Derive(j.view, j.view.channels, j.view.frames, j.warnings()...), nil
}

// resampled runs the samples through the filter into a new recording.
func (j *job) resampled() (made *samples.Recording, err error) {
	draft, err := j.r.Draft(j.plan.Rate, j.view.channels)
	if err != nil {
		return nil, err
	}
	err = j.filter.resample(j.view, func(planes [][]float64) error {
		j.amplify(planes)
		return draft.Append(planes)
	})
	if err != nil {
		draft.Drop()
		return nil, err
	}
	return draft.Recording(j.warnings()...)
}

// amplify applies the gain and counts what it takes beyond full scale.
func (j *job) amplify(planes [][]float64) {
	if j.gain == 0 {
		return
	}
	for _, p := range planes {
		for i, x := range p {
			p[i] = x * j.gain
			if math.Abs(p[i]) > 1 && math.Abs(x) <= 1 {
				j.over++
			}
		}
	}
}

func (j *job) warnings() []string {
	if j.over == 0 {
		return nil
	}
	return []string{fmt.Sprintf("the gain of %+.2f dB takes %d samples beyond full scale: choose a lower level", j.plan.GainDB, j.over)}
}
