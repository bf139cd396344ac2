package model

import (
	"bufio"
	"fmt"
	"io"
	"strconv"
	"strings"
)

// maxPoints bounds a table's memory.
const maxPoints = 1 << 20

// ParseTable reads a density as text: a value and its density a line,
// separated by a comma, semicolon, tab or blanks; values ascend. Blank lines
// and what follows # are skipped, as is one line of column names before the
// first numbers. Errors name the line.
func ParseTable(r io.Reader) (*Tabulated, error) {
	var values, densities []float64
	sc := bufio.NewScanner(r)
	line := 0
	named := false
	for sc.Scan() {
		line++
		col := columns(sc.Text(), line)
		if len(col) == 0 {
			continue
		}
		x, f, err := point(col)
		switch {
		case err != nil && len(values) == 0 && !named && words(col):
			named = true
			continue
		case err == nil && len(values) > 0 && !(x > values[len(values)-1]):
			err = fmt.Errorf("value %q is not above the one before, %g", col[0], values[len(values)-1])
		case err == nil && len(values) == maxPoints:
			err = fmt.Errorf("more than %d points", maxPoints)
		}
		if err != nil {
			return nil, fmt.Errorf("line %d: %w", line, err)
		}
		values, densities = append(values, x), append(densities, f)
	}
	if err := sc.Err(); err != nil {
		return nil, fmt.Errorf("line %d: %w", line+1, err)
	}
	if len(values) < 2 {
		return nil, fmt.Errorf("line %d: the table ends with %d points; want at least 2, a value and its density a line", line, len(values))
	}
	m, err := NewTabulated(values, densities)
	if err != nil {
		return nil, fmt.Errorf("lines 1 to %d: %w", line, err)
	}
	return m, nil
}

// columns splits a line; a byte order mark before the first is dropped.
func columns(s string, line int) []string {
	if line == 1 {
		s = strings.TrimPrefix(s, "\ufeff")
	}
	s, _, _ = strings.Cut(s, "#")
	for _, sep := range []string{";", ","} {
		if strings.Contains(s, sep) {
			col := strings.Split(s, sep)
			for i := range col {
				col[i] = strings.TrimSpace(col[i])
			}
			return col
		}
	}
	return strings.Fields(s)
}

// words reports whether no column is a number.
func words(col []string) bool {
	for _, c := range col {
		if _, err := strconv.ParseFloat(c, 64); err == nil || c == "" {
			return false
		}
	}
	return true
}

// point reads a value and a density.
func point(col []string) (x, f float64, err error) {
	if len(col) != 2 {
		return 0, 0, fmt.Errorf("%d columns: want 2, a value and its density", len(col))
	}
	if x, err = strconv.ParseFloat(col[0], 64); err != nil || !(x >= -1e150 && x <= 1e150) {
		return 0, 0, fmt.Errorf("value %q: want a finite number", col[0])
	}
	if f, err = strconv.ParseFloat(col[1], 64); err != nil || !(f >= 0 && f <= 1e300) {
		return 0, 0, fmt.Errorf("density %q: want a finite number, at least 0", col[1])
	}
	return x, f, nil
}
