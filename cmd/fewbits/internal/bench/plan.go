package bench

import (
	"regexp"

	"fewbits/codec/family"
	"fewbits/samples/prepare"
)

// Plan is what to run.
type Plan struct {
	Settings
	Inputs  []string      // recordings: files or folders
	Train   []string      // make fitted designs on these instead
	Specs   []family.Spec // with their bits settled
	Command []string      // as typed, for the record

	Steps  prepare.Plan   // preparation, but for the level
	Level  float64        // active speech level to bring each clip to, dBov; NaN: as is
	Talker *regexp.Regexp // finds the talker in a path; nil: every clip its own

	Audio     bool // write reconstructions and errors
	FramesCSV bool
	// Place gives the path to write a file of the run to, making its folder.
	Place func(names ...string) (string, error)
	// Shown turns an input's path into the one to show; nil shows it as is.
	Shown func(path string) string

	// Trace makes MakeStaircases keep the convergence of each design.
	Trace bool

	Workers  int
	Progress func(Step)
}

// Step tells how far a pass over the recordings is.
type Step struct {
	Pass  string // "reading", "designing", "measuring", "sweeping"
	Unit  string // what is counted: "samples" (all channels) or "designs"
	Done  int64  // done in this pass
	Total int64
}
