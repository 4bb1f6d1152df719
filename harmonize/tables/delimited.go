package tables

import (
	"encoding/csv"
	"strings"
)

// findDelimiter returns the delimiter of a header line, 0 = none.
func findDelimiter(header string) rune {
	best, most := rune(0), 0
	for _, d := range []rune{'\t', ';', ',', '|'} {
		if n := strings.Count(header, string(d)); n > most {
			best, most = d, n
		}
	}
	return best
}

// readDelimited reads cells set apart by commas, semicolons, tabs or bars,
// in quotation marks where they need them.
func readDelimited(name string, content []byte, o Options) (*Table, error) {
	text := decoded(content)
	lines := dataLines(text, o)
	delimiter := findDelimiter(firstLine(text, o))
	if o.Delimiter != "" {
		delimiter = []rune(strings.NewReplacer("tab", "\t", "\\t", "\t").Replace(o.Delimiter))[0]
	}
	if delimiter == 0 {
		delimiter = ','
	}
	split := func(l line) ([]string, error) {
		if !strings.Contains(l.text, `"`) {
			return strings.Split(l.text, string(delimiter)), nil
		}
		reader := csv.NewReader(strings.NewReader(l.text))
		reader.Comma, reader.FieldsPerRecord = delimiter, -1
		cells, err := reader.Read()
		if err != nil {
			return nil, &CellError{Place: Place{File: name, Row: l.number}, Text: l.text, Problem: err.Error(), Accepted: "cells with closed quotation marks", Kind: ErrUnreadable}
		}
		return cells, nil
	}
	names, rest, err := splitHeader(name, lines, o, split)
	if err != nil {
		return nil, err
	}
	return textTable(name, names, rest, split)
}
