package plan_test

import (
	"bytes"
	"errors"
	"os"
	"reflect"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"platemeld/harmonize/plan"
)

// sound is a plan without a fault; the tests damage copies of it.
const sound = `title = "A test"
[star]
name = "Velthorn 9"
ra = "14 22 31.80"
dec = "-00 04 55.1"
pm_ra = -312.4
parallax = 40.1
[[site]]
name = "Hill"
longitude = 23.5
latitude = -31.0
height = 1200
[[instrument]]
name = "Corvane"
site = "Hill"
eras = [{name = "old", until = "1931-05-02"}, {name = "new"}]
[[instrument]]
name = "Dorn"
aliases = ["D II"]
[[source]]
name = "plates"
file = "plates.csv"
reference = "Hill Obs. Bull. 3"
year = 1940
instrument = "Corvane"
[source.columns]
time = "Date"
velocity = "Vel"
error = "pe"
[source.time]
form = "jd"
offset = 2400000.5
scale = "ut"
[source.velocity]
frame = "heliocentric"
[source.error]
kind = "probable"
[[source]]
name = "later"
file = "later.csv"
reference = "Hill Obs. Bull. 9"
instrument = "Dorn"
columns = {time = "t", velocity = "v"}
time = {form = "mjd", scale = "utc"}
velocity = {frame = "barycentric", unit = "m/s"}
[fit]
period = 5000.0
reference_instrument = "Corvane/new"
`

func TestParse(t *testing.T) {
	p, err := plan.Parse("plan.toml", []byte(sound))
	if err != nil {
		t.Fatal(err)
	}
	star, err := p.Star.Direction()
	if err != nil {
		t.Fatal(err)
	}
	if !(star.DecDeg < 0) {
		t.Errorf("declination -00 04 55.1 reads %v deg: the sign of a zero is lost", star.DecDeg)
	}
	convention, err := p.Sources[0].Convention()
	if err != nil {
		t.Fatal(err)
	}
	if convention.Offset != "2400000.5" {
		t.Errorf("the offset 2400000.5 reads %q", convention.Offset)
	}
	var names []string
	for _, z := range p.ZeroPoints() {
		names = append(names, z.Name)
	}
	if want := []string{"Corvane/old", "Corvane/new", "Dorn"}; !reflect.DeepEqual(names, want) {
		t.Errorf("zero points %v, want %v", names, want)
	}
	// JD 2426463.5 is 0h of 1931 May 2 (from the day count of the calendar:
	// 2425977.5 is 1930 Jan 1, plus 365 + 121 days); the whole day belongs to
	// the old era.
	if old, next := p.EraAt(0, 2426463.9), p.EraAt(0, 2426464.6); old != 0 || next != 1 {
		t.Errorf("eras %d and %d, want 0 on 1931 May 2 and 1 on May 3", old, next)
	}
	if i, err := p.InstrumentNamed("d  ii"); err != nil || i != 1 {
		t.Errorf("alias \"d  ii\" leads to %d, %v; want 1", i, err)
	}
}

