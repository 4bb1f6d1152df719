package tables_test

import (
	"errors"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"time"

	"github.com/xuri/excelize/v2"

	"platemeld/harmonize/tables"
)

// workbook writes a workbook made by fill and returns its path.
func workbook(t *testing.T, fill func(book *excelize.File) error) string {
	t.Helper()
	book := excelize.NewFile()
	defer book.Close()
	path := filepath.Join(t.TempDir(), "plates.xlsx")
	if err := errors.Join(fill(book), book.SaveAs(path)); err != nil {
		t.Fatal(err)
	}
	return path
}

// fillPlates: two title rows, the header in row 3, a date cell, a number typed
// as text, a number shown with fewer digits than it has, a formula, a blank
// row and a hidden one.
func fillPlates(book *excelize.File) error {
	shortNumber, err1 := book.NewStyle(&excelize.Style{NumFmt: 1}) // shown without decimals
	return errors.Join(err1,
		book.SetSheetName("Sheet1", "1931"),
		book.SetCellValue("1931", "A1", "Plates of 1931"),
		book.SetSheetRow("1931", "A3", &[]any{"Date", "Vel. (km/s)", "Note"}),
		book.SetCellValue("1931", "A4", time.Date(1931, 5, 14, 3, 12, 0, 0, time.UTC)),
		book.SetCellValue("1931", "B4", -17.4567),
		book.SetCellStyle("1931", "B4", "B4", shortNumber),
		book.SetCellStr("1931", "A5", "1899 Dec 31.5"),
		book.SetCellStr("1931", "B5", "−16.9"),
		book.SetCellValue("1931", "A7", 11823.25),
		book.SetCellFormula("1931", "B7", "B4+1"),
		book.SetCellStr("1931", "C7", "faint"),
		book.SetRowVisible("1931", 7, false))
}

// TestWorkbook. The serial number of 1931 May 14 3:12 is its Julian date less
// 2415018.5 (ECMA-376, part 1, 18.17.4): 2426475.63333 gives 11457.13333.
func TestWorkbook(t *testing.T) {
	path := workbook(t, fillPlates)
	table, err := tables.Read(path, tables.Options{HeaderRow: 3})
	if err != nil {
		t.Fatal(err)
	}
	if table.Sheet != "1931" || len(table.Rows) != 3 {
		t.Fatalf("sheet %q, %s", table.Sheet, shown(table))
	}
	date := table.Rows[0].Cells[0]
	if date.Kind != tables.KindDate || !strings.HasPrefix(date.Text, "11457.1333") || date.Date1904 {
		t.Errorf("the date cell is %+v", date)
	}
	if v := table.Rows[0].Cells[1]; v.Kind != tables.KindNumber || v.Text != "-17.4567" {
		t.Errorf("the number shown without decimals is %+v", v)
	}
	if v := table.Rows[1].Cells[1]; v.Kind != tables.KindText || v.Text != "−16.9" || table.Rows[1].Number != 5 {
		t.Errorf("the number typed as text is %+v in row %d", v, table.Rows[1].Number)
	}
	if c := table.Rows[0].Cells[2]; c.Kind != tables.KindEmpty {
		t.Errorf("the empty cell is %+v", c)
	}
	if c := table.Columns[1]; c.Letter != "B" || c.Unit != "km/s" || table.Place(0, 1).String() != `plates.xlsx, sheet "1931", row 4, column B "Vel. (km/s)"` {
		t.Errorf("column %+v, place %s", c, table.Place(0, 1))
	}
	var notes []string
	for _, note := range table.Notes {
		notes = append(notes, note.String())
	}
	all := strings.Join(notes, "\n")
	for _, want := range []string{"above the header", "typed as text", "hidden", "formula"} {
		if !strings.Contains(all, want) {
			t.Errorf("no note about %q among:\n%s", want, all)
		}
	}
}

// TestWorkbook1904: the other date system (1904 January 1 is 0).
func TestWorkbook1904(t *testing.T) {
	yes := true
	path := workbook(t, func(book *excelize.File) error {
		style, err := book.NewStyle(&excelize.Style{NumFmt: 22})
		return errors.Join(err, book.SetWorkbookProps(&excelize.WorkbookPropsOptions{Date1904: &yes}),
			book.SetSheetRow("Sheet1", "A1", &[]any{"Date"}), book.SetCellValue("Sheet1", "A2", 35064.5), book.SetCellStyle("Sheet1", "A2", "A2", style))
	})
	table, err := tables.Read(path, tables.Options{})
	if err != nil {
		t.Fatal(err)
	}
	if c := table.Rows[0].Cells[0]; c.Kind != tables.KindDate || !c.Date1904 || c.Text != "35064.5" {
		t.Errorf("the date cell is %+v", c)
	}
}

// TestForeignWorkbook reads the demo's workbook, which openpyxl wrote.
func TestForeignWorkbook(t *testing.T) {
	table, err := tables.Read("../../testdata/demo/ollery.xlsx", tables.Options{Sheet: "1926-1952", HeaderRow: 4})
	if err != nil {
		t.Fatal(err)
	}
	if len(table.Rows) != 52 || table.Rows[0].Cells[0].Kind != tables.KindDate || table.Rows[0].Number != 5 {
		t.Errorf("%d rows, the first is %+v", len(table.Rows), table.Rows[0])
	}
}

func TestWorkbookRefuses(t *testing.T) {
	path := workbook(t, func(book *excelize.File) error {
		_, err := book.NewSheet("other")
		return errors.Join(err, book.SetSheetRow("Sheet1", "A1", &[]any{"JD", "v"}), book.SetSheetRow("Sheet1", "A2", &[]any{1, 2, 3}))
	})
	for _, test := range []struct {
		options tables.Options
		kind    error
		says    string
	}{
		{tables.Options{Sheet: "plates"}, tables.ErrNoSheet, "Sheet1, other"},
		{tables.Options{}, tables.ErrNoSheet, "several sheets"},
		{tables.Options{Sheet: "Sheet1", HeaderRow: 40}, tables.ErrNoColumn, "header row"},
		{tables.Options{Sheet: "Sheet1"}, tables.ErrUnreadable, "row 2"},
	} {
		if _, err := tables.Read(path, test.options); !errors.Is(err, test.kind) || !strings.Contains(err.Error(), test.says) {
			t.Errorf("%+v: got %v; want %v that says %q", test.options, err, test.kind, test.says)
		}
	}
	content, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	if _, err := tables.Read(write(t, "cut.xlsx", content[:len(content)/2]), tables.Options{}); !errors.Is(err, tables.ErrUnreadable) {
		t.Errorf("cut short: got %v, want ErrUnreadable", err)
	}
}
