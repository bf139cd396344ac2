package family

// Register lists every family. A new one is a new file and a line here.
var Register = []Family{
	uniform,
	muLaw,
	aLaw,
	g711Mu,
	g711A,
	lloydMax,
	compander,
}

// Names lists the families in order.
func Names() []string {
	var names []string
	for _, f := range Register {
		names = append(names, f.Name)
	}
	return names
}
