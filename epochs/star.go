package epochs

import (
	"errors"
	"fmt"
	"math"
)

// ErrStar is what every error about a star's data unwraps to.
var ErrStar = errors.New("epochs: unusable star")

// Star is a star's place and motion as an astrometric catalogue gives them,
// on ICRS axes. Motions that are not known are zero.
type Star struct {
	RADeg, DecDeg float64 // degrees, ICRS
	EpochJY       float64 // Julian year (TDB) for which the position holds; 0 = 2000
	PMRAMasYr     float64 // proper motion in right ascension with the factor cos(dec), mas per Julian year
	PMDecMasYr    float64 // proper motion in declination, mas per Julian year
	ParallaxMas   float64 // mas; 0 = not known, taken as infinitely far
	SystemicKms   float64 // radial velocity in km/s, positive = receding
}

// Validate reports values outside their range: right ascension 0..360 and
// declination -90..90 degrees, epoch 0 or 1700..2200, proper motion within
// 100 arcsec/yr, parallax 0..1000 mas, velocity within 3000 km/s. The error
// unwraps to ErrStar.
func (s Star) Validate() error {
	motion := math.Hypot(s.PMRAMasYr, s.PMDecMasYr)
	switch {
	case !(s.RADeg >= 0 && s.RADeg < 360):
		return fmt.Errorf("%w: right ascension %v deg, expected 0 <= ra < 360", ErrStar, s.RADeg)
	case !(s.DecDeg >= -90 && s.DecDeg <= 90):
		return fmt.Errorf("%w: declination %v deg, expected -90 to 90", ErrStar, s.DecDeg)
	case s.EpochJY != 0 && !(s.EpochJY >= 1700 && s.EpochJY <= 2200):
		return fmt.Errorf("%w: epoch of the position %v, expected a Julian year in 1700 to 2200", ErrStar, s.EpochJY)
	case !(motion <= 100e3):
		return fmt.Errorf("%w: proper motion (%v, %v) mas/yr, expected at most 100000", ErrStar, s.PMRAMasYr, s.PMDecMasYr)
	case !(s.ParallaxMas >= 0 && s.ParallaxMas <= 1000):
		return fmt.Errorf("%w: parallax %v mas, expected 0 (not known) to 1000", ErrStar, s.ParallaxMas)
	case !(math.Abs(s.SystemicKms) <= 3000):
		return fmt.Errorf("%w: systemic velocity %v km/s, expected at most 3000 either way", ErrStar, s.SystemicKms)
	}
	return nil
}

const (
	auKm              = 149597870.7 // IAU 2012 Resolution B2
	lightKmS          = 299792.458  // SI
	daysPerJulianYear = 365.25
	lightAuDay        = lightKmS * SecondsPerDay / auKm
)

// smallestParallaxMas stands in for a parallax that is zero: the motion
// needs some distance, and the direction at any time does not depend on which
// as long as the star is given no radial velocity.
const smallestParallaxMas = 1e-4

// spaceMotion is a star in uniform motion: place and velocity about the
// solar-system barycentre. The place is where the star was when the light
// left it that arrived at the barycentre at the epoch.
type spaceMotion struct {
	epoch       JD // TDB
	placeAu     vector
	velocityAuD vector
	lightDays   float64 // from placeAu
	inverseAu   float64 // 1/distance for the curvature of the wavefront, 0 = plane
	slowing     float64 // sqrt(1 - v^2/c^2) - 1
	startKms    float64 // radial velocity at placeAu
}

// spaceMotion changes catalogue values to place and velocity. The observed
// proper motion and radial velocity contain the changing light time and the
// relativistic Doppler effect; both are removed (Stumpff 1985, A&A 144, 232).
//
// A star with no parallax moves on its great circle without its radial
// velocity: the change of perspective needs the distance.
func (s Star) spaceMotion() spaceMotion {
	radialKmS := s.SystemicKms
	parallaxMas := s.ParallaxMas
	inverseAu := parallaxMas * 1e-3 * radPerArcsec
	if parallaxMas <= 0 {
		radialKmS = 0
		// Keep the made-up transverse speed near 5 km/s.
		parallaxMas = math.Max(smallestParallaxMas, math.Hypot(s.PMRAMasYr, s.PMDecMasYr))
	}
	epoch := s.EpochJY
	if epoch == 0 {
		epoch = 2000
	}

	ra, dec := s.RADeg*radPerDeg, s.DecDeg*radPerDeg
	direction := fromSpherical(ra, dec)
	east, north := tangents(ra, dec)
	distance := 1 / (parallaxMas * 1e-3 * radPerArcsec)
	perDay := 1e-3 * radPerArcsec / daysPerJulianYear * distance
	transverse := east.times(s.PMRAMasYr * perDay).plus(north.times(s.PMDecMasYr * perDay))
	radial := radialKmS * SecondsPerDay / auKm
	velocity := trueVelocity(direction, radial, transverse)

	m := spaceMotion{
		epoch:       NewJD(2451545, (epoch-2000)*daysPerJulianYear),
		placeAu:     direction.times(distance),
		velocityAuD: velocity,
		lightDays:   distance / lightAuDay,
		inverseAu:   inverseAu,
	}
	m.slowing = timeDilation(velocity.dot(velocity) / (lightAuDay * lightAuDay))
	m.startKms = m.radialVelocityKms(direction)
	return m
}

