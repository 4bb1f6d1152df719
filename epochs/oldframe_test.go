package epochs

import (
	"errors"
	"math"
	"testing"
)

// Source: liberfa/erfa src/t_erfa_c.c (Oct 2025), t_fk425. The velocity in
// ERFA is scaled with pmf = 100 * 206264.8..., so mas per year there are
// arcsec per century over ten here.
func TestFK4ToFK5(t *testing.T) {
	ra, dec := 0.07626899753879587532, -1.137405378399605780
	east, north := tangents(ra, dec)
	direction := fromSpherical(ra, dec)
	perCentury := 100 * arcsecPerRad
	velocity := east.times(0.1973749217849087460e-4 * math.Cos(dec) * perCentury).
		plus(north.times(0.5659714913272723189e-5 * perCentury)).
		plus(direction.times(8.7 * 0.134 * velocityFactor))
	s := starFromState(fk4ToFK5(frameState{direction, velocity}), Star{ParallaxMas: 134, SystemicKms: 8.7})

	near(t, "ra, rad", s.RADeg*radPerDeg, 0.08757989933556446040, 1e-14)
	near(t, "dec, rad", s.DecDeg*radPerDeg, -1.132279113042091895, 1e-14)
	masPerRad := 1e3 * arcsecPerRad
	near(t, "pm ra, rad/yr", s.PMRAMasYr/masPerRad/math.Cos(-1.132279113042091895), 0.1953670614474396139e-4, 1e-17)
	near(t, "pm dec, rad/yr", s.PMDecMasYr/masPerRad, 0.5637686678659640164e-5, 1e-17)
	near(t, "parallax, arcsec", s.ParallaxMas/1e3, 0.1339919950582767871, 1e-13)
	near(t, "velocity, km/s", s.SystemicKms, 8.736999669183529069, 1e-12)
}

// Source: fk425 and fk52h of pyerfa 2.0.0.1 for the same star. The proper
// motion is given per Julian year here, the year of fk425 is tropical; place
// to 1 microarcsecond, motion to 1 microarcsecond per year. The radial
// velocity of fk52h is that of the relativistic space motion, 0.01 m/s.
func TestB1950WithMotion(t *testing.T) {
	s := catalogueStar(0.07626899753879587532, -1.137405378399605780,
		0.1973749217849087460e-4*daysPerJulianYear/tropicalYearDays,
		0.5659714913272723189e-5*daysPerJulianYear/tropicalYearDays, 0.134, 8.7, 0)
	got, err := FromB1950(s)
	if err != nil {
		t.Fatal(err)
	}
	near(t, "ra, rad", got.RADeg*radPerDeg, 0.08758000147611866, 5e-12)
	near(t, "dec, rad", got.DecDeg*radPerDeg, -1.1322791485523127, 5e-12)
	masPerRad := 1e3 * arcsecPerRad
	near(t, "pm ra, rad/yr", got.PMRAMasYr/masPerRad/math.Cos(-1.1322791485523127), 1.953585775063476e-05, 5e-12)
	near(t, "pm dec, rad/yr", got.PMDecMasYr/masPerRad, 5.640713493865206e-06, 5e-12)
	near(t, "velocity, km/s", got.SystemicKms, 8.737002169480615, 1e-5)
	if got.EpochJY != 2000 {
		t.Errorf("epoch %v, want 2000", got.EpochJY)
	}
}

// Source: fk45z followed by fk5hz of pyerfa 2.0.0.1. Besselian epochs as
// Julian years by epb2jd and epj. 0.1 mas: the spin is applied once with the
// small angles of a straight line.
func TestB1950WithoutMotion(t *testing.T) {
	for _, c := range []struct{ ra, dec, epochJY, wantRA, wantDec float64 }{
		{1.0, 0.3, 1949.9997904422999, 1.012456231917371, 0.30259957696914425},
		{4.2, -1.1, 1908.5006768231033, 4.2195759877439, -1.1023417872588746},
		{2.0, 1.2, 1982.9990856093716, 2.022447069502358, 1.197929228760591},
	} {
		got, err := FromB1950(Star{RADeg: c.ra / radPerDeg, DecDeg: c.dec / radPerDeg, EpochJY: c.epochJY})
		if err != nil {
			t.Fatal(err)
		}
		near(t, "ra, arcsec", got.RADeg*3600*math.Cos(c.dec), c.wantRA*arcsecPerRad*math.Cos(c.dec), 1e-4)
		near(t, "dec, arcsec", got.DecDeg*3600, c.wantDec*arcsecPerRad, 1e-4)
		if got.PMRAMasYr != 0 || got.PMDecMasYr != 0 {
			t.Errorf("a star without known motion got (%v, %v) mas/yr", got.PMRAMasYr, got.PMDecMasYr)
		}
	}
}

// Source: astropy 5.2.1, SkyCoord(frame=FK4(equinox="B1900",
// obstime="B1900")).icrs. It has the same Newcomb precession; elliptic terms
// of 1900 against 1950 and the spin of FK5 make up the tolerance.
func TestB1900(t *testing.T) {
	for _, c := range []struct{ ra, dec, wantRA, wantDec float64 }{
		{30, 20, 31.385571046635807, 20.47882775374301},
		{250, -45, 251.8088134270152, -45.182209313176834},
		{100, 75, 103.3079641578905, 74.8875065171729},
	} {
		got, err := FromB1900(Star{RADeg: c.ra, DecDeg: c.dec})
		if err != nil {
			t.Fatal(err)
		}
		near(t, "ra, arcsec", got.RADeg*3600*math.Cos(c.dec*radPerDeg), c.wantRA*3600*math.Cos(c.dec*radPerDeg), 0.1)
		near(t, "dec, arcsec", got.DecDeg*3600, c.wantDec*3600, 0.1)
	}
}

func TestOldFrameRefused(t *testing.T) {
	if _, err := FromB1950(Star{DecDeg: 95}); !errors.Is(err, ErrStar) {
		t.Errorf("B1950: got %v", err)
	}
	if _, err := FromB1900(Star{RADeg: math.Inf(1)}); !errors.Is(err, ErrStar) {
		t.Errorf("B1900: got %v", err)
	}
}
