package bench

import (
	"math"

	"fewbits/measure"
)

// collect turns tallies into figures: per clip, pooled, and the means over
// clips, then settles which figure leads and who wins.
func (e *engine) collect(r *Results, surveys []*survey, outcomes []*outcome) {
	for i := range surveys {
		for d := range r.Designs {
			t := &outcomes[i].tallies[d]
			r.Results = append(r.Results, Result{
				Clip: surveys[i].clip.File, Design: r.Designs[d].Spec,
				Lossless: measure.Lossless(t), Figures: figures(t),
			})
		}
	}
	for d := range r.Designs {
		r.Pooled = append(r.Pooled, pooled(r, outcomes, d))
	}
	r.Leading, r.LeadingWhy = leading(r.Pooled, r.Settings.LimitsDB[1])
	e.intervals(r, outcomes)
	r.Verdicts = verdicts(r)
	r.Savings = savings(r)
	e.footnotes(r)
}

// figures evaluates the register.
func figures(t *measure.Tally) Figures {
	f := Figures{}
	for _, m := range measure.Register {
		f[m.Name] = Num(m.Of(t))
	}
	return f
}

// pooled adds one design's tallies up over clips, in order.
func pooled(r *Results, outcomes []*outcome, d int) Pooled {
	var sum measure.Tally
	for _, o := range outcomes {
		sum.Merge(&o.tallies[d])
	}
	undefined := [2]Num{Num(math.NaN()), Num(math.NaN())}
	return Pooled{
		Design: r.Designs[d].Spec, Lossless: measure.Lossless(&sum), Figures: figures(&sum),
		ClipMeans: clipMeans(r, d, len(outcomes)), Interval: undefined, Behind: undefined,
	}
}

// clipMeans averages each figure over the clips where it is defined.
func clipMeans(r *Results, d, clips int) Figures {
	out := Figures{}
	for _, m := range measure.Register {
		var sum float64
		n := 0
		for c := range clips {
			if v := r.Results[c*len(r.Designs)+d].Figures[m.Name]; v.Defined() {
				sum += float64(v)
				n++
			}
		}
		out[m.Name] = Num(sum / float64(n))
	}
	return out
}

// footnotes are what a reader must know about the whole run.
func (e *engine) footnotes(r *Results) {
	var frames, used int64
	for _, c := range r.Clips {
		frames += c.Frames
		used += c.FramesInRange
	}
	if frames > 0 && float64(used) > 0.95*float64(frames) {
		r.Warnings = append(r.Warnings,
			"more than 95 % of the frames are in range, so segsnr_db is almost segsnr_all_db: the recordings have hardly any pauses, or loud noise in them")
	}
	if used == 0 {
		r.Warnings = append(r.Warnings,
			"no frame is in range: without an active speech level (silence, too faint or too short) segmental figures are undefined")
	}
}
