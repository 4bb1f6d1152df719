package epochs

import (
	"errors"
	"fmt"
	"math"
	"strings"
	"sync/atomic"

	"platemeld/epochs/ephemeris"
)

// Ephemeris gives the Earth's centre and the Sun about the solar-system
// barycentre on ICRS axes. day + frac is the Julian date in TDB. An instant
// outside the ephemeris is an error.
type Ephemeris interface {
	At(day, frac float64) (ephemeris.State, error)
}

// Sentinels of the converter's errors.
var (
	// ErrSiteNeeded: the stamp or the velocity cannot be used without the
	// place of the observer.
	ErrSiteNeeded = errors.New("epochs: the site is needed")
	// ErrNotConverged: a heliocentric or barycentric stamp could not be
	// brought back to the observer.
	ErrNotConverged = errors.New("epochs: the light time of the stamp did not settle")
)

// EpochFlag says what is doubtful about an epoch that could be computed.
type EpochFlag uint

// The flags; several may be set.
const (
	FlagGeocentric      EpochFlag = 1 << iota // observed at an unknown place: up to 21 ms
	FlagDeltaT                                // Universal Time went through Delta T
	FlagUTCBefore1960                         // "UTC" before it existed, read as Universal Time
	FlagUTAsUTC                               // Universal Time from 1960 on, read as UTC
	FlagExposureUnknown                       // the middle of the exposure is not known
	FlagStampReduced                          // the stamp was heliocentric or barycentric; its light time was taken out first
	FlagDayTwice                              // a sidereal time that occurs twice on that date: the earlier was taken
)

var epochFlagTexts = []string{
	"geocentric: site not known",
	"through Delta T",
	"UTC before 1960 read as Universal Time",
	"Universal Time after 1960 read as UTC",
	"middle of the exposure not known",
	"light time of the stamp taken out first",
	"sidereal time occurs twice on that date",
}

// String lists the flags, separated by semicolons; "" when none is set.
func (f EpochFlag) String() string { return flagText(uint(f), epochFlagTexts) }

func flagText(bits uint, texts []string) string {
	var set []string
	for i, text := range texts {
		if bits&(1<<i) != 0 {
			set = append(set, text)
		}
	}
	return strings.Join(set, "; ")
}

// Epoch is the instant of an observation.
type Epoch struct {
	BJD         TDB       // arrival of the light at the solar-system barycentre
	SigmaDays   float64   // standard uncertainty: printed digits, exposure, Delta T
	ObserverTT  TT        // the instant at the site, or at the Earth's centre without one
	ObserverUT1 UT1       // the same as rotation of the Earth
	Terms       LightTime // how BJD came about
	Flags       EpochFlag
}

// Options replace what NewConverter assumes. The zero value is its defaults.
type Options struct {
	// DeltaT returns TT - UT1 and its standard uncertainty in seconds for a
	// Julian date in UT before 1960; nil = the package's DeltaT.
	DeltaT func(jd float64) (seconds, sigmaSeconds float64, err error)
	// UT1MinusUTC returns UT1 - UTC in seconds from 1960 on; nil = zero, in
	// error by at most 0.9 s: 1.4 microseconds and 31 mm/s, at a mid-latitude
	// site.
	UT1MinusUTC func(utc UTC) float64
	// UnknownExposureS is the length in seconds that exposures are taken to
	// have, at most, when the stamp does not say; 0 = 3600.
	UnknownExposureS float64
}

// Converter turns stamps into epochs, and published velocities into
// barycentric ones, for one star. It is safe for concurrent use.
type Converter struct {
	star      Star
	motion    spaceMotion
	ephemeris Ephemeris
	options   Options
	days      dayTable
	sites     atomic.Pointer[[]knownSite]
}

// knownSite remembers what follows from a site's coordinates.
type knownSite struct {
	site     Site
	grounded groundedSite
}

// NewConverter returns a converter for a star. eph nil means the embedded
// ephemeris. Errors: Star.Validate, and the embedded ephemeris' own.
//
// BJD_TDB agrees with a chain of ERFA 2.0 routines (epv00, dtdb, starpm, the
// IAU 2006/2000A matrices) to 0.05 ms in 1960-2050, the velocity correction
// to 1 cm/s.
func NewConverter(star Star, eph Ephemeris) (*Converter, error) {
	return NewConverterWith(star, eph, Options{})
}

