package tables

import (
	"fmt"
	"path"
	"regexp"
	"strconv"
	"strings"
)

// byteColumn is one column of a byte-by-byte description.
type byteColumn struct {
	from, to                     int // bytes, from 1
	format, unit, label, explain string
	null                         string // a number that means "no value"
}

var byteLine = regexp.MustCompile(`^\s*(\d+)\s*(?:-\s*(\d+))?\s+([AIEFD]\d+(?:\.\d+)?)\s+(\S+)\s+(\S+)\s*(.*)$`)

var nullValue = regexp.MustCompile(`^(?:[\[\]][^\[\]]*[\[\]])?\s*\?=(\S+)`)

// readDescription finds the byte-by-byte description of a file in a ReadMe
// (Ochsenbein 2000, Standard Description for Astronomical Catalogues,
// version 2.0). Several files may share one.
func readDescription(readme, text, table string) ([]byteColumn, error) {
	lines := strings.Split(text, "\n")
	var described []string
	for i, l := range lines {
		_, list, found := strings.Cut(l, "Byte-by-byte Description of file:")
		if !found {
			_, list, found = strings.Cut(l, "Byte-per-byte Description of file:")
		}
		if !found {
			continue
		}
		names := strings.FieldsFunc(list, func(r rune) bool { return r == ' ' || r == ',' || r == '\r' || r == '\t' })
		described = append(described, names...)
		for _, pattern := range names {
			if ok, err := path.Match(pattern, table); ok && err == nil {
				return descriptionAt(readme, lines, i+1)
			}
		}
	}
	return nil, &CellError{Place: Place{File: readme}, Text: table, Problem: "the ReadMe describes no such file", Accepted: "one of " + strings.Join(described, ", "), Kind: ErrUnreadable}
}

// descriptionAt reads the description that begins on a line.
func descriptionAt(readme string, lines []string, start int) ([]byteColumn, error) {
	var columns []byteColumn
	rules := 0
	for i := start; i < len(lines); i++ {
		l := strings.TrimRight(lines[i], "\r ")
		if strings.HasPrefix(strings.TrimSpace(l), "-----") {
			rules++
			if rules == 3 {
				break
			}
			continue
		}
		if rules < 2 {
			continue // the heading
		}
		match := byteLine.FindStringSubmatch(l)
		if match == nil {
			if n := len(columns); n > 0 {
				columns[n-1].explain += " " + strings.TrimSpace(l)
			}
			continue
		}
		from, err1 := strconv.Atoi(match[1])
		to, err2 := from, error(nil)
		if match[2] != "" {
			to, err2 = strconv.Atoi(match[2])
		}
		if err1 != nil || err2 != nil || from < 1 || to < from || to > 1<<20 {
			return nil, &CellError{Place: Place{File: readme, Row: i + 1}, Text: l, Problem: "the bytes are no range", Accepted: "such as \"1- 16\" or \"39\"", Kind: ErrUnreadable}
		}
		c := byteColumn{from: from, to: to, format: match[3], unit: match[4], label: match[5], explain: match[6]}
		if null := nullValue.FindStringSubmatch(c.explain); null != nil {
			c.null = null[1]
		}
		columns = append(columns, c)
	}
	if len(columns) == 0 {
		return nil, &CellError{Place: Place{File: readme, Row: start}, Problem: "the description names no column", Accepted: "lines of bytes, format, unit, label and explanation", Kind: ErrUnreadable}
	}
	if len(columns) > maxColumns {
		return nil, fmt.Errorf("%w: %s describes %d columns", ErrTooLarge, readme, len(columns))
	}
	return columns, nil
}
