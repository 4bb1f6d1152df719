package epochs

import (
	"fmt"
	"math"
)

// instant is a moment at the observer on the scales that the sky needs.
type instant struct {
	tt      TT
	ut      UT1
	deltaTS float64   // TT - UT1, s
	sigmaS  float64   // standard uncertainty of tt, s
	zoneS   float64   // added to the stamp to reach Greenwich, s
	flags   EpochFlag // those that come from the clock
}

// utcStart is 1960 January 1, 0h: the first day of UTC.
const utcStart = 2436934.5

// instant returns the moment of an epoch.
func (e *Epoch) instant() instant {
	return instant{tt: e.ObserverTT, ut: e.ObserverUT1, deltaTS: e.Terms.DeltaTS}
}

// instantOf reads a clock into n. clock is the reading on the scale of the stamp; s
// supplies scale and zone, site the longitude of local times.
func (c *Converter) instantOf(n *instant, clock JD, s *Stamp, site *Site) error {
	*n = instant{}
	var err error
	switch s.Scale {
	case ScaleUTC:
		err = c.fromUTC(n, UTC{clock})
	case ScaleUT, ScaleGMT, ScaleGMAT, ScaleUT1:
		err = c.fromUT(n, UT1{clock}, s.Scale)
	case ScaleZone:
		n.zoneS = -s.ZoneHours * 3600
		err = c.fromUT(n, UT1{clock.AddSeconds(n.zoneS)}, s.Scale)
	case ScaleLocalMean, ScaleLocalSidereal:
		if site == nil {
			return fmt.Errorf("%w for %v time: %q", ErrSiteNeeded, s.Scale, s.Text)
		}
		err = c.fromLocal(n, clock, s, site)
	default:
		err = c.fromUniform(n, clock, s)
	}
	return err
}

// fromUTC takes a clock on UTC; before 1960 the label is an anachronism for
// Universal Time.
func (c *Converter) fromUTC(n *instant, utc UTC) error {
	if utc.Float() < utcStart {
		n.flags |= FlagUTCBefore1960
		return c.throughDeltaT(n, UT1(utc))
	}
	tai, err := utc.TAI()
	if err != nil {
		return err
	}
	n.tt = tai.TT()
	return c.rotationFromUTC(n, utc)
}

// rotationFromUTC sets UT1 from TT and the UTC of the same instant. The detour
// through TT keeps the seconds of a day with a leap second at their length: UT1
// from the fraction of a quasi Julian day would be up to a second wrong.
func (c *Converter) rotationFromUTC(n *instant, utc UTC) error {
	taiMinusUTC, err := leapSeconds(utc.JD)
	if err != nil {
		return err
	}
	n.deltaTS = ttMinusTAIS + taiMinusUTC
	if c.options.UT1MinusUTC != nil {
		n.deltaTS -= c.options.UT1MinusUTC(utc)
	}
	n.ut = UT1{n.tt.AddSeconds(-n.deltaTS)}
	return nil
}

// leapSeconds returns TAI - UTC in seconds at an instant from 1960 on; on the
// day of a leap second the value before it.
func leapSeconds(utc JD) (float64, error) {
	mjd, fraction := mjdOf(utc)
	return taiMinusUTC(mjd, fraction)
}

const ttMinusTAIS = 32.184 // IAU 1991 Resolution A4

