package listening

import (
	"encoding/csv"
	"fmt"
	"io"
	"strconv"
)

// keyHead names the key's columns. Gains are those applied, dB, the common
// attenuation among them; sha256 is the pair's file.
var keyHead = []string{"pair", "clip", "order", "first", "second", "gain_first_db", "gain_second_db", "seed", "sha256"}

// writeKey says which side is which; order is AB or BA, A the design named first.
func writeKey(w io.Writer, items []item, sums []string, seed uint64) error {
	rows := [][]string{keyHead}
	for i, it := range items {
		rows = append(rows, []string{
			stem(it.file), it.clip, it.order, it.first.design, it.second.design,
			exactly(decibels(it.first.gain)), exactly(decibels(it.second.gain)), strconv.FormatUint(seed, 10), sums[i],
		})
	}
	return csv.NewWriter(w).WriteAll(rows)
}

func exactly(x float64) string { return strconv.FormatFloat(x, 'g', -1, 64) }

// answerKey is what a key says: A is the design named first when the set was
// made, pairs go by pairName.
type answerKey struct {
	a, b  string
	pairs map[string]bool // whether A plays first
}

// readKey reads a key by its columns' names.
func readKey(r io.Reader) (answerKey, error) {
	key := answerKey{pairs: map[string]bool{}}
	rows, err := readTable(r, "pair", "order", "first", "second")
	if err != nil {
		return key, err
	}
	for _, row := range rows {
		name, order, a, b := pairName(row.cells[0]), row.cells[1], row.cells[2], row.cells[3]
		if order == "BA" {
			a, b = b, a
		}
		switch _, twice := key.pairs[name]; {
		case name == "":
			return key, row.fault("pair %q: want a number", row.cells[0])
		case order != "AB" && order != "BA":
			return key, row.fault("order %q: want AB or BA", order)
		case a == b:
			return key, row.fault("both sides are %q: not a key of two designs", a)
		case twice:
			return key, row.fault("pair %q is listed twice", row.cells[0])
		case len(key.pairs) > 0 && (a != key.a || b != key.b):
			return key, row.fault("designs %q and %q, the rows before have %q and %q: take the key of one set", a, b, key.a, key.b)
		}
		key.a, key.b, key.pairs[name] = a, b, order == "AB"
	}
	if len(key.pairs) == 0 {
		return key, fmt.Errorf("line 1: no pairs follow: take the %s that came with the set", KeyFile)
	}
	return key, nil
}
