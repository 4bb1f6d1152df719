package tables

import (
	"bytes"
	"fmt"
	"strconv"
	"strings"

	"github.com/xuri/excelize/v2"
)

// readWorkbook reads one sheet of a workbook by its stored values.
func readWorkbook(name string, content []byte, o Options) (*Table, error) {
	book, err := excelize.OpenReader(bytes.NewReader(content), excelize.Options{RawCellValue: true, UnzipSizeLimit: maxBytes})
	if err != nil {
		return nil, fmt.Errorf("%w: %s: %w", ErrUnreadable, name, err)
	}
	defer book.Close()
	sheet, err := chooseSheet(name, book, o.Sheet)
	if err != nil {
		return nil, err
	}
	properties, err := book.GetWorkbookProps()
	if err != nil {
		return nil, fmt.Errorf("%w: %s: %w", ErrUnreadable, name, err)
	}
	rows, err := book.GetRows(sheet)
	if err != nil {
		return nil, fmt.Errorf("%w: %s, sheet %q: %w", ErrUnreadable, name, sheet, err)
	}
	r := sheetReader{book: book, name: name, sheet: sheet, date1904: properties.Date1904 != nil && *properties.Date1904, dateStyles: map[int]bool{}}
	return r.table(rows, o)
}

func chooseSheet(name string, book *excelize.File, wanted string) (string, error) {
	sheets := book.GetSheetList()
	for _, s := range sheets {
		if s == wanted || fold(s) == fold(wanted) {
			return s, nil
		}
	}
	if wanted == "" && len(sheets) == 1 {
		return sheets[0], nil
	}
	problem := "there is no such sheet"
	if wanted == "" {
		problem = "the workbook has several sheets and none is named"
	}
	return "", &CellError{Place: Place{File: name, Sheet: wanted}, Problem: problem, Accepted: "one of " + strings.Join(sheets, ", "), Kind: ErrNoSheet}
}

type sheetReader struct {
	book        *excelize.File
	name, sheet string
	date1904    bool
	dateStyles  map[int]bool
	seen        []oddity // in the order of their first appearance
}

// oddity counts something noteworthy, to be noted once.
type oddity struct {
	text  string
	first Place
	count int
}

func (r *sheetReader) count(place Place, text string) {
	for i := range r.seen {
		if r.seen[i].text == text {
			r.seen[i].count++
			return
		}
	}
	r.seen = append(r.seen, oddity{text, place, 1})
}

// notes returns the oddities, each with its number and first place.
func (r *sheetReader) notes() []Note {
	var list []Note
	for _, o := range r.seen {
		list = append(list, Note{o.first, fmt.Sprintf("%s (%d in all)", o.text, o.count)})
	}
	return list
}

func (r *sheetReader) table(rows [][]string, o Options) (*Table, error) {
	t := &Table{File: r.name, Sheet: r.sheet}
	header := o.HeaderRow
	if header == 0 {
		for header < len(rows) && strings.TrimSpace(strings.Join(rows[header], "")) == "" {
			header++
		}
		header++
	}
	if header < 1 || header > len(rows) {
		return nil, &CellError{Place: Place{File: r.name, Sheet: r.sheet, Row: header}, Problem: "the header row is not there", Accepted: fmt.Sprintf("header_row from 1 to %d", len(rows)), Kind: ErrNoColumn}
	}
	for k := range header - 1 {
		if strings.TrimSpace(strings.Join(rows[k], "")) != "" {
			r.count(Place{File: r.name, Sheet: r.sheet, Row: k + 1}, "row above the header, not read")
		}
	}
	for i, cell := range rows[header-1] {
		letter, err := excelize.ColumnNumberToName(i + 1)
		if err != nil {
			return nil, fmt.Errorf("%w: %s: %w", ErrTooLarge, r.name, err)
		}
		t.Columns = append(t.Columns, Column{Name: strings.TrimSpace(cell), Unit: unitInName(cell), Letter: letter})
	}
	for k := header; k < len(rows); k++ {
		if strings.TrimSpace(strings.Join(rows[k], "")) == "" {
			continue
		}
		row, err := r.row(t, k+1, rows[k])
		if err != nil {
			return nil, err
		}
		t.Rows = append(t.Rows, row)
	}
	if len(t.Rows) > maxRows {
		return nil, fmt.Errorf("%w: %s has %d rows", ErrTooLarge, r.name, len(t.Rows))
	}
	t.Notes = r.notes()
	return t, nil
}

