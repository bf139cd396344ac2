package listening

import (
	"encoding/csv"
	"io"
	"strings"
)

// answer is what a listener said of a pair.
type answer string

// The answers that are taken; an empty one is a pair not answered.
const (
	first      answer = "first"
	second     answer = "second"
	none       answer = "none"
	unanswered answer = ""
)

// blank writes the table to type answers into.
func blank(w io.Writer, files []string) error {
	rows := [][]string{{"pair", "preferred", "remark"}}
	for _, f := range files {
		rows = append(rows, []string{stem(f), "", ""})
	}
	return csv.NewWriter(w).WriteAll(rows)
}

// readAnswers reads a filled table for the pairs of a key.
func readAnswers(r io.Reader, key answerKey) (map[string]answer, error) {
	rows, err := readTable(r, "pair", "preferred")
	if err != nil {
		return nil, err
	}
	said := map[string]answer{}
	for _, row := range rows {
		name, a := pairName(row.cells[0]), answer(strings.ToLower(row.cells[1]))
		if _, known := key.pairs[name]; !known {
			return nil, row.fault("pair %q is not in the key: take the key of this set", row.cells[0])
		}
		if _, twice := said[name]; twice {
			return nil, row.fault("pair %q is answered twice", row.cells[0])
		}
		switch a {
		case first, second, none, unanswered:
			said[name] = a
		default:
			return nil, row.fault("preferred %q: want first, second or none, or nothing where it was not answered", row.cells[1])
		}
	}
	return said, nil
}

// pairName takes "pair-07.wav", "pair-07", "07" and "7" for one.
func pairName(s string) string {
	s = strings.TrimPrefix(strings.TrimSuffix(strings.ToLower(s), ".wav"), "pair-")
	return strings.TrimLeft(s, "0")
}
