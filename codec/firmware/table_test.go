package firmware

import (
	"bytes"
	"encoding/csv"
	"encoding/json"
	"math"
	"math/bits"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"fewbits/codec"
)

var assignments = []Assignment{Natural, Folded, Gray, Standard}

// exports calls f with every example under every assignment that fits it.
func exports(t *testing.T, f func(t *testing.T, e example, table Table)) {
	for _, e := range examples() {
		if err := e.s.Check(); err != nil {
			t.Fatalf("%s: %v", e.name, err)
		}
		for _, a := range assignments {
			if a == Folded && !e.s.IsMirror(1e-9) || a == Standard && e.s.Codes == nil {
				continue
			}
			table, err := Export(e.s, Options{Assignment: a})
			if err != nil {
				t.Fatalf("%s %s: %v", e.name, a, err)
			}
			t.Run(e.name+" "+string(a), func(t *testing.T) { f(t, e, table) })
		}
	}
}

// Every word lands in the staircase's own cell and decodes to its value.
func TestEveryWord(t *testing.T) {
	exports(t, func(t *testing.T, e example, table Table) {
		seen := make([]bool, 1<<table.Bits())
		for k, c := range table.Codes {
			if seen[c] {
				t.Fatalf("cell %d: code word %d given twice", k, c)
			}
			seen[c] = true
		}
		for w := -32768; w <= 32767; w++ {
			x := float64(w) / 32768
			k := e.s.Index(x)
			if from, to, ok := table.Span(k); !ok || w < int(from) || w > int(to) {
				t.Fatalf("word %d is outside the span [%d, %d] of its cell", w, from, to)
			}
			code := table.Index(int16(w))
			if code != int(table.Codes[k]) {
				t.Fatalf("word %d: code %d, want %d", w, code, table.Codes[k])
			}
			// half a step of the 16-bit grid, from rounding; more only where held
			y := e.s.Values[k]
			if got := float64(table.Value(code)) / 32768; math.Abs(got-y) > 0.5/32768 && math.Abs(y) < 1-1.0/32768 {
				t.Fatalf("word %d: value %g, want %g", w, got, y)
			}
		}
		for c, used := range seen {
			if !used && table.Value(c) != 0 {
				t.Fatalf("unused code word %d decodes to %d", c, table.Value(c))
			}
		}
	})
}

// What the assignments promise.
func TestAssignments(t *testing.T) {
	exports(t, func(t *testing.T, e example, table Table) {
		n := table.Cells()
		for k := 1; k < n; k++ {
			if d := bits.OnesCount16(table.Codes[k] ^ table.Codes[k-1]); table.Assignment == Gray && d != 1 {
				t.Fatalf("gray: cells %d and %d differ in %d bits", k-1, k, d)
			}
		}
		if table.Assignment != Folded || n < 2 {
			return
		}
		sign := uint16(1) << (table.Bits() - 1)
		for k := range n / 2 {
			if table.Codes[k] != table.Codes[n-1-k]|sign || table.Codes[n-1-k]&sign != 0 {
				t.Fatalf("folded: cells %d and %d have codes %#x and %#x", k, n-1-k, table.Codes[k], table.Codes[n-1-k])
			}
		}
	})
	// by hand: 4 and 5 cells
	for n, want := range map[int][]int{4: {3, 2, 0, 1}, 5: {6, 5, 0, 1, 2}, 2: {1, 0}, 3: {3, 0, 1}} {
		for k, c := range want {
			if got := fold(n, k); got != c {
				t.Errorf("fold(%d, %d) = %d, want %d", n, k, got, c)
			}
		}
	}
}

// G.711's characters for a few words (ITU-T Rec. G.711, Tables 1 and 2: +0 is
// 0xFF and 0xD5 after inversion, the ends are 0x80/0x00 and 0xAA/0x2A).
func TestStandardCodes(t *testing.T) {
	mu, _ := Export(codec.G711Mu(), Options{})
	a, _ := Export(codec.G711A(), Options{})
	for _, tc := range []struct {
		t    *Table
		w    int16
		code int
	}{{&mu, 0, 0xFF}, {&mu, 32767, 0x80}, {&mu, -32768, 0x00}, {&mu, -1, 0x7F}, {&a, 0, 0xD5}, {&a, 32767, 0xAA}, {&a, -32768, 0x2A}} {
		if got := tc.t.Index(tc.w); tc.t.Assignment != Standard || got != tc.code {
			t.Errorf("%s: word %d has code %#x, want %#x", tc.t, tc.w, got, tc.code)
		}
	}
}

func TestRefusals(t *testing.T) {
	nan := make([]float64, 1<<16)
	nan[7] = math.NaN()
	twice := codec.G711A()
	twice.Codes[3] = twice.Codes[4]
	for _, tc := range []struct {
		s    *codec.Staircase
		o    Options
		says string
	}{
		{irregular(9, 1, codec.TieUp), Options{Assignment: Folded}, "mirror"},
		{even(4, 1, codec.TieOut), Options{Assignment: "zigzag"}, `"zigzag"`},
		{even(4, 1, codec.TieOut), Options{Assignment: Standard}, "code words"},
		{even(4, 1, codec.TieOut), Options{Weights: make([]float64, 3)}, "65536"},
		{even(4, 1, codec.TieOut), Options{Weights: make([]float64, 1<<16)}, "sum"},
		{even(4, 1, codec.TieOut), Options{Weights: nan}, "word -32761"},
		{&codec.Staircase{}, Options{}, "0 cells"},
		{twice, Options{}, "share"},
	} {
		if _, err := Export(tc.s, tc.o); err == nil || !strings.Contains(err.Error(), tc.says) {
			t.Errorf("%+v: error %v, want one with %q", tc.o.Assignment, err, tc.says)
		}
	}
}

