package epochs

import (
	"errors"
	"math"
	"testing"

	"pgregory.net/rapid"
)

// TestDayNumber holds civil dates against published Julian dates of 0h.
func TestDayNumber(t *testing.T) {
	for _, test := range []struct {
		name             string
		calendar         Calendar
		year, month, day int
		want             float64
		source           string
	}{
		{"2003 June 1", CalendarGregorian, 2003, 6, 1, 2452791.5, "ERFA t_erfa_c.c, eraCal2jd"},
		{"Sputnik, 1957 October 4", CalendarGregorian, 1957, 10, 4, 2436115.5, "Meeus, Astronomical Algorithms, example 7.a"},
		{"333 January 27, Julian", CalendarJulian, 333, 1, 27, 1842712.5, "Meeus, example 7.b"},
		{"1900 January 1", CalendarGregorian, 1900, 1, 1, 2415020.5, "ERFA eraCal2jd"},
		{"1908 January 14", CalendarGregorian, 1908, 1, 14, 2417954.5, "ERFA eraCal2jd"},
		{"1925 January 1", CalendarGregorian, 1925, 1, 1, 2424151.5, "ERFA eraCal2jd"},
		{"1858 November 17", CalendarGregorian, 1858, 11, 17, 2400000.5, "definition of MJD, ERFA"},
		{"1968 May 24", CalendarGregorian, 1968, 5, 24, 2440000.5, "ERFA eraCal2jd"},
		{"last day before the reform", CalendarJulian, 1582, 10, 4, 2299159.5, "ERFA and Meeus, ch. 7"},
		{"first day of the reform", CalendarGregorian, 1582, 10, 15, 2299160.5, "ERFA and Meeus, ch. 7"},
		{"1900 February 28, Julian", CalendarJulian, 1900, 2, 28, 2415090.5, "Gregorian 1900 March 12, ERFA"},
		{"1900 February 29, Julian: a day that only this calendar has", CalendarJulian, 1900, 2, 29, 2415091.5, "Gregorian 1900 March 13, ERFA"},
		{"1900 March 1, Julian", CalendarJulian, 1900, 3, 1, 2415092.5, "Gregorian 1900 March 14, ERFA"},
		{"1908 January 1, Julian", CalendarJulian, 1908, 1, 1, 2417954.5, "Gregorian 1908 January 14, ERFA"},
		{"1918 January 31, Julian", CalendarJulian, 1918, 1, 31, 2421637.5, "Gregorian 1918 February 13, ERFA"},
		{"0 January is 31 December", CalendarGregorian, 1908, 1, 0, 2417940.5, "common practice of almanacs, no source"},
		{"32 December is 1 January", CalendarGregorian, 1908, 12, 32, 2418307.5, "common practice of almanacs, no source"},
	} {
		t.Run(test.name, func(t *testing.T) {
			got, err := DayNumber(test.calendar, test.year, test.month, test.day)
			if err != nil || got != test.want {
				t.Errorf("got %v, %v; want %v (%s)", got, err, test.want, test.source)
			}
		})
	}
	for _, test := range []struct{ year, month, day int }{
		{1900, 2, 29}, {1900, 2, 30}, {1907, 2, 29}, {1908, 2, 30}, {1908, 4, 31}, {1908, 1, 32}, {1908, 12, 33}, {1900, 13, 1}, {1900, 0, 1}, {1900, 4, 32}, {0, 1, 1}, {10000, 1, 1}, {1900, 1, -1},
	} {
		if _, err := DayNumber(CalendarGregorian, test.year, test.month, test.day); !errors.Is(err, ErrDate) {
			t.Errorf("%v: got %v, want ErrDate", test, err)
		}
	}
}

// TestCivilDate: JD 2436116.31 is 1957 October 4.81 (Meeus, example 7.c), and
// 2400000.5 + 50123.9999 is 1996 February 10.9999 (ERFA t_erfa_c.c, eraJd2cal).
func TestCivilDate(t *testing.T) {
	for _, test := range []struct {
		jd               JD
		year, month, day int
		fraction         float64
	}{
		{NewJD(2436116, 0.31), 1957, 10, 4, 0.81},
		{NewJD(2400000.5, 50123.9999), 1996, 2, 10, 0.9999},
	} {
		y, m, d, fraction := test.jd.CivilDate(CalendarGregorian)
		if y != test.year || m != test.month || d != test.day || !(math.Abs(fraction-test.fraction) <= 1e-7) {
			t.Errorf("%s: got %d %d %d.%v", test.jd.Text(6), y, m, d, fraction)
		}
	}
}

// TestCalendarRoundTrip: Julian date to civil date and back, to a
// microsecond, in both calendars.
func TestCalendarRoundTrip(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		jd := NewJD(float64(rapid.IntRange(1800000, 2600000).Draw(t, "day")), rapid.Float64Range(-0.5, 0.4999).Draw(t, "fraction"))
		for _, calendar := range []Calendar{CalendarGregorian, CalendarJulian} {
			y, m, d, fraction := jd.CivilDate(calendar)
			midnight, err := DayNumber(calendar, y, m, d)
			if err != nil {
				t.Fatal(err)
			}
			if off := math.Abs(NewJD(midnight, fraction).Sub(jd)) * SecondsPerDay; !(off <= 1e-6) {
				t.Fatalf("%s comes back %g s off", jd.Text(9), off)
			}
		}
	})
}
