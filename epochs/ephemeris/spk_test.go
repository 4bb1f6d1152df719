package ephemeris

import (
	"bufio"
	"errors"
	"math"
	"os"
	"path/filepath"
	"strconv"
	"strings"
	"testing"
)

const smallSPK = "../../testdata/reference/de405_1990.bsp"

// TestSPK holds the states read from a small file against those that jplephem
// 2.18, an independent reader, finds in it. It takes the time as one float64,
// which steps by 40 microseconds: 1.2 m of the Earth's way.
func TestSPK(t *testing.T) {
	kernel, err := OpenSPK(smallSPK)
	if err != nil {
		t.Fatal(err)
	}
	file, err := os.Open("../../testdata/reference/de405_1990_states.csv")
	if err != nil {
		t.Fatal(err)
	}
	defer file.Close()
	rows := 0
	for lines := bufio.NewScanner(file); lines.Scan(); {
		cells := strings.Split(lines.Text(), ",")
		if strings.HasPrefix(lines.Text(), "#") || cells[0] == "jd" {
			continue
		}
		rows++
		var v [13]float64
		for i := range v {
			if v[i], err = strconv.ParseFloat(cells[i], 64); err != nil {
				t.Fatal(err)
			}
		}
		got, err := kernel.At(math.Floor(v[0]), v[0]-math.Floor(v[0]))
		if err != nil {
			t.Fatal(err)
		}
		for k := range 3 {
			if d := math.Abs(got.EarthKm[k] - v[1+k]); !(d <= 2e-3) {
				t.Errorf("JD %s, axis %d: Earth %.9f km, jplephem %.9f", cells[0], k, got.EarthKm[k], v[1+k])
			}
			if d := math.Abs(got.EarthKmS[k] - v[4+k]); !(d <= 1e-9) {
				t.Errorf("JD %s, axis %d: Earth %.12f km/s, jplephem %.12f", cells[0], k, got.EarthKmS[k], v[4+k])
			}
			if d := math.Abs(got.SunKm[k] - v[7+k]); !(d <= 1e-5) {
				t.Errorf("JD %s, axis %d: Sun %.9f km, jplephem %.9f", cells[0], k, got.SunKm[k], v[7+k])
			}
		}
	}
	if rows != 40 {
		t.Errorf("%d rows were compared", rows)
	}
	if _, err := kernel.At(2440000.5, 0); !errors.Is(err, ErrRange) {
		t.Errorf("outside the file: got %v, want ErrRange", err)
	}
}

// TestLayered: the file where it covers the date, the embedded series
// elsewhere, an error where neither does.
func TestLayered(t *testing.T) {
	kernel, err := OpenSPK(smallSPK)
	if err != nil {
		t.Fatal(err)
	}
	embedded, err := Embedded()
	if err != nil {
		t.Fatal(err)
	}
	both := Layered{kernel, embedded}
	for jd, want := range map[float64]Source{2447950.5: kernel, 2451545: embedded} {
		a, err1 := both.At(jd, 0)
		b, err2 := want.At(jd, 0)
		if err := errors.Join(err1, err2); err != nil || a != b {
			t.Errorf("JD %v: %v, want %v (%v)", jd, a, b, err)
		}
	}
	if _, err := both.At(3e6, 0); !errors.Is(err, ErrRange) {
		t.Errorf("far away: got %v, want ErrRange", err)
	}
}

func TestSPKRefuses(t *testing.T) {
	content, err := os.ReadFile(smallSPK)
	if err != nil {
		t.Fatal(err)
	}
	damage := func(change func(c []byte) []byte) []byte { return change(append([]byte{}, content...)) }
	for name, damaged := range map[string][]byte{
		"empty":             nil,
		"text":              []byte(strings.Repeat("no ephemeris ", 200)),
		"cut short":         content[:3000],
		"foreign numbers":   damage(func(c []byte) []byte { copy(c[88:], "VAX-GFLT"); return c }),
		"summaries outside": damage(func(c []byte) []byte { c[76] = 0xff; return c }),
	} {
		path := filepath.Join(t.TempDir(), "x.bsp")
		if err := os.WriteFile(path, damaged, 0o644); err != nil {
			t.Fatal(err)
		}
		if _, err := OpenSPK(path); !errors.Is(err, ErrSPK) {
			t.Errorf("%s: got %v, want ErrSPK", name, err)
		}
	}
	if _, err := OpenSPK("nowhere.bsp"); !errors.Is(err, os.ErrNotExist) {
		t.Errorf("no file: got %v", err)
	}
}

// FuzzSPK: no content makes the reader panic, when it is opened or asked.
func FuzzSPK(f *testing.F) {
	content, err := os.ReadFile(smallSPK)
	if err != nil {
		f.Fatal(err)
	}
	f.Add(content[:8192])
	f.Add(content)
	f.Fuzz(func(t *testing.T, content []byte) {
		kernel, err := parseSPK("fuzz.bsp", content)
		if err != nil {
			return
		}
		for _, jd := range []float64{2447892.5, 2448000.25, 2451545} {
			if _, err := kernel.At(jd, 0); err != nil && !errors.Is(err, ErrRange) {
				t.Errorf("JD %v: %v", jd, err)
			}
		}
	})
}