// Against the loss worked out from the definition, and in closed form: levels
// on the 16-bit grid lose nothing; two levels at +-1 lose what holding +1 at
// 32767/32768 costs.
func TestLoss(t *testing.T) {
	exact, _ := Export(even(256, 1, codec.TieOut), Options{})
	if exact.Loss.DB != 0 || exact.Loss.Largest != 0 || exact.Loss.Held != 0 {
		t.Errorf("levels on the grid: %+v", exact.Loss)
	}
	s := &codec.Staircase{Thresholds: []float64{0}, Values: []float64{-1, 1}, Tie: codec.TieOut}
	weights := make([]float64, 1<<16)
	weights[32768+16384] = 3 // amplitude 0.5
	weights[32768-16384] = 1
	held, err := Export(s, Options{Weights: weights})
	if err != nil {
		t.Fatal(err)
	}
	e := 32767.0/32768 - 0.5
	want := (3*e*e + 0.25) / 4
	if l := held.Loss; l.Held != 1 || l.RealMSE != 0.25 || math.Abs(l.TableMSE-want) > 1e-15 ||
		math.Abs(l.DB-10*math.Log10(want/0.25)) > 1e-12 || l.Largest != 1.0/32768 {
		t.Errorf("held: %+v", l)
	}
	fine, _ := Export(even(4096, 0.01, codec.TieOut), Options{})
	if fine.Loss.Unreached == 0 || fine.Loss.Merged == 0 {
		t.Errorf("cells finer than words: %+v", fine.Loss)
	}
	// a value on every word that counts, but not on the grid it is rounded to
	point := make([]float64, 1<<16)
	point[32768+100] = 1
	s = &codec.Staircase{Values: []float64{100.0 / 32768}}
	s.MirrorBounds()
	if l, _ := Export(s, Options{Weights: point}); l.Loss.RealMSE != 0 || l.Loss.DB != 0 {
		t.Errorf("no error at all: %+v", l.Loss)
	}
}

// Any staircase: same cells as its Index on all words, loss as defined.
func TestAnyStaircase(t *testing.T) {
	rapid.Check(t, func(rt *rapid.T) {
		n := rapid.IntRange(1, 200).Draw(rt, "cells")
		tie := codec.Tie(rapid.IntRange(0, 1).Draw(rt, "tie"))
		s := irregular(n, rapid.Uint64().Draw(rt, "seed"), tie)
		table, err := Export(s, Options{Assignment: Gray})
		if err != nil {
			rt.Fatal(err)
		}
		sum := 0.0
		reached := 0
		for k := range n {
			from, to, ok := table.Span(k)
			if !ok {
				continue
			}
			// a cell is one stretch of words, so that its ends say it all
			for _, w := range []int16{from, to} {
				if a, b := s.Index(float64(w)/32768), table.Cell(w); a != k || b != k {
					rt.Fatalf("word %d: cell %d, staircase %d, want %d", w, b, a, k)
				}
			}
			for w := int(from); w <= int(to); w++ {
				d := float64(w)/32768 - float64(table.Levels[k])/32768
				sum += d * d
				reached++
			}
		}
		if reached != 1<<16 {
			rt.Fatalf("the spans hold %d words", reached)
		}
		if math.Abs(sum/65536-table.Loss.TableMSE) > 1e-12*sum {
			rt.Fatalf("mse %g, want %g", table.Loss.TableMSE, sum/65536)
		}
	})
}

func TestCSVAndJSON(t *testing.T) {
	exports(t, func(t *testing.T, e example, table Table) {
		var c, j bytes.Buffer
		if err := table.CSV(&c); err != nil {
			t.Fatal(err)
		}
		rows, err := csv.NewReader(&c).ReadAll()
		if err != nil || len(rows) != table.Cells()+1 {
			t.Fatalf("csv: %d rows, error %v", len(rows), err)
		}
		if err := table.JSON(&j, e.name, "made <here> & now"); err != nil {
			t.Fatal(err)
		}
		var doc document
		if err := json.Unmarshal(j.Bytes(), &doc); err != nil {
			t.Fatal(err)
		}
		if doc.Cells != table.Cells() || len(doc.Decisions) != len(table.Decisions) || doc.Checksum != hex32(table.Checksum()) {
			t.Errorf("json: %+v", doc)
		}
	})
}

func TestIdentifier(t *testing.T) {
	for in, want := range map[string]string{
		"lloyd-max:6,from=data":  "lloyd_max_6_from_data",
		"8 bits":                 "q8_bits",
		"":                       "quantizer",
		"  --  ":                 "quantizer",
		"__ÄÖ int":               "int",
		"A//*b":                  "a_b",
		strings.Repeat("x-", 99): strings.TrimRight(strings.Repeat("x_", 20), "_"),
	} {
		if got := Identifier(in); got != want {
			t.Errorf("%q: %q, want %q", in, got, want)
		}
	}
}

func TestIdentifierAlwaysValid(t *testing.T) {
	rapid.Check(t, func(rt *rapid.T) {
		id := Identifier(rapid.String().Draw(rt, "name"))
		for i, r := range id {
			if !(r >= 'a' && r <= 'z' || i > 0 && (r >= '0' && r <= '9' || r == '_')) {
				rt.Fatalf("%q", id)
			}
		}
		if id == "" || len(id) > maxIdentifier {
			rt.Fatalf("%q", id)
		}
	})
}

func BenchmarkExport(b *testing.B) {
	s := smoothMu(4096)
	for b.Loop() {
		if _, err := Export(s, Options{}); err != nil {
			b.Fatal(err)
		}
	}
}
