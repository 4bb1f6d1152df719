package epochs

import "math"

// FromB1950 returns the ICRS place and motion of a star given in the FK4
// system: mean equator and equinox of B1950.0, with the elliptic terms of
// aberration that such catalogues leave in their positions.
//
// The fields of s have the units of Star but hold FK4 values: EpochJY is the
// Julian year of the position, 0 = B1950.0; the proper motion is per year (the
// difference of the tropical and the Julian year, 2e-5 of the motion, is
// allowed for) in the FK4 system, with the factor cos(dec). A proper motion of
// exactly zero in both coordinates means "not known": the star is then given
// no motion against distant galaxies, which is not the same as no motion in
// FK4, a slowly turning frame (up to 0.5 arcsec per century).
//
// The result is for epoch J2000 when the motion is known, for the epoch of
// the position when not. Against the published transformation it is exact to
// rounding; the FK4 system itself has errors of about 0.1 arcsec, 50
// microseconds of light time. Errors: those of Star.Validate.
//
// Source: Aoki et al. 1983, A&A 128, 263 and Yallop et al. 1989, AJ 97, 274,
// as in the Explanatory Supplement (Seidelmann 1992), section 3.59; then the
// orientation and spin of FK5 in ICRS of Mignard and Froeschle 2000, A&A 354,
// 732.
func FromB1950(s Star) (Star, error) {
	if s.EpochJY == 0 {
		s.EpochJY = epochB1950
	}
	if err := s.Validate(); err != nil {
		return Star{}, err
	}
	if s.PMRAMasYr == 0 && s.PMDecMasYr == 0 {
		return fixedFromB1950(s), nil
	}
	at1950, err := s.AtEpoch(epochB1950)
	if err != nil {
		return Star{}, err
	}
	state := fk4ToFK5(fk4State(at1950))
	return fk5ToICRS(starFromState(state, at1950)), nil
}

// FromB1900 is FromB1950 for mean equator and equinox of B1900.0: positions
// and motions are first turned by Newcomb's precession to the equinox of
// B1950.0. EpochJY 0 means B1900.0. The elliptic terms are taken as those of
// 1950 (the change is below 1 mas).
//
// Source: Newcomb's precession in the form of the Explanatory Supplement to
// the Astronomical Ephemeris (1961), section 2B.
func FromB1900(s Star) (Star, error) {
	if s.EpochJY == 0 {
		s.EpochJY = epochB1900
	}
	if err := s.Validate(); err != nil {
		return Star{}, err
	}
	ra, dec := s.RADeg*radPerDeg, s.DecDeg*radPerDeg
	east, north := tangents(ra, dec)
	motion := east.times(s.PMRAMasYr).plus(north.times(s.PMDecMasYr))

	precession := newcombPrecession1900To1950()
	direction := precession.times(fromSpherical(ra, dec))
	motion = precession.times(motion)

	s.setDirection(direction)
	east, north = tangents(s.RADeg*radPerDeg, s.DecDeg*radPerDeg)
	s.PMRAMasYr, s.PMDecMasYr = motion.dot(east), motion.dot(north)
	return FromB1950(s)
}

// The Julian years of B1900.0 = JD 2415020.31352 and B1950.0 =
// JD 2433282.42345905.
const (
	epochB1900 = 2000 + (2415020.31352-2451545)/daysPerJulianYear
	epochB1950 = 2000 + (2433282.42345905-2451545)/daysPerJulianYear
)

// newcombPrecession1900To1950 is the rotation over 50 tropical years.
func newcombPrecession1900To1950() matrix {
	const t = 0.5
	zeta := polynomial(t, 0, 2304.250, 0.302, 0.018) * radPerArcsec
	z := polynomial(t, 0, 2304.250, 0.302+0.791, 0.019) * radPerArcsec
	theta := polynomial(t, 0, 2004.682, -0.426, -0.042) * radPerArcsec
	return aboutZ(-z).after(aboutY(theta)).after(aboutZ(-zeta))
}

