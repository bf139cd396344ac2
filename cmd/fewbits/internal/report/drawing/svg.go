package drawing

import (
	"encoding/xml"
	"math"
	"strconv"
	"strings"
)

// Fonts that a reader's system may have, best first.
const Fonts = "system-ui, 'Segoe UI', Roboto, 'Liberation Sans', Arial, sans-serif"

// SVG writes the figure to stand in a page: colours and sizes are left to the
// page's style by class (the role; l where stroked, f where filled).
func (f *Figure) SVG() string {
	w := &writer{page: true}
	w.open("svg", append([]string{
		"class", "pic", "viewBox", "0 0 " + num(f.W) + " " + num(f.H), "role", "img",
		"aria-labelledby", "t-" + f.Name + " x-" + f.Name,
	}, f.Attrs...)...)
	w.element("title", f.Title, "id", "t-"+f.Name)
	w.element("desc", f.Text, "id", "x-"+f.Name)
	w.shapes(f.shapes)
	w.close("svg")
	return w.String()
}

// Inline writes a small decoration that needs no alternative.
func (f *Figure) Inline() string {
	w := &writer{page: true}
	w.open("svg", "class", "swatch", "viewBox", "0 0 "+num(f.W)+" "+num(f.H), "aria-hidden", "true")
	w.shapes(f.shapes)
	w.close("svg")
	return w.String()
}

// File writes the figure to stand alone: light colours, key beneath.
func (f *Figure) File() string {
	g := f.withKey()
	w := &writer{}
	w.WriteString("<?xml version=\"1.0\" encoding=\"UTF-8\"?>\n")
	w.open("svg", "xmlns", "http://www.w3.org/2000/svg", "viewBox", "0 0 "+num(g.W)+" "+num(g.H),
		"width", num(g.W), "height", num(g.H), "font-family", Fonts, "role", "img")
	w.element("title", g.Title)
	w.element("desc", g.Text)
	w.shapes(g.shapes)
	w.close("svg")
	w.WriteString("\n")
	return w.String()
}

type writer struct {
	strings.Builder
	page bool
}

func (w *writer) open(name string, attrs ...string) {
	w.start(name, attrs)
	w.WriteString(">")
}

func (w *writer) start(name string, attrs []string) {
	w.WriteString("<" + name)
	for i := 0; i+1 < len(attrs); i += 2 {
		w.WriteString(" " + attrs[i] + `="`)
		w.escape(attrs[i+1])
		w.WriteString(`"`)
	}
}

func (w *writer) escape(s string) { xml.EscapeText(&w.Builder, []byte(s)) }

func (w *writer) close(name string) { w.WriteString("</" + name + ">") }

func (w *writer) element(name, content string, attrs ...string) {
	w.open(name, attrs...)
	w.escape(content)
	w.close(name)
}

func (w *writer) shapes(list []shape) {
	for i := range list {
		switch s := &list[i]; s.kind {
		case group:
			w.open("g", s.attrs...)
		case groupEnd:
			w.close("g")
		case text:
			w.words(s)
		default:
			w.path(s)
		}
	}
}

func (w *writer) path(s *shape) {
	d := s.d()
	if d == "" {
		return
	}
	attrs := append(w.paint(s), "d", d)
	w.start("path", append(attrs, s.attrs...))
	w.WriteString("/>")
}

// paint gives class or colours.
func (w *writer) paint(s *shape) []string {
	c := Roles[s.ink.Role][0]
	var out []string
	switch {
	case w.page && s.ink.Width > 0:
		out = []string{"class", s.ink.Role + " l"}
	case w.page:
		return []string{"class", s.ink.Role + " f"}
	case s.ink.Width > 0:
		out = []string{"fill", "none", "stroke", c, "stroke-linejoin", "round"}
	default:
		return []string{"fill", c}
	}
	out = append(out, "stroke-width", num(s.ink.Width))
	if len(s.ink.Dash) > 0 {
		var d []string
		for _, v := range s.ink.Dash {
			d = append(d, num(v))
		}
		out = append(out, "stroke-dasharray", strings.Join(d, " "))
	}
	return out
}

func (w *writer) words(s *shape) {
	attrs := []string{"class", s.ink.Role}
	if !w.page {
		attrs = []string{"fill", Roles[s.ink.Role][0], "font-size", num(size(s.ink.Role))}
		if s.ink.Role == "head" {
			attrs = append(attrs, "font-weight", "600")
		}
	}
	attrs = append(attrs, "x", num(s.points[0].X), "y", num(s.points[0].Y))
	if s.anchor != Start {
		attrs = append(attrs, "text-anchor", [...]string{"start", "middle", "end"}[s.anchor])
	}
	if s.upward {
		attrs = append(attrs, "transform", "rotate(-90 "+num(s.points[0].X)+" "+num(s.points[0].Y)+")")
	}
	w.element("text", s.words, append(attrs, s.attrs...)...)
}

// size is the height of a text's letters in user units.
func size(role string) float64 {
	if role == "tick" {
		return 11
	}
	return 12
}

// d is the path's outline; points at the same place to a tenth are drawn once.
func (s *shape) d() string {
	var b strings.Builder
	letter, last := "M", ""
	for _, p := range s.points {
		if p.lifts() {
			letter, last = "M", ""
			continue
		}
		at := num(p.X) + " " + num(p.Y)
		if at == last {
			continue
		}
		b.WriteString(letter + at)
		letter, last = "L", at
	}
	if s.closed && b.Len() > 0 {
		b.WriteString("Z")
	}
	return b.String()
}

// num prints to a tenth of a unit.
func num(v float64) string {
	s := strconv.FormatFloat(math.Round(10*v)/10, 'f', -1, 64)
	if s == "-0" {
		return "0"
	}
	return s
}
