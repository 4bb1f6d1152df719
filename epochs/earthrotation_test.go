package epochs

import (
	"math"
	"testing"

	"github.com/soniakeys/meeus/v3/nutation"
)

// nutationAt returns nutation in longitude and obliquity and the mean
// obliquity, radians.
func nutationAt(jd float64) (psi, epsilon, obliquity float64) {
	p, e := nutation.Nutation(jd)
	return p.Rad(), e.Rad(), nutation.MeanObliquity(jd).Rad()
}

func TestEarthRotation(t *testing.T) {
	// Source: liberfa/erfa src/t_erfa_c.c (Oct 2025), t_era00 and t_gmst06.
	near(t, "era00, rad", earthRotationAngle(UT1{NewJD(2400000.5, 54388)}), 0.4022837240028158102, 1e-12)
	date := NewJD(2400000.5, 53736)
	near(t, "gmst06, rad", greenwichMeanSiderealTime(UT1{date}, TT{date}), 1.754174971870091203, 1e-12)

	// Sources: gmst06 and gmst82 of pyerfa 2.0.0.1 with TT = UT1 + 55 s; Meeus,
	// Astronomical Algorithms, examples 12.a and 12.b, and the sidereal time of
	// 1908 follow gmst82. The two formulas part at the corrected rate of
	// precession, 0.28 arcsec of right ascension per century from J2000.
	for _, c := range []struct {
		name                       string
		day, frac                  float64
		gmst06, gmst82, difference float64 // seconds of sidereal time
	}{
		{"1987 Apr 10 0h (Meeus 12.a)", 2446895.5, 0, 47446.3701348438, 13*3600 + 10*60 + 46.3668, 0.004},
		{"1987 Apr 10 19h21m (Meeus 12.b)", 2446895.5, (19 + 21.0/60) / 24, 30897.09289929291, 8*3600 + 34*60 + 57.0896, 0.004},
		{"1908 Jan 14 0h", 2417954.5, 0, 26897.559017484567, 7*3600 + 28*60 + 17.5414, 0.018},
	} {
		ut := NewJD(c.day, c.frac)
		got := greenwichMeanSiderealTime(UT1{ut}, TT{ut.AddSeconds(55)}) / (2 * math.Pi) * SecondsPerDay
		near(t, c.name+", s", got, c.gmst06, 1e-8)
		near(t, c.name+" by the formula of 1982, s", got, c.gmst82, c.difference)
	}
}

// Source: gst06a of ERFA, t_erfa_c.c (Oct 2025). Nutation by the IAU 1980
// series: 0.1 arcsec.
func TestApparentSiderealTime(t *testing.T) {
	date := NewJD(2400000.5, 53736)
	psi, _, obliquity := nutationAt(date.Float())
	apparent := greenwichMeanSiderealTime(UT1{date}, TT{date}) + psi*math.Cos(obliquity)
	near(t, "gst06a, arcsec", apparent*arcsecPerRad, 1.754166137675019159*arcsecPerRad, 0.1)
}

func TestInterpolatedAxes(t *testing.T) {
	var table dayTable
	for i := range 400 {
		date := NewJD(2396700+float64(i)*241.37, 0.313*float64(i%3)) // 1849 to 2113, past both ends
		values := table.at(date)
		got, want := values.axes, axesOfDate(date)
		near(t, date.Text(2)+" TDB - TT, s", values.tdbMinusTTS, tdbMinusTT(TT{date}), 1e-7)
		for row := range 3 {
			for column := range 3 {
				near(t, date.Text(2), got[row][column], want[row][column], 0.01*radPerArcsec)
			}
		}
	}
}
