package report

import (
	"bytes"
	"encoding/base64"
	"html"
	"io"
	"math"
	"regexp"
	"strconv"
	"strings"
	"testing"

	"fewbits/cmd/fewbits/internal/bench"
)

func pageOf(t testing.TB, r *bench.Results, traces *bench.Traces) string {
	t.Helper()
	var out bytes.Buffer
	if err := HTML(&out, r, traces, Options{Audio: true}); err != nil {
		t.Fatal(err)
	}
	return out.String()
}

// TestPageSize: 50 recordings and 12 designs stay below a megabyte.
func TestPageSize(t *testing.T) {
	r, traces := synthetic(50, 2000)
	n := len(pageOf(t, r, traces))
	t.Logf("%d bytes", n)
	if n > 1e6 {
		t.Error("too large")
	}
}

var (
	tableRow  = regexp.MustCompile(`(?s)<tr><th scope="row"[^>]*>(.*?)<td(.*?)(?:\n|</tbody>)`)
	tableCell = regexp.MustCompile(`data-f="([^"]+)" data-v="([^"]+)"`)
)

// TestTablesEqualResults: what the tables carry reads back as the very numbers
// of the results.
func TestTablesEqualResults(t *testing.T) {
	r, traces := synthetic(5, 50)
	text := pageOf(t, r, traces)
	b := open(r)
	for id, of := range map[string]func(*bench.Pooled) bench.Figures{
		"pooled":      func(p *bench.Pooled) bench.Figures { return p.Figures },
		"pooled-rest": func(p *bench.Pooled) bench.Figures { return p.Figures },
		"means":       func(p *bench.Pooled) bench.Figures { return p.ClipMeans },
		"means-rest":  func(p *bench.Pooled) bench.Figures { return p.ClipMeans },
	} {
		rows := tableRow.FindAllStringSubmatch(between(t, text, `id="grid-`+id+`"`, "</table>"), -1)
		if len(rows) != len(r.Designs) {
			t.Fatalf("%s: %d rows", id, len(rows))
		}
		compared := 0
		for _, row := range rows {
			spec := html.UnescapeString(strings.ReplaceAll(row[1], "<wbr>", ""))
			p := b.pooled[spec]
			if p == nil {
				t.Fatalf("%s: no design %q", id, spec)
			}
			for _, c := range tableCell.FindAllStringSubmatch(row[2], -1) {
				want := float64(of(p)[c[1]])
				switch c[1] {
				case "interval":
					want = float64(p.Interval[0])
				case "behind":
					want = float64(p.Behind[0])
				}
				if got, err := strconv.ParseFloat(c[2], 64); err != nil || got != want {
					t.Errorf("%s %s %s: %q, want %v", id, spec, c[1], c[2], want)
				}
				compared++
			}
		}
		if compared < 5*len(r.Designs) {
			t.Errorf("%s: only %d numbers", id, compared)
		}
	}
}

// TestTracksEqualTraces: the packed bytes are within half a step of the
// traces, and undefined stays undefined.
func TestTracksEqualTraces(t *testing.T) {
	r, traces := synthetic(2, 100)
	b := open(r)
	for i, k := range tracks(b, traces) {
		c := traces.Clips[i]
		for j, d := range r.Designs {
			packed, err := base64.StdEncoding.DecodeString(k.SNR[j])
			if err != nil || len(packed) != len(c.Max) {
				t.Fatalf("%d bytes, %v", len(packed), err)
			}
			for n, v := range c.SNR[d.Spec] {
				got := float64(packed[n])/2 - 20
				want := math.Max(-20, float64(v))
				if packed[n] == undefined {
					got = nan
				}
				if math.IsNaN(got) != math.IsNaN(float64(v)) || math.Abs(got-want) > 0.25+1e-9 {
					t.Fatalf("%s step %d: %v, want %v", d.Spec, n, got, v)
				}
			}
		}
	}
}