// frameState is a place at unit distance and its velocity in arcsec per
// century, on the axes of a catalogue.
type frameState struct{ place, velocity vector }

const (
	arcsecPerRad = 1 / radPerArcsec
	// velocityFactor turns km/s times a parallax in arcsec into arcsec per
	// tropical century of radial motion at unit distance.
	velocityFactor = 21.095
)

// Elliptic aberration of B1950: the constant part at unit distance and its
// change in arcsec per tropical century (Explanatory Supplement 1992, eq.
// 3.591-2).
var (
	ellipticAberration       = vector{-1.62557e-6, -0.31919e-6, -0.13843e-6}
	ellipticAberrationChange = vector{+1.245e-3, -1.580e-3, -0.659e-3}
)

// fk4Matrix is the published 6 by 6 matrix (Explanatory Supplement 1992, eq.
// 3.591-4), place and velocity of FK4 B1950 to those of FK5 J2000, in four
// blocks [to place, to velocity][from place, from velocity].
var fk4Matrix = [2][2]matrix{
	{
		{
			{+0.9999256782, -0.0111820611, -0.0048579477},
			{+0.0111820610, +0.9999374784, -0.0000271765},
			{+0.0048579479, -0.0000271474, +0.9999881997},
		},
		{
			{+0.00000242395018, -0.00000002710663, -0.00000001177656},
			{+0.00000002710663, +0.00000242397878, -0.00000000006587},
			{+0.00000001177656, -0.00000000006582, +0.00000242410173},
		},
	},
	{
		{
			{-0.000551, -0.238565, +0.435739},
			{+0.238514, -0.002667, -0.008541},
			{-0.435623, +0.012254, +0.002117},
		},
		{
			{+0.99994704, -0.01118251, -0.00485767},
			{+0.01118251, +0.99995883, -0.00002718},
			{+0.00485767, -0.00002714, +1.00000956},
		},
	},
}

// fk4State returns the FK4 place and velocity of a star at epoch B1950. One
// tropical century is taken for the century of the proper motion.
func fk4State(s Star) frameState {
	ra, dec := s.RADeg*radPerDeg, s.DecDeg*radPerDeg
	direction := fromSpherical(ra, dec)
	east, north := tangents(ra, dec)
	const perCentury = 0.1 * tropicalYearDays / daysPerJulianYear // from mas/yr to arcsec/century
	velocity := east.times(s.PMRAMasYr * perCentury).
		plus(north.times(s.PMDecMasYr * perCentury)).
		plus(direction.times(s.SystemicKms * s.ParallaxMas * 1e-3 * velocityFactor))
	return frameState{direction, velocity}
}

const tropicalYearDays = 365.242198781

// fk4ToFK5 removes the elliptic aberration and applies the matrix.
func fk4ToFK5(s frameState) frameState {
	place, velocity := s.place, s.velocity
	free := frameState{
		place: place.minus(ellipticAberration).
			plus(place.times(place.dot(ellipticAberration))),
		velocity: velocity.minus(ellipticAberrationChange).
			plus(place.times(place.dot(ellipticAberrationChange))),
	}
	return frameState{
		place:    fk4Matrix[0][0].times(free.place).plus(fk4Matrix[0][1].times(free.velocity)),
		velocity: fk4Matrix[1][0].times(free.place).plus(fk4Matrix[1][1].times(free.velocity)),
	}
}

// starFromState returns a J2000 place and velocity per Julian century as a
// star; old supplies parallax and radial velocity at the other epoch.
func starFromState(state frameState, old Star) Star {
	s := Star{EpochJY: 2000, ParallaxMas: old.ParallaxMas, SystemicKms: old.SystemicKms}
	s.setDirection(state.place)
	distance := state.place.length()
	east, north := tangents(s.RADeg*radPerDeg, s.DecDeg*radPerDeg)
	s.PMRAMasYr = state.velocity.dot(east) / distance * 10
	s.PMDecMasYr = state.velocity.dot(north) / distance * 10
	if old.ParallaxMas > 0 {
		radial := state.velocity.dot(state.place) / distance
		s.SystemicKms = radial / (old.ParallaxMas * 1e-3 * velocityFactor)
		s.ParallaxMas = old.ParallaxMas / distance
	}
	return s
}

