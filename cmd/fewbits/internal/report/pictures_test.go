package report

import (
	"encoding/xml"
	"errors"
	"io"
	"math"
	"os"
	"path/filepath"
	"regexp"
	"strconv"
	"strings"
	"testing"

	"codeberg.org/go-fonts/liberation/liberationsansbold"
	"codeberg.org/go-fonts/liberation/liberationsansregular"
	"golang.org/x/image/font/sfnt"
	"pgregory.net/rapid"

	"fewbits/cmd/fewbits/internal/bench"
)

var svgOf = regexp.MustCompile(`(?s)<svg.*?</svg>`)

var picMark = regexp.MustCompile(`data-design="([^"]+)" data-x="([^"]+)" data-y="([^"]+)"`)

// TestPicturesParse: every picture is XML, in the page with a text alternative
// that is there.
func TestPicturesParse(t *testing.T) {
	r, traces := synthetic(3, 60)
	text := pageOf(t, r, traces)
	list := svgOf.FindAllString(text, -1)
	named := 0
	for _, s := range list {
		if err := parses(s); err != nil {
			t.Errorf("%v in %.200s", err, s)
		}
		if strings.Contains(s, `role="img"`) {
			named++
			ids := regexp.MustCompile(`aria-labelledby="(\S+) (\S+)"`).FindStringSubmatch(s)
			if ids == nil || !regexp.MustCompile(`<title id="`+regexp.QuoteMeta(ids[1])+`">[^<]`).MatchString(s) ||
				!regexp.MustCompile(`<desc id="`+regexp.QuoteMeta(ids[2])+`">[^<]{20}`).MatchString(s) {
				t.Errorf("no text alternative: %.300s", s)
			}
		}
	}
	if named < 6+3+1+1+3+3+1 {
		t.Errorf("only %d pictures", named)
	}
	for _, p := range draw(open(r), traces).all() {
		if err := parses(p.File()); err != nil {
			t.Errorf("%s: %v", p.Name, err)
		}
	}
}

// TestPictures: a file per picture and per clip, in both forms.
func TestPictures(t *testing.T) {
	r, traces := synthetic(2, 20)
	for _, format := range []string{"svg", "png"} {
		if format == "png" && testing.Short() {
			continue
		}
		dir := t.TempDir()
		if err := Pictures(dir, r, traces, format); err != nil {
			t.Fatal(err)
		}
		for _, name := range []string{"tradeoff-segsnr-open-bits", "tradeoff-snr-entropy", "level-4", "sine-8", "amplitudes", "staircases-8", "frames-6", "time-call-02"} {
			if info, err := os.Stat(filepath.Join(dir, name+"."+format)); err != nil || info.Size() < 2000 {
				t.Errorf("%s: %v", name, err)
			}
		}
	}
	if err := Pictures(t.TempDir(), r, traces, "gif"); err == nil {
		t.Error("gif was taken")
	}
}

// TestPicturesOfAnything: whatever is undefined or beside all bounds, the
// pictures hold.
func TestPicturesOfAnything(t *testing.T) {
	rapid.Check(t, func(rt *rapid.T) {
		r, traces := synthetic(1, 3)
		r.Designs = r.Designs[4:7]
		odd := rapid.SampledFrom([]float64{math.NaN(), math.Inf(1), math.Inf(-1), 0, -1e9, 1e9})
		for i := range r.Pooled {
			for _, name := range append(qualities, entropy) {
				if rapid.Bool().Draw(rt, "spoil") {
					r.Pooled[i].Figures[name] = bench.Num(odd.Draw(rt, name))
				}
			}
			r.Pooled[i].Interval[0] = bench.Num(odd.Draw(rt, "interval"))
		}
		for i := range traces.Sweep {
			traces.Sweep[i].SNRDB[3] = bench.Num(odd.Draw(rt, "sweep"))
		}
		for i := range traces.Spread {
			traces.Spread[i].Quantiles[2] = bench.Num(odd.Draw(rt, "quantile"))
		}
		traces.Models[0].Density[2] = bench.Num(odd.Draw(rt, "density"))
		traces.Clips[0].LevelDBov[1] = bench.Num(odd.Draw(rt, "level"))
		b := open(r)
		list := append(draw(b, traces).all(), overTime(b, traces, &traces.Clips[0], &r.Designs[0], &r.Designs[1]))
		for _, p := range list {
			if err := parses(p.SVG()); err != nil {
				rt.Fatalf("%s: %v", p.Name, err)
			}
		}
	})
}

