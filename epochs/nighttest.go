package epochs

import (
	"fmt"
	"math"
	"strconv"
	"strings"
)

// NightLimits says when a spectrum of the star could have been taken.
type NightLimits struct {
	SunBelowDeg  float64 // altitude in degrees that the Sun's centre must be below
	StarAboveDeg float64 // altitude in degrees that the star must be above
}

// DefaultNightLimits returns the end of civil twilight, -6 degrees for the
// Sun, and the horizon, 0 degrees, for the star.
func DefaultNightLimits() NightLimits { return NightLimits{SunBelowDeg: -6, StarAboveDeg: 0} }

// Sky is where Sun and star stood, in degrees above the horizon of the
// ellipsoid. Refraction (0.6 degrees at the horizon), aberration and the Sun's
// radius are left out: the test is about hours.
type Sky struct {
	SunAltitudeDeg, StarAltitudeDeg float64
}

// Daylight reports whether the Sun was too high.
func (k Sky) Daylight(limits NightLimits) bool { return !(k.SunAltitudeDeg < limits.SunBelowDeg) }

// Hidden reports whether the star was too low.
func (k Sky) Hidden(limits NightLimits) bool { return !(k.StarAltitudeDeg > limits.StarAboveDeg) }

// Night reports whether the star could be observed.
func (k Sky) Night(limits NightLimits) bool { return !k.Daylight(limits) && !k.Hidden(limits) }

// Sky returns the altitudes of Sun and star at an epoch that Epoch returned
// for the same site. Errors: Site.Validate, the ephemeris' range.
func (c *Converter) Sky(e Epoch, site Site) (Sky, error) {
	ground, err := c.ground(&site)
	if err != nil {
		return Sky{}, err
	}
	now := e.instant()
	var view scene
	if err := c.look(&view, &now, ground); err != nil {
		return Sky{}, err
	}
	axes := c.days.at(now.tt.JD).axes
	zenith := axes.transposedTimes(fromSpherical(earthRotationAngle(now.ut)+ground.longitudeRad, ground.latitudeRad))
	sun := view.toSunKm.unit()
	return Sky{SunAltitudeDeg: altitude(sun, zenith), StarAltitudeDeg: altitude(view.sightline(), zenith)}, nil
}

func altitude(direction, zenith vector) float64 {
	return math.Asin(math.Max(-1, math.Min(1, direction.dot(zenith)))) / radPerDeg
}

// Reading is one way to understand a stamp, and the sky that follows from it.
type Reading struct {
	Name string // in words, such as "day from noon"
	Sky  Sky
	Err  error // the reading is impossible, for instance before UTC
}

// NightResult is the night test of one stamp.
type NightResult struct {
	Stated Reading   // as the convention says
	Others []Reading // other readings that sources have confused with it, in fixed order
	Limits NightLimits
	// TooCoarse: the stamp is not known to a tenth of a day and says nothing
	// about night.
	TooCoarse bool
}

// Passed reports whether the stated reading is a night with the star up, or
// the stamp too coarse to tell.
func (r NightResult) Passed() bool {
	return r.TooCoarse || r.Stated.Err == nil && r.Stated.Sky.Night(r.Limits)
}

// Passing returns the names of the other readings that would pass.
func (r NightResult) Passing() []string {
	var names []string
	for _, other := range r.Others {
		if other.Err == nil && other.Sky.Night(r.Limits) {
			names = append(names, other.Name)
		}
	}
	return names
}

// String says in a sentence what is wrong and which reading would pass; ""
// when the test was passed.
func (r NightResult) String() string {
	if r.Passed() {
		return ""
	}
	problem := fmt.Sprintf("not a usable instant as %s (%v)", r.Stated.Name, r.Stated.Err)
	if r.Stated.Err == nil {
		sky := r.Stated.Sky
		problem = fmt.Sprintf("as %s the Sun stood at %+.0f and the star at %+.0f degrees", r.Stated.Name, sky.SunAltitudeDeg, sky.StarAltitudeDeg)
	}
	if passing := r.Passing(); len(passing) > 0 {
		return problem + "; at night as " + strings.Join(passing, ", or as ")
	}
	return problem + "; no other reading tried is at night"
}

