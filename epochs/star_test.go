package epochs

import (
	"errors"
	"math"
	"testing"

	"pgregory.net/rapid"
)

// near fails unless got is within tolerance of want; NaN is never near.
func near(t *testing.T, what string, got, want, tolerance float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tolerance) {
		t.Errorf("%s: got %.17g, want %.17g, difference %.3g exceeds %.3g", what, got, want, got-want, tolerance)
	}
}

func nearVector(t *testing.T, what string, got, want vector, tolerance float64) {
	t.Helper()
	for i := range 3 {
		near(t, what+" "+string("xyz"[i]), got[i], want[i], tolerance)
	}
}

// catalogueStar builds a star from the arguments of ERFA: radians, radians
// of right ascension (no cos(dec)) per Julian year, arcsec, km/s.
func catalogueStar(ra, dec, pmRA, pmDec, parallaxArcsec, kms, epochJY float64) Star {
	masPerRad := 1e3 * arcsecPerRad
	return Star{
		RADeg: ra / radPerDeg, DecDeg: dec / radPerDeg, EpochJY: epochJY,
		PMRAMasYr: pmRA * math.Cos(dec) * masPerRad, PMDecMasYr: pmDec * masPerRad,
		ParallaxMas: parallaxArcsec * 1e3, SystemicKms: kms,
	}
}

// Source: liberfa/erfa src/t_erfa_c.c (Oct 2025), t_starpv. ERFA's astronomical
// unit and light time are those used here.
func TestSpaceMotionAgainstERFA(t *testing.T) {
	s := catalogueStar(0.01686756, -1.093989828, -1.78323516e-5, 2.336024047e-6, 0.74723, -21.6, 2000)
	m := s.spaceMotion()
	nearVector(t, "place, au", m.placeAu, vector{126668.5912743160601, 2136.792716839935195, -245251.2339876830091}, 1e-9)
	nearVector(t, "velocity, au/day", m.velocityAuD, vector{-0.4051854008955659551e-2, -0.6253919754414777970e-2, 0.1189353714588109341e-1}, 1e-13)
}

// Source: liberfa/erfa src/t_erfa_c.c (Oct 2025), t_starpm and t_pmsafe: the
// same uniform motion, there with all six outputs.
func TestStarAtAnotherEpoch(t *testing.T) {
	julianYear := func(mjd float64) float64 { return 2000 + (mjd-51544.5)/365.25 }
	cases := []struct {
		name                                string
		star                                Star
		to                                  float64
		ra, dec, pmRA, pmDec, parallax, kms float64
		angleTolerance, kmsTolerance        float64
	}{
		{
			name: "starpm",
			star: catalogueStar(0.01686756, -1.093989828, -1.78323516e-5, 2.336024047e-6, 0.74723, -21.6, julianYear(50083)),
			to:   julianYear(53736),
			ra:   0.01668919069414256149, dec: -1.093966454217127897,
			pmRA: -0.1783662682153176524e-4, pmDec: 0.2338092915983989595e-5,
			parallax: 0.7473533835317719243, kms: -21.59905170476417175,
			angleTolerance: 1e-13, kmsTolerance: 1e-11,
		},
		{
			name: "pmsafe",
			star: catalogueStar(1.234, 0.789, 1e-5, -2e-5, 1e-2, 10, julianYear(48348.5625)),
			to:   2000,
			ra:   1.234087484501017061, dec: 0.7888249982450468567,
			pmRA: 0.9996457663586073988e-5, pmDec: -0.2000040085106754565e-4,
			parallax: 0.9999997295356830666e-2, kms: 10.38468380293920069,
			// Epochs as Julian years in one float64 are good to 7
			// microseconds, 1e-17 rad here.
			angleTolerance: 1e-12, kmsTolerance: 1e-10,
		},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			got, err := c.star.AtEpoch(c.to)
			if err != nil {
				t.Fatal(err)
			}
			near(t, "ra, rad", got.RADeg*radPerDeg, c.ra, c.angleTolerance)
			near(t, "dec, rad", got.DecDeg*radPerDeg, c.dec, c.angleTolerance)
			masPerRad := 1e3 * arcsecPerRad
			near(t, "pm ra, rad/yr", got.PMRAMasYr/masPerRad/math.Cos(c.dec), c.pmRA, 1e-16)
			near(t, "pm dec, rad/yr", got.PMDecMasYr/masPerRad, c.pmDec, 1e-16)
			near(t, "parallax, arcsec", got.ParallaxMas/1e3, c.parallax, 1e-13)
			near(t, "velocity, km/s", got.SystemicKms, c.kms, c.kmsTolerance)
		})
	}
}

