package tables_test

import (
	"bytes"
	"compress/gzip"
	"errors"
	"fmt"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"golang.org/x/text/encoding/charmap"
	"golang.org/x/text/encoding/unicode"

	"platemeld/harmonize/tables"
)

// write puts content into a file of its own and returns its path.
func write(t *testing.T, name string, content []byte) string {
	t.Helper()
	path := filepath.Join(t.TempDir(), name)
	if err := os.WriteFile(path, content, 0o644); err != nil {
		t.Fatal(err)
	}
	return path
}

// shown returns a table as text: names, then each row's number and cells.
func shown(table *tables.Table) string {
	var b strings.Builder
	for i, c := range table.Columns {
		if i > 0 {
			b.WriteString("|")
		}
		b.WriteString(c.Name)
	}
	for _, row := range table.Rows {
		fmt.Fprintf(&b, "\n%d:", row.Number)
		for i, cell := range row.Cells {
			if i > 0 {
				b.WriteString("|")
			}
			b.WriteString(cell.Text)
		}
	}
	return b.String()
}

// TestTextTables: what a file holds and how it is read. The dialects are
// common practice, no source; quotation marks are those of RFC 4180.
func TestTextTables(t *testing.T) {
	for _, test := range []struct {
		name, file, content string
		options             tables.Options
		want                string
	}{
		{"commas", "a.csv", "JD,v,e\n1,2,3\n4,,6\n", tables.Options{}, "JD|v|e\n2:1|2|3\n3:4||6"},
		{"semicolons with decimal commas", "a.csv", "JD;v\n1,5;2,5\n", tables.Options{}, "JD|v\n2:1,5|2,5"},
		{"tabs", "a.tsv", "JD\tv\n1\t2\n", tables.Options{}, "JD|v\n2:1|2"},
		{"bars", "a.txt", "JD|v\n1|2\n", tables.Options{}, "JD|v\n2:1|2"},
		{"quotation marks", "a.csv", "JD,note\n1,\"a, \"\"b\"\"\"\n", tables.Options{}, "JD|note\n2:1|a, \"b\""},
		{"comments and blank lines are no rows but count as lines", "a.csv", "# about\n\nJD,v\n1,2\n# more\n3,4\n", tables.Options{}, "JD|v\n4:1|2\n6:3|4"},
		{"another comment sign", "a.csv", "! about\nJD,v\n1,2\n", tables.Options{Comment: "!"}, "JD|v\n3:1|2"},
		{"title lines above the header", "a.csv", "The table\nby somebody, else\nJD,v\n1,2\n", tables.Options{HeaderRow: 3}, "JD|v\n4:1|2"},
		{"no header", "a.csv", "1,2\n3,4\n", tables.Options{HeaderRow: -1, ColumnNames: []string{"JD", "v"}}, "JD|v\n1:1|2\n2:3|4"},
		{"CR LF", "a.csv", "JD,v\r\n1,2\r\n", tables.Options{}, "JD|v\n2:1|2"},
		{"byte-order mark", "a.csv", "\xef\xbb\xbfJD,v\n1,2\n", tables.Options{}, "JD|v\n2:1|2"},
		{"a stated delimiter", "a.txt", "JD,x;v\n1,2;3\n", tables.Options{Delimiter: ";"}, "JD,x|v\n2:1,2|3"},
		{"blanks", "a.dat", "# plates\nJD   v    e\n  1  2    3\n 10 20   30\n", tables.Options{}, "JD|v|e\n3:1|2|3\n4:10|20|30"},
		{"blanks, names given", "a.dat", "1 2\n3 4\n", tables.Options{Format: "columns", ColumnNames: []string{"JD", "v"}}, "JD|v\n1:1|2\n2:3|4"},
	} {
		t.Run(test.name, func(t *testing.T) {
			table, err := tables.Read(write(t, test.file, []byte(test.content)), test.options)
			if err != nil {
				t.Fatal(err)
			}
			if got := shown(table); got != test.want {
				t.Errorf("got\n%s\nwant\n%s", got, test.want)
			}
		})
	}
}

