package report

import (
	"math"
	"strconv"
	"strings"
	"unicode"

	"fewbits/cmd/fewbits/internal/bench"
)

// dash is what stands for an undefined number.
const dash = "–"

// fixed prints v with so many decimals, a dash where undefined.
func fixed(v bench.Num, decimals int) string {
	if !v.Defined() {
		return dash
	}
	s := strconv.FormatFloat(float64(v), 'f', decimals, 64)
	if strings.Trim(s, "-0.") == "" {
		s = strings.TrimPrefix(s, "-")
	}
	return s
}

// span prints an interval, empty where undefined.
func span(v [2]bench.Num) string {
	if !v[0].Defined() || !v[1].Defined() {
		return ""
	}
	return fixed(v[0], 1) + " to " + fixed(v[1], 1)
}

// percent prints a share: enough digits that a few samples do not look like none.
func percent(v bench.Num) string {
	p := 100 * float64(v)
	switch {
	case !v.Defined():
		return dash
	case p == 0:
		return "0"
	case p < 0.001:
		return "<0.001"
	case p < 0.1:
		return fixed(bench.Num(p), 3)
	}
	return fixed(bench.Num(p), 1)
}

// plain makes text safe for a terminal: what is not printable is escaped.
func plain(s string) string {
	return strings.Map(func(r rune) rune {
		if unicode.IsPrint(r) {
			return r
		}
		return '\uFFFD'
	}, s)
}

// sentence ends a text as one.
func sentence(s string) string {
	s = strings.TrimSpace(s)
	if s == "" {
		return ""
	}
	r := []rune(s)
	// A word such as segsnr_db or a spec keeps its case.
	if word, _, _ := strings.Cut(s, " "); !strings.ContainsAny(word, "_:.=/0123456789") {
		r[0] = unicode.ToUpper(r[0])
	}
	if !strings.ContainsRune(".!?", r[len(r)-1]) {
		r = append(r, '.')
	}
	return string(r)
}

var nan = math.NaN()

// full is every digit of v.
func full(v float64) string { return strconv.FormatFloat(v, 'g', -1, 64) }

// trim prints at most two decimals.
func trim(v float64) string {
	return strconv.FormatFloat(math.Round(100*v)/100, 'f', -1, 64)
}

func slug(name string) string {
	return strings.ReplaceAll(strings.TrimSuffix(strings.TrimSuffix(name, "_db"), "_bits"), "_", "-")
}

// capital begins a text with a capital letter.
func capital(s string) string {
	if s == "" {
		return s
	}
	return strings.ToUpper(s[:1]) + s[1:]
}