// TestThin: merging keeps the extremes of the wave, the energy and the mean.
func TestThin(t *testing.T) {
	c := &bench.ClipTrace{
		StepSeconds: 0.01, Min: []bench.Num{-1, -3, -2}, Max: []bench.Num{1, 2, 5}, LevelDBov: []bench.Num{-20, bench.Num(nan), -40},
		SNR: map[string][]bench.Num{"a": {10, 20, bench.Num(nan)}},
	}
	got := thin(c, 2)
	if got.StepSeconds != 0.02 || len(got.Max) != 2 || got.Min[0] != -3 || got.Max[0] != 2 || got.Max[1] != 5 ||
		math.Abs(float64(got.LevelDBov[0])+20) > 1e-9 || got.SNR["a"][0] != 15 || got.SNR["a"][1].Defined() {
		t.Errorf("%+v", got)
	}
	if thin(c, 3) != c {
		t.Error("three points are three points")
	}
}

func between(t *testing.T, text, from, to string) string {
	t.Helper()
	_, rest, ok := strings.Cut(text, from)
	part, _, ok2 := strings.Cut(rest, to)
	if !ok || !ok2 {
		t.Fatalf("no %s ... %s", from, to)
	}
	return part
}

// TestPageHoldsNothingForeign: no address, no inline style or handler.
func TestPageHoldsNothingForeign(t *testing.T) {
	r, traces := synthetic(2, 20)
	text := pageOf(t, r, traces)
	for _, bad := range []string{"http:", "https:", " style=", " onclick", " onload", "javascript:"} {
		if strings.Contains(text, bad) {
			t.Errorf("the page holds %q", bad)
		}
	}
}

// TestPageHostileNames: names from outside stay text.
func TestPageHostileNames(t *testing.T) {
	r, traces := synthetic(2, 20)
	const evil = `</script><img src=x onerror=alert(1)>"'&` + "\x00\xff.wav"
	traces.Clips[0].File, r.Clips[0].File = evil, evil
	r.Refused[0] = bench.Refusal{File: evil, Reason: evil}
	r.Command = []string{"fewbits", evil}
	r.Warnings = []string{evil}
	text := pageOf(t, r, traces)
	if strings.Contains(text, "<img") {
		t.Error("a name became markup")
	}
	for _, s := range svgOf.FindAllString(text, -1) {
		if err := parses(s); err != nil {
			t.Error(err)
		}
	}
}

// TestPageOfLittle: nothing measured, nothing traced, one of each.
func TestPageOfLittle(t *testing.T) {
	pageOf(t, &bench.Results{}, nil)
	r, traces := synthetic(1, 1)
	pageOf(t, r, nil)
	r.Designs, r.Pooled, r.Results, r.Verdicts = r.Designs[:1], r.Pooled[:1], r.Results[:1], nil
	pageOf(t, r, traces)
}

// TestPageRefusesWhatDoesNotFit: an edited file is told, not drawn.
func TestPageRefusesWhatDoesNotFit(t *testing.T) {
	for want, spoil := range map[string]func(*bench.Results, *bench.Traces){
		`names "nowhere"`: func(r *bench.Results, _ *bench.Traces) { r.Verdicts[0].Winners[snr] = "nowhere" },
		"thresholds":      func(r *bench.Results, _ *bench.Traces) { r.Designs[0].Thresholds = nil },
		"minima":          func(_ *bench.Results, t *bench.Traces) { t.Clips[0].Min = nil },
		"steps of 0 s":    func(_ *bench.Results, t *bench.Traces) { t.Clips[0].StepSeconds = 0 },
		"steps of 20":     func(_ *bench.Results, t *bench.Traces) { t.Clips[1].SNR["mu-law:4"] = nil },
		"6 limits":        func(_ *bench.Results, t *bench.Traces) { t.Sine[0].LimitDB = t.Sine[0].LimitDB[:6] },
		"densities":       func(_ *bench.Results, t *bench.Traces) { t.Models[0].Density = nil },
		"bound of":        func(_ *bench.Results, t *bench.Traces) { t.Bounds[0].Bits = nil },
	} {
		r, traces := synthetic(2, 20)
		spoil(r, traces)
		if err := HTML(io.Discard, r, traces, Options{}); err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("%v, want %q", err, want)
		}
		if err := Pictures(t.TempDir(), r, traces, "svg"); err == nil {
			t.Errorf("pictures of what has %q", want)
		}
	}
}

func BenchmarkHTML(b *testing.B) {
	r, traces := synthetic(50, 2000)
	for b.Loop() {
		if err := HTML(io.Discard, r, traces, Options{}); err != nil {
			b.Fatal(err)
		}
	}
}
