package tables

import (
	"bufio"
	"bytes"
	"compress/gzip"
	"errors"
	"fmt"
	"io"
	"os"
	"path/filepath"
	"strings"

	"golang.org/x/text/encoding/charmap"
	"golang.org/x/text/encoding/unicode"
	"golang.org/x/text/transform"
	"unicode/utf8"
)

// What a file from outside can hold at most.
const (
	maxBytes   = 1 << 30 // unpacked
	maxColumns = 1000
	maxRows    = 10_000_000
)

// Read reads one table from a file, which may be compressed with gzip. The
// error names the file and, where it can, the sheet, row and column.
func Read(path string, o Options) (*Table, error) {
	content, err := unpacked(path)
	if err != nil {
		return nil, err
	}
	name := filepath.Base(path)
	format := o.Format
	if format == "" {
		format = sniff(strings.TrimSuffix(name, ".gz"), content, o)
	}
	for _, f := range formats {
		if f.word != format {
			continue
		}
		t, err := f.read(name, content, o)
		if err != nil {
			return nil, err
		}
		t.File, t.Format = name, format
		return t, nil
	}
	return nil, fmt.Errorf("%w: format %q; accepted: %s", ErrUnreadable, format, strings.Join(Formats(), ", "))
}

// formats lists the formats and their readers; a new one is a line here and a
// file with its reader. The reader gets the file's name for messages and its
// unpacked content.
var formats = []struct {
	word string
	read func(name string, content []byte, o Options) (*Table, error)
}{
	{"xlsx", readWorkbook},
	{"delimited", readDelimited},
	{"columns", readColumns},
	{"fixed", readFixed},
}

// Formats returns the words for the formats.
func Formats() []string {
	words := make([]string, len(formats))
	for i, f := range formats {
		words[i] = f.word
	}
	return words
}

// unpacked returns the content of a file, without its gzip packing.
func unpacked(path string) ([]byte, error) {
	file, err := os.Open(path)
	if err != nil {
		return nil, fmt.Errorf("tables: %w", err)
	}
	defer file.Close()
	buffered := bufio.NewReader(file)
	var in io.Reader = buffered
	if magic, err := buffered.Peek(2); err == nil && magic[0] == 0x1f && magic[1] == 0x8b {
		packed, err := gzip.NewReader(buffered)
		if err != nil {
			return nil, fmt.Errorf("%w: %s: %w", ErrUnreadable, filepath.Base(path), err)
		}
		in = packed
	}
	content, err := io.ReadAll(io.LimitReader(in, maxBytes+1))
	if err != nil {
		if errors.Is(err, gzip.ErrChecksum) || errors.Is(err, io.ErrUnexpectedEOF) {
			return nil, fmt.Errorf("%w: %s is damaged or cut short: %w", ErrUnreadable, filepath.Base(path), err)
		}
		return nil, fmt.Errorf("tables: %w", err)
	}
	if len(content) > maxBytes {
		return nil, fmt.Errorf("%w: %s has more than %d bytes", ErrTooLarge, filepath.Base(path), maxBytes)
	}
	return content, nil
}

// sniff finds the format from the name and the first bytes.
func sniff(name string, content []byte, o Options) string {
	switch {
	case bytes.HasPrefix(content, []byte("PK\x03\x04")):
		return "xlsx"
	case o.ReadMe != "":
		return "fixed"
	case strings.HasSuffix(strings.ToLower(name), ".csv"), strings.HasSuffix(strings.ToLower(name), ".tsv"), o.Delimiter != "":
		return "delimited"
	}
	if findDelimiter(firstLine(decoded(content), o)) != 0 {
		return "delimited"
	}
	return "columns"
}

// decoded returns the content as UTF-8 text. A byte-order mark decides;
// without one, text that is not UTF-8 is read as Windows-1252, which Latin-1
// is a part of.
func decoded(content []byte) string {
	switch {
	case bytes.HasPrefix(content, []byte("\xef\xbb\xbf")):
		return string(content[3:])
	case bytes.HasPrefix(content, []byte("\xff\xfe")), bytes.HasPrefix(content, []byte("\xfe\xff")):
		text, _, err := transform.Bytes(unicode.UTF16(unicode.LittleEndian, unicode.UseBOM).NewDecoder(), content)
		if err == nil {
			return string(text)
		}
	case !utf8.Valid(content):
		text, err := charmap.Windows1252.NewDecoder().Bytes(content)
		if err == nil {
			return string(text)
		}
	}
	return string(content)
}

