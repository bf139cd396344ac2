package report

import (
	"bytes"
	"crypto/sha256"
	_ "embed"
	"encoding/base64"
	"fmt"
	"html/template"
	"io"
	"slices"
	"strings"

	"fewbits/cmd/fewbits/internal/bench"
	"fewbits/cmd/fewbits/internal/report/drawing"
)

var (
	//go:embed page/page.html
	pageHTML string
	//go:embed page/page.css
	pageCSS string
	//go:embed page/page.js
	pageJS string

	page = template.Must(template.New("page").Funcs(template.FuncMap{"soft": soft}).Parse(pageHTML))
)

// Options say what the page stands beside.
type Options struct {
	Audio bool // audio/<clip>/<design>.wav and .error.wav were written
}

// HTML writes the report: one self-contained page that opens from the disk and
// asks for nothing but the audio beside it.
func HTML(w io.Writer, r *bench.Results, t *bench.Traces, o Options) error {
	if t == nil {
		t = &bench.Traces{}
	}
	if err := check(r, t); err != nil {
		return err
	}
	p, err := compose(open(r), t, o)
	if err != nil {
		return err
	}
	var out bytes.Buffer
	if err := page.Execute(&out, p); err != nil {
		return fmt.Errorf("report page: %w", err)
	}
	_, err = out.WriteTo(w)
	return err
}

// content is what the template shows.
type content struct {
	B                                       *book
	Policy                                  string
	Style, Script                           template.HTML
	Title, Facts, Why                       string
	Parts                                   []section
	Answers                                 []answer
	Cautions                                []string
	Sets                                    map[string]*set
	Time                                    *shown
	Tracks                                  []track
	low, top                                float64 // of the SNR axis over time
	First, Second                           int
	Audio                                   bool
	FirstAudio                              string
	Models, Classes, Matrix, Fits, Findings *gridTable
	Idle                                    *gridTable
	IdleSays                                []string
	Pooled                                  []gridTable
	Designs, Clips                          gridTable
	Figures                                 []string
	Command, Checksums                      string
	Settings                                []bench.Definition
	Data                                    template.JS
}

type section struct{ ID, Short string }

func compose(b *book, t *bench.Traces, o Options) (*content, error) {
	style, script := "\n"+roleCSS()+pageCSS, "\n"+pageJS
	p := &content{
		B: b, Policy: policy(style, script), Style: template.HTML("<style>" + style + "</style>"),
		Script: template.HTML("<script>" + script + "</script>"), Title: title(b), Facts: facts(b),
		Why: sentence(b.LeadingWhy), Answers: b.answers(), Cautions: b.cautions(), Audio: o.Audio,
		Sets: sets(b, draw(b, t)), Pooled: b.pooledTables(), Designs: b.designsTable(), Clips: b.clipsTable(),
		Figures: measured(b.Results), Command: commandLine(b.Command), Checksums: checksums(b), Settings: settings(b),
	}
	p.Models = unlessEmpty(modelsTable(t))
	p.Classes = unlessEmpty(classesTable(b, t))
	p.Idle, p.IdleSays = unlessEmpty(b.idleChannelTable()), b.idleSentences()
	p.Fits = unlessEmpty(b.fitsTable())
	p.Findings = unlessEmpty(b.findingsTable())
	if len(b.Designs) > 0 {
		p.Matrix = unlessEmpty(b.matrix(b.Leading))
	}
	p.addTime(t)
	p.Parts = p.parts()
	var err error
	p.Data, err = p.data()
	return p, err
}

// unlessEmpty is nil for a table without rows.
func unlessEmpty(g gridTable) *gridTable {
	if len(g.Rows) == 0 {
		return nil
	}
	return &g
}

// addTime draws the first clip; the page's script draws the others in its
// place.
func (p *content) addTime(t *bench.Traces) {
	first, second := p.B.lead2()
	if first == nil || len(t.Clips) == 0 {
		return
	}
	p.Tracks = tracks(p.B, t)
	p.low, p.top = framesReach(t)
	at := func(d *bench.Design) int {
		return slices.IndexFunc(p.B.Designs, func(x bench.Design) bool { return x.Spec == d.Spec })
	}
	p.First, p.Second = at(first), at(second)
	pic := overTime(p.B, t, &t.Clips[0], first, second)
	pic.Attrs = []string{"id", "time-picture"}
	p.Time = show(pic, true)
	p.FirstAudio = audioPath(p.Tracks[0].Name, first.Name)
}

func (p *content) HasLevels() bool {
	return p.Sets["sweep"] != nil || p.Sets["sine"] != nil || p.Sets["noise"] != nil
}

// parts lists the sections that are there.
func (p *content) parts() []section {
	all := []struct {
		section
		there bool
	}{
		{section{"answer", "answer"}, true}, {section{"lead", "lead"}, p.Sets["gaps"] != nil}, {section{"tradeoff", "bits"}, p.Sets["tradeoff"] != nil},
		{section{"level", "level"}, p.HasLevels()}, {section{"signal", "amplitudes"}, p.Sets["signal"] != nil},
		{section{"stairs", "staircases"}, p.Sets["stairs"] != nil}, {section{"time", "over time"}, p.Time != nil},
		{section{"frames", "frames"}, p.Sets["spread"] != nil}, {section{"idle", "idle"}, p.Idle != nil},
		{section{"numbers", "numbers"}, true},
		{section{"repeat", "repeat"}, true},
	}
	var out []section
	for _, s := range all {
		if s.there {
			out = append(out, s.section)
		}
	}
	return out
}

// policy allows this style and this script by their hashes, sound from beside
// the page, and nothing else.
func policy(style, script string) string {
	hash := func(s string) string {
		sum := sha256.Sum256([]byte(s))
		return "'sha256-" + base64.StdEncoding.EncodeToString(sum[:]) + "'"
	}
	return "default-src 'none'; style-src " + hash(style) + "; script-src " + hash(script) +
		"; media-src 'self' file:; base-uri 'none'; form-action 'none'"
}

// roleCSS gives the pictures' roles their colours, light and dark; print is
// light.
func roleCSS() string {
	names := make([]string, 0, len(drawing.Roles))
	for name := range drawing.Roles {
		names = append(names, name)
	}
	slices.Sort(names)
	var light, dark, classes strings.Builder
	for _, name := range names {
		fmt.Fprintf(&light, "--%s:%s;", name, drawing.Roles[name][0])
		fmt.Fprintf(&dark, "--%s:%s;", name, drawing.Roles[name][1])
		fmt.Fprintf(&classes, ".%s{--c:var(--%s)}", name, name)
	}
	return ":root{color-scheme:light dark;--ground:#f6f7f8;" + light.String() + "}\n" +
		"@media screen and (prefers-color-scheme:dark){:root{--ground:#0b0f13;" + dark.String() + "}}\n" + classes.String() + "\n"
}

// soft lets a name break after its punctuation.
func soft(name string) template.HTML {
	return template.HTML(breaks.Replace(template.HTMLEscapeString(name)))
}

var breaks = strings.NewReplacer("_", "_<wbr>", ",", ",<wbr>", ":", ":<wbr>", "=", "=<wbr>", "/", "/<wbr>")
