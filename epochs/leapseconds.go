package epochs

import (
	"errors"
	"fmt"
	"math"
	"sort"
)

// ErrUTC is returned for a date on which UTC did not exist.
var ErrUTC = errors.New("epochs: no UTC")

// utcSegment is a stretch of time in which TAI - UTC was a straight line.
type utcSegment struct {
	from    float64 // MJD of its first day
	seconds float64 // TAI - UTC in seconds at refMJD
	refMJD  float64
	rate    float64 // seconds a day
}

// utcSegments is the table of TAI - UTC since 1960 (IERS, tai-utc.dat). Valid
// until the next leap second, which the IERS Bulletin C announces half a year
// ahead; none was announced up to 2026. Another leap second is one more line.
var utcSegments = []utcSegment{
	{36934, 1.4178180, 37300, 0.001296},  // 1960 January 1
	{37300, 1.4228180, 37300, 0.001296},  // 1961 January 1
	{37512, 1.3728180, 37300, 0.001296},  // 1961 August 1
	{37665, 1.8458580, 37665, 0.0011232}, // 1962 January 1
	{38334, 1.9458580, 37665, 0.0011232}, // 1963 November 1
	{38395, 3.2401300, 38761, 0.001296},  // 1964 January 1
	{38486, 3.3401300, 38761, 0.001296},  // 1964 April 1
	{38639, 3.4401300, 38761, 0.001296},  // 1964 September 1
	{38761, 3.5401300, 38761, 0.001296},  // 1965 January 1
	{38820, 3.6401300, 38761, 0.001296},  // 1965 March 1
	{38942, 3.7401300, 38761, 0.001296},  // 1965 July 1
	{39004, 3.8401300, 38761, 0.001296},  // 1965 September 1
	{39126, 4.3131700, 39126, 0.002592},  // 1966 January 1
	{39887, 4.2131700, 39126, 0.002592},  // 1968 February 1
	{41317, 10, 0, 0}, {41499, 11, 0, 0}, {41683, 12, 0, 0}, {42048, 13, 0, 0},
	{42413, 14, 0, 0}, {42778, 15, 0, 0}, {43144, 16, 0, 0}, {43509, 17, 0, 0},
	{43874, 18, 0, 0}, {44239, 19, 0, 0}, {44786, 20, 0, 0}, {45151, 21, 0, 0},
	{45516, 22, 0, 0}, {46247, 23, 0, 0}, {47161, 24, 0, 0}, {47892, 25, 0, 0},
	{48257, 26, 0, 0}, {48804, 27, 0, 0}, {49169, 28, 0, 0}, {49534, 29, 0, 0},
	{50083, 30, 0, 0}, {50630, 31, 0, 0}, {51179, 32, 0, 0}, {53736, 33, 0, 0},
	{54832, 34, 0, 0}, {56109, 35, 0, 0}, {57204, 36, 0, 0}, {57754, 37, 0, 0}, // 2017 January 1
}

// utcSegmentOf returns the place in the table of a day's segment, by its MJD
// at 0h.
func utcSegmentOf(mjd float64) (int, error) {
	last := len(utcSegments) - 1
	if mjd >= utcSegments[last].from { // the years since 2017
		return last, nil
	}
	i := sort.Search(last, func(i int) bool { return utcSegments[i].from > mjd })
	if i == 0 {
		return 0, fmt.Errorf("%w before 1960 January 1 (MJD 36934), at MJD %.0f", ErrUTC, mjd)
	}
	return i - 1, nil
}

// at returns TAI - UTC in seconds on a day, by its MJD at 0h, at a fraction of
// the day.
func (s *utcSegment) at(mjd, fraction float64) float64 {
	return s.seconds + (mjd+fraction-s.refMJD)*s.rate
}

// taiMinusUTC returns TAI - UTC in seconds on a day, by its MJD at 0h, at a
// fraction of the day.
func taiMinusUTC(mjd, fraction float64) (float64, error) {
	i, err := utcSegmentOf(mjd)
	if err != nil {
		return 0, err
	}
	return utcSegments[i].at(mjd, fraction), nil
}

// dayLengthS returns the length of a UTC day in UTC seconds: 86401 when it
// ends with a leap second. The small steps before 1972 are left out: they lie
// between two days.
func dayLengthS(mjd float64) float64 {
	i, err := utcSegmentOf(mjd)
	if err != nil {
		return SecondsPerDay
	}
	return lengthOfDayIn(i, mjd)
}

// lengthOfDayIn is dayLengthS for a day of a known segment.
func lengthOfDayIn(i int, mjd float64) float64 {
	if i+1 == len(utcSegments) || utcSegments[i+1].from != mjd+1 || utcSegments[i].rate != 0 {
		return SecondsPerDay
	}
	return SecondsPerDay + utcSegments[i+1].seconds - utcSegments[i].seconds
}

// TAI returns the same instant on TAI. UTC is a quasi Julian date: on a day
// with a leap second its fraction is that of a day of 86401 s. Dates before
// 1960 are an error that wraps ErrUTC. Exact but for the rounding of the
// parts, below 0.01 ns.
func (u UTC) TAI() (TAI, error) {
	mjd, fraction := mjdOf(u.JD)
	i, err := utcSegmentOf(mjd)
	if err != nil {
		return TAI{}, err
	}
	seconds := fraction*lengthOfDayIn(i, mjd) + utcSegments[i].at(mjd, fraction)
	return TAI{NewJD(mjd+2400001, -0.5).AddSeconds(seconds)}, nil
}

// UTC returns the same instant on UTC, as a quasi Julian date.
func (t TAI) UTC() (UTC, error) {
	mjd, _ := mjdOf(t.JD)
	for day := mjd + 1; ; day-- { // the UTC day begins before the TAI day of the same number or after
		i, err := utcSegmentOf(day)
		if err != nil {
			return UTC{}, err
		}
		segment := &utcSegments[i]
		seconds := t.Sub(NewJD(day+2400001, -0.5))*SecondsPerDay - segment.at(day, 0)
		if seconds < 0 {
			continue
		}
		fraction := seconds / (lengthOfDayIn(i, day) + segment.rate)
		return UTC{NewJD(day+2400001, -0.5).Add(fraction)}, nil
	}
}

// mjdOf splits a date into the MJD of its midnight and the fraction of the
// day, in [0, 1).
func mjdOf(d JD) (mjd, fraction float64) {
	n := NewJD(d.Day, d.Frac)
	fraction = n.Frac + 0.5
	mjd = n.Day - 2400001
	if fraction >= 1 {
		mjd, fraction = mjd+1, 0
	}
	return mjd, math.Max(fraction, 0)
}
