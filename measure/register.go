package measure

// Register lists every figure in the order of the tables. A new one is a file
// with a Measure value and a line here.
var Register = []Measure{
	mse,
	snr,
	segSNR,
	segSNRAll,
	segSNROpen,
	framesUsed,
	framesOutOfRange,
	framesLeftOut,
	atUpperLimit,
	atLowerLimit,
	atUpperLimitAll,
	atLowerLimitAll,
	atUpperLimitOpen,
	atLowerLimitOpen,
	floored,
	overloadFraction,
	granularMSE,
	overloadMSE,
	entropyBits,
	quietSNR,
	idleLevel,
	idleGain,
	toggleShare,
	matchGain,
}

// ByName finds a measure of the Register; ok is false where there is none.
func ByName(name string) (m Measure, ok bool) {
	for _, m := range Register {
		if m.Name == name {
			return m, true
		}
	}
	return Measure{}, false
}
