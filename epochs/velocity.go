package epochs

import (
	"errors"
	"fmt"
	"math"
)

// ErrVelocity is what every error about a published velocity unwraps to.
var ErrVelocity = errors.New("epochs: unusable velocity")

// Frame is what a published velocity is measured against.
type Frame int

// The frames.
const (
	FrameTopocentric  Frame = iota // as observed at the site
	FrameGeocentric                // the observer's rotation about the Earth removed
	FrameHeliocentric              // "reduced to the Sun"
	FrameBarycentric               // about the solar-system barycentre
	FrameLSR                       // about the local standard of rest: needs a solar motion
)

var frameWords = []string{"observatory", "geocentric", "heliocentric", "barycentric", "lsr"}

// String returns the word of a plan for the frame.
func (f Frame) String() string { return wordOf(int(f), frameWords) }

// ParseFrame reads the word of a plan. The error unwraps to ErrWord and
// lists the accepted words.
func ParseFrame(word string) (Frame, error) {
	i, err := findWord("velocity frame", word, frameWords)
	return Frame(i), err
}

// VelocityConvention is how a printed velocity follows from the shift z of a
// spectrum.
type VelocityConvention int

// The conventions.
const (
	VelocityPlain        VelocityConvention = iota // c z, "optical": the measure that is returned
	VelocityRelativistic                           // v of 1 + z = sqrt((1 + v/c) / (1 - v/c))
	VelocityRadio                                  // c (1 - 1/(1 + z))
)

var conventionWords = []string{"optical", "relativistic", "radio"}

// String returns the word of a plan for the convention.
func (c VelocityConvention) String() string { return wordOf(int(c), conventionWords) }

// ParseVelocityConvention reads the word of a plan. The error unwraps to
// ErrWord and lists the accepted words.
func ParseVelocityConvention(word string) (VelocityConvention, error) {
	i, err := findWord("velocity convention", word, conventionWords)
	return VelocityConvention(i), err
}

// SolarMotion is the motion of the Sun against a local standard of rest.
type SolarMotion struct {
	SpeedKms              float64 // km/s
	ApexRADeg, ApexDecDeg float64 // degrees, ICRS: where the Sun moves to
}

// ClassicalSolarMotion returns the motion of 20 km/s towards right ascension
// 18h, declination +30 degrees, equator and equinox of B1900 (common practice
// before and, in radio astronomy, after 1950).
func ClassicalSolarMotion() SolarMotion {
	precession := newcombPrecession1900To1950()
	apex := precession.times(fromSpherical(270*radPerDeg, 30*radPerDeg))
	ra, dec := fk4Matrix[0][0].times(apex).spherical()
	return SolarMotion{SpeedKms: 20, ApexRADeg: ra / radPerDeg, ApexDecDeg: dec / radPerDeg}
}

// PublishedVelocity is a radial velocity as printed.
type PublishedVelocity struct {
	Kms        float64 // km/s, positive = receding
	Frame      Frame
	Convention VelocityConvention
	// PerspectiveRemoved: the source has already taken out the change of
	// velocity by perspective.
	PerspectiveRemoved bool
	// RemovePerspective asks for it to be taken out, counted from the epoch of
	// the star's position. It is not done when PerspectiveRemoved is set.
	RemovePerspective bool
	// LSR is the motion of the Sun that the source used; only, and always, for
	// FrameLSR.
	LSR *SolarMotion
}

// VelocityFlag says what is doubtful about a converted velocity.
type VelocityFlag uint

// The flags; several may be set.
const (
	FlagPerspectiveAlreadyRemoved VelocityFlag = 1 << iota // removal was asked for and had been done by the source
	FlagPerspectiveUnknown                                 // removal was asked for, but the parallax is not known
	FlagNoRelativity                                       // reduced to the Sun by its authors: no time dilation or gravity (a constant 4.6 to 4.9 m/s)
)

var velocityFlagTexts = []string{
	"perspective already removed by the source",
	"perspective not removed: parallax not known",
	"without time dilation and gravity, as reduced by the source",
}

// String lists the flags, separated by semicolons; "" when none is set.
func (f VelocityFlag) String() string { return flagText(uint(f), velocityFlagTexts) }

