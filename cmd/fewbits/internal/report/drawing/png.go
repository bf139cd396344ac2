package drawing

import (
	"bytes"
	"fmt"
	"image/color"
	"sync"

	"codeberg.org/go-fonts/liberation/liberationsansbold"
	"codeberg.org/go-fonts/liberation/liberationsansregular"
	"git.sr.ht/~sbinet/gg"
	"golang.org/x/image/font"
	"golang.org/x/image/font/opentype"
)

// zoom is the number of pixels per user unit in a PNG.
const zoom = 3

// PNG draws the figure to stand alone: light colours, key beneath.
func (f *Figure) PNG() ([]byte, error) {
	g := f.withKey()
	fonts, err := typefaces()
	if err != nil {
		return nil, err
	}
	dc := gg.NewContext(int(zoom*g.W), int(zoom*g.H))
	for i := range g.shapes {
		switch s := &g.shapes[i]; s.kind {
		case line:
			s.draw(dc)
		case text:
			s.write(dc, fonts)
		}
	}
	var out bytes.Buffer
	err = dc.EncodePNG(&out)
	return out.Bytes(), err
}

func (s *shape) draw(dc *gg.Context) {
	dc.SetColor(paint(s.ink.Role))
	pen := false
	for _, p := range s.points {
		switch {
		case p.lifts():
			pen = false
		case pen:
			dc.LineTo(zoom*p.X, zoom*p.Y)
		default:
			dc.MoveTo(zoom*p.X, zoom*p.Y)
			pen = true
		}
	}
	if s.closed {
		dc.ClosePath()
	}
	if s.ink.Width == 0 {
		dc.Fill()
		return
	}
	var dash []float64
	for _, d := range s.ink.Dash {
		dash = append(dash, zoom*d)
	}
	dc.SetDash(dash...)
	dc.SetLineWidth(zoom * s.ink.Width)
	dc.SetLineCapButt()
	dc.Stroke()
}

func (s *shape) write(dc *gg.Context, fonts map[string]font.Face) {
	dc.SetColor(paint(s.ink.Role))
	dc.SetFontFace(fonts[s.ink.Role])
	x, y := zoom*s.points[0].X, zoom*s.points[0].Y
	if s.upward {
		dc.Push()
		dc.RotateAbout(gg.Radians(-90), x, y)
		defer dc.Pop()
	}
	w, _ := dc.MeasureString(s.words)
	dc.DrawString(s.words, x-w*float64(s.anchor)/2, y)
}

// paint is a role's light colour.
func paint(role string) color.Color {
	c := color.NRGBA{A: 255}
	fmt.Sscanf(Roles[role][0], "#%02x%02x%02x", &c.R, &c.G, &c.B)
	return c
}

// typefaces makes the fonts by text role, for one picture: a face may not be
// used by two at a time.
func typefaces() (map[string]font.Face, error) {
	parsed, err := parsedFonts()
	if err != nil {
		return nil, err
	}
	out := map[string]font.Face{}
	for role, f := range map[string]*opentype.Font{"tick": parsed[0], "label": parsed[0], "head": parsed[1]} {
		if out[role], err = opentype.NewFace(f, &opentype.FaceOptions{Size: zoom * size(role), DPI: 72}); err != nil {
			return nil, fmt.Errorf("font for %s: %w", role, err)
		}
	}
	return out, nil
}

// parsedFonts are regular and bold.
var parsedFonts = sync.OnceValues(func() (out [2]*opentype.Font, err error) {
	for i, ttf := range [][]byte{liberationsansregular.TTF, liberationsansbold.TTF} {
		if out[i], err = opentype.Parse(ttf); err != nil {
			return out, fmt.Errorf("font: %w", err)
		}
	}
	return out, nil
})
