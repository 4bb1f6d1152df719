package epochs

import (
	"errors"
	"math"
	"testing"

	"pgregory.net/rapid"
)

// TestLeapSecondTable: TAI - UTC in seconds. The drifting years are those of
// the IERS file tai-utc.dat as ERFA's eraDat gives them at 0h; the leap
// seconds are the table in ERFA's dat.c.
func TestLeapSecondTable(t *testing.T) {
	check := func(year, month, day int, want, tolerance float64) {
		t.Helper()
		midnight, err := DayNumber(CalendarGregorian, year, month, day)
		if err != nil {
			t.Fatal(err)
		}
		got, err := taiMinusUTC(midnight-2400000.5, 0)
		if err != nil || !(math.Abs(got-want) <= tolerance) {
			t.Errorf("%d-%02d-%02d: got %.7f, %v; want %.7f", year, month, day, got, err, want)
		}
	}
	check(2003, 6, 1, 32, 0)
	check(2008, 1, 17, 33, 0)
	check(2017, 9, 1, 37, 0)
	check(1960, 1, 1, 0.943482, 1e-6)
	check(1961, 1, 1, 1.422818, 1e-6)
	check(1965, 1, 1, 3.540130, 1e-6)
	check(1968, 2, 1, 6.185682, 1e-6)
	check(1971, 12, 31, 9.889650, 1e-6)
	january := map[int]float64{1972: 10, 1973: 12, 1974: 13, 1975: 14, 1976: 15, 1977: 16, 1978: 17, 1979: 18, 1980: 19,
		1988: 24, 1990: 25, 1991: 26, 1996: 30, 1999: 32, 2006: 33, 2009: 34, 2017: 37}
	july := map[int]float64{1972: 11, 1981: 20, 1982: 21, 1983: 22, 1985: 23, 1992: 27, 1993: 28, 1994: 29, 1997: 31, 2012: 35, 2015: 36}
	for year, want := range january {
		check(year, 1, 1, want, 0)
	}
	for year, want := range july {
		check(year, 7, 1, want, 0)
	}
	if n := len(january) + len(july) + 14; n != len(utcSegments) {
		t.Errorf("the table has %d lines, %d were checked", len(utcSegments), n)
	}
	// The step at 1972 January 1 (from the drifting line and 10 s).
	before, err1 := taiMinusUTC(41316, 1)
	after, err2 := taiMinusUTC(41317, 0)
	if err := errors.Join(err1, err2); err != nil || !(math.Abs(after-before-0.107758) <= 1e-6) {
		t.Errorf("step at 1972: %.6f s, %v; want 0.107758", after-before, err)
	}
	if _, err := (UTC{NewJD(2436934, 0)}).TAI(); !errors.Is(err, ErrUTC) {
		t.Errorf("UTC in 1959: got %v, want ErrUTC", err)
	}
}

