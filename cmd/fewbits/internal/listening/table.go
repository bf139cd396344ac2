package listening

import (
	"bufio"
	"bytes"
	"encoding/csv"
	"errors"
	"fmt"
	"io"
	"slices"
	"strings"
)

// mostBytes of a table are read: a set of thousands of pairs is far below it.
const mostBytes = 4 << 20

// tableRow is the wanted cells of a line of a CSV file.
type tableRow struct {
	line  int
	cells []string // in the order of the columns asked for
}

func (r tableRow) fault(format string, args ...any) error {
	return fmt.Errorf("line %d: %s", r.line, fmt.Sprintf(format, args...))
}

// readTable reads columns by name, whatever others there are. Spreadsheets'
// habits are taken: a byte-order mark, semicolons, capitals, empty lines and
// cells left out at a line's end.
func readTable(r io.Reader, columns ...string) (rows []tableRow, err error) {
	text, err := io.ReadAll(io.LimitReader(r, mostBytes+1))
	switch {
	case err != nil:
		return nil, err
	case len(text) > mostBytes:
		return nil, fmt.Errorf("more than %d bytes: not a table of answers or a key", mostBytes)
	}
	lines := csv.NewReader(bytes.NewReader(bytes.TrimPrefix(text, []byte("\xef\xbb\xbf"))))
	lines.FieldsPerRecord, lines.ReuseRecord = -1, true
	if head, _, _ := bufio.NewReader(bytes.NewReader(text)).ReadLine(); bytes.Count(head, []byte(";")) > bytes.Count(head, []byte(",")) {
		lines.Comma = ';'
	}
	var at []int
	for {
		cells, err := lines.Read()
		if errors.Is(err, io.EOF) {
			break
		} else if err != nil {
			return nil, plain(err)
		}
		line, _ := lines.FieldPos(0)
		if at == nil {
			if at, err = find(cells, columns); err != nil {
				return nil, tableRow{line: line}.fault("%v", err)
			}
			continue
		}
		if row := pick(cells, at, line); strings.Join(row.cells, "") != "" {
			rows = append(rows, row)
		}
	}
	if at == nil {
		return nil, fmt.Errorf("line 1: nothing there: want the columns %s", strings.Join(columns, ", "))
	}
	return rows, nil
}

// find gives the columns' places in the header.
func find(head, columns []string) (at []int, err error) {
	for i := range head {
		head[i] = strings.ToLower(strings.TrimSpace(head[i]))
	}
	for _, c := range columns {
		i := slices.Index(head, c)
		if i < 0 {
			return nil, fmt.Errorf("no column %q among %q: want %s", c, head, strings.Join(columns, ", "))
		}
		at = append(at, i)
	}
	return at, nil
}

// pick takes the wanted cells of a line.
func pick(cells []string, at []int, line int) tableRow {
	row := tableRow{line: line}
	for _, i := range at {
		cell := ""
		if i < len(cells) {
			cell = strings.TrimSpace(cells[i])
		}
		row.cells = append(row.cells, cell)
	}
	return row
}

// plain puts the line first, as all messages here do.
func plain(err error) error {
	var p *csv.ParseError
	if errors.As(err, &p) {
		return fmt.Errorf("line %d: column %d: %w", p.Line, p.Column, p.Err)
	}
	return err
}
