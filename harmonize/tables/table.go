package tables

import (
	"fmt"
	"strings"
)

// Table is one table as it stands in a file: cells as text, each with its
// place.
type Table struct {
	File, Sheet, Format string
	Columns             []Column
	Rows                []Row
	Notes               []Note
}

// Column is one column of a table, with what the file says of it.
type Column struct {
	Name, Unit, Description string
	Letter                  string // where it stands: "C" in a workbook, "1-11" as bytes, else its number
}

// Row is one row of data.
type Row struct {
	Number int    // as a person counts in the file or sheet, from 1
	Cells  []Cell // one for each column
}

// Kind says what a cell holds.
type Kind uint8

// The kinds of cell.
const (
	KindEmpty  Kind = iota
	KindText        // text, numbers typed as text among it
	KindNumber      // a workbook's number; Text is its stored value
	KindDate        // a workbook's date; Text is its serial number
)

// Cell is one cell as it stands in the file.
type Cell struct {
	Text     string
	Kind     Kind
	Date1904 bool // the serial number counts from 1904
}

// Note is a remark on what was found in a file.
type Note struct {
	Place Place
	Text  string
}

// String returns the note with its place.
func (n Note) String() string { return n.Place.String() + ": " + n.Text }

// Options says how a file is to be read. The zero value leaves it to the
// file's name and content.
type Options struct {
	Format      string
	Sheet       string
	HeaderRow   int
	ColumnNames []string
	ReadMe      string
	Table       string
	Delimiter   string
	Comment     string
}

// Column returns the index of a column by its name: the exact name, or else
// the only one equal but for case and blanks.
func (t *Table) Column(name string) (int, error) {
	found, count := -1, 0
	for i, c := range t.Columns {
		if c.Name == name {
			return i, nil
		}
		if fold(c.Name) == fold(name) {
			found, count = i, count+1
		}
	}
	if count == 1 {
		return found, nil
	}
	names := make([]string, len(t.Columns))
	for i, c := range t.Columns {
		names[i] = fmt.Sprintf("%q", c.Name)
	}
	return -1, &CellError{Place: Place{File: t.File, Sheet: t.Sheet}, Text: name, Problem: "there is no such column",
		Accepted: "one of " + strings.Join(names, ", "), Kind: ErrNoColumn}
}

func fold(name string) string { return strings.Join(strings.Fields(strings.ToLower(name)), " ") }

// Place returns the place of a cell by the indices of its row and column.
func (t *Table) Place(row, column int) Place {
	p := Place{File: t.File, Sheet: t.Sheet}
	if row >= 0 && row < len(t.Rows) {
		p.Row = t.Rows[row].Number
	}
	if column >= 0 && column < len(t.Columns) {
		p.Column = strings.TrimSpace(t.Columns[column].Letter + " \"" + t.Columns[column].Name + "\"")
	}
	return p
}