// TestScales: the chain of ERFA's own tests (t_erfa_c.c, eraUtctai, eraTaitt,
// eraTaiutc, eraTcbtdb), to 1e-12 d, and of the SOFA cookbook of time scales
// (UTC 2006-01-15 21:24:37.5; from memory, recomputed with astropy 5.2.1).
func TestScales(t *testing.T) {
	near := func(what string, got JD, day, fraction, tolerance float64) {
		t.Helper()
		if off := math.Abs(got.Sub(JD{Day: day, Frac: fraction})); !(off <= tolerance) {
			t.Errorf("%s: got %s, want %.1f + %.16f, %g d off", what, got.Text(15), day, fraction, off)
		}
	}
	tai, err := UTC{NewJD(2453750.5, 0.892100694)}.TAI()
	if err != nil {
		t.Fatal(err)
	}
	near("eraUtctai", tai.JD, 2453750.5, .8924826384444444444, 1e-12)
	near("eraTaitt", TAI{NewJD(2453750.5, 0.892482639)}.TT().JD, 2453750.5, .892855139, 1e-12)
	utc, err := TAI{NewJD(2453750.5, 0.892482639)}.UTC()
	if err != nil {
		t.Fatal(err)
	}
	near("eraTaiutc", utc.JD, 2453750.5, .8921006945555555556, 1e-12)
	near("eraTcbtdb", TCB{NewJD(2453750.5, 0.893019599)}.TDB().JD, 2453750.5, .8928551362746343397, 1e-12)

	// Delta T of the tests eraTtut1 and eraUt1tt, DUT1 of eraUtcut1.
	near("eraTtut1", TT{NewJD(2453750.5, .892855139)}.AddSeconds(-64.8499), 2453750.5, .8921045614537037037, 1e-12)
	near("eraUt1tt", UT1{NewJD(2453750.5, .892104561)}.AddSeconds(64.8499), 2453750.5, .8928551385462962963, 1e-12)
	near("eraUtcut1", UTC{NewJD(2453750.5, .892100694)}.AddSeconds(.3341), 2453750.5, .8921045608981481481, 1e-12)
	// The light time of the astronomical unit (IAU 2012 Resolution B2 and SI).
	if got := auKm / lightKmS; !(math.Abs(got-499.004783836) <= 1e-9) {
		t.Errorf("au/c: got %.10f s, want 499.004783836", got)
	}

	clock := (21*3600 + 24*60 + 37.5) / SecondsPerDay
	tai, err = UTC{NewJD(2453750.5, clock)}.TAI()
	if err != nil {
		t.Fatal(err)
	}
	tt := tai.TT()
	near("cookbook TT", tt.JD, 2453750.5, (21*3600+25*60+42.684)/SecondsPerDay, 1e-6/SecondsPerDay)
	// TDB 21:25:42.684373 holds for the cookbook's site; the centre of the Earth
	// is within 2 microseconds, our series within 10.
	near("cookbook TDB", tt.TDB().JD, 2453750.5, (21*3600+25*60+42.684373)/SecondsPerDay, 12e-6/SecondsPerDay)
}

// TestTDBMinusTT: ERFA's eraDtdb (t_erfa_c.c, 1992; -0.00128037 s) and the
// largest excursion in 1886-2050, 1.697 ms (ERFA).
func TestTDBMinusTT(t *testing.T) {
	got := tdbMinusTT(TT{NewJD(2448939.5, 0.123)})
	if !(math.Abs(got - -0.1280368005936998991e-2) <= 12e-6) { // 10 of the series, 2 of the test's site
		t.Errorf("got %.9f s, want -0.001280368", got)
	}
	largest := 0.0
	for jd := 2409908.5; jd < 2469808; jd += 5 {
		largest = math.Max(largest, math.Abs(tdbMinusTT(TT{NewJD(jd, 0)})))
	}
	if !(math.Abs(largest-0.001697) <= 15e-6) {
		t.Errorf("largest TDB - TT %.7f s, want 0.001697", largest)
	}
}

// TestScaleRoundTrips: there and back to a microsecond, leap seconds and the
// small steps of the sixties included.
func TestScaleRoundTrips(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		jd := NewJD(float64(rapid.IntRange(2436935, 2466000).Draw(t, "day")), rapid.Float64Range(-0.5, 0.4999999).Draw(t, "fraction"))
		tai, err := UTC{jd}.TAI()
		if err != nil {
			t.Fatal(err)
		}
		utc, err := tai.UTC()
		if err != nil {
			t.Fatal(err)
		}
		// A step back of UTC (1961 August 1, 1968 February 1) repeats up to 0.1 s.
		if off := math.Abs(utc.Sub(jd)) * SecondsPerDay; !(off <= 1e-6) && !(off <= 0.11 && math.Abs(math.Mod(jd.Float()+0.5, 1)) > 0.999) {
			t.Fatalf("UTC %s comes back %g s off", jd.Text(9), off)
		}
		tt := TT{jd}
		if off := math.Abs(tt.TDB().TT().Sub(jd)) * SecondsPerDay; !(off <= 1e-6) {
			t.Fatalf("TT %s comes back from TDB %g s off", jd.Text(9), off)
		}
		if off := math.Abs(tt.TAI().TT().Sub(jd)) * SecondsPerDay; !(off <= 1e-9) {
			t.Fatalf("TT %s comes back from TAI %g s off", jd.Text(9), off)
		}
	})
}
