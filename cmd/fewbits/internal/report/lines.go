package report

import (
	"math"
	"regexp"
	"slices"
	"strings"

	"fewbits/cmd/fewbits/internal/bench"
	"fewbits/cmd/fewbits/internal/report/drawing"
)

var bitsOfSpec = regexp.MustCompile(`:\d+|,levels=\d+`)

// kin is a spec without its number of bits: what the designs of one line in a
// picture share.
func kin(spec string) string { return bitsOfSpec.ReplaceAllString(spec, "") }

// series numbers the lines of all pictures, so that a design keeps its colour,
// dash and marker.
func (b *book) series(spec string) int {
	k := kin(spec)
	if n, ok := b.line[k]; ok {
		return n
	}
	return 0
}

// numberLines gives each kin its series, in order of appearance.
func (b *book) numberLines() {
	b.line = map[string]int{}
	for _, d := range b.Designs {
		if _, ok := b.line[kin(d.Spec)]; !ok {
			b.line[kin(d.Spec)] = len(b.line)
			b.kins = append(b.kins, kin(d.Spec))
		}
	}
}

// rates lists the numbers of bits of the designs, ascending.
func (b *book) rates() (out []int) {
	for _, d := range b.Designs {
		if !slices.Contains(out, d.Bits) {
			out = append(out, d.Bits)
		}
	}
	slices.Sort(out)
	return out
}

// at lists the designs of so many bits, in order asked.
func (b *book) at(bits int) (out []*bench.Design) {
	for i := range b.Designs {
		if b.Designs[i].Bits == bits {
			out = append(out, &b.Designs[i])
		}
	}
	return out
}

// mainRate is the number of bits shown first: the middle one asked for.
func (b *book) mainRate() int {
	if r := b.rates(); len(r) > 0 {
		return r[len(r)/2]
	}
	return 0
}

// key is the key of a picture that shows these designs.
func (b *book) key(designs []*bench.Design) (out []drawing.Entry) {
	for _, d := range designs {
		out = append(out, drawing.Entry{Label: d.Spec, Series: b.series(d.Spec), ID: d.Name})
	}
	return out
}

// lead2 are the two designs to set against each other first: the best and the
// next at the middle number of bits by the leading figure.
func (b *book) lead2() (first, second *bench.Design) {
	var of []*bench.Design
	for _, d := range b.ranked() {
		if d.Bits == b.mainRate() {
			of = append(of, d)
		}
	}
	switch len(of) {
	case 0:
		return nil, nil
	case 1:
		return of[0], of[0]
	}
	return of[0], of[1]
}

// floats are the numbers themselves, NaN where undefined.
func floats(v []bench.Num) []float64 {
	out := make([]float64, len(v))
	for i, x := range v {
		out[i] = nan
		if x.Defined() {
			out[i] = float64(x)
		}
	}
	return out
}

// decibels is 20 log10 of a magnitude; NaN of 0.
func decibels(v float64) float64 {
	if !(v > 0) {
		return nan
	}
	return 20 * math.Log10(v)
}

// listed joins words with commas and "and".
func listed(words []string) string {
	switch n := len(words); n {
	case 0:
		return ""
	case 1:
		return words[0]
	default:
		return strings.Join(words[:n-1], ", ") + " and " + words[n-1]
	}
}
