package harmonize_test

import (
	"context"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"platemeld/harmonize"
	"platemeld/harmonize/plan"
)

// mergeTables writes tables of "date,v" to a folder and merges them; sources
// holds name, instrument and table of each.
func mergeTables(t *testing.T, head string, sources ...[3]string) *harmonize.Series {
	t.Helper()
	folder := t.TempDir()
	text := "[star]\nname = \"Velthorn 9\"\nra = 215.6\ndec = -12.1\n" + head
	for _, s := range sources {
		name, instrument, table := s[0], s[1], s[2]
		if err := os.WriteFile(filepath.Join(folder, name+".csv"), []byte("date,v\n"+table), 0o644); err != nil {
			t.Fatal(err)
		}
		text += "[[source]]\nname = \"" + name + "\"\nfile = \"" + name + ".csv\"\nreference = \"invented\"\ninstrument = \"" + instrument + `"
columns = {time = "date", velocity = "v"}
time = {form = "jd", scale = "tdb", place = "barycentre"}
velocity = {frame = "barycentric"}
`
	}
	p, err := plan.Parse(filepath.Join(folder, "plan.toml"), []byte(text))
	if err != nil {
		t.Fatal(err)
	}
	series, err := harmonize.Merge(context.Background(), p, nil)
	if err != nil {
		t.Fatal(err)
	}
	return series
}

// fates lists what became of each row, as "name:row fate" or "name:row ->
// name:row" for a duplicate.
func fates(s *harmonize.Series) string {
	var list []string
	for i := range s.Measurements {
		m := &s.Measurements[i]
		if m.DuplicateOf >= 0 {
			list = append(list, m.ID(s.Plan)+" -> "+s.Measurements[m.DuplicateOf].ID(s.Plan))
		} else if m.Fate != harmonize.FateMerged {
			list = append(list, m.ID(s.Plan)+" "+m.Fate.String())
		}
	}
	return strings.Join(list, "; ")
}

func TestDuplicates(t *testing.T) {
	const two = "[[instrument]]\nname = \"A\"\n[[instrument]]\nname = \"B\"\nspectrograph = \"A\"\n[[instrument]]\nname = \"C\"\n"
	early := "2445000.3000,1.0\n2445010.3000,1.2\n2445020.3000,0.9\n"
	tests := []struct {
		name, head string
		sources    [][3]string
		want       string
	}{
		{"the later source of the plan wins", two,
			[][3]string{{"p", "A", early}, {"q", "A", "2445010.3001,1.1\n2445030.3,1.0\n"}}, "p:3 -> q:2"},
		{"precedence wins over the order of the plan", two + "[duplicates]\nprecedence = [\"p\"]\n",
			[][3]string{{"p", "A", early}, {"q", "A", "2445010.3001,1.1\n2445030.3,1.0\n"}}, "q:2 -> p:3"},
		{"another spectrograph at the same time is no duplicate", two,
			[][3]string{{"p", "A", early}, {"q", "C", early}}, ""},
		{"two reductions with zero points of their own share exposures", two,
			[][3]string{{"p", "A", early}, {"q", "B", "2445010.3,-8.1\n2445040.3,-8.2\n"}}, "p:3 -> q:2"},
		{"beyond the tolerance", two + "[duplicates]\nwithin_days = 0.00005\n",
			[][3]string{{"p", "A", early}, {"q", "A", "2445010.3001,1.1\n2445030.3,1.0\n"}}, ""},
		{"a tolerance of 0 looks for none", two + "[duplicates]\nwithin_days = 0.0\n",
			[][3]string{{"p", "A", early}, {"q", "A", early}}, ""},
		{"each row answers for one only, the closest", two + "[duplicates]\nwithin_days = 0.01\n",
			[][3]string{{"p", "A", "2445010.3000,1.0\n2445010.3040,1.1\n2445020.3,0.9\n"}, {"q", "A", "2445010.3050,1.1\n2445030.3,1.0\n"}}, "p:3 -> q:2"},
		{"a row printed twice in one source", two,
			[][3]string{{"p", "A", "2445010.3,1.0\n2445020.3,0.9\n2445010.3,1.0\n"}}, "p:4 -> p:2"},
		{"three sources point to the one in use", two + "[duplicates]\nprecedence = [\"r\", \"q\", \"p\"]\n",
			[][3]string{{"p", "A", early}, {"q", "A", "2445010.3,1.1\n2445020.3,0.8\n"}, {"r", "A", "2445010.3,1.1\n2445050.3,1.2\n"}},
			"p:3 -> r:2; p:4 -> q:3; q:2 -> r:2"},
	}
	for _, test := range tests {
		t.Run(test.name, func(t *testing.T) {
			if got := fates(mergeTables(t, test.head, test.sources...)); got != test.want {
				t.Errorf("got %q, want %q", got, test.want)
			}
		})
	}
}