// VelocityTerms lists what was added to a printed velocity, in m/s: their sum
// is the change.
type VelocityTerms struct {
	ConventionMs  float64 // from the printed convention to c z
	LSRMs         float64 // from the local standard of rest to the Sun
	OrbitMs       float64 // Earth's centre about the barycentre, along the line of sight
	RotationMs    float64 // the site about the Earth's centre, along the line of sight
	SunMs         float64 // the Sun about the barycentre: heliocentric velocities only
	RelativityMs  float64 // time dilation of the observer, potentials of Sun and Earth
	CrossMs       float64 // c times the product of the star's shift and the correction's
	PerspectiveMs float64 // change by perspective since the star's epoch, taken out on request
}

// SumMs returns the sum of the terms.
func (t VelocityTerms) SumMs() float64 {
	return t.ConventionMs + t.LSRMs + t.OrbitMs + t.RotationMs + t.SunMs +
		t.RelativityMs + t.CrossMs + t.PerspectiveMs
}

// BarycentricVelocity is the barycentric radial-velocity measure, c z_B, of IAU
// 2000 Resolution C1: nothing about the star itself is taken out.
type BarycentricVelocity struct {
	Kms   float64 // km/s, positive = receding
	Terms VelocityTerms
	Flags VelocityFlag
	// Beside the result: the Sun's velocity about the barycentre along the line
	// of sight, which is a heliocentric velocity's whole change, and the change
	// by perspective since the star's epoch, removed or not. m/s.
	SunAlongSightMs, PerspectiveSinceEpochMs float64
}

const earthGMKm3S2 = 398600.4418 // IERS Conventions 2010, table 1.1

// BarycentricVelocity refers a published velocity to the barycentre.
//
// v is the velocity, e the epoch of the observation as Epoch returned it for
// the same star and site. site is needed for FrameTopocentric (nil is an error
// of ErrSiteNeeded) and not used otherwise.
//
// A topocentric shift z becomes 1 + z_B = (1 + z) gamma (1 + v.k/c) / (1 -
// GM_Sun/(r c^2) - GM_Earth/(s c^2)) (Wright and Eastman 2014, PASP 126, 838,
// eq. 28 without the star's own motion and Shapiro's term; Lindegren and
// Dravins 2003, A&A 401, 1185, eq. 40), k the direction from the observer to
// the star. A geocentric velocity is treated as if observed at rest at the
// surface: the same without the rotation. A heliocentric one is moved by the
// Sun's velocity along the line of sight alone, because its authors applied
// only a projection; time dilation and gravity, nearly constant, then stay in
// the instrument's zero point (FlagNoRelativity). The factors 1 + z are
// multiplied, never added. For FrameLSR the Sun's motion is removed first.
//
// Errors: ErrVelocity for a value that is not finite or not below the speed of
// light, or a missing, superfluous or impossible solar motion; those of the
// ephemeris.
func (c *Converter) BarycentricVelocity(v PublishedVelocity, e Epoch, site *Site) (BarycentricVelocity, error) {
	if err := v.validate(site); err != nil {
		return BarycentricVelocity{}, err
	}
	if v.Frame != FrameTopocentric {
		site = nil
	}
	ground, err := c.ground(site)
	if err != nil {
		return BarycentricVelocity{}, err
	}
	var view scene
	now := e.instant()
	if err := c.look(&view, &now, ground); err != nil {
		return BarycentricVelocity{}, err
	}
	return c.velocity(&v, &view), nil
}

// velocity converts a valid velocity under a known sky.
func (c *Converter) velocity(v *PublishedVelocity, view *scene) BarycentricVelocity {
	var b BarycentricVelocity
	b.SunAlongSightMs = view.sunKmS.dot(view.toStar) * 1e3
	b.PerspectiveSinceEpochMs = c.motion.perspectiveMs(view.toStar)
	shift := v.shift()
	b.Terms.ConventionMs = (shift*lightKmS - v.Kms) * 1e3
	correction := b.correction(v, view)
	b.Terms.CrossMs += shift * correction * lightKmS * 1e3
	c.removePerspective(v, &b)
	b.Kms = v.Kms + b.Terms.SumMs()/1e3
	return b
}

