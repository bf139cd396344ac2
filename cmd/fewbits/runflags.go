package main

import (
	"math"
	"regexp"
	"slices"
	"strconv"
	"strings"

	"github.com/spf13/cobra"

	"fewbits/cmd/fewbits/internal/bench"
	"fewbits/codec/family"
	"fewbits/measure"
)

// runFlags are the flags of compare and demo, and in part of the commands
// that measure without writing audio.
type runFlags struct {
	out                string
	replace            bool
	designs            []string
	bits               string
	train              []string
	holdOut            bool
	noAudio, framesCSV bool
	frame, rng         float64
	limits             string
	level, channel     string
	dc                 *choice
	rate               int
	from, to           float64
	talker             string
	seed               uint64
	depth              *choice
	format, pictures   *choice
}

// register adds the flags; out is the default output folder.
func (f *runFlags) register(c *cobra.Command, out string) {
	fl := c.Flags()
	fl.StringVarP(&f.out, "out", "o", out, "output folder")
	fl.BoolVar(&f.replace, "replace", false, "replace what a former run wrote in the output folder")
	fl.BoolVar(&f.noAudio, "no-audio", false, "write no audio")
	fl.BoolVar(&f.framesCSV, "frames-csv", false, "also write frames.csv: a line per clip, channel and frame")
	f.depth = choose(c, "depth", "bit depth of the written audio", "16", "24", "32f")
	f.pictures = choose(c, "pictures", "also write each picture of the report as a file", "none", "svg", "png")
	f.registerMeasuring(c)
}

// registerMeasuring adds the flags that say what is measured and how.
func (f *runFlags) registerMeasuring(c *cobra.Command) {
	fl := c.Flags()
	fl.StringArrayVarP(&f.designs, "design", "d", nil, "a design `SPEC`; repeatable")
	fl.StringVar(&f.bits, "bits", "4,6,8", "bits of designs that name none: a list such as 4,6,8 or a range 2..12")
	fl.StringArrayVar(&f.train, "train", nil, "make fitted designs on these recordings instead; repeatable")
	fl.BoolVar(&f.holdOut, "hold-out", false, "make fitted designs without the clip they are measured on")
	fl.Float64Var(&f.frame, "frame", 0.02, "frame length in `seconds`")
	fl.Float64Var(&f.rng, "range", 30, "frames in range lie above the active speech level less this, in `dB`")
	fl.StringVar(&f.limits, "limits", "-10,35", "limits on a frame's SNR in `dB`")
	fl.StringVar(&f.level, "level", "as-is", "bring each clip's active speech level to this many `dBov`, or as-is")
	f.dc = choose(c, "dc", "what to do about a constant offset", "keep", "remove")
	fl.IntVar(&f.rate, "rate", 0, "resample to this many `Hz`; 0 keeps the rate")
	fl.StringVar(&f.channel, "channel", "each", "which channels: each, first or mix")
	fl.Float64Var(&f.from, "from", 0, "start this many `seconds` into each recording")
	fl.Float64Var(&f.to, "to", 0, "end this many `seconds` into each recording; 0 is the end")
	fl.StringVar(&f.talker, "talker", "", "regular expression that finds the talker in a path; clips of a talker are resampled together")
	fl.Uint64Var(&f.seed, "seed", 1, "seed of the bootstrap")
	f.format = choose(c, "format", "how to print the table", "table", "csv", "json")
}

// defaults are the settings of commands that take few of the flags.
func (f *runFlags) defaults() { f.registerMeasuring(&cobra.Command{}) }

// plan checks every flag and turns them into a bench.Plan.
func (f *runFlags) plan(inputs []string) (bench.Plan, error) {
	p := bench.Plan{Inputs: inputs, Train: f.train, Audio: !f.noAudio, FramesCSV: f.framesCSV}
	bits, err := parseBits(f.bits)
	if err != nil {
		return p, err
	}
	if p.Specs, err = specs(f.designs, bits); err != nil {
		return p, usageError{err}
	}
	p.Settings = bench.Settings{FrameSeconds: f.frame, RangeDB: f.rng, Depth: "16", Bits: bits, Seed: f.seed, HoldOut: f.holdOut}
	if f.depth != nil {
		p.Depth = f.depth.value
	}
	p.OpenLimitsDB = [2]float64{measure.OpenLower, measure.OpenUpper}
	if p.LimitsDB, err = parseLimits(f.limits); err != nil {
		return p, err
	}
	if err := f.checkNumbers(); err != nil {
		return p, err
	}
	if f.holdOut && len(f.train) > 0 {
		return p, usagef("--hold-out and --train: give one of them")
	}
	return p, f.prepare(&p)
}