// parses checks that a picture is well-formed XML without broken numbers.
func parses(text string) error {
	d := xml.NewDecoder(strings.NewReader(text))
	for {
		token, err := d.Token()
		if errors.Is(err, io.EOF) {
			return nil
		}
		if err != nil {
			return err
		}
		if e, ok := token.(xml.StartElement); ok {
			for _, a := range e.Attr {
				if !strings.HasPrefix(a.Name.Local, "data-") && (strings.Contains(a.Value, "NaN") || strings.Contains(a.Value, "Inf")) {
					return errors.New(a.Name.Local + "=" + a.Value)
				}
			}
		}
	}
}

// TestMarksEqualResults: every mark of the trade-off carries its design's
// figures.
func TestMarksEqualResults(t *testing.T) {
	r, traces := synthetic(5, 50)
	b := open(r)
	for _, p := range tradeoffs(b, traces) {
		marks := picMark.FindAllStringSubmatch(p.SVG(), -1)
		if len(marks) != len(r.Designs) {
			t.Errorf("%s: %d marks", p.Name, len(marks))
		}
		for _, m := range marks {
			x, _ := strconv.ParseFloat(m[2], 64)
			y, _ := strconv.ParseFloat(m[3], 64)
			if wantX := b.cost(b.design[m[1]], p.Turn[1]); x != wantX || y != float64(b.figure(m[1], p.Turn[0])) {
				t.Errorf("%s: %s at %v, %v", p.Name, m[1], x, y)
			}
		}
	}
}

// TestGapsEqualResults: the intervals drawn are those of the results.
func TestGapsEqualResults(t *testing.T) {
	r, _ := synthetic(5, 50)
	b := open(r)
	marks := regexp.MustCompile(`data-design="([^"]+)" data-lo="([^"]+)" data-hi="([^"]+)"`).FindAllStringSubmatch(gaps(b, 6).SVG(), -1)
	if len(marks) != 3 {
		t.Fatalf("%d marks", len(marks))
	}
	for _, m := range marks {
		want := b.pooled[m[1]].Behind
		if m[2] != full(float64(want[0])) || m[3] != full(float64(want[1])) {
			t.Errorf("%s: %s to %s, want %v", m[1], m[2], m[3], want)
		}
	}
}

// TestGlyphs: the fonts of the PNG files have every letter of the pictures.
func TestGlyphs(t *testing.T) {
	r, traces := synthetic(1, 20)
	b := open(r)
	var fonts []*sfnt.Font
	for _, ttf := range [][]byte{liberationsansregular.TTF, liberationsansbold.TTF} {
		f, err := sfnt.Parse(ttf)
		if err != nil {
			t.Fatal(err)
		}
		fonts = append(fonts, f)
	}
	for _, p := range append(draw(b, traces).all(), overTime(b, traces, &traces.Clips[0], &r.Designs[0], &r.Designs[1])) {
		for _, words := range regexp.MustCompile(`<text[^>]*>([^<]*)<`).FindAllStringSubmatch(p.File(), -1) {
			for _, letter := range words[1] {
				for _, f := range fonts {
					if i, err := f.GlyphIndex(nil, letter); err != nil || i == 0 {
						t.Fatalf("%s: no %q in %q", p.Name, letter, words[1])
					}
				}
			}
		}
	}
}