// coarsestNightQuantum is the printed step, in days, beyond which a stamp
// says nothing about the hour.
const coarsestNightQuantum = 0.2

// NightTest asks whether at the site the Sun was down and the star up at the
// instant of a stamp, and of other readings of it: the day from noon for
// midnight, JD - 2400000 for MJD and the other way, the other sign of the
// longitude, of the zone, local for Greenwich time. It changes nothing.
//
// conv is the convention that read s. limits: see DefaultNightLimits. The
// error is that of an unusable site; a reading that cannot be converted carries
// its own.
func (c *Converter) NightTest(conv Convention, s Stamp, site Site, limits NightLimits) (NightResult, error) {
	if err := site.Validate(); err != nil {
		return NightResult{}, err
	}
	r := NightResult{Limits: limits, TooCoarse: s.QuantumDays >= coarsestNightQuantum}
	r.Stated = c.reading(readingName(conv), s, site)
	for _, o := range otherReadings(conv, s, site) {
		r.Others = append(r.Others, c.reading(o.name, o.stamp, o.site))
	}
	return r, nil
}

func (c *Converter) reading(name string, s Stamp, site Site) Reading {
	r := Reading{Name: name}
	var e Epoch
	if e, r.Err = c.Epoch(s, &site); r.Err == nil {
		r.Sky, r.Err = c.Sky(e, site)
	}
	return r
}

type otherReading struct {
	name  string
	stamp Stamp
	site  Site
}

// otherReadings lists what a stamp of this convention has been confused with.
func otherReadings(conv Convention, s Stamp, site Site) []otherReading {
	var list []otherReading
	moved := func(name string, days float64) {
		other := s
		other.JD = s.JD.Add(days)
		list = append(list, otherReading{name, other, site})
	}
	switch {
	case hasCalendarDay(conv.Form) && fromNoon(conv):
		moved(dayName(conv.Scale, false), -0.5)
	case hasCalendarDay(conv.Form):
		moved(dayName(conv.Scale, true), +0.5)
	case conv.Form == FormMJD:
		moved("JD - 2400000", -0.5)
	case conv.Form == FormJD:
		if offset, half := halfOffset(conv.Offset); half {
			moved("JD - "+offset, -0.5)
		} else {
			moved("JD - "+offset, +0.5)
		}
	}
	if site.LongitudeDeg != 0 {
		mirrored := site
		mirrored.LongitudeDeg = math.Remainder(-site.LongitudeDeg, 360)
		list = append(list, otherReading{"longitude of the other sign", s, mirrored})
	}
	return append(list, otherClocks(s, site)...)
}

// otherClocks exchanges Greenwich and local time.
func otherClocks(s Stamp, site Site) []otherReading {
	with := func(name string, scale Scale, zoneHours float64) otherReading {
		other := s
		other.Scale, other.ZoneHours = scale, zoneHours
		return otherReading{name, other, site}
	}
	switch s.Scale {
	case ScaleUTC, ScaleUT, ScaleGMT, ScaleGMAT, ScaleUT1:
		return []otherReading{with("local mean time of the site", ScaleLocalMean, 0)}
	case ScaleLocalMean:
		return []otherReading{with("Greenwich time", ScaleUT, 0)}
	case ScaleZone:
		return []otherReading{
			with("Greenwich time", ScaleUT, 0),
			with("zone of the other sign", ScaleZone, -s.ZoneHours),
		}
	}
	return nil
}

// hasCalendarDay reports whether stamps of the form name a day, which may
// start at noon or midnight.
func hasCalendarDay(f Form) bool {
	return f == FormISO || f == FormCivil || f == FormFields || f == FormSpreadsheet
}

func fromNoon(conv Convention) bool {
	return conv.Scale == ScaleGMAT || conv.DayStart == DayStartNoon
}

// readingName says how the convention understands its stamps.
func readingName(conv Convention) string {
	switch {
	case hasCalendarDay(conv.Form):
		return dayName(conv.Scale, fromNoon(conv))
	case conv.Form == FormMJD:
		return "MJD"
	case conv.Form == FormJD && conv.Offset != "":
		return "JD - " + conv.Offset
	case conv.Form == FormJD:
		return "JD"
	}
	return conv.Form.String()
}

