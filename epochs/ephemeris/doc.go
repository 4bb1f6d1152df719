// Package ephemeris gives the place and velocity of the Earth's centre and of
// the Sun about the solar-system barycentre, on ICRS axes.
//
// The embedded ephemeris is made from VSOP87B (Bretagnon and Francou 1988,
// A&A 202, 309: heliocentric places of the eight planets, ecliptic and
// equinox of J2000), with Pluto by the series of Meeus, Astronomical
// Algorithms, ch. 37 (package meeus/pluto), without which the barycentre is
// 40 km off. The Sun's place about the barycentre follows from the planets'
// masses. The VSOP87 axes are turned to those of FK5 by the authors' matrix
// and from there to ICRS by a constant rotation found from JPL's DE405; see
// rotation.go.
//
// The coefficients in series.txt were cut by gen_series.go from the data of
// the npm package astronomia 4.2.0 (MIT licence), which holds the published
// series. Terms too small to matter are left out: see gen_series.go for the
// rule. To make the table anew, unpack that package and run
//
//	go run gen_series.go FOLDER_OF_THE_PACKAGE/data series.txt
//
// Summing the series takes most of a millisecond, so it is done only at the
// nodes of Chebyshev polynomials that span 32 days; each such segment is built
// when it is first needed and kept. A second call within a segment costs well
// under a microsecond.
package ephemeris
