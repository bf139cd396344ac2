package firmware

import (
	"fmt"
	"strings"
	"unicode"
)

// maxIdentifier keeps names with their suffixes within the 63 significant
// characters of an internal identifier (C99 5.2.4.1).
const maxIdentifier = 40

// Identifier makes a C identifier of any text: lower-case ASCII letters,
// digits and single underscores, starting with a letter, at most 40 long.
func Identifier(name string) string {
	var b strings.Builder
	for _, r := range strings.ToLower(name) {
		ok := r >= 'a' && r <= 'z' || r >= '0' && r <= '9'
		switch {
		case ok && b.Len() == 0 && r <= '9':
			b.WriteString("q")
			fallthrough
		case ok:
			b.WriteRune(r)
		case b.Len() > 0 && !strings.HasSuffix(b.String(), "_"):
			b.WriteByte('_')
		}
		if b.Len() >= maxIdentifier {
			break
		}
	}
	id := strings.TrimRight(b.String()[:min(b.Len(), maxIdentifier)], "_")
	if id == "" {
		return "quantizer"
	}
	return id
}

// comment makes any text safe inside a C comment, a line of it a line there:
// plain ASCII, no comment marks, no trigraphs, no backslash at a line's end.
func comment(text string) string {
	var lines []string
	for line := range strings.SplitSeq(strings.TrimRight(text, "\r\n"), "\n") {
		s := apart(ascii(strings.TrimRight(line, "\r")))
		if strings.HasSuffix(s, `\`) {
			s += "."
		}
		lines = append(lines, strings.TrimRight(" * "+s, " "))
	}
	return strings.Join(lines, "\n")
}

// ascii names every character that is not printable ASCII.
func ascii(line string) string {
	var b strings.Builder
	for _, r := range strings.ReplaceAll(line, "\t", " ") {
		if r > unicode.MaxASCII || r < ' ' || r == 0x7F {
			fmt.Fprintf(&b, "<U+%04X>", r)
		} else {
			b.WriteRune(r)
		}
	}
	return b.String()
}

// apart puts a space into every comment mark and before a second question
// mark.
func apart(s string) string {
	var b strings.Builder
	last := rune(0)
	for _, r := range s {
		if last == '*' && r == '/' || last == '/' && r == '*' || last == '?' && r == '?' {
			b.WriteByte(' ')
		}
		b.WriteRune(r)
		last = r
	}
	return b.String()
}

func hex32(v uint32) string { return fmt.Sprintf("0x%08X", v) }