// correction fills in the terms that do not depend on the star's velocity and
// returns their sum as a shift, with that of a local standard of rest.
func (b *BarycentricVelocity) correction(v *PublishedVelocity, view *scene) float64 {
	terms := &b.Terms
	switch v.Frame {
	case FrameTopocentric, FrameGeocentric:
		sight := view.sightline()
		terms.OrbitMs = view.earthKmS.dot(sight) * 1e3
		terms.RotationMs = view.siteKmS.dot(sight) * 1e3
		shift := view.observerShift(sight)
		terms.RelativityMs = shift*lightKmS*1e3 - terms.OrbitMs - terms.RotationMs
		return shift
	case FrameHeliocentric, FrameLSR:
		b.Flags |= FlagNoRelativity
		terms.SunMs = b.SunAlongSightMs
		shift := terms.SunMs / 1e3 / lightKmS
		if v.Frame == FrameLSR {
			apex := fromSpherical(v.LSR.ApexRADeg*radPerDeg, v.LSR.ApexDecDeg*radPerDeg)
			terms.LSRMs = -v.LSR.SpeedKms * apex.dot(view.toStar) * 1e3
			lsr := terms.LSRMs / 1e3 / lightKmS
			terms.CrossMs = lsr * shift * lightKmS * 1e3
			return lsr + shift + lsr*shift
		}
		return shift
	}
	return 0
}

// observerShift is z of a source at rest about the barycentre in the direction
// of sight, seen by the observer, turned round: 1 + z_B for z = 0.
func (s *scene) observerShift(sight vector) float64 {
	velocity := s.earthKmS.plus(s.siteKmS)
	along := velocity.dot(sight) / lightKmS
	square := velocity.dot(velocity) / (lightKmS * lightKmS)
	dilation := square * (0.5 + 0.375*square) // gamma - 1, the next term is 1e-25
	potential := (sunGMKm3S2/s.sunDistanceKm + s.potentialKm2S2) / (lightKmS * lightKmS)
	// (1 + dilation)(1 + along)/(1 - potential) - 1, again in small numbers
	product := dilation + along + dilation*along
	return (product + potential) / (1 - potential)
}

// earthMeanRadiusKm gives the potential at an unknown place of the surface.
const earthMeanRadiusKm = 6371.0

// removePerspective takes the perspective out once at most.
func (c *Converter) removePerspective(v *PublishedVelocity, b *BarycentricVelocity) {
	switch {
	case !v.RemovePerspective:
	case v.PerspectiveRemoved:
		b.Flags |= FlagPerspectiveAlreadyRemoved
	case c.motion.inverseAu == 0:
		b.Flags |= FlagPerspectiveUnknown
	default:
		b.Terms.PerspectiveMs = -b.PerspectiveSinceEpochMs
	}
}

// validate refuses what cannot be converted.
func (v *PublishedVelocity) validate(site *Site) error {
	switch {
	case v.Frame == FrameTopocentric && site == nil:
		return fmt.Errorf("%w for a velocity as observed", ErrSiteNeeded)
	case v.Frame < FrameTopocentric || v.Frame > FrameLSR:
		return fmt.Errorf("%w: frame %v", ErrVelocity, v.Frame)
	case v.Convention < VelocityPlain || v.Convention > VelocityRadio:
		return fmt.Errorf("%w: convention %v", ErrVelocity, v.Convention)
	case !(math.Abs(v.Kms) < lightKmS):
		return fmt.Errorf("%w: %v km/s, expected less than the speed of light", ErrVelocity, v.Kms)
	case v.Frame == FrameLSR && v.LSR == nil:
		return fmt.Errorf("%w: a velocity about the local standard of rest needs the solar motion its source used", ErrVelocity)
	case v.Frame != FrameLSR && v.LSR != nil:
		return fmt.Errorf("%w: a solar motion belongs to the frame lsr, not to %v", ErrVelocity, v.Frame)
	case v.LSR != nil && !v.LSR.possible():
		return fmt.Errorf("%w: solar motion of %v km/s to (%v, %v) deg, expected 0 to 1000 km/s and ICRS degrees", ErrVelocity, v.LSR.SpeedKms, v.LSR.ApexRADeg, v.LSR.ApexDecDeg)
	}
	return nil
}

func (m *SolarMotion) possible() bool {
	return m.SpeedKms >= 0 && m.SpeedKms <= 1000 && m.ApexRADeg >= 0 && m.ApexRADeg <= 360 &&
		m.ApexDecDeg >= -90 && m.ApexDecDeg <= 90
}

// shift returns z of the printed velocity.
func (v *PublishedVelocity) shift() float64 {
	beta := v.Kms / lightKmS
	switch v.Convention {
	case VelocityRelativistic:
		// sqrt((1+b)/(1-b)) - 1, in small numbers
		root := math.Sqrt((1 + beta) / (1 - beta))
		return 2 * beta / (1 - beta) / (root + 1)
	case VelocityRadio:
		return beta / (1 - beta)
	}
	return beta
}