// Source: liberfa/erfa src/t_erfa_c.c (Oct 2025), t_pmpx: direction from an
// observer at 8.75 years plus the light time to the observer. ERFA moves the
// direction by the catalogue rates alone, here light time is solved as well:
// the two differ by less than 1e-11 rad.
func TestDirectionFromObserver(t *testing.T) {
	s := catalogueStar(1.234, 0.789, 1e-5, -2e-5, 1e-2, 10, 2000)
	m := s.spaceMotion()
	observer := vector{0.9, 0.4, 0.1}
	roemerDays := observer.dot(m.placeAu.unit()) / lightAuDay
	place := m.at(NewJD(2451545, 8.75*365.25+roemerDays))
	direction := place.minus(observer).unit()
	nearVector(t, "direction", direction, vector{0.2328137623960308438, 0.6651097085397855328, 0.7095257765896359837}, 1e-11)
}

// Source: Meeus, Astronomical Algorithms, example 21.b: theta Persei moved
// from J2000 to 2028 Nov 13.19 (position on J2000 axes, p. 135: the values
// before precession), last printed digit.
func TestProperMotionOfMeeus(t *testing.T) {
	s := Star{RADeg: 15 * (2 + 44.0/60 + 11.986/3600), DecDeg: 49 + 13.0/60 + 42.48/3600}
	s.PMRAMasYr = 15 * 34.25 * math.Cos(s.DecDeg*radPerDeg)
	s.PMDecMasYr = -89.5
	moved, err := s.AtEpoch(2000 + (2462088.69-2451545)/365.25)
	if err != nil {
		t.Fatal(err)
	}
	near(t, "ra, s of time", moved.RADeg*240, 41.054063*240, 0.001)
	near(t, "dec, arcsec", moved.DecDeg*3600, 49.227750*3600, 0.01)

	// Then through precession to the equator of date: 2h46m11.331s,
	// +49d20'54.54". The example has neither nutation nor frame bias and uses
	// the IAU 1976 angles, 0.1 arcsec from those of IAU 2006 by then.
	ra, dec := precessed(moved, 2462088.69).spherical()
	near(t, "ra of date, s of time", ra/radPerDeg*240, (2*60+46)*60+11.331, 0.010)
	near(t, "dec of date, arcsec", dec/radPerDeg*3600, (49*60+20)*60+54.54, 0.1)
}

// precessed returns the direction of a star on the mean equator and equinox
// of date, from the matrix of the true equator by taking out the nutation.
func precessed(s Star, jd float64) vector {
	axes := axesOfDate(NewJD(jd, 0))
	direction := axes.times(fromSpherical(s.RADeg*radPerDeg, s.DecDeg*radPerDeg))
	psi, epsilon, obliquity := nutationAt(jd)
	toTrueEquinox := aboutZ(-(precessionInRA(centuries(NewJD(jd, 0))) + psi*math.Cos(obliquity)))
	unNutated := aboutX(-obliquity).after(aboutZ(psi)).after(aboutX(obliquity + epsilon)).after(toTrueEquinox)
	return unNutated.times(direction)
}