// TestEncodings: the same table in four encodings.
func TestEncodings(t *testing.T) {
	const text = "Jahr,Radialgeschw. für Sonne\n1931,−17\n"
	const latin = "Jahr,Radialgeschw. für Sonne\n1931,-17\n"
	utf16, err := unicode.UTF16(unicode.LittleEndian, unicode.UseBOM).NewEncoder().String(text)
	if err != nil {
		t.Fatal(err)
	}
	latin1, err := charmap.ISO8859_1.NewEncoder().String(latin)
	if err != nil {
		t.Fatal(err)
	}
	windows, err := charmap.Windows1252.NewEncoder().String(strings.Replace(latin, "-17", "–17", 1))
	if err != nil {
		t.Fatal(err)
	}
	for name, content := range map[string]string{"UTF-8": text, "UTF-16": utf16, "Latin-1": latin1, "Windows-1252": windows} {
		table, err := tables.Read(write(t, "a.csv", []byte(content)), tables.Options{})
		if err != nil {
			t.Errorf("%s: %v", name, err)
			continue
		}
		if table.Columns[1].Name != "Radialgeschw. für Sonne" || !strings.HasSuffix(table.Rows[0].Cells[1].Text, "17") {
			t.Errorf("%s reads %s", name, shown(table))
		}
	}
}

func packed(t *testing.T, text string) []byte {
	t.Helper()
	var b bytes.Buffer
	w := gzip.NewWriter(&b)
	if _, err := w.Write([]byte(text)); err != nil {
		t.Fatal(err)
	}
	if err := w.Close(); err != nil {
		t.Fatal(err)
	}
	return b.Bytes()
}

func TestGzip(t *testing.T) {
	content := packed(t, "JD,v\n1,2\n")
	table, err := tables.Read(write(t, "a.csv.gz", content), tables.Options{})
	if err != nil || shown(table) != "JD|v\n2:1|2" {
		t.Errorf("packed: %v", err)
	}
	for name, damaged := range map[string][]byte{"cut short": content[:len(content)-6], "changed": append(append([]byte{}, content[:len(content)-8]...), 0, 0, 0, 0, 0, 0, 0, 0)} {
		if _, err := tables.Read(write(t, "a.csv.gz", damaged), tables.Options{}); !errors.Is(err, tables.ErrUnreadable) {
			t.Errorf("%s: got %v, want ErrUnreadable", name, err)
		}
	}
}

// TestRefusedTables: each error is of its kind and names the row.
func TestRefusedTables(t *testing.T) {
	for _, test := range []struct {
		name, content string
		options       tables.Options
		kind          error
		says          string
	}{
		{"a short row", "JD,v\n1,2\n3\n", tables.Options{}, tables.ErrUnreadable, "a.csv, row 3"},
		{"a long row", "JD,v\n1,2\n3,4,5\n", tables.Options{}, tables.ErrUnreadable, "a.csv, row 3"},
		{"an open quotation mark", "JD,v\n1,\"2\n", tables.Options{}, tables.ErrUnreadable, "a.csv, row 2"},
		{"empty", "", tables.Options{}, tables.ErrUnreadable, "a.csv"},
		{"comments only", "# nothing\n", tables.Options{}, tables.ErrUnreadable, "a.csv"},
		{"header beyond the end", "JD,v\n1,2\n", tables.Options{HeaderRow: 9}, tables.ErrNoColumn, "row 9"},
		{"no header and no names", "1,2\n", tables.Options{HeaderRow: -1}, tables.ErrNoColumn, "column_names"},
		{"unknown format", "JD,v\n", tables.Options{Format: "papyrus"}, tables.ErrUnreadable, "papyrus"},
		{"fixed without a ReadMe", "JD,v\n", tables.Options{Format: "fixed"}, tables.ErrUnreadable, "readme"},
		{"no workbook", "JD,v\n", tables.Options{Format: "xlsx"}, tables.ErrUnreadable, "a.csv"},
	} {
		t.Run(test.name, func(t *testing.T) {
			_, err := tables.Read(write(t, "a.csv", []byte(test.content)), test.options)
			if !errors.Is(err, test.kind) || !strings.Contains(err.Error(), test.says) {
				t.Errorf("got %v; want %v that says %q", err, test.kind, test.says)
			}
		})
	}
	if _, err := tables.Read("nowhere.csv", tables.Options{}); !errors.Is(err, os.ErrNotExist) {
		t.Errorf("no file: got %v", err)
	}
}

