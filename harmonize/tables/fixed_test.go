package tables_test

import (
	"errors"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"platemeld/harmonize/tables"
)

// describedCatalogue has the byte-by-byte description of a catalogue of
// velocities in the manner of CDS III/55: column bytes, formats, units and
// labels as published there (Mermilliod 1979), explanations in our words;
// the data are invented. It shares its description with a second file, has
// single bytes, a range with blanks, labels that hang left, a continuation
// line, a null value and a note.
const describedCatalogue = `III/0                       Invented velocities
================================================================================
File Summary:
--------------------------------------------------------------------------------
 FileName    Lrecl    Records    Explanations
--------------------------------------------------------------------------------
table1.dat      80          3    First part
--------------------------------------------------------------------------------

Byte-by-byte Description of file: table1.dat table2.dat
--------------------------------------------------------------------------------
   Bytes Format Units   Label     Explanations
--------------------------------------------------------------------------------
   1-  8  A8    ---     Name      Name of the star
       9  A1    ---   m_Name      [AB]? Component
  14- 25  F12.4 d       JD        Date of observation
  28- 34  F7.2  km/s    RV        Velocity of the star
                                   on a second line
  37- 41  F5.2  km/s  e_RV        ?=9.99 Probable error on RV (1)
  43- 45  I3    ---     Nl        ? Number of lines
  48- 52  F5.1  10-7    Disp      Dispersion
--------------------------------------------------------------------------------
Note (1): probable, not standard.
--------------------------------------------------------------------------------

Byte-by-byte Description of file: refs.dat
--------------------------------------------------------------------------------
   Bytes Format Units   Label     Explanations
--------------------------------------------------------------------------------
   1-  4  A4    ---     Ref       Reference
--------------------------------------------------------------------------------
`

const cataloguedRows = "Velth 9 A    2433333.4567   -17.25   0.75  12   38.5\n" +
	"Velth 9      2433334.4567   -16.25   9.99       38.5\r\n" +
	"\n" +
	"Velth 9 B    2433335.4567   -15.25\n"

// writeCatalogue writes ReadMe and data and returns their paths.
func writeCatalogue(t *testing.T, readme, name, rows string) (data, description string) {
	t.Helper()
	folder := t.TempDir()
	description = filepath.Join(folder, "ReadMe")
	data = filepath.Join(folder, name)
	for path, text := range map[string]string{description: readme, data: rows} {
		if err := os.WriteFile(path, []byte(text), 0o644); err != nil {
			t.Fatal(err)
		}
	}
	return data, description
}

// TestFixed: bytes are cut as described (Ochsenbein 2000, Standard Description
// for Astronomical Catalogues 2.0).
func TestFixed(t *testing.T) {
	for _, name := range []string{"table1.dat", "table2.dat"} {
		data, readme := writeCatalogue(t, describedCatalogue, name, cataloguedRows)
		table, err := tables.Read(data, tables.Options{ReadMe: readme})
		if err != nil {
			t.Fatal(err)
		}
		want := "Name|m_Name|JD|RV|e_RV|Nl|Disp\n" +
			"1:Velth 9|A|2433333.4567|-17.25|0.75|12|38.5\n" +
			"2:Velth 9||2433334.4567|-16.25|||38.5\n" + // 9.99 is the null value
			"4:Velth 9|B|2433335.4567|-15.25|||" // a short line is filled up
		if got := shown(table); got != want {
			t.Errorf("%s reads\n%s\nwant\n%s", name, got, want)
		}
		rv := table.Columns[3]
		if rv.Unit != "km/s" || rv.Letter != "bytes 28-34" || !strings.Contains(rv.Description, "on a second line") {
			t.Errorf("the velocity column is %+v", rv)
		}
		if table.Rows[1].Cells[4].Kind != tables.KindEmpty {
			t.Errorf("the null value is %v", table.Rows[1].Cells[4])
		}
	}
}

func TestFixedRefuses(t *testing.T) {
	for _, test := range []struct {
		name, readme, file, rows string
		options                  tables.Options
		says                     string
	}{
		{"a file that is not described", describedCatalogue, "table3.dat", cataloguedRows, tables.Options{}, "table1.dat, table2.dat, refs.dat"},
		{"a description without columns", strings.Split(describedCatalogue, "   1-  8")[0], "table1.dat", cataloguedRows, tables.Options{}, "names no column"},
		{"bytes the wrong way round", strings.Replace(describedCatalogue, "28- 34", "34- 28", 1), "table1.dat", cataloguedRows, tables.Options{}, "34- 28"},
		{"text behind the last byte", describedCatalogue, "table1.dat", "Velth 9      2433333.4567   -17.25   0.75  12   38.5 and more\n", tables.Options{}, "row 1"},
	} {
		t.Run(test.name, func(t *testing.T) {
			data, readme := writeCatalogue(t, test.readme, test.file, test.rows)
			test.options.ReadMe = readme
			_, err := tables.Read(data, test.options)
			if !errors.Is(err, tables.ErrUnreadable) || !strings.Contains(err.Error(), test.says) {
				t.Errorf("got %v; want ErrUnreadable that says %q", err, test.says)
			}
		})
	}
	data, _ := writeCatalogue(t, describedCatalogue, "table1.dat", cataloguedRows)
	if _, err := tables.Read(data, tables.Options{ReadMe: "nowhere/ReadMe"}); !errors.Is(err, os.ErrNotExist) {
		t.Errorf("no ReadMe: got %v", err)
	}
}

// TestRealReadMe reads the table of 51 Peg that Birkby et al. 2017 published
// (CDS J/AJ/153/138): 639 rows by its own ReadMe.
func TestRealReadMe(t *testing.T) {
	folder := filepath.Join("..", "..", "..", "shared", "real", "51peg")
	if _, err := os.Stat(folder); err != nil {
		t.Skipf("the published velocities of 51 Peg are not beside this checkout (%v)", err)
	}
	table, err := tables.Read(filepath.Join(folder, "table1.dat"), tables.Options{ReadMe: filepath.Join(folder, "ReadMe")})
	if err != nil {
		t.Fatal(err)
	}
	if len(table.Rows) != 639 {
		t.Errorf("%d rows, the ReadMe says 639", len(table.Rows))
	}
	if names := strings.SplitN(shown(table), "\n", 2)[0]; names != "BJD|RV|e_RV|Set" {
		t.Errorf("columns %s", names)
	}
	if unit := table.Columns[1].Unit; unit != "m/s" {
		t.Errorf("unit %q of the velocity, the ReadMe says m/s", unit)
	}
}

// FuzzFixed: no ReadMe and no data make the reader panic.
func FuzzFixed(f *testing.F) {
	f.Add(describedCatalogue, cataloguedRows)
	f.Add("Byte-by-byte Description of file: table1.dat\n----------\n   Bytes\n---------\n 1 A1 --- x\n", "a")
	f.Add("Byte-by-byte Description of file: [\n", "")
	f.Add(strings.Replace(describedCatalogue, "28- 34", "28-999999999", 1), cataloguedRows)
	folder := f.TempDir()
	f.Fuzz(func(t *testing.T, readme, rows string) {
		data, description := filepath.Join(folder, "table1.dat"), filepath.Join(folder, "ReadMe")
		if err := errors.Join(os.WriteFile(data, []byte(rows), 0o644), os.WriteFile(description, []byte(readme), 0o644)); err != nil {
			t.Fatal(err)
		}
		table, err := tables.Read(data, tables.Options{Format: "fixed", ReadMe: description})
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
