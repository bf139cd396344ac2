package report

import (
	"fmt"
	"strings"
)

// notes are the lines under the table: which design to take and why, what the
// marks mean, what to beware of, what was refused.
func notes(b *book, left []string) (out []string) {
	for _, v := range b.Verdicts {
		out = append(out, v.Sentence)
		out = append(out, b.savingSentences(v.Winners[b.Leading])...)
	}
	if b.LeadingWhy != "" {
		out = append(out, sentence(b.LeadingWhy))
	}
	if len(b.winner) > 0 {
		out = append(out, "* best at its number of bits by "+b.Leading+".")
	}
	if b.IntervalMethod != "" {
		out = append(out, "95 %: interval of "+b.intervalOf()+"; "+b.IntervalMethod+".")
	}
	if len(b.winner) > 0 {
		out = append(out, leadMeans)
	}
	if len(b.idlers()) > 0 {
		out = append(out, idleMeans)
	}
	if len(left) > 0 {
		out = append(out, "Left out for want of width: "+strings.Join(left, ", ")+".")
	}
	cautions := b.cautions()
	if len(cautions) > 0 {
		out = append(out, "")
	}
	return append(out, cautions...)
}

const leadMeans = "lead: clear, ahead of all others beyond chance; shared, level with the best; open, cannot be told from the best; behind."

// cautions are what to beware of, as sentences.
func (b *book) cautions() (out []string) {
	for _, w := range b.Warnings {
		out = append(out, sentence(w))
	}
	for _, d := range b.Designs {
		for _, n := range d.Notes {
			out = append(out, d.Spec+": "+n)
		}
	}
	out = append(out, b.clipWarnings()...)
	for _, x := range b.Refused {
		out = append(out, fmt.Sprintf("Refused %s: %s.", x.File, strings.TrimSuffix(x.Reason, ".")))
	}
	return out
}

// clipWarnings says what is wrong with recordings: each kind of fault once,
// in full for the first recording that has it. Mere notes are left to
// inspect.
func (b *book) clipWarnings() (out []string) {
	files, first := map[string][]string{}, map[string]string{}
	var order []string
	enter := func(kind, text, file string) {
		if files[kind] == nil {
			order, first[kind] = append(order, kind), text
		}
		if n := len(files[kind]); n == 0 || files[kind][n-1] != file {
			files[kind] = append(files[kind], file)
		}
	}
	for _, c := range b.Clips {
		told := map[string]bool{}
		for _, f := range c.Findings {
			text := f.Sentence + ": " + f.Advice
			told[text] = true
			if f.Severity != "note" {
				enter(f.Kind, text, c.File)
			}
		}
		for _, w := range c.Warnings {
			if _, ofChannel, _ := strings.Cut(w, ": "); !told[w] && !told[ofChannel] {
				enter(w, w, c.File)
			}
		}
	}
	for _, kind := range order {
		text := strings.TrimSuffix(first[kind], ".") + "."
		if n := len(files[kind]); n > 1 && first[kind] != kind {
			out = append(out, fmt.Sprintf("%d of %d recordings, %s. For one, %s: %s", n, len(b.Clips), kind, files[kind][0], text))
			continue
		}
		out = append(out, some(files[kind], 3)+": "+text)
	}
	if len(order) > 0 {
		out = append(out, "More on each recording: fewbits inspect.")
	}
	return out
}

// some names the first few of a list and counts the others.
func some(list []string, n int) string {
	if len(list) <= n {
		return strings.Join(list, ", ")
	}
	return fmt.Sprintf("%s and %d more", strings.Join(list[:n], ", "), len(list)-n)
}

func plural(n int, one, many string) string {
	if n == 1 {
		return "1 " + one
	}
	return fmt.Sprintf("%d %s", n, many)
}