// checkNumbers refuses what is not a sensible number; NaN fails every test.
func (f *runFlags) checkNumbers() error {
	switch {
	case !(f.frame >= 0.001 && f.frame <= 1):
		return usagef("--frame %g: want 0.001 to 1 second", f.frame)
	case !(f.rng > 0 && f.rng <= 120):
		return usagef("--range %g: want a number above 0, at most 120 dB", f.rng)
	case f.rate != 0 && (f.rate < 1000 || f.rate > 384000):
		return usagef("--rate %d: want 1000 to 384000 Hz, or 0 to keep the rate", f.rate)
	case !(f.from >= 0 && f.from <= 1e9):
		return usagef("--from %g: want 0 or more seconds", f.from)
	case !(f.to >= 0 && f.to <= 1e9) || f.to != 0 && f.to <= f.from:
		return usagef("--to %g: want seconds after --from %g, or 0 for the end", f.to, f.from)
	}
	return nil
}

// prepare fills in the steps that come before measuring.
func (f *runFlags) prepare(p *bench.Plan) error {
	p.Level = math.NaN()
	if f.level != "as-is" {
		v, err := strconv.ParseFloat(f.level, 64)
		if err != nil || !(v >= -90 && v <= 0) {
			return usagef("--level %q: want as-is or -90 to 0 dBov", f.level)
		}
		p.Level = v
	}
	switch f.channel {
	case "each", "first", "mix":
		p.Steps.Channel = f.channel
	default:
		return usagef("--channel %q: want each, first or mix", f.channel)
	}
	p.Steps.RemoveDC, p.Steps.Rate = f.dc.value == "remove", f.rate
	p.Steps.From, p.Steps.To = f.from, f.to
	if f.talker != "" {
		re, err := regexp.Compile(f.talker)
		if err != nil {
			return usagef("--talker %q: %w", f.talker, err)
		}
		p.Talker = re
	}
	return nil
}

// parseLimits reads "lower,upper" in dB.
func parseLimits(text string) ([2]float64, error) {
	lo, hi, ok := strings.Cut(text, ",")
	a, err1 := strconv.ParseFloat(lo, 64)
	b, err2 := strconv.ParseFloat(hi, 64)
	if !ok || err1 != nil || err2 != nil || !(a >= -100 && a < b && b <= 200) {
		return [2]float64{}, usagef("--limits %q: want two numbers such as -10,35, the lower first, within -100 to 200 dB", text)
	}
	return [2]float64{a, b}, nil
}

// parseBits reads a list "4,6,8", a range "2..12" or a mix of both.
func parseBits(text string) ([]int, error) {
	bad := usagef("--bits %q: want whole numbers from 1 to 16 such as 4,6,8 or a range such as 2..12", text)
	seen := map[int]bool{}
	var bits []int
	for word := range strings.SplitSeq(text, ",") {
		from, to, isRange := strings.Cut(word, "..")
		if !isRange {
			to = from
		}
		a, err1 := strconv.Atoi(from)
		b, err2 := strconv.Atoi(to)
		if err1 != nil || err2 != nil || a < 1 || b > 16 || a > b {
			return nil, bad
		}
		for n := a; n <= b; n++ {
			if !seen[n] {
				seen[n], bits = true, append(bits, n)
			}
		}
	}
	return bits, nil
}

// usualDesigns are compared when none is named.
var usualDesigns = []string{
	"uniform", "uniform,overload=optimal", "mu-law", "a-law",
	"lloyd-max,from=laplacian", "lloyd-max,from=gamma", "g711-mu", "g711-a",
}

// specs settles the designs asked for: those without bits at each of bits.
func specs(texts []string, bits []int) ([]family.Spec, error) {
	usual := len(texts) == 0
	if usual {
		texts = usualDesigns
	}
	var out []family.Spec
	seen := map[string]bool{}
	for _, text := range texts {
		s, err := family.Parse(text)
		if err != nil {
			return nil, err
		}
		if usual && s.Family.MinBits == s.Family.MaxBits && !slices.Contains(bits, s.Bits) {
			continue
		}
		for _, s := range spread(s, bits) {
			if s.err != nil {
				if usual {
					continue // out of that family's range
				}
				return nil, s.err
			}
			if !seen[s.Text] {
				seen[s.Text], out = true, append(out, s.Spec)
			}
		}
	}
	return out, nil
}

type spreadSpec struct {
	family.Spec
	err error
}

// spread gives one spec per bit rate, or the spec itself where it has its own.
func spread(s family.Spec, bits []int) []spreadSpec {
	if !s.Open() {
		return []spreadSpec{{Spec: s}}
	}
	var out []spreadSpec
	for _, n := range bits {
		at, err := s.WithBits(n)
		out = append(out, spreadSpec{at, err})
	}
	return out
}