func TestFaults(t *testing.T) {
	tests := []struct {
		name, old, new string
		at             string   // text of the line that is to be named
		says           []string // parts of the message
	}{
		{"unknown key", "pm_ra =", "pm_rra =", "pm_rra", []string{"star.pm_rra", `did you mean "pm_ra"`}},
		{"key of another table", "pm_ra = -312.4", "longitude = 3", "longitude = 3", []string{"star.longitude", "[site] has one"}},
		{"unknown table", "[fit]", "[fitt]", "[fitt]", []string{"fitt", `"fit"`}},
		{"wrong type", `height = 1200`, `height = "high"`, "height", []string{"number"}},
		{"not TOML", "[star]", "[star", "[star", []string{"plan.toml, line 2"}},
		{"no position", "ra = \"14 22 31.80\"\ndec = \"-00 04 55.1\"\n", "", "[star]", []string{"star", "has no position"}},
		{"unreadable position", "14 22 31.80", "fourteen hours", "[star]", []string{"fourteen hours"}},
		{"no longitude", "longitude = 23.5\n", "", "[[site]]", []string{"longitude"}},
		{"latitude beyond the pole", "latitude = -31.0", "latitude = -131.0", "[[site]]", []string{"latitude"}},
		{"unknown site", `site = "Hill"`, `site = "Hil"`, `site = "Hil"`, []string{`"Hil"`, `"Hill"`}},
		{"unknown instrument", `instrument = "Dorn"`, `instrument = "Dron"`, `instrument = "Dron"`, []string{`"Dron"`, "Dorn", "did you mean"}},
		{"no instrument", "instrument = \"Dorn\"\n", "", "[[source]]\nname = \"later", []string{"names no instrument"}},
		{"two columns missing", `columns = {time = "t", velocity = "v"}`, `columns = {remark = "r"}`, "columns = {remark", []string{"velocity column", "date column"}},
		{"unknown form", `form = "mjd"`, `form = "mdj"`, "mdj", []string{"mdj", "mjd"}},
		{"unknown scale", `scale = "utc"`, `scale = "gtm"`, "gtm", []string{"gtm", "gmt"}},
		{"no frame", `frame = "barycentric", `, "", `velocity = {unit`, []string{"velocity.frame", "heliocentric"}},
		{"unknown unit", `unit = "m/s"`, `unit = "mph"`, "mph", []string{"mph", "km/s"}},
		{"kind without column", "error = \"pe\"\n", "", `kind = "probable"`, []string{"probable", "columns.error"}},
		{"eras out of order", `until = "1931-05-02"}, {name = "new"}`, `until = "1931-05-02"}, {name = "x", until = "1930-01-01"}, {name = "new"}`, "1930-01-01", []string{"order of time"}},
		{"duplicate source name", `name = "later"`, `name = "plates"`, "name = \"plates\"\nfile = \"later", []string{"used twice"}},
		{"reference named nowhere", "Corvane/new", "Corvane", "reference_instrument", []string{"Corvane/old", "Corvane/new"}},
		{"period and range", "period = 5000.0", "period = 5000.0\nperiod_range = [1.0, 2.0]", "period_range", []string{"keep one"}},
		{"precedence of no source", "[fit]", "[duplicates]\nprecedence = [\"platse\"]\n[fit]", "precedence", []string{"platse", "plates, later"}},
		{"published without zero points", "reference_instrument = \"Corvane/new\"", "gauge = \"published\"", "gauge", []string{"zero_point"}},
	}
	for _, test := range tests {
		t.Run(test.name, func(t *testing.T) {
			text := strings.Replace(sound, test.old, test.new, 1)
			if text == sound {
				t.Fatalf("the plan holds no %q", test.old)
			}
			at := strings.Index(text, test.at)
			if at < 0 {
				t.Fatalf("the damaged plan holds no %q", test.at)
			}
			line := 1 + strings.Count(text[:at], "\n")
			_, err := plan.Parse("plan.toml", []byte(text))
			if !errors.Is(err, plan.ErrPlan) {
				t.Fatalf("got error %v, want one that is ErrPlan", err)
			}
			var faults *plan.Faults
			if !errors.As(err, &faults) {
				t.Fatalf("error %v is no *Faults", err)
			}
			found := false
			for _, fault := range faults.List {
				found = found || fault.Line == line
			}
			if !found {
				t.Errorf("no fault on line %d: %v", line, err)
			}
			for _, part := range test.says {
				if !strings.Contains(err.Error(), part) {
					t.Errorf("the message does not say %q: %v", part, err)
				}
			}
		})
	}
}

