package measure

var overloadFraction = Measure{
	Name: "overload_fraction", Unit: "share",
	Means: "share of samples strictly outside the design's overload bounds",
	Of:    func(t *Tally) float64 { return share(t.Overloaded, t.Samples) },
}

var granularMSE = Measure{
	Name: "granular_mse", Unit: "FS^2",
	Means: "part of mse from samples within the overload bounds, divided by all samples",
	Of:    func(t *Tally) float64 { return t.GranularErr / float64(t.Samples) },
}

var overloadMSE = Measure{
	Name: "overload_mse", Unit: "FS^2",
	Means: "part of mse from overloaded samples, divided by all samples",
	Of:    func(t *Tally) float64 { return t.OverloadErr / float64(t.Samples) },
}