// line is one line of a text file that is not blank and no comment.
type line struct {
	number int // from 1
	text   string
}

// dataLines splits text into lines and leaves out blank ones and comments.
func dataLines(text string, o Options) []line {
	comment := o.Comment
	if comment == "" {
		comment = "#"
	}
	var lines []line
	number := 0
	for raw := range strings.Lines(text) {
		number++
		raw = strings.TrimRight(raw, "\r\n")
		if strings.TrimSpace(raw) == "" || strings.HasPrefix(strings.TrimSpace(raw), comment) {
			continue
		}
		lines = append(lines, line{number, raw})
	}
	return lines
}

func firstLine(text string, o Options) string {
	if lines := dataLines(text, o); len(lines) > 0 {
		return lines[0].text
	}
	return ""
}

// splitHeader takes the header off the lines and returns the column names.
func splitHeader(name string, lines []line, o Options, split func(line) ([]string, error)) ([]string, []line, error) {
	switch {
	case o.HeaderRow < 0 || len(o.ColumnNames) > 0 && o.HeaderRow == 0:
		if len(o.ColumnNames) == 0 {
			return nil, nil, &CellError{Place: Place{File: name}, Problem: "the table has no header row and no names of columns are given", Accepted: "column_names in the plan", Kind: ErrNoColumn}
		}
		return o.ColumnNames, lines, nil
	case o.HeaderRow == 0:
		if len(lines) == 0 {
			return nil, nil, &CellError{Place: Place{File: name}, Problem: "the table is empty", Accepted: "a row of column names and rows of data", Kind: ErrUnreadable}
		}
		names, err := split(lines[0])
		return names, lines[1:], err
	}
	for i, l := range lines {
		if l.number == o.HeaderRow {
			names, err := split(l)
			if len(o.ColumnNames) > 0 {
				names = o.ColumnNames
			}
			return names, lines[i+1:], err
		}
	}
	return nil, nil, &CellError{Place: Place{File: name, Row: o.HeaderRow}, Problem: "the header row is not there, or blank, or a comment", Accepted: "a header_row that holds the column names", Kind: ErrNoColumn}
}

// textTable builds a table from split lines. A line that has more or fewer
// cells than there are columns is an error.
func textTable(name string, names []string, lines []line, split func(line) ([]string, error)) (*Table, error) {
	if len(names) > maxColumns {
		return nil, fmt.Errorf("%w: %s has %d columns", ErrTooLarge, name, len(names))
	}
	if len(lines) > maxRows {
		return nil, fmt.Errorf("%w: %s has %d rows", ErrTooLarge, name, len(lines))
	}
	t := &Table{File: name}
	for i, n := range names {
		n = strings.TrimSpace(n)
		t.Columns = append(t.Columns, Column{Name: n, Unit: unitInName(n), Letter: fmt.Sprint(i + 1)})
	}
	t.Rows = make([]Row, 0, len(lines))
	for _, l := range lines {
		cells, err := split(l)
		if err != nil {
			return nil, err
		}
		if len(cells) != len(names) {
			return nil, &CellError{Place: Place{File: name, Row: l.number}, Text: l.text, Kind: ErrUnreadable,
				Problem: fmt.Sprintf("the row has %d cells under %d columns", len(cells), len(names)), Accepted: "as many cells as there are columns"}
		}
		row := Row{Number: l.number, Cells: make([]Cell, len(cells))}
		for i, text := range cells {
			row.Cells[i] = textCell(text)
		}
		t.Rows = append(t.Rows, row)
	}
	return t, nil
}

func textCell(text string) Cell {
	if strings.TrimSpace(text) == "" {
		return Cell{Text: text}
	}
	return Cell{Text: text, Kind: KindText}
}

// unitInName finds a unit of velocity in brackets in a column's name.
func unitInName(name string) string {
	for _, unit := range []string{"km/s", "m/s"} {
		if strings.Contains(name, "("+unit+")") || strings.Contains(name, "["+unit+"]") {
			return unit
		}
	}
	return ""
}
