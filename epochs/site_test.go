package epochs

import (
	"errors"
	"math"
	"testing"
)

// Source: liberfa/erfa src/t_erfa_c.c (Oct 2025), t_gd2gc with the WGS84
// ellipsoid.
func TestGeocentricPlace(t *testing.T) {
	s := Site{LongitudeDeg: 3.1 / radPerDeg, LatitudeDeg: -0.5 / radPerDeg, HeightM: 2500}
	nearVector(t, "m", s.geocentricKm().times(1000),
		vector{-5599000.5577049947, 233011.67223479203, -3040909.4706983363}, 1e-7)
}

// Source: Meeus, Astronomical Algorithms, example 11.a (Palomar). Its
// ellipsoid is that of 1976, 3 m larger but in units of its own radius.
func TestParallaxConstants(t *testing.T) {
	g := Site{LatitudeDeg: 33 + 21.0/60 + 22.0/3600, HeightM: 1706}.grounded()
	near(t, "rho sin phi'", g.equatorKm/wgs84.Er, 0.546861, 1e-6)
	near(t, "rho cos phi'", g.axisKm/wgs84.Er, 0.836339, 1e-6)
}

func TestSiteOnAxesOfDate(t *testing.T) {
	s := Site{LongitudeDeg: 2 / radPerDeg, LatitudeDeg: 0.5 / radPerDeg, HeightM: 3000}
	place, velocity := s.grounded().onAxesOfDate(5)

	// Source: pvtob of pyerfa 2.0.0.1 with the pole at rest.
	nearVector(t, "place, m", place.times(1e3), vector{4225083.72466651, 3681940.68870198, 3041149.18346764}, 1e-5)
	nearVector(t, "velocity, m/s", velocity.times(1e3), vector{-268.49135465, 308.09797025, 0}, 1e-7)

	// Source: liberfa/erfa src/t_erfa_c.c (Oct 2025), t_pvtob, with the pole
	// 1e-6 and -0.5e-6 rad away: that motion, left out here, comes to 6 m.
	nearVector(t, "place, m", place.times(1e3), vector{4225081.367071159207, 3681943.215856198144, 3041149.399241260785}, 6)
	nearVector(t, "velocity, m/s", velocity.times(1e3), vector{-268.4915389365998787, 308.0977983288903123, 0}, 5e-4)
}

// Source: pyerfa 2.0.0.1: pvtob, era00 and the transposed c2i06a (IAU
// 2006/2000A), no polar motion, longitude -70.7, latitude -30.2 deg, 2500 m;
// TT and TT - UT1 as listed.
func TestSiteOnICRSAxes(t *testing.T) {
	s := Site{LongitudeDeg: -70.7, LatitudeDeg: -30.2, HeightM: 2500}
	for _, c := range []struct {
		day, frac, deltaT float64
		place, velocity   vector
	}{
		{2396800.5, 0.3, 7, vector{-5471.026711752233, -112.29520900900397, -3270.9624511464535}, vector{0.008254552361738342, -0.4023889388466347, 7.787776975935954e-06}},
		{2417955.5, 0.12, 8.743, vector{334.92071737970497, 5511.125521905314, -3187.359792423284}, vector{-0.4018371031709152, 0.022337645066660704, -0.0036011011574324926}},
		{2433350.5, 0.25, 29, vector{-5460.698118406127, -688.2832655993865, -3217.294058275445}, vector{0.05018538068710368, -0.3993323935195155, 0.00025070446376963313}},
		{2451545, 0, 64.184, vector{-4804.024768072833, -2717.1104817791233, -3191.0179424490307}, vector{0.1981413413392065, -0.35032128772566623, -4.471458077247071e-06}},
		{2460379.5, 0.7, 69.184, vector{5420.321773496133, -1000.8930531308636, -3203.476832980221}, vector{0.07297692582645854, 0.3958021340854991, -0.00018641820488072143}},
		{2469807.5, 0.3, 75, vector{-4083.973555935383, 3729.8522612661964, -3170.694080959372}, vector{-0.27196951136457265, -0.2966746640728871, 0.0013131590984884608}},
	} {
		tt := TT{NewJD(c.day, c.frac)}
		t.Run(tt.Text(1), func(t *testing.T) {
			place, velocity := s.GeocentricICRS(UT1{tt.AddSeconds(-c.deltaT)}, tt)
			nearVector(t, "place, km", place, c.place, 4e-3)
			nearVector(t, "velocity, km/s", velocity, c.velocity, 3e-7)
		})
	}
}

func TestLongitudeHours(t *testing.T) {
	for _, c := range []struct{ deg, hours float64 }{{-70.5, -4.7}, {289.5, -4.7}, {0, 0}, {15, 1}, {-180, -12}} {
		near(t, "hours", Site{LongitudeDeg: c.deg}.LongitudeHours(), c.hours, 1e-12)
	}
}

func TestSiteRefused(t *testing.T) {
	for _, s := range []Site{
		{Name: "west of the date line", LongitudeDeg: -181},
		{Name: "past a full turn", LongitudeDeg: 361},
		{Name: "latitude", LatitudeDeg: 90.5},
		{Name: "height in cm", HeightM: 250000},
		{Name: "not a number", LatitudeDeg: math.NaN()},
	} {
		if err := s.Validate(); !errors.Is(err, ErrSite) {
			t.Errorf("%s: got %v, want an error of ErrSite", s.Name, err)
		}
	}
	if err := (Site{Name: "pole", LatitudeDeg: 90}).Validate(); err != nil {
		t.Error(err)
	}
}
