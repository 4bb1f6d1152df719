// Package epochs turns dates as printed into BJD_TDB, and velocities as
// printed into barycentric ones.
//
// A Convention says how a table prints its dates; its StampReader reads them
// into Stamps, in which calendar, noon or midnight and offset are resolved. A
// Converter, made for one star, turns a stamp into an Epoch: the instant at
// which the light reached the solar-system barycentre, on the scale TDB, with
// its standard uncertainty and each term of the light time in seconds; and a
// PublishedVelocity into a BarycentricVelocity with each term in m/s. It can
// also test whether it was night at the site (NightTest), which shows a date
// that was misread.
//
// # Conventions
//
// Julian dates are held in two parts. Longitudes are east positive, velocities
// positive receding. A Julian date begins at noon whatever the scale; only
// calendar dates ask whether the day begins at midnight or noon. UTC exists
// from 1960; earlier dates so labelled are taken for Universal Time, and
// flagged. Universal Time becomes TT through Delta T before 1960 and through
// UTC from then on. "ET" is TT.
//
// # What is refused
//
// A date that can mean two things is an error (ErrAmbiguous): G.M.T. before
// 1925 unless the start of the day is stated. So is a date that no calendar
// has, 23:59:60 where no leap second was, a truncated year, a Julian date
// outside 1800 to 2200, and a date outside the ephemeris (1850 to 2100).
//
// # Accuracy
//
// Against astropy 5.2 and ERFA 2.0 with the same inputs, in 2,000 random cases:
// BJD_TDB to 0.05 ms in 1960-2050 and to 0.1 ms in 1885-1960 with the same
// Delta T; velocity corrections to 1 cm/s. Most of that is the ephemeris; TDB
// minus TT is good to 10 microseconds. UT1 minus UTC is taken for zero unless
// given: 1.4 microseconds and 31 mm/s at most. Polar motion is left out: 10 m.
//
// # What is not done
//
// The star's gravity and convection, the Shapiro delay of the planets (below
// a microsecond) and the emission time at the star are left out; an orbit
// absorbs the last. A spline of Delta T was tried and not kept: see DeltaT.
// Dates as one float64 and times as time.Time were rejected: the first step by
// 40 microseconds, the second knows neither the seconds of 1960-1971 nor days
// from noon.
package epochs