func TestColumn(t *testing.T) {
	table, err := tables.Read(write(t, "a.csv", []byte("JD,Vel. (km/s),vel,VEL\n1,2,3,4\n")), tables.Options{})
	if err != nil {
		t.Fatal(err)
	}
	if i, err := table.Column("vel.  (KM/S)"); err != nil || i != 1 {
		t.Errorf("a name but for case and blanks: %d, %v", i, err)
	}
	if i, err := table.Column("vel"); err != nil || i != 2 {
		t.Errorf("the exact name has precedence: %d, %v", i, err)
	}
	if _, err := table.Column("Vel"); !errors.Is(err, tables.ErrNoColumn) {
		t.Errorf("a name that fits two columns: %v", err)
	}
	_, err = table.Column("RV")
	if !errors.Is(err, tables.ErrNoColumn) || !strings.Contains(err.Error(), `"Vel. (km/s)"`) {
		t.Errorf("an unknown name: %v; want the names there are", err)
	}
	if table.Columns[1].Unit != "km/s" {
		t.Errorf("unit %q of the column %q", table.Columns[1].Unit, table.Columns[1].Name)
	}
	if got := table.Place(0, 1).String(); got != `a.csv, row 2, column 2 "Vel. (km/s)"` {
		t.Errorf("place %s", got)
	}
}

// FuzzText: no content makes the readers of text panic, and every row is as
// wide as the header.
func FuzzText(f *testing.F) {
	for _, text := range []string{"JD,v\n1,2\n", "a;b\n1,5;2\n", "a b\n1 2\n", "\"", "\xff\xfea\x00", "# c\n\n", "a\tb\n\t\n", "\xef\xbb\xbfa|b\n1|2"} {
		f.Add([]byte(text), "delimited")
		f.Add([]byte(text), "columns")
	}
	folder := f.TempDir()
	f.Fuzz(func(t *testing.T, content []byte, format string) {
		path := filepath.Join(folder, "a.txt")
		if err := os.WriteFile(path, content, 0o644); err != nil {
			t.Fatal(err)
		}
		table, err := tables.Read(path, tables.Options{Format: map[bool]string{true: "columns", false: "delimited"}[format == "columns"]})
		if err != nil {
			return
		}
		for _, row := range table.Rows {
			if len(row.Cells) != len(table.Columns) {
				t.Errorf("row %d has %d cells under %d columns", row.Number, len(row.Cells), len(table.Columns))
			}
		}
	})
}

func ExampleRead() {
	folder, err := os.MkdirTemp("", "example")
	if err != nil {
		fmt.Println(err)
		return
	}
	defer os.RemoveAll(folder)
	path := filepath.Join(folder, "plates.csv")
	if err := os.WriteFile(path, []byte("# 1908\nDate;Vel.\n1908 Jan 14,62;-17,4\n"), 0o644); err != nil {
		fmt.Println(err)
		return
	}
	table, err := tables.Read(path, tables.Options{})
	if err != nil {
		fmt.Println(err)
		return
	}
	column, err := table.Column("vel.")
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Printf("%s: %s\n", table.Place(0, column), table.Rows[0].Cells[column].Text)
	// Output: plates.csv, row 3, column 2 "Vel.": -17,4
}
