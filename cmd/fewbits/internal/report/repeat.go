package report

import (
	"encoding/json"
	"fmt"
	"html/template"
	"net/url"
	"regexp"
	"strings"

	"fewbits/cmd/fewbits/internal/bench"
)

func title(b *book) string {
	return fmt.Sprintf("%s on %s", plural(len(b.Designs), "quantizer", "quantizers"), plural(len(b.Clips), "recording", "recordings"))
}

// facts is the line under the title.
func facts(b *book) string {
	seconds, rates := 0.0, map[int]bool{}
	var kHz []string
	for _, c := range b.Clips {
		seconds += c.Seconds
		if !rates[c.RateHz] {
			rates[c.RateHz] = true
			kHz = append(kHz, trim(float64(c.RateHz)/1000))
		}
	}
	out := []string{lasting(seconds)}
	if len(kHz) > 0 {
		out = append(out, listed(kHz)+" kHz")
	}
	if b.Leading != "" {
		out = append(out, b.Leading+" decides")
	}
	if n := len(b.Refused); n > 0 {
		out = append(out, plural(n, "recording refused", "recordings refused"))
	}
	return strings.Join(out, " · ")
}

func lasting(seconds float64) string {
	switch {
	case seconds < 120:
		return fixed(bench.Num(seconds), 1) + " s"
	case seconds < 7200:
		return fixed(bench.Num(seconds/60), 1) + " min"
	}
	return fixed(bench.Num(seconds/3600), 1) + " h"
}

var tame = regexp.MustCompile(`^[A-Za-z0-9_@%+=:,./-]+$`)

// commandLine quotes the words for a POSIX shell.
func commandLine(words []string) string {
	var out []string
	for _, w := range words {
		if !tame.MatchString(w) {
			w = "'" + strings.ReplaceAll(w, "'", `'\''`) + "'"
		}
		out = append(out, w)
	}
	return strings.Join(out, " ")
}

// checksums has a line per recording in the form that checksum programs read
// back.
func checksums(b *book) string {
	var out strings.Builder
	for _, c := range b.Clips {
		fmt.Fprintf(&out, "%s  %s\n", c.SHA256, c.File)
	}
	return out.String()
}

func settings(b *book) []bench.Definition {
	s := b.Settings
	orNone := func(list []string) string {
		if len(list) == 0 {
			return "none"
		}
		return strings.Join(list, ", ")
	}
	holdOut := "no"
	if s.HoldOut {
		holdOut = "yes: each fitted design was made without the clip it is measured on"
	}
	return []bench.Definition{
		{Name: "frame", Means: trim(1000*s.FrameSeconds) + " ms"},
		{Name: "range", Means: "frames in range lie above the active speech level less " + trim(s.RangeDB) + " dB"},
		{Name: "limits", Means: fmt.Sprintf("%s to %s dB (segsnr_db, segsnr_all_db), %s to %s dB (segsnr_open_db)",
			trim(s.LimitsDB[0]), trim(s.LimitsDB[1]), trim(s.OpenLimitsDB[0]), trim(s.OpenLimitsDB[1]))},
		{Name: "preparation", Means: orNone(s.Preparation)},
		{Name: "trained on", Means: orNone(s.TrainedOn)},
		{Name: "hold-out", Means: holdOut},
		{Name: "bits", Means: strings.Trim(fmt.Sprint(s.Bits), "[]")},
		{Name: "depth of written audio", Means: s.Depth},
		{Name: "seed", Means: fmt.Sprint(s.Seed)},
	}
}

func audioPath(clip, design string) string {
	return "audio/" + url.PathEscape(clip) + "/" + url.PathEscape(design) + ".wav"
}

// data is what the page's script reads.
func (p *content) data() (template.JS, error) {
	type design struct {
		Spec string `json:"spec"`
		Name string `json:"name"`
	}
	type place struct {
		Left   float64    `json:"left"`
		Right  float64    `json:"right"`
		Wave   [4]float64 `json:"wave"` // foot, top, lowest, highest value
		Level  [4]float64 `json:"level"`
		Frames [4]float64 `json:"frames"`
	}
	out := struct {
		Clips   []string            `json:"clips"`
		Designs []design            `json:"designs"`
		Figures map[string][]digits `json:"figures"`
		Tracks  []track             `json:"tracks"`
		Place   place               `json:"place"`
	}{Figures: map[string][]digits{}, Tracks: p.Tracks}
	for _, c := range p.B.Clips {
		out.Clips = append(out.Clips, c.File)
	}
	for _, d := range p.B.Designs {
		out.Designs = append(out.Designs, design{d.Spec, d.Name})
	}
	for _, name := range p.Figures {
		for _, v := range p.B.figureCells(name) {
			out.Figures[name] = append(out.Figures[name], digits(v))
		}
	}
	out.Place = place{
		timeLeft, timeRight, [4]float64{waveFoot, waveTop, -1, 1},
		[4]float64{levelFoot, levelTop, levelMin, levelMax}, [4]float64{framesFoot, framesTop, p.low, p.top},
	}
	text, err := json.Marshal(out)
	return template.JS(text), err
}

// digits is a number written with five significant digits, null where
// undefined.
type digits bench.Num

// MarshalJSON implements json.Marshaler.
func (d digits) MarshalJSON() ([]byte, error) {
	if v := bench.Num(d); v.Defined() {
		return []byte(`"` + five(v) + `"`), nil
	}
	return []byte("null"), nil
}
