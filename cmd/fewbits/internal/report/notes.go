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
	}
	if b.LeadingWhy != "" {
		out = append(out, sentence(b.LeadingWhy))
	}
	if len(b.winner) > 0 {
		out = append(out, "* best at its number of bits by "+b.Leading+".")
	}
	if b.IntervalMethod != "" {
		out = append(out, "95 %: interval of the mean over clips; "+b.IntervalMethod+".")
	}
	if lead := b.means["lead"].Means; lead != "" {
		out = append(out, "lead: "+lead+".")
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

// cautions are what to beware of, as sentences.
func (b *book) cautions() (out []string) {
	if specs := b.optimistic(); len(specs) > 0 {
		out = append(out, fmt.Sprintf("%s made on the recordings they are tested on, which flatters them: %s.",
			plural(len(specs), "design was", "designs were"), strings.Join(specs, ", ")))
	}
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

// clipWarnings says each warning once, with the recordings it is about.
func (b *book) clipWarnings() (out []string) {
	files := map[string][]string{}
	var order []string
	for _, c := range b.Clips {
		for _, w := range c.Warnings {
			if files[w] == nil {
				order = append(order, w)
			}
			files[w] = append(files[w], c.File)
		}
	}
	for _, w := range order {
		out = append(out, some(files[w], 3)+": "+strings.TrimSuffix(w, ".")+".")
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