// NewConverterWith is NewConverter with other assumptions.
func NewConverterWith(star Star, eph Ephemeris, options Options) (*Converter, error) {
	if err := star.Validate(); err != nil {
		return nil, err
	}
	if eph == nil {
		embedded, err := ephemeris.Embedded()
		if err != nil {
			return nil, err
		}
		eph = embedded
	}
	if options.DeltaT == nil {
		options.DeltaT = DeltaT
	}
	if options.UnknownExposureS == 0 {
		options.UnknownExposureS = 3600
	}
	c := &Converter{star: star, motion: star.spaceMotion(), ephemeris: eph, options: options}
	c.sites.Store(new([]knownSite))
	return c, nil
}

// Epoch returns the instant that a stamp means.
//
// site is where the observation was made; nil = not known: light times then
// end at the Earth's centre, and a stamp made at an observatory is flagged
// FlagGeocentric. Local mean and sidereal times need a site (ErrSiteNeeded).
// With a site the light time of heliocentric and barycentric stamps is that of
// the site, as modern reductions have it; old tables used the Earth's centre,
// 21 ms at most. Stamps on clock scales at the heliocentre or barycentre are
// understood as the observer's clock plus the light time; a heliocentric light
// time is that of a plane wave without Shapiro's term.
//
// Errors: a stamp that is not finite or out of range of the time scales or the
// ephemeris, a site that Validate refuses.
func (c *Converter) Epoch(s Stamp, site *Site) (Epoch, error) {
	var e Epoch
	var view scene
	if err := c.epoch(&e, &view, &s, site); err != nil {
		return Epoch{}, err
	}
	return e, nil
}

// Convert is Epoch and BarycentricVelocity of one row in one call, in little
// more than half the time because the sky is looked up once.
func (c *Converter) Convert(s Stamp, v PublishedVelocity, site *Site) (Epoch, BarycentricVelocity, error) {
	var e Epoch
	var view scene
	if err := v.validate(site); err != nil {
		return Epoch{}, BarycentricVelocity{}, err
	}
	if err := c.epoch(&e, &view, &s, site); err != nil {
		return Epoch{}, BarycentricVelocity{}, err
	}
	if v.Frame == FrameGeocentric && site != nil { // the velocity knows no site
		now := e.instant()
		view = scene{}
		if err := c.look(&view, &now, nil); err != nil {
			return Epoch{}, BarycentricVelocity{}, err
		}
	}
	return e, c.velocity(&v, &view), nil
}

// farthestJD keeps absurd numbers away from the polynomials; the time scales and
// the ephemeris have narrower limits of their own.
const farthestJD = 1e8

// epoch fills in the epoch of a stamp and the sky at that instant.
func (c *Converter) epoch(e *Epoch, view *scene, s *Stamp, site *Site) error {
	if !(math.Abs(s.JD.Float()) <= farthestJD) {
		return fmt.Errorf("%w: the stamp %q means JD %v, which is no date", ErrUnreadable, s.Text, s.JD.Float())
	}
	ground, err := c.ground(site)
	if err != nil {
		return err
	}
	exposureSigmaS := c.moveToMiddle(s, e)
	clock := s.JD.AddSeconds(e.Terms.ExposureShiftS)

	var now instant
	lightS, stepS := 0.0, 0.0
	for pass := 0; ; pass++ {
		if err = c.instantOf(&now, clock.AddSeconds(-lightS), s, site); err != nil {
			return err
		}
		if err = c.look(view, &now, ground); err != nil {
			return err
		}
		view.lightTime(&e.Terms)
		inside, rate := view.insideStamp(s.Place, &e.Terms)
		stepS = (inside - lightS) / (1 + rate)
		lightS += stepS
		if math.Abs(stepS) <= lastStepS || pass > 3 && math.Abs(stepS) <= leapStepS {
			break
		}
		if pass == 8 {
			return fmt.Errorf("%w: %q", ErrNotConverged, s.Text)
		}
	}
	now.tt, now.ut = TT{now.tt.AddSeconds(-stepS)}, UT1{now.ut.AddSeconds(-stepS)}
	e.finish(s, &now, view.tdbMinusTTS, lightS)
	if site == nil && s.Place == PlaceObservatory {
		e.Flags |= FlagGeocentric
	}
	e.SigmaDays = math.Sqrt(square(s.QuantumDays)/12 +
		square(exposureSigmaS/SecondsPerDay) + square(now.sigmaS/SecondsPerDay))
	return nil
}

func square(x float64) float64 { return x * x }

// finish adds up the terms.
func (e *Epoch) finish(s *Stamp, now *instant, tdbMinusTTS, lightS float64) {
	e.Flags |= now.flags
	if s.Place == PlaceHeliocentre || s.Place == PlaceBarycentre {
		e.Flags |= FlagStampReduced
	}
	e.ObserverTT, e.ObserverUT1 = now.tt, now.ut
	e.Terms.StampLightTimeS = lightS
	e.Terms.ZoneS = now.zoneS
	e.Terms.DeltaTS = now.deltaTS
	e.Terms.TDBMinusTTS = tdbMinusTTS
	e.Terms.TTMinusStampS = now.tt.Sub(s.JD) * SecondsPerDay
	e.BJD = TDB{now.tt.AddSeconds(tdbMinusTTS + e.Terms.BarycentreMinusObserverS())}
}

