package bench

// idleDefinitions explain the figures of a design's idle channel, which no
// recording is needed for.
var idleDefinitions = []Definition{
	{Name: "idle_zero_dbov", Unit: "dBov", Means: "level of a design's output for an input of exactly zero (a constant: heard where it comes and goes); undefined where the output is silent"},
	{Name: "idle_one_lsb_dbov", Unit: "dBov", Means: "level of a design's output for an input that alternates between + and - one lsb of the recordings (the coarsest of theirs); undefined where the output is silent"},
}

// tryIdle enters what the design puts out on an idle channel.
func (d *made) tryIdle(surveys []*survey) {
	for _, s := range surveys {
		d.IdleLSB = max(d.IdleLSB, s.clip.LSB)
	}
	idle := d.search().Idle(d.IdleLSB)
	d.IdleZero, d.IdleOneLSB = Num(idle.Zero), Num(idle.OneLSB)
}