// fromUT takes a clock on Universal Time or a civil time derived from it.
// From 1960 on what is printed as UT or zone time is UTC, without the
// stretching of leap-second days; UT1 is strictly the rotation of the Earth.
func (c *Converter) fromUT(n *instant, ut UT1, scale Scale) error {
	if ut.Float() < utcStart {
		return c.throughDeltaT(n, ut)
	}
	taiMinusUTC, err := leapSeconds(ut.JD)
	if err != nil {
		return err
	}
	n.deltaTS = ttMinusTAIS + taiMinusUTC
	dut1 := 0.0
	if c.options.UT1MinusUTC != nil {
		dut1 = c.options.UT1MinusUTC(UTC(ut))
	}
	switch {
	case scale == ScaleUT1:
		n.tt = TT{ut.AddSeconds(n.deltaTS - dut1)}
		if c.options.UT1MinusUTC == nil {
			n.sigmaS = largestUT1MinusUTCS / math.Sqrt(3)
		}
	default:
		n.tt = TT{ut.AddSeconds(n.deltaTS)}
		if scale != ScaleZone {
			n.flags |= FlagUTAsUTC
		}
	}
	n.deltaTS -= dut1
	n.ut = UT1{n.tt.AddSeconds(-n.deltaTS)}
	return nil
}

// largestUT1MinusUTCS bounds |UT1 - UTC| since 1972 (ITU-R TF.460).
const largestUT1MinusUTCS = 0.9

// throughDeltaT takes Universal Time before 1960.
func (c *Converter) throughDeltaT(n *instant, ut UT1) error {
	deltaT, sigma, err := c.options.DeltaT(ut.Float())
	if err != nil {
		return err
	}
	n.flags |= FlagDeltaT
	n.ut, n.deltaTS, n.sigmaS = ut, deltaT, sigma
	n.tt = TT{ut.AddSeconds(deltaT)}
	return nil
}

// fromLocal takes local mean time, or local sidereal time on a local date.
func (c *Converter) fromLocal(n *instant, clock JD, s *Stamp, site *Site) error {
	n.zoneS = -site.LongitudeHours() * 3600
	if s.Scale == ScaleLocalMean {
		return c.fromUT(n, UT1{clock.AddSeconds(n.zoneS)}, s.Scale)
	}
	midnight := NewJD(math.Floor(clock.Day+clock.Frac+0.5), -0.5)
	sidereal := clock.Sub(midnight) // turns since the vernal equinox culminated

	// Mean sidereal time at the start of the local mean day; TT for its
	// argument may be a minute off, that is 1e-4 s.
	start := midnight.AddSeconds(n.zoneS)
	if s.DayFromNoon {
		start = start.Add(0.5)
	}
	atStart := greenwichMeanSiderealTime(UT1{start}, TT{start})/(2*math.Pi) + site.LongitudeDeg/360
	turns := math.Mod(sidereal-atStart, 1)
	if turns < 0 {
		turns++
	}
	if turns*siderealToMean < 1-siderealToMean {
		n.flags |= FlagDayTwice
	}
	return c.fromUT(n, UT1{start.Add(turns * siderealToMean)}, s.Scale)
}

// siderealToMean is the length of a mean sidereal day in mean solar days
// (Aoki et al. 1982, A&A 105, 359, eq. 19).
const siderealToMean = 0.997269566329084

// fromUniform takes atomic and dynamical time.
func (c *Converter) fromUniform(n *instant, clock JD, s *Stamp) error {
	switch s.Scale {
	case ScaleTAI:
		n.tt = TAI{clock}.TT()
	case ScaleTT:
		n.tt = TT{clock}
	case ScaleTDB:
		n.tt = TDB{clock}.TT()
	case ScaleTCB:
		n.tt = TCB{clock}.TDB().TT()
	default:
		return fmt.Errorf("%w: scale %v of the stamp %q", ErrUnreadable, s.Scale, s.Text)
	}
	return c.rotationFromTT(n)
}

// rotationFromTT finds UT1 for an instant on TT.
func (c *Converter) rotationFromTT(n *instant) error {
	if n.tt.Float() < utcStart {
		deltaT, _, err := c.options.DeltaT(n.tt.Float())
		n.deltaTS = deltaT
		n.ut = UT1{n.tt.AddSeconds(-deltaT)}
		return err
	}
	utc, err := n.tt.TAI().UTC()
	if err != nil {
		return err
	}
	return c.rotationFromUTC(n, utc)
}