// The fixed point clock = stamp - light time(clock), by Newton's steps. The
// light time changes by at most 1e-4 of a step, so that after a step of
// lastStepS the terms need not be computed again: 1 ns. Within leapStepS of a
// leap second the clock may jump forth and back for ever; either side will do.
const (
	lastStepS = 1e-5
	leapStepS = 1e-3
)

// insideStamp returns the light time, in seconds, that a stamp of a place
// contains, and its rate in seconds per second.
func (s *scene) insideStamp(place Place, terms *LightTime) (seconds, rate float64) {
	switch place {
	case PlaceHeliocentre:
		return terms.heliocentreMinusObserverS(), s.earthKmS.minus(s.sunKmS).dot(s.toStar) / lightKmS
	case PlaceBarycentre:
		return terms.BarycentreMinusObserverS(), s.earthKmS.dot(s.toStar) / lightKmS
	}
	return 0, 0
}

// moveToMiddle sets the shift to the middle of the exposure and returns the
// standard uncertainty in seconds that remains.
//
// Where only the start or the end is known and not the length, nothing is
// added: with lengths L spread evenly up to the assumed one, the middle is off
// by L/2, root mean square L_max/sqrt(12). Where the point is unknown the
// middle lies within L/2 either way: L/sqrt(12) as well.
func (c *Converter) moveToMiddle(s *Stamp, e *Epoch) (sigmaS float64) {
	known := s.ExposureLengthS > 0
	switch {
	case s.Exposure == ExposureMid:
		return 0
	case s.Exposure == ExposureStart && known:
		e.Terms.ExposureShiftS = s.ExposureLengthS / 2
		return 0
	case s.Exposure == ExposureEnd && known:
		e.Terms.ExposureShiftS = -s.ExposureLengthS / 2
		return 0
	}
	e.Flags |= FlagExposureUnknown
	length := c.options.UnknownExposureS
	if known {
		length = s.ExposureLengthS
	}
	return length / math.Sqrt(12)
}

// ground returns what follows from a site's coordinates, remembered from
// earlier calls; nil for nil.
func (c *Converter) ground(site *Site) (*groundedSite, error) {
	if site == nil {
		return nil, nil
	}
	known := *c.sites.Load()
	for i := range known {
		if k := &known[i]; k.site.LongitudeDeg == site.LongitudeDeg &&
			k.site.LatitudeDeg == site.LatitudeDeg && k.site.HeightM == site.HeightM {
			return &k.grounded, nil
		}
	}
	if err := site.Validate(); err != nil {
		return nil, err
	}
	k := knownSite{*site, site.grounded()}
	if len(known) < 64 {
		longer := append(append([]knownSite(nil), known...), k)
		c.sites.Store(&longer)
	}
	return &k.grounded, nil
}

// look fills in where everything is.
func (c *Converter) look(s *scene, now *instant, site *groundedSite) error {
	day := c.days.at(now.tt.JD)
	tdb := now.tt.AddSeconds(day.tdbMinusTTS)
	state, err := c.ephemeris.At(tdb.Day, tdb.Frac)
	if err != nil {
		return err
	}
	s.tdbMinusTTS = day.tdbMinusTTS
	s.earthKm, s.earthKmS = state.EarthKm, state.EarthKmS
	s.sunKm, s.sunKmS = state.SunKm, state.SunKmS
	s.starAu, s.inverseAu = c.motion.at(tdb), c.motion.inverseAu
	s.toStar = s.starAu.unit()
	s.observerKm, s.potentialKm2S2 = s.earthKm, earthGMKm3S2/earthMeanRadiusKm
	if site != nil {
		place, velocity := site.onAxesOfDate(earthRotationAngle(now.ut))
		s.siteKm, s.siteKmS = day.axes.transposedTimes(place), day.axes.transposedTimes(velocity)
		s.observerKm = s.earthKm.plus(s.siteKm)
		s.potentialKm2S2 = site.potentialKm2S2
		// A clock at the site against one at the Earth's centre, up to 2.1
		// microseconds (Moyer 1981, Celest. Mech. 23, 33, eq. 46).
		s.tdbMinusTTS += s.earthKmS.dot(s.siteKm) / (lightKmS * lightKmS)
	}
	s.toSunKm = s.sunKm.minus(s.observerKm)
	s.sunDistanceKm = s.toSunKm.length()
	return nil
}
