package tables

import (
	"bytes"
	"fmt"
	"path/filepath"
	"strconv"
	"strings"
)

// readFixed reads fixed-width data by the byte-by-byte description in a
// ReadMe. Bytes are cut before they are decoded; a short line is filled up
// with blanks.
func readFixed(name string, content []byte, o Options) (*Table, error) {
	if o.ReadMe == "" {
		return nil, &CellError{Place: Place{File: name}, Problem: "fixed-width data need their ReadMe", Accepted: "readme in the plan", Kind: ErrUnreadable}
	}
	description, err := unpacked(o.ReadMe)
	if err != nil {
		return nil, err
	}
	table := o.Table
	if table == "" {
		table = strings.TrimSuffix(name, ".gz")
	}
	columns, err := readDescription(filepath.Base(o.ReadMe), decoded(description), table)
	if err != nil {
		return nil, err
	}
	t := &Table{File: name}
	for _, c := range columns {
		letter := fmt.Sprintf("bytes %d-%d", c.from, c.to)
		t.Columns = append(t.Columns, Column{Name: c.label, Unit: strings.Trim(c.unit, "-"), Description: c.explain, Letter: letter})
	}
	number := 0
	for raw := range bytes.Lines(content) {
		number++
		raw = bytes.TrimRight(raw, "\r\n")
		if len(bytes.TrimSpace(raw)) == 0 {
			continue
		}
		row := Row{Number: number, Cells: make([]Cell, len(columns))}
		for i, c := range columns {
			row.Cells[i] = fixedCell(raw, c)
		}
		if last := columns[len(columns)-1].to; len(bytes.TrimRight(raw, " ")) > last {
			return nil, &CellError{Place: Place{File: name, Row: number}, Text: string(raw), Kind: ErrUnreadable,
				Problem: fmt.Sprintf("the row has text after byte %d, where its description ends", last), Accepted: "a row as long as described"}
		}
		t.Rows = append(t.Rows, row)
	}
	return t, nil
}

// fixedCell cuts one cell; the description's null value is an empty cell.
func fixedCell(raw []byte, c byteColumn) Cell {
	from, to := min(c.from-1, len(raw)), min(c.to, len(raw))
	text := decoded(bytes.TrimSpace(raw[from:to]))
	if c.null != "" && text != "" {
		value, err1 := strconv.ParseFloat(text, 64)
		null, err2 := strconv.ParseFloat(c.null, 64)
		if text == c.null || err1 == nil && err2 == nil && value == null {
			return Cell{}
		}
	}
	return textCell(text)
}
