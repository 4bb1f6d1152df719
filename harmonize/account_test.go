package harmonize_test

import (
	"context"
	"fmt"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"platemeld/harmonize"
	"platemeld/harmonize/plan"
)

// TestEveryRowIsAccountedFor: whatever mixture of good rows, missing values,
// other stars, rows set aside and repeated exposures comes in, every row
// leaves as merged or as set aside with a reason.
func TestEveryRowIsAccountedFor(t *testing.T) {
	folder := t.TempDir()
	rapid.Check(t, func(t *rapid.T) {
		var printed int
		var blocks strings.Builder
		for source := range rapid.IntRange(1, 3).Draw(t, "sources") {
			var table strings.Builder
			table.WriteString("date,v,e,star,note\n")
			rows := rapid.IntRange(3, 25).Draw(t, "rows")
			for row := range rows {
				velocity, star, note := fmt.Sprintf("%.2f", -10+rapid.Float64Range(-1, 1).Draw(t, "v")), "Velthorn 9", ""
				switch rapid.IntRange(0, 7).Draw(t, "kind") {
				case 0:
					velocity = rapid.SampledFrom([]string{"", "...", "--"}).Draw(t, "missing")
				case 1:
					star = "Another"
				case 2:
					note = "bad"
				}
				day := float64(row) + 0.25
				if rapid.Bool().Draw(t, "own") {
					day += 0.01 * float64(source+1)
				}
				fmt.Fprintf(&table, "%.4f,%s,0.10,%s,%s\n", 45000+day, velocity, star, note)
			}
			// One good row and one bad, so that every rule fits some row.
			fmt.Fprintf(&table, "%.4f,-10.0,0.10,Velthorn 9,bad\n%.4f,-10.1,0.10,Velthorn 9,\n", 46000.5, 46010.5+float64(source))
			printed += rows + 2
			name := fmt.Sprintf("s%d", source)
			if err := os.WriteFile(filepath.Join(folder, name+".csv"), []byte(table.String()), 0o644); err != nil {
				t.Fatal(err)
			}
			fmt.Fprintf(&blocks, `[[source]]
name = "%s"
file = "%s.csv"
reference = "invented"
instrument = "Dorn"
columns = {time = "date", velocity = "v", error = "e", star = "star"}
time = {form = "jd", offset = 2400000, scale = "utc", place = "geocentre"}
velocity = {frame = "barycentric"}
set_aside = [{column = "note", equals = "bad", reason = "noted as bad"}]
`, name, name)
		}
		text := "[star]\nname = \"Velthorn 9\"\nra = 215.6\ndec = -12.1\n[[instrument]]\nname = \"Dorn\"\n" + blocks.String() + "[fit]\nreference_instrument = \"Dorn\"\n"
		p, err := plan.Parse(filepath.Join(folder, "plan.toml"), []byte(text))
		if err != nil {
			t.Fatal(err)
		}
		series, err := harmonize.Merge(context.Background(), p, nil)
		if err != nil {
			t.Fatal(err)
		}
		setAside := 0
		for i := range series.Measurements {
			if m := &series.Measurements[i]; m.Fate != harmonize.FateMerged {
				setAside++
				if m.Reason == "" {
					t.Fatalf("%s is set aside without a reason", m.ID(p))
				}
			}
		}
		if printed != len(series.Rows)+setAside {
			t.Fatalf("%d rows printed, %d merged, %d set aside", printed, len(series.Rows), setAside)
		}
	})
}
