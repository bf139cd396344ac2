package report

import (
	"html/template"
	"strconv"
	"strings"

	"fewbits/cmd/fewbits/internal/report/drawing"
)

// set is a place of the page where pictures take turns.
type set struct {
	Name     string
	Switches []switcher
	Plates   []*shown
}

type switcher struct {
	Legend  string
	Choices []choice
}

type choice struct {
	Value, Label string
	On           bool
}

// shown is a picture as the template takes it.
type shown struct {
	Title, Caption, Words, Turn string
	On                          bool
	Svg                         template.HTML
	Keys                        []keyEntry
}

type keyEntry struct {
	ID, Label string
	Swatch    template.HTML
}

// show turns a picture into what the template takes; on: at first visible.
func show(p plate, on bool) *shown {
	s := &shown{Title: p.Title, Caption: p.Caption, Words: p.Text, Turn: strings.Join(p.Turn, " "), On: on, Svg: template.HTML(p.SVG())}
	for _, e := range p.Key {
		s.Keys = append(s.Keys, keyEntry{e.ID, e.Label, template.HTML(drawing.Swatch(e.Series).Inline())})
	}
	return s
}

// sets arranges the album; a set without pictures is absent.
func sets(b *book, a album) map[string]*set {
	out := map[string]*set{}
	if len(a.Tradeoff) > 0 {
		out["tradeoff"] = tradeoffSet(b, a.Tradeoff)
	}
	for name, plates := range map[string][]plate{
		"gaps": a.Gaps, "sweep": a.Sweep, "sine": a.Sine, "noise": a.Noise, "signal": a.Signal, "stairs": a.Stairs, "spread": a.Spread,
	} {
		if len(plates) > 0 {
			out[name] = byBitsSet(b, name, plates)
		}
	}
	return out
}

func tradeoffSet(b *book, plates []plate) *set {
	s := &set{Name: "tradeoff", Switches: []switcher{{Legend: "Quality"}, {Legend: "Cost"}}}
	first := b.Leading
	for _, q := range qualities {
		label := map[string]string{segSNR: "segmental SNR", snr: "SNR", openSNR: "open segmental SNR"}[q]
		s.Switches[0].Choices = append(s.Switches[0].Choices, choice{q, label, q == first})
	}
	for i, c := range costs {
		s.Switches[1].Choices = append(s.Switches[1].Choices, choice{c, []string{"bits", "entropy"}[i], i == 0})
	}
	for _, p := range plates {
		s.Plates = append(s.Plates, show(p, p.Turn[0] == first && p.Turn[1] == costs[0]))
	}
	return s
}

// byBitsSet switches by number of bits, the main one first.
func byBitsSet(b *book, name string, plates []plate) *set {
	s := &set{Name: name}
	first := 0
	for i, p := range plates {
		if len(p.Turn) > 0 && p.Turn[0] == strconv.Itoa(b.mainRate()) {
			first = i
		}
	}
	sw := switcher{Legend: "Bits"}
	for i, p := range plates {
		s.Plates = append(s.Plates, show(p, i == first))
		if len(p.Turn) > 0 {
			sw.Choices = append(sw.Choices, choice{p.Turn[0], p.Turn[0], i == first})
		}
	}
	if len(sw.Choices) > 0 {
		s.Switches = []switcher{sw}
	}
	return s
}
