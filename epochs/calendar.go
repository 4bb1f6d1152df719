package epochs

import (
	"errors"
	"fmt"
)

// ErrDate is what every error about a date that no calendar has unwraps to.
var ErrDate = errors.New("epochs: no such date")

// DayNumber returns the Julian date of 0h (midnight) of a civil date, a
// number ending in .5. The date must exist, except for the two that almanacs
// print: day 0 is the last day of the month before (0 January is 31 December),
// and 32 December is 1 January. No other month may run over: a 29 February 1900
// in a table taken for Gregorian is an Old Style date, not 1 March. The month is 1 to 12, the year 1 to 9999.
// Algorithm: days of the months counted from March, which puts the leap day
// at the end of the year (Meeus, Astronomical Algorithms, ch. 7, in whole
// numbers). The error unwraps to ErrDate.
func DayNumber(calendar Calendar, year, month, day int) (float64, error) {
	if year < 1 || year > 9999 || month < 1 || month > 12 {
		return 0, fmt.Errorf("%w: year %d, month %d; years 1 to 9999 and months 1 to 12 are accepted", ErrDate, year, month)
	}
	if last := DaysInMonth(calendar, year, month); day < 0 || day > last && !(month == 12 && day == 32) {
		return 0, fmt.Errorf("%w: day %d of month %d in %d, which has %d days (%s calendar)", ErrDate, day, month, year, last, calendar)
	}
	y, m := year, month-3
	if m < 0 {
		y, m = y-1, m+12
	}
	days := 365*y + floorDiv(y, 4) + (153*m+2)/5 + day
	if calendar == CalendarJulian {
		return float64(days) + 1721116.5, nil
	}
	return float64(days-floorDiv(y, 100)+floorDiv(y, 400)) + 1721118.5, nil
}

func floorDiv(a, b int) int {
	q := a / b
	if a%b < 0 {
		q--
	}
	return q
}

// IsLeapYear reports whether a year has a 29 February.
func IsLeapYear(calendar Calendar, year int) bool {
	return year%4 == 0 && (calendar == CalendarJulian || year%100 != 0 || year%400 == 0)
}

// DaysInMonth returns the length of a month, 1 to 12, in days.
func DaysInMonth(calendar Calendar, year, month int) int {
	lengths := [12]int{31, 28, 31, 30, 31, 30, 31, 31, 30, 31, 30, 31}
	if month == 2 && IsLeapYear(calendar, year) {
		return 29
	}
	return lengths[month-1]
}

// CivilDate returns the date in a calendar of a Julian date, and the fraction
// of the day since midnight, in [0, 1).
func (d JD) CivilDate(calendar Calendar) (year, month, day int, fraction float64) {
	n := NewJD(d.Day, d.Frac)
	midnight := int(n.Day) // the civil day whose noon is n.Day ...
	fraction = n.Frac + 0.5
	if fraction >= 1 { // rounding only: Frac is below 0.5
		midnight, fraction = midnight+1, 0
	}
	z := midnight - 1721120 // days since 1 March of year 0, Gregorian
	if calendar == CalendarJulian {
		z = midnight - 1721118
		year = floorDiv(4*z+3, 1461)
		z -= floorDiv(1461*year, 4)
	} else {
		century := floorDiv(4*z+3, 146097)
		z -= floorDiv(146097*century, 4)
		inCentury := (4*z + 3) / 1461
		z -= 1461 * inCentury / 4
		year = 100*century + inCentury
	}
	m := (5*z + 2) / 153
	day = z - (153*m+2)/5 + 1
	month = m + 3
	if month > 12 {
		year, month = year+1, month-12
	}
	return year, month, day, fraction
}