// dayName names a day by its scale and start.
func dayName(scale Scale, noon bool) string {
	switch scale {
	case ScaleUT, ScaleGMT, ScaleGMAT:
		if noon {
			return "GMAT (day from noon)"
		}
		return "GMT (day from midnight)"
	}
	if noon {
		return scale.String() + " (day from noon)"
	}
	return scale.String() + " (day from midnight)"
}

// halfOffset reports whether the offset of a Julian date ends in a half day,
// and returns the offset that it is confused with: half a day less then, half
// a day more otherwise.
func halfOffset(offset string) (other string, half bool) {
	value, err := strconv.ParseFloat(strings.TrimSpace(offset), 64)
	if err != nil { // an empty offset is none
		value = 0
	}
	half = value != math.Floor(value)
	if half {
		return strconv.FormatFloat(value-0.5, 'f', -1, 64), true
	}
	return strconv.FormatFloat(value+0.5, 'f', -1, 64), false
}

// NightTally sums the night tests of one source. The zero value is ready.
type NightTally struct {
	rows, coarse int
	stated       readingCount
	others       []readingCount // in the order of first appearance
}

// readingCount counts, for one reading, the rows that fail.
type readingCount struct {
	name                     string
	tested, daylight, hidden int
	impossible, failed       int
}

// Add counts one row.
func (t *NightTally) Add(r NightResult) {
	t.rows++
	if r.TooCoarse {
		t.coarse++
		return
	}
	t.stated.add(r.Stated, r.Limits)
	for _, other := range r.Others {
		t.other(other.Name).add(other, r.Limits)
	}
}

func (t *NightTally) other(name string) *readingCount {
	for i := range t.others {
		if t.others[i].name == name {
			return &t.others[i]
		}
	}
	t.others = append(t.others, readingCount{name: name})
	return &t.others[len(t.others)-1]
}

func (n *readingCount) add(r Reading, limits NightLimits) {
	n.name = r.Name
	n.tested++
	switch {
	case r.Err != nil:
		n.impossible++
	case r.Sky.Daylight(limits):
		n.daylight++
	case r.Sky.Hidden(limits):
		n.hidden++
	default:
		return
	}
	n.failed++
}

// Failed returns the number of rows that fail as stated, and the number that
// could be tested.
func (t *NightTally) Failed() (failed, tested int) { return t.stated.failed, t.stated.tested }

// Better returns the name of the other reading with the fewest failures, when
// the stated one is doubtful: more than a tenth of its rows fail, at least
// two, and the other fails in less than a third as many. ok false: there is
// none, the stated reading stands.
func (t *NightTally) Better() (name string, ok bool) {
	if t.stated.failed < 2 || 10*t.stated.failed <= t.stated.tested {
		return "", false
	}
	best := -1
	for i, other := range t.others {
		if other.tested == t.stated.tested && 3*other.failed < t.stated.failed &&
			(best < 0 || other.failed < t.others[best].failed) {
			best = i
		}
	}
	if best < 0 {
		return "", false
	}
	return t.others[best].name, true
}

// Verdict sums the source up in a sentence, such as "41 of 43 rows are in
// daylight as GMT (day from midnight), 0 as GMAT (day from noon)". Readings
// that fail in more than a third as many rows are left out. Nothing is decided: the
// plan's author has to change the plan.
func (t *NightTally) Verdict() string {
	n := t.stated
	if n.tested == 0 {
		return fmt.Sprintf("none of %d rows is known well enough in time for the night test", t.rows)
	}
	text := fmt.Sprintf("%d of %d rows are in daylight as %s", n.daylight, n.tested, n.name)
	for _, other := range t.others {
		if other.tested == n.tested && 3*other.failed < n.failed {
			text += fmt.Sprintf(", %d as %s", other.daylight, other.name)
		}
	}
	if n.hidden > 0 {
		text += fmt.Sprintf("; in %d more the star is below the horizon", n.hidden)
	}
	if n.impossible > 0 {
		text += fmt.Sprintf("; %d cannot be read that way at all", n.impossible)
	}
	if t.coarse > 0 {
		text += fmt.Sprintf("; %d rows are not known to %g day and were left out", t.coarse, coarsestNightQuantum)
	}
	if name, ok := t.Better(); ok {
		text += ": check whether they are " + name
	}
	return text
}