func (r *sheetReader) row(t *Table, number int, texts []string) (Row, error) {
	row := Row{Number: number, Cells: make([]Cell, len(t.Columns))}
	visible, err := r.book.GetRowVisible(r.sheet, number)
	if err != nil {
		return row, fmt.Errorf("%w: %s: %w", ErrUnreadable, r.name, err)
	}
	if !visible {
		r.count(Place{File: r.name, Sheet: r.sheet, Row: number}, "row hidden in the workbook, read all the same")
	}
	for i, text := range texts {
		if i >= len(t.Columns) {
			if strings.TrimSpace(text) == "" {
				continue
			}
			return row, &CellError{Place: Place{File: r.name, Sheet: r.sheet, Row: number}, Text: text, Problem: "the row goes beyond the header's columns", Accepted: "a name for every column in use", Kind: ErrUnreadable}
		}
		if row.Cells[i], err = r.cell(t, number, i, text); err != nil {
			return row, err
		}
	}
	return row, nil
}

func (r *sheetReader) cell(t *Table, number, column int, text string) (Cell, error) {
	axis := fmt.Sprintf("%s%d", t.Columns[column].Letter, number)
	place := Place{File: r.name, Sheet: r.sheet, Row: number, Column: t.Columns[column].Letter}
	kind, err := r.book.GetCellType(r.sheet, axis)
	if err != nil {
		return Cell{}, fmt.Errorf("%w: %s: %w", ErrUnreadable, place, err)
	}
	if formula, err := r.book.GetCellFormula(r.sheet, axis); err == nil && formula != "" {
		r.count(place, "formula, read by its stored value, which may be stale")
	}
	if strings.TrimSpace(text) == "" {
		return Cell{}, nil
	}
	switch kind {
	case excelize.CellTypeUnset, excelize.CellTypeNumber, excelize.CellTypeFormula, excelize.CellTypeDate:
		style, err := r.book.GetCellStyle(r.sheet, axis)
		if err != nil {
			return Cell{}, fmt.Errorf("%w: %s: %w", ErrUnreadable, place, err)
		}
		if r.isDate(style) {
			return Cell{Text: text, Kind: KindDate, Date1904: r.date1904}, nil
		}
		return Cell{Text: text, Kind: KindNumber, Date1904: r.date1904}, nil
	case excelize.CellTypeError:
		return Cell{}, &CellError{Place: place, Text: text, Problem: "the cell holds a spreadsheet error", Accepted: "a value", Kind: ErrUnreadable}
	}
	if numeric(text) {
		r.count(place, "number typed as text")
	}
	return Cell{Text: text, Kind: KindText}, nil
}

// numeric reports whether a text is a plain number.
func numeric(text string) bool {
	_, err := strconv.ParseFloat(strings.NewReplacer("−", "-", ",", ".").Replace(strings.TrimSpace(text)), 64)
	return err == nil
}

// isDate reports whether a style shows numbers as dates: one of the built-in
// date formats of ECMA-376 (18.8.30: 14 to 22 and 45 to 47), or a format of
// the workbook's own with a letter for year or day.
func (r *sheetReader) isDate(style int) bool {
	if known, ok := r.dateStyles[style]; ok {
		return known
	}
	s, err := r.book.GetStyle(style)
	isDate := false
	if err == nil && s != nil {
		isDate = s.NumFmt >= 14 && s.NumFmt <= 22 || s.NumFmt >= 27 && s.NumFmt <= 36 || s.NumFmt >= 45 && s.NumFmt <= 47 || s.NumFmt >= 50 && s.NumFmt <= 58
		if s.CustomNumFmt != nil {
			isDate = strings.ContainsAny(strings.ToLower(*s.CustomNumFmt), "yd")
		}
	}
	r.dateStyles[style] = isDate
	return isDate
}
