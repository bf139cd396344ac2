package drawing

import (
	"bytes"
	"encoding/xml"
	"fmt"
	"image/png"
	"io"
	"math"
	"strings"
	"testing"

	"pgregory.net/rapid"
)

// luminance is the relative luminance of WCAG 2.1.
func luminance(hex string) float64 {
	var c [3]int
	fmt.Sscanf(hex, "#%02x%02x%02x", &c[0], &c[1], &c[2])
	weights := [3]float64{0.2126, 0.7152, 0.0722}
	sum := 0.0
	for i, v := range c {
		x := float64(v) / 255
		if x <= 0.03928 {
			x /= 12.92
		} else {
			x = math.Pow((x+0.055)/1.055, 2.4)
		}
		sum += weights[i] * x
	}
	return sum
}

// TestContrast: lines have 3 : 1 and words 4.5 : 1 against their background
// (WCAG 2.1, success criteria 1.4.11 and 1.4.3).
func TestContrast(t *testing.T) {
	for role, shades := range Roles {
		want := 0.0
		switch {
		case role[0] == 's' && len(role) == 2:
			want = 3
		case role == "tick" || role == "label" || role == "head" || role == "ink" || role == "soft":
			want = 4.5
		}
		for i, shade := range shades {
			a, b := luminance(shade), luminance(Roles["paper"][i])
			if got := (math.Max(a, b) + 0.05) / (math.Min(a, b) + 0.05); got < want {
				t.Errorf("%s %s: %.2f to 1, want %v", role, shade, got, want)
			}
		}
	}
}

// TestSeriesDiffer: up to 16 series no two share hue, dash and mark.
func TestSeriesDiffer(t *testing.T) {
	seen := map[string]int{}
	for i := range 16 {
		look := fmt.Sprint(Role(i), shift(i))
		if j, ok := seen[look]; ok {
			t.Errorf("series %d looks like %d", i, j)
		}
		seen[look] = i
	}
}

func TestTicks(t *testing.T) {
	for _, c := range []struct {
		lo, hi float64
		n      int
		want   string
	}{
		{0, 40, 8, "0 5 10 15 20 25 30 35 40"},
		{-60, 10, 8, "−60 −50 −40 −30 −20 −10 0 10"},
		{0, 0.9, 5, "0.0 0.2 0.4 0.6 0.8"},
		{3, 9, 9, "3 4 5 6 7 8 9"},
		{1, 1, 5, ""},
	} {
		var got []string
		for _, tick := range Ticks(c.lo, c.hi, c.n) {
			got = append(got, tick.Label)
		}
		if strings.Join(got, " ") != c.want {
			t.Errorf("%v to %v: %q, want %q", c.lo, c.hi, got, c.want)
		}
	}
}

// TestTicksWithin: ticks lie within the axis and are at most one more than
// asked for.
func TestTicksWithin(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		lo := rapid.Float64Range(-1e4, 1e4).Draw(t, "lo")
		hi := lo + rapid.Float64Range(1e-3, 1e4).Draw(t, "span")
		n := rapid.IntRange(2, 12).Draw(t, "n")
		ticks := Ticks(lo, hi, n)
		if len(ticks) > n+1 {
			t.Fatalf("%d ticks", len(ticks))
		}
		for _, k := range ticks {
			if k.At < lo-1e-6*(hi-lo) || k.At > hi+1e-6*(hi-lo) {
				t.Fatalf("%v outside %v to %v", k.At, lo, hi)
			}
		}
	})
}

// TestCurveIsCut: a line that leaves the axes ends where it crosses their edge.
func TestCurveIsCut(t *testing.T) {
	f := &Figure{W: 100, H: 100}
	p := Panel{F: f, X: Scale{0, 4, 0, 40}, Y: Scale{0, 10, 100, 0}}
	p.Curve(Ink{Role: "s0", Width: 1}, []float64{0, 1, 2, 3, 4}, []float64{5, 15, 5, math.NaN(), 5})
	if got, want := f.shapes[0].d(), "M0 50L5 0M15 0L20 50M40 50"; got != want {
		t.Errorf("%s, want %s", got, want)
	}
}

func sample() *Figure {
	f := &Figure{Name: "x", Title: `a < b & "c"`, Text: "words \x00", W: 200, H: 100, Key: []Entry{{"one", 0, "a"}, {"two, longer", 9, "b"}}}
	f.Group("data-line", "a")
	f.Line(Stroke(1), Point{0, 0}, Point{10.04, 20.06}, Up, Point{50, 50}, Point{60, 60})
	f.Marker(0, 50, 50, "data-x", "1")
	f.Ungroup()
	f.Rect(Ink{Role: "fill"}, 1, 2, 3, 4)
	f.Words("tick", 5, 5, End, "<&>")
	f.Upward("label", 5, 50, "up")
	return f
}

// TestSVGParses: both forms are XML, and the one that stands alone names its
// space and has a key.
func TestSVGParses(t *testing.T) {
	for _, text := range []string{sample().SVG(), sample().File(), Swatch(3).Inline()} {
		d := xml.NewDecoder(strings.NewReader(text))
		for {
			if _, err := d.Token(); err == io.EOF {
				break
			} else if err != nil {
				t.Fatalf("%v in %s", err, text)
			}
		}
	}
	file := sample().File()
	if !strings.Contains(file, `xmlns="http://www.w3.org/2000/svg"`) || !strings.Contains(file, "two, longer") {
		t.Error(file)
	}
	if !strings.Contains(sample().SVG(), `d="M0 0L10 20.1M50 50L60 60"`) {
		t.Error(sample().SVG())
	}
}

// TestPNG: the picture has the figure's size and its colours.
func TestPNG(t *testing.T) {
	data, err := sample().PNG()
	if err != nil {
		t.Fatal(err)
	}
	im, err := png.Decode(bytes.NewReader(data))
	if err != nil {
		t.Fatal(err)
	}
	if w := im.Bounds().Dx(); w != 200*zoom {
		t.Errorf("%d wide", w)
	}
	want := paint("s0")
	r, g, b, _ := want.RGBA()
	found := false
	for y := range im.Bounds().Dy() {
		for x := range im.Bounds().Dx() {
			r1, g1, b1, _ := im.At(x, y).RGBA()
			found = found || r1 == r && g1 == g && b1 == b
		}
	}
	if !found {
		t.Error("the mark is not there")
	}
}
