package epochs

import (
	"errors"
	"fmt"
	"math"

	"github.com/soniakeys/meeus/v3/globe"
	"github.com/soniakeys/unit"
)

// ErrSite is what every error about an observing site unwraps to.
var ErrSite = errors.New("epochs: unusable site")

// Site is an observing site on the WGS84 ellipsoid. The zero value is the
// point at sea level on the equator and the meridian of Greenwich; where a
// site may be missing, functions take a *Site and nil means "not known".
type Site struct {
	Name         string
	LongitudeDeg float64 // degrees, east of Greenwich positive
	LatitudeDeg  float64 // degrees, geodetic, north positive
	HeightM      float64 // metres above the ellipsoid
}

// Validate reports coordinates that no observatory can have: longitude
// outside -180..360, latitude outside -90..90 degrees, height outside
// -1000..50000 m. The error unwraps to ErrSite.
func (s Site) Validate() error {
	switch {
	case !(s.LongitudeDeg >= -180 && s.LongitudeDeg <= 360):
		return fmt.Errorf("%w %q: longitude %v deg, expected -180 to 360, east of Greenwich positive", ErrSite, s.Name, s.LongitudeDeg)
	case !(s.LatitudeDeg >= -90 && s.LatitudeDeg <= 90):
		return fmt.Errorf("%w %q: latitude %v deg, expected -90 to 90, north positive", ErrSite, s.Name, s.LatitudeDeg)
	case !(s.HeightM >= -1000 && s.HeightM <= 50000):
		return fmt.Errorf("%w %q: height %v m, expected -1000 to 50000", ErrSite, s.Name, s.HeightM)
	}
	return nil
}

// LongitudeHours returns the longitude as time, east positive, in -12..12:
// local time minus Greenwich time.
func (s Site) LongitudeHours() float64 {
	return math.Remainder(s.LongitudeDeg, 360) / 15
}

// wgs84 is the ellipsoid of the Department of Defense World Geodetic System
// 1984 (NIMA TR8350.2, table 3.1), radius in km. The library's own Earth76 is
// the IAU 1976 ellipsoid: 3 m larger.
var wgs84 = globe.Ellipsoid{Er: 6378.137, Fl: 1 / 298.257223563}

// groundedSite holds what does not change while the Earth turns.
type groundedSite struct {
	axisKm, equatorKm float64 // distances from the axis and from the equator's plane
	longitudeRad      float64
	latitudeRad       float64
	potentialKm2S2    float64 // of the Earth, positive
}

func (s Site) grounded() groundedSite {
	latitude := unit.AngleFromDeg(s.LatitudeDeg)
	rhoSin, rhoCos := wgs84.ParallaxConstants(latitude, s.HeightM)
	return groundedSite{
		axisKm:         rhoCos * wgs84.Er,
		equatorKm:      rhoSin * wgs84.Er,
		longitudeRad:   s.LongitudeDeg * radPerDeg,
		latitudeRad:    latitude.Rad(),
		potentialKm2S2: earthGMKm3S2 / (math.Hypot(rhoCos, rhoSin) * wgs84.Er),
	}
}

// geocentricKm returns the site in axes that turn with the Earth: x to the
// meridian of Greenwich, z to the north pole (Meeus, Astronomical
// Algorithms, ch. 11, on the WGS84 ellipsoid).
func (s Site) geocentricKm() vector {
	g := s.grounded()
	sin, cos := math.Sincos(g.longitudeRad)
	return vector{g.axisKm * cos, g.axisKm * sin, g.equatorKm}
}

// onAxesOfDate returns the site's place in km and velocity in km/s about the
// Earth's centre when the Earth rotation angle is the given one, in the axes
// of axesOfDate. Polar motion (0.3 arcsec: 10 m, 0.7 mm/s) is left out.
func (g groundedSite) onAxesOfDate(earthRotationRad float64) (placeKm, velocityKmS vector) {
	sin, cos := math.Sincos(earthRotationRad + g.longitudeRad)
	placeKm = vector{g.axisKm * cos, g.axisKm * sin, g.equatorKm}
	velocityKmS = vector{-earthRotationRadS * placeKm[1], earthRotationRadS * placeKm[0], 0}
	return placeKm, velocityKmS
}

// GeocentricICRS returns the site's place in km and velocity in km/s about
// the Earth's centre on ICRS axes: the WGS84 place is turned by the Earth
// rotation angle about the true pole, then through nutation, precession and
// frame bias. ut is the rotation of the Earth, tt the same instant on the
// scale of precession; a second of error in ut moves the velocity by up to
// 34 mm/s, in tt by nothing. The error is below 15 m and 1 mm/s in
// 1850-2100, most of it polar motion, compared with ERFA's IAU 2006/2000A
// matrices and the pole of the IERS.
func (s Site) GeocentricICRS(ut UT1, tt TT) (placeKm, velocityKmS [3]float64) {
	axes := axesOfDate(tt.JD)
	place, velocity := s.grounded().onAxesOfDate(earthRotationAngle(ut))
	return axes.transposedTimes(place), axes.transposedTimes(velocity)
}