// TestAllFaultsAtOnce: two mistakes give two messages in one run.
func TestAllFaultsAtOnce(t *testing.T) {
	text := strings.Replace(sound, `site = "Hill"`, `site = "Dale"`, 1)
	text = strings.Replace(text, `frame = "heliocentric"`, `frame = "helio"`, 1)
	_, err := plan.Parse("plan.toml", []byte(text))
	if err == nil || !strings.Contains(err.Error(), "Dale") || !strings.Contains(err.Error(), "helio") {
		t.Errorf("got %v, want both faults", err)
	}
}

// TestReadmePlan: the plan in the README is one.
func TestReadmePlan(t *testing.T) {
	readme, err := os.ReadFile("../../README.md")
	if err != nil {
		t.Fatal(err)
	}
	_, rest, found := strings.Cut(string(readme), "```toml\n")
	text, _, closed := strings.Cut(rest, "```")
	if !found || !closed {
		t.Fatal("the README holds no plan")
	}
	if _, err := plan.Parse("README.md", []byte(text)); err != nil {
		t.Error(err)
	}
}

// TestReferenceIsComplete: every key of every table has a meaning, and a key
// that is not required says what is assumed or that it is optional.
func TestReferenceIsComplete(t *testing.T) {
	var page bytes.Buffer
	if err := plan.WriteReference(&page); err != nil {
		t.Fatal(err)
	}
	for i, line := range strings.Split(page.String(), "\n") {
		if n := len([]rune(line)); n > 80 {
			t.Errorf("line %d of the reference is %d characters wide", i+1, n)
		}
	}
	keys := 0
	var look func(of reflect.Type)
	look = func(of reflect.Type) {
		for field := range of.Fields() {
			key := field.Tag.Get("toml")
			if key == "" || key == "-" {
				continue
			}
			keys++
			if field.Tag.Get("doc") == "" {
				t.Errorf("the key %s of %s has no meaning", key, of.Name())
			}
			if !strings.Contains(page.String(), key) {
				t.Errorf("the reference leaves out %s of %s", key, of.Name())
			}
			inner := field.Type
			if inner.Kind() == reflect.Slice || inner.Kind() == reflect.Pointer {
				inner = inner.Elem()
			}
			if inner.Kind() == reflect.Struct {
				look(inner)
			}
		}
	}
	look(reflect.TypeFor[plan.Plan]())
	if keys < 70 {
		t.Errorf("only %d keys were looked at", keys)
	}
}

// TestPrecedence: listed sources first, then the latest year, then the last
// in the plan.
func TestPrecedence(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		n := rapid.IntRange(1, 8).Draw(t, "sources")
		p := &plan.Plan{}
		for i := range n {
			p.Sources = append(p.Sources, plan.Source{Name: string(rune('a' + i)), Year: rapid.IntRange(1990, 1993).Draw(t, "year")})
		}
		first := rapid.IntRange(0, n-1).Draw(t, "first")
		p.Duplicates.Precedence = []string{p.Sources[first].Name}
		order := p.Precedence()
		if len(order) != n || order[0] != first {
			t.Fatalf("order %v of %d sources, want %d first", order, n, first)
		}
		for k := 2; k < n; k++ {
			a, b := order[k-1], order[k]
			if p.Sources[a].Year < p.Sources[b].Year || (p.Sources[a].Year == p.Sources[b].Year && a < b) {
				t.Fatalf("order %v puts %d before %d", order, a, b)
			}
		}
	})
}

// FuzzParse: no text makes the reader panic, and a plan that passes can be
// asked for all its conventions.
func FuzzParse(f *testing.F) {
	f.Add([]byte(sound))
	f.Add([]byte(""))
	f.Add([]byte("[star]\nra = 1\n"))
	f.Add([]byte("source = 3"))
	f.Add([]byte("[[instrument]]\nname = \"x\"\neras = [{until = \"1e9\"}, {}]"))
	f.Fuzz(func(t *testing.T, text []byte) {
		p, err := plan.Parse("plan.toml", text)
		if err != nil {
			return
		}
		p.Gauge()
		p.Precedence()
		if len(p.ZeroPoints()) == 0 {
			t.Error("a plan without a zero point passed")
		}
	})
}