// tangents returns the unit vectors towards increasing right ascension and
// declination at a place.
func tangents(raRad, decRad float64) (east, north vector) {
	sinRA, cosRA := math.Sincos(raRad)
	sinDec, cosDec := math.Sincos(decRad)
	return vector{-sinRA, cosRA, 0}, vector{-sinDec * cosRA, -sinDec * sinRA, cosDec}
}

// trueVelocity turns an observed radial velocity and an observed transverse
// motion, both in au/day, into a velocity (Stumpff 1985, sections 3 and 4).
// With b the true velocity in units of that of light, the light time makes
// the observed motion b_t = transverse / (1 + b_r), and the observed radial
// velocity is a frequency shift times c, sqrt-of-gamma included; the equations
// are solved by iteration.
func trueVelocity(direction vector, radial float64, transverse vector) vector {
	observedRadial := radial / lightAuDay
	observedTransverse := transverse.length() / lightAuDay
	trueRadial, trueTransverse := observedRadial, observedTransverse
	for range 100 {
		before := trueRadial + trueTransverse
		stretch := 1 + trueRadial
		slowing := timeDilation(square(trueRadial) + square(trueTransverse))
		trueRadial = stretch*observedRadial + slowing
		trueTransverse = stretch * observedTransverse
		if math.Abs(trueRadial+trueTransverse-before) <= 1e-17 {
			break
		}
	}
	return direction.times(trueRadial * lightAuDay).plus(transverse.times(1 + trueRadial))
}

// timeDilation returns sqrt(1 - b^2) - 1 for b^2, without cancellation.
func timeDilation(betaSquare float64) float64 {
	return -betaSquare / (math.Sqrt(1-betaSquare) + 1)
}

// at returns the place, in au about the barycentre, from which the light
// came that arrives at the barycentre at an instant. Time of light travel is
// solved in closed form: with e the days since the first light left,
// |p + v e| = c (light + t - e), t the days since the epoch.
func (m *spaceMotion) at(tdb JD) vector {
	arrival := tdb.Sub(m.epoch)
	// The straight motion during arrival + lightDays, then back by the light
	// time from there.
	far := m.placeAu.plus(m.velocityAuD.times(arrival + m.lightDays))
	along := far.dot(m.velocityAuD)
	room := lightAuDay*lightAuDay - m.velocityAuD.dot(m.velocityAuD)
	light := (math.Sqrt(along*along+room*far.dot(far)) - along) / room
	return m.placeAu.plus(m.velocityAuD.times(arrival + (m.lightDays - light)))
}

// radialVelocityKms returns the radial velocity that the barycentre would
// observe with the star in a direction: the Doppler shift of Stumpff 1985, eq.
// 4.
func (m *spaceMotion) radialVelocityKms(direction vector) float64 {
	radial := m.velocityAuD.dot(direction) / lightAuDay
	return lightKmS * (radial - m.slowing) / (1 + radial)
}

// perspectiveMs returns by how much the radial velocity has changed since
// the epoch of the star's position because the line of sight has turned, in
// m/s; 0 when the parallax is not known.
func (m *spaceMotion) perspectiveMs(direction vector) float64 {
	if m.inverseAu == 0 {
		return 0
	}
	return (m.radialVelocityKms(direction) - m.startKms) * 1e3
}

// AtEpoch returns the star as a catalogue of another epoch would give it:
// position, proper motion, parallax and radial velocity after uniform motion
// in space (Stumpff 1985). A star without parallax keeps its radial velocity.
// julianYear is the new epoch in TDB. The error is that of Validate.
func (s Star) AtEpoch(julianYear float64) (Star, error) {
	if err := s.Validate(); err != nil {
		return Star{}, err
	}
	motion := s.spaceMotion()
	place := motion.at(NewJD(2451545, (julianYear-2000)*daysPerJulianYear))
	moved := s
	moved.EpochJY = julianYear
	moved.setMotion(&motion, place)
	return moved, nil
}

// setMotion fills in what would be observed of a star at a place.
func (s *Star) setMotion(m *spaceMotion, placeAu vector) {
	direction := placeAu.unit()
	s.setDirection(placeAu)
	east, north := tangents(s.RADeg*radPerDeg, s.DecDeg*radPerDeg)
	radial := m.velocityAuD.dot(direction) / lightAuDay
	observed := m.velocityAuD.times(1 / (1 + radial) / placeAu.length())
	masYr := daysPerJulianYear / (1e-3 * radPerArcsec)
	s.PMRAMasYr = observed.dot(east) * masYr
	s.PMDecMasYr = observed.dot(north) * masYr
	if m.inverseAu > 0 {
		s.ParallaxMas *= m.placeAu.length() / placeAu.length()
		s.SystemicKms = m.radialVelocityKms(direction)
	}
}

// setDirection sets right ascension and declination.
func (s *Star) setDirection(direction vector) {
	ra, dec := direction.spherical()
	s.RADeg, s.DecDeg = ra/radPerDeg, dec/radPerDeg
	if s.RADeg >= 360 { // the rounding of a right ascension just below zero
		s.RADeg -= 360
	}
}
