package report

import (
	"encoding/csv"
	"encoding/json"
	"fmt"
	"io"
	"slices"
	"strconv"

	"fewbits/cmd/fewbits/internal/bench"
)

// JSON writes r as results.json: indented, full precision, undefined as null;
// the same results give the same bytes.
func JSON(w io.Writer, r *bench.Results) error { return indented(w, r) }

// TracesJSON writes t as traces.json, in the form of JSON but without
// indentation: it is long.
func TracesJSON(w io.Writer, t *bench.Traces) error {
	e := json.NewEncoder(w)
	e.SetEscapeHTML(false)
	return e.Encode(t)
}

func indented(w io.Writer, v any) error {
	e := json.NewEncoder(w)
	e.SetEscapeHTML(false)
	e.SetIndent("", "  ")
	return e.Encode(v)
}

// Summary writes r as CSV: a line per clip and design, every measured figure a
// column, in the order of r.Definitions, then the design's idle channel.
// Undefined figures are empty.
func Summary(w io.Writer, r *bench.Results) error {
	figures := measured(r)
	designs := open(r).design
	out := csv.NewWriter(w)
	out.Write(append(append([]string{"clip", "design", "bits", "lossless"}, figures...), "idle_zero_dbov", "idle_one_lsb_dbov"))
	for _, x := range r.Results {
		d := designs[x.Design]
		if d == nil {
			return fmt.Errorf("results: %q is coded with %q, which is not among the designs", x.Clip, x.Design)
		}
		line := []string{x.Clip, x.Design, strconv.Itoa(d.Bits), strconv.FormatBool(x.Lossless)}
		for _, name := range figures {
			line = append(line, exact(x.Figures, name))
		}
		tried := bench.Figures{}
		if d.IdleLSB > 0 {
			tried["zero"], tried["lsb"] = d.IdleZero, d.IdleOneLSB
		}
		out.Write(append(line, exact(tried, "zero"), exact(tried, "lsb")))
	}
	out.Flush()
	return out.Error()
}

// measured lists the figures that some result holds: first the defined ones in
// their order, then any without a definition, by name.
func measured(r *bench.Results) []string {
	have := map[string]bool{}
	for _, x := range r.Results {
		for name := range x.Figures {
			have[name] = true
		}
	}
	for _, p := range r.Pooled {
		for name := range p.Figures {
			have[name] = true
		}
	}
	var out, rest []string
	for _, d := range r.Definitions {
		if have[d.Name] {
			out = append(out, d.Name)
			delete(have, d.Name)
		}
	}
	for name := range have {
		rest = append(rest, name)
	}
	slices.Sort(rest)
	return append(out, rest...)
}

// exact is a figure at full precision, empty where undefined.
func exact(f bench.Figures, name string) string {
	if v, ok := f[name]; ok && v.Defined() {
		return strconv.FormatFloat(float64(v), 'g', -1, 64)
	}
	return ""
}