// fixedFromB1950 converts a place whose motion is not known (Aoki et al.
// 1983, appendix 2): the elliptic terms are those of the epoch, and the turn
// of FK4 between 1950 and the epoch is undone by the velocity rows of the
// matrix.
func fixedFromB1950(s Star) Star {
	direction := fromSpherical(s.RADeg*radPerDeg, s.DecDeg*radPerDeg)
	tropicalCenturies := (s.EpochJY - epochB1950) * daysPerJulianYear / tropicalYearDays / 100
	aberration := ellipticAberration.plus(ellipticAberrationChange.times(tropicalCenturies * radPerArcsec))
	free := direction.minus(aberration).plus(direction.times(direction.dot(aberration)))

	place := fk4Matrix[0][0].times(free)
	velocity := fk4Matrix[1][0].times(free)
	julianCenturies := (s.EpochJY - 2000) / 100
	s.setDirection(place.plus(velocity.times(julianCenturies * radPerArcsec)))

	// The place now stands on FK5 axes; their spin against ICRS, 0.7 mas/yr,
	// acts over the years from 2000 because the star is fixed in ICRS.
	fixed := fk5ToICRS(Star{RADeg: s.RADeg, DecDeg: s.DecDeg})
	years := s.EpochJY - 2000
	spun := fromSpherical(fixed.RADeg*radPerDeg, fixed.DecDeg*radPerDeg)
	east, north := tangents(fixed.RADeg*radPerDeg, fixed.DecDeg*radPerDeg)
	mas := 1e-3 * radPerArcsec * years
	spun = spun.plus(east.times(fixed.PMRAMasYr * mas)).plus(north.times(fixed.PMDecMasYr * mas))
	s.setDirection(spun.unit())
	return s
}

// Orientation and spin between the FK5 axes and ICRS (Mignard and Froeschle
// 2000), with the signs that fk5ToICRS needs.
var (
	fk5OrientationMas = vector{-19.9, -9.1, +22.9}
	fk5SpinMasYr      = vector{-0.30, +0.60, +0.70}
)

// fk5ToICRS turns a J2000 place and motion from FK5 to ICRS axes.
func fk5ToICRS(s Star) Star {
	ra, dec := s.RADeg*radPerDeg, s.DecDeg*radPerDeg
	direction := fromSpherical(ra, dec)
	east, north := tangents(ra, dec)
	motion := east.times(s.PMRAMasYr).plus(north.times(s.PMDecMasYr))

	toICRS := aboutVector(fk5OrientationMas.times(1e-3 * radPerArcsec))
	motion = toICRS.times(motion.minus(fk5SpinMasYr.cross(direction)))
	s.setDirection(toICRS.times(direction))
	east, north = tangents(s.RADeg*radPerDeg, s.DecDeg*radPerDeg)
	s.PMRAMasYr, s.PMDecMasYr = motion.dot(east), motion.dot(north)
	return s
}

// aboutVector turns the axes about a vector whose length is the angle in
// radians (Rodrigues).
func aboutVector(w vector) matrix {
	angle := w.length()
	axis := w.unit()
	sin, cos := math.Sincos(angle)
	var m matrix
	for i := range 3 {
		for j := range 3 {
			m[i][j] = axis[i] * axis[j] * (1 - cos)
		}
		m[i][i] += cos
	}
	m[0][1] += axis[2] * sin
	m[1][0] -= axis[2] * sin
	m[0][2] -= axis[1] * sin
	m[2][0] += axis[1] * sin
	m[1][2] += axis[0] * sin
	m[2][1] -= axis[0] * sin
	return m
}
