package epochs

import (
	"fmt"
	"math"
	"math/rand/v2"
	"strings"
	"testing"
	"time"
)

// Sun rise and transit on known dates (Astronomical Almanac conventions,
// from memory): at Greenwich on 2000 March 20 near 12h UT the Sun stands at 90 -
// 51.48 degrees, and a star of right ascension equal to the sidereal time in the
// meridian.
func TestSky(t *testing.T) {
	greenwich := Site{LatitudeDeg: 51.4779}
	// Equinox 2000 March 20 07:35 UT; noon has an equation of time of -7.5 min.
	stamp := Stamp{JD: NewJD(2451624, 0.0052), Scale: ScaleUTC}
	sidereal := greenwichMeanSiderealTime(UT1{stamp.JD}, TT{stamp.JD}) / radPerDeg
	c := converterFor(t, Star{RADeg: sidereal, DecDeg: 20}, nil)
	e, err := c.Epoch(stamp, &greenwich)
	if err != nil {
		t.Fatal(err)
	}
	sky, err := c.Sky(e, greenwich)
	if err != nil {
		t.Fatal(err)
	}
	near(t, "star in the meridian, deg", sky.StarAltitudeDeg, 90-51.4779+20, 0.02)
	// Declination of the Sun 4 h 32 min after the equinox: 0.0165 deg a hour.
	near(t, "Sun at noon, deg", sky.SunAltitudeDeg, 90-51.4779+0.075, 0.02)
	limits := DefaultNightLimits()
	if !sky.Daylight(limits) || sky.Hidden(limits) || sky.Night(limits) {
		t.Errorf("noon taken for night: %+v", sky)
	}

	e.ObserverUT1 = UT1{e.ObserverUT1.Add(0.5)}
	e.ObserverTT = TT{e.ObserverTT.Add(0.5)}
	if sky, err = c.Sky(e, greenwich); err != nil {
		t.Fatal(err)
	}
	near(t, "Sun at midnight, deg", sky.SunAltitudeDeg, -(90-51.4779)+0.27, 0.02)
	near(t, "star below the pole, deg", sky.StarAltitudeDeg, -(90-51.4779)+20, 0.02)
}

// plateLog invents n plates of 1896 to 1920 taken at night with the star up,
// printed to 0.001 day as astronomical days of Greenwich from noon or from
// midnight.
func plateLog(t *testing.T, c *Converter, site Site, n int, noon bool) []string {
	t.Helper()
	random := rand.New(rand.NewPCG(1896, 1920))
	log := make([]string, 0, n)
	limits := NightLimits{SunBelowDeg: -12, StarAboveDeg: 20}
	for len(log) < n {
		jd := NewJD(2413560+float64(random.IntN(9000)), random.Float64())
		e, err := c.Epoch(Stamp{JD: jd, Scale: ScaleUT}, &site)
		if err != nil {
			t.Fatal(err)
		}
		sky, err := c.Sky(e, site)
		if err != nil {
			t.Fatal(err)
		}
		if !sky.Night(limits) {
			continue
		}
		days := jd.Sub(NewJD(2440587, 0.5))
		if noon {
			days -= 0.5
		}
		day := time.Unix(int64(math.Floor(days))*86400, 0).UTC()
		log = append(log, fmt.Sprintf("%s%.3f", day.Format("2006 Jan "), float64(day.Day())+days-math.Floor(days)))
	}
	return log
}

func tally(t *testing.T, c *Converter, site Site, conv Convention, log []string) *NightTally {
	t.Helper()
	reader, err := conv.NewStampReader()
	if err != nil {
		t.Fatal(err)
	}
	var sum NightTally
	for _, text := range log {
		s, err := reader.Read(text)
		if err != nil {
			t.Fatal(err)
		}
		result, err := c.NightTest(conv, s, site, DefaultNightLimits())
		if err != nil {
			t.Fatal(err)
		}
		sum.Add(result)
	}
	return &sum
}

// 500 invented plates labelled G.M.T.: the tally has to tell from which hour
// the day was counted, whichever the plan says.
func TestVerdictOnNoonAndMidnight(t *testing.T) {
	site := Site{Name: "Invented", LongitudeDeg: 18.5, LatitudeDeg: -33.9, HeightM: 10}
	c := converterFor(t, Star{RADeg: 215, DecDeg: -12}, nil)
	for _, printedFromNoon := range []bool{true, false} {
		log := plateLog(t, c, site, 500, printedFromNoon)
		for _, readFromNoon := range []bool{true, false} {
			conv := Convention{Form: FormCivil, Scale: ScaleGMT, DayStart: DayStartMidnight}
			other := "GMAT (day from noon)"
			if readFromNoon {
				conv.DayStart, other = DayStartNoon, "GMT (day from midnight)"
			}
			t.Run(fmt.Sprintf("printed from noon %v, read from noon %v", printedFromNoon, readFromNoon), func(t *testing.T) {
				sum := tally(t, c, site, conv, log)
				failed, tested := sum.Failed()
				better, found := sum.Better()
				t.Log(sum.Verdict())
				if tested != 500 {
					t.Fatalf("%d of 500 rows tested", tested)
				}
				if printedFromNoon == readFromNoon {
					if failed != 0 || found {
						t.Errorf("false alarm: %d failed, %q: %s", failed, better, sum.Verdict())
					}
					return
				}
				if failed < 475 || better != other {
					t.Errorf("%d of 500 failed, better %q, want %q: %s", failed, better, other, sum.Verdict())
				}
				if !strings.Contains(sum.Verdict(), ", 0 as "+other) {
					t.Errorf("verdict %q", sum.Verdict())
				}
			})
		}
	}
}