// The coefficient 0.0229824 m/s/yr for mu = 1 arcsec/yr and 1 arcsec of
// parallax follows from au, c and the Julian year (van de Kamp 1967, eq. for
// the secular change of radial velocity: dv/dt = v_t^2/r).
func TestPerspectiveAcceleration(t *testing.T) {
	s := Star{RADeg: 269.45, DecDeg: 4.69, PMRAMasYr: -801.551, PMDecMasYr: 10362.394, ParallaxMas: 546.9759}
	m := s.spaceMotion()
	year := m.perspectiveMs(m.at(NewJD(2451545, 365.25)).unit())
	near(t, "m/s in the first year", year, 4.5388, 1e-3)
	near(t, "m/s before", m.perspectiveMs(m.at(NewJD(2451545, -365.25)).unit()), -4.5388, 1e-3)

	s.ParallaxMas = 0
	m = s.spaceMotion()
	if got := m.perspectiveMs(m.at(NewJD(2451545, 36525)).unit()); got != 0 {
		t.Errorf("without a parallax the perspective is not known, got %v m/s", got)
	}
}

// A star without parallax must still move: after a century 10.4 arcsec/yr
// has turned the direction by 1040 arcsec, less the slowing of a great
// circle with no radial motion, atan(x) for x.
func TestProperMotionWithoutParallax(t *testing.T) {
	s := Star{RADeg: 270, DecDeg: 5, PMDecMasYr: 10400, SystemicKms: -110}
	m := s.spaceMotion()
	turn := math.Asin(m.at(NewJD(2451545, -36525)).unit().cross(m.placeAu.unit()).length())
	near(t, "turn, arcsec", turn*arcsecPerRad, math.Atan(1040*radPerArcsec)*arcsecPerRad, 1e-4)
}

func TestStarThereAndBack(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		s := Star{
			RADeg:       rapid.Float64Range(0, 359.999).Draw(t, "ra"),
			DecDeg:      rapid.Float64Range(-89, 89).Draw(t, "dec"),
			EpochJY:     rapid.Float64Range(1850, 2100).Draw(t, "epoch"),
			PMRAMasYr:   rapid.Float64Range(-5000, 5000).Draw(t, "pmRA"),
			PMDecMasYr:  rapid.Float64Range(-5000, 5000).Draw(t, "pmDec"),
			ParallaxMas: rapid.Float64Range(5, 700).Draw(t, "parallax"),
			SystemicKms: rapid.Float64Range(-300, 300).Draw(t, "velocity"),
		}
		there, err := s.AtEpoch(rapid.Float64Range(1850, 2100).Draw(t, "to"))
		if err != nil {
			t.Fatal(err)
		}
		back, err := there.AtEpoch(s.EpochJY)
		if err != nil {
			t.Fatal(err)
		}
		before := fromSpherical(s.RADeg*radPerDeg, s.DecDeg*radPerDeg)
		after := fromSpherical(back.RADeg*radPerDeg, back.DecDeg*radPerDeg)
		if miss := before.minus(after).length() * arcsecPerRad; !(miss <= 1e-7) {
			t.Fatalf("place misses by %g arcsec", miss)
		}
		if miss := back.SystemicKms - s.SystemicKms; !(math.Abs(miss) <= 1e-8) {
			t.Fatalf("velocity misses by %g km/s", miss)
		}
		if miss := back.ParallaxMas - s.ParallaxMas; !(math.Abs(miss) <= 1e-9) {
			t.Fatalf("parallax misses by %g mas", miss)
		}
	})
}

func TestStarRefused(t *testing.T) {
	for _, c := range []struct {
		name string
		star Star
	}{
		{"right ascension in hours times 360", Star{RADeg: 360}},
		{"negative right ascension", Star{RADeg: -1}},
		{"not a number", Star{RADeg: math.NaN()}},
		{"beyond the pole", Star{DecDeg: -90.1}},
		{"epoch as a Julian date", Star{EpochJY: 2451545}},
		{"proper motion", Star{PMRAMasYr: 2e5}},
		{"negative parallax", Star{ParallaxMas: -0.2}},
		{"velocity in m/s", Star{SystemicKms: -21600}},
		{"velocity not finite", Star{SystemicKms: math.Inf(1)}},
	} {
		t.Run(c.name, func(t *testing.T) {
			if err := c.star.Validate(); !errors.Is(err, ErrStar) {
				t.Errorf("got %v, want an error of ErrStar", err)
			}
			if _, err := c.star.AtEpoch(2000); !errors.Is(err, ErrStar) {
				t.Errorf("AtEpoch: got %v, want an error of ErrStar", err)
			}
		})
	}
}
