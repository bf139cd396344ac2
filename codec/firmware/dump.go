package firmware

import (
	"encoding/csv"
	"encoding/json"
	"io"
	"math"
	"strconv"
)

// CSV writes a line a cell: its number, its code word, the first and last word
// that land in it (empty if none does), its level in Q15 and as an amplitude
// (full scale = 1.0).
func (t *Table) CSV(w io.Writer) error {
	out := csv.NewWriter(w)
	if err := out.Write([]string{"cell", "code", "first_word", "last_word", "level_q15", "level"}); err != nil {
		return err
	}
	for k, y := range t.Levels {
		first, last := "", ""
		if from, to, ok := t.Span(k); ok {
			first, last = strconv.Itoa(int(from)), strconv.Itoa(int(to))
		}
		row := []string{strconv.Itoa(k), strconv.Itoa(int(t.Codes[k])), first, last, strconv.Itoa(int(y)),
			strconv.FormatFloat(float64(y)/32768, 'g', -1, 64)}
		if err := out.Write(row); err != nil {
			return err
		}
	}
	out.Flush()
	return out.Error()
}

// document is the JSON form. Numbers that do not exist are null.
type document struct {
	Name       string     `json:"name"`
	Provenance string     `json:"provenance"`
	Cells      int        `json:"cells"`
	Bits       int        `json:"bits"`
	Assignment Assignment `json:"assignment"`
	FirstCell  int        `json:"first_cell"`
	Decisions  []int16    `json:"decision_words"`
	Codes      []uint16   `json:"codes"`
	Levels     []int16    `json:"levels_q15"`
	Checksum   string     `json:"checksum_fnv1a32"`
	Loss       lossJSON   `json:"rounding"`
}

type lossJSON struct {
	Weighted  bool     `json:"weighted"`
	RealMSE   float64  `json:"real_mse"`
	TableMSE  float64  `json:"table_mse"`
	DB        *float64 `json:"loss_db"`
	Largest   float64  `json:"largest_change"`
	Held      int      `json:"held"`
	Unreached int      `json:"unreached"`
	Merged    int      `json:"merged"`
}

// JSON writes the whole table with its name, provenance, checksum and loss.
func (t *Table) JSON(w io.Writer, name, provenance string) error {
	doc := document{
		Name: name, Provenance: provenance, Cells: t.Cells(), Bits: t.Bits(), Assignment: t.Assignment,
		FirstCell: t.First, Decisions: t.Decisions, Codes: t.Codes, Levels: t.Levels,
		Checksum: hex32(t.Checksum()),
		Loss: lossJSON{Weighted: t.Loss.Weighted, RealMSE: t.Loss.RealMSE, TableMSE: t.Loss.TableMSE, Largest: t.Loss.Largest,
			Held: t.Loss.Held, Unreached: t.Loss.Unreached, Merged: t.Loss.Merged},
	}
	if !math.IsNaN(t.Loss.DB) {
		doc.Loss.DB = &t.Loss.DB
	}
	enc := json.NewEncoder(w)
	enc.SetEscapeHTML(false)
	enc.SetIndent("", " ")
	return enc.Encode(doc)
}