// Each of the usual slips is named by the row that has it.
func TestOtherReadings(t *testing.T) {
	site := Site{Name: "Invented", LongitudeDeg: -110, LatitudeDeg: 32, HeightM: 2000}
	c := converterFor(t, Star{RADeg: 215, DecDeg: 12}, nil)
	// 2010 April 15, 07:20 UT: local midnight, the star near the meridian.
	night := NewJD(2455301, 0.5+(7+20.0/60)/24)
	for _, test := range []struct {
		name  string
		conv  Convention
		stamp JD
		want  string
	}{
		{"day from noon", Convention{Form: FormISO, Scale: ScaleUTC}, night.Add(-0.5), "utc (day from noon)"},
		{"day from midnight", Convention{Form: FormISO, Scale: ScaleUTC, DayStart: DayStartNoon}, night.Add(0.5), "utc (day from midnight)"},
		{"MJD that was JD - 2400000", Convention{Form: FormMJD, Scale: ScaleUTC}, night.Add(0.5), "JD - 2400000"},
		{"JD - 2400000 that was MJD", Convention{Form: FormJD, Offset: "2400000", Scale: ScaleUTC}, night.Add(-0.5), "JD - 2400000.5"},
		{"zone time of the other sign", Convention{Form: FormISO, Scale: ScaleZone, ZoneHours: 7}, night.AddSeconds(-7 * 3600), "zone of the other sign"},
		{"Greenwich time called zone time", Convention{Form: FormISO, Scale: ScaleZone, ZoneHours: -7}, night, "Greenwich time"},
		{"local time called Greenwich", Convention{Form: FormISO, Scale: ScaleUTC}, night.AddSeconds(-7.33 * 3600), "local mean time of the site"},
	} {
		t.Run(test.name, func(t *testing.T) {
			s := Stamp{JD: test.stamp, Scale: test.conv.Scale, ZoneHours: test.conv.ZoneHours}
			result, err := c.NightTest(test.conv, s, site, DefaultNightLimits())
			if err != nil {
				t.Fatal(err)
			}
			if result.Passed() {
				t.Fatalf("the wrong reading passed: %+v", result.Stated)
			}
			if !strings.Contains(strings.Join(result.Passing(), "|"), test.want) {
				t.Errorf("%s: want %q among those that pass", result, test.want)
			}
			if !strings.Contains(result.String(), test.want) {
				t.Errorf("%q does not name %q", result.String(), test.want)
			}
		})
	}

	mirrored := site
	mirrored.LongitudeDeg = 110
	s := Stamp{JD: night, Scale: ScaleUTC}
	result, err := c.NightTest(Convention{Form: FormJD, Scale: ScaleUTC}, s, mirrored, DefaultNightLimits())
	if err != nil {
		t.Fatal(err)
	}
	if result.Passed() || !strings.Contains(result.String(), "longitude of the other sign") {
		t.Errorf("longitude: %q", result.String())
	}
	result, err = c.NightTest(Convention{Form: FormJD, Scale: ScaleUTC}, s, site, DefaultNightLimits())
	if err != nil {
		t.Fatal(err)
	}
	if !result.Passed() || result.String() != "" {
		t.Errorf("a good row: %q", result.String())
	}
}

func TestCoarseStampsSayNothing(t *testing.T) {
	site := Site{LongitudeDeg: -110, LatitudeDeg: 32}
	c := converterFor(t, Star{RADeg: 215, DecDeg: 12}, nil)
	s := Stamp{JD: NewJD(2455301, 0), Scale: ScaleUTC, QuantumDays: 1}
	conv := Convention{Form: FormCivil, Scale: ScaleUTC}
	result, err := c.NightTest(conv, s, site, DefaultNightLimits())
	if err != nil {
		t.Fatal(err)
	}
	if !result.TooCoarse || !result.Passed() {
		t.Errorf("a whole day was judged: %+v", result)
	}
	var sum NightTally
	sum.Add(result)
	if _, tested := sum.Failed(); tested != 0 {
		t.Errorf("%d rows tested", tested)
	}
	if !strings.HasPrefix(sum.Verdict(), "none of 1 rows") {
		t.Errorf("verdict %q", sum.Verdict())
	}
}
