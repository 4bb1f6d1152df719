package epochs

import (
	"math"
	"sync/atomic"

	"github.com/soniakeys/meeus/v3/nutation"
)

// earthRotationRadS is the rate of the Earth rotation angle in rad per
// second of UT1 (Capitaine, Guinot and McCarthy 2000, A&A 355, 398, eq. 14).
const earthRotationRadS = 2 * math.Pi * 1.00273781191135448 / SecondsPerDay

// earthRotationAngle returns the Earth rotation angle in radians, within
// [0, 2 pi) (IERS Conventions 2010, eq. 5.15). The whole turns of the whole
// days are left out before anything is multiplied, so that no digit is lost.
func earthRotationAngle(ut UT1) float64 {
	days := (ut.Day - 2451545) + ut.Frac
	turns := math.Mod(ut.Frac+0.7790572732640+0.00273781191135448*days, 1)
	if turns < 0 {
		turns++
	}
	return 2 * math.Pi * turns
}

// greenwichMeanSiderealTime returns GMST in radians, within [0, 2 pi):
// the Earth rotation angle and the precession in right ascension (Capitaine,
// Wallace and Chapront 2003, A&A 412, 567, eq. 42, with the IAU 2006 rate).
func greenwichMeanSiderealTime(ut UT1, tt TT) float64 {
	angle := math.Mod(earthRotationAngle(ut)+precessionInRA(centuries(tt.JD)), 2*math.Pi)
	if angle < 0 {
		angle += 2 * math.Pi
	}
	return angle
}

// precessionInRA is GMST minus the Earth rotation angle, in radians.
func precessionInRA(t float64) float64 {
	return polynomial(t, 0.014506, 4612.156534, 1.3915817, -0.00000044,
		-0.000029956, -0.0000000368) * radPerArcsec
}

// centuries counts Julian centuries from J2000.0.
func centuries(d JD) float64 { return ((d.Day - 2451545) + d.Frac) / 36525 }

// polynomial sums c[0] + c[1] t + c[2] t^2 ...
func polynomial(t float64, c ...float64) float64 {
	sum := 0.0
	for i := len(c) - 1; i >= 0; i-- {
		sum = sum*t + c[i]
	}
	return sum
}

// axesOfDate returns the rotation from ICRS axes to the true equator of date
// with the origin of right ascension that makes the Earth rotation angle the
// hour angle of Greenwich. Written as
//
//	R3(GAST - ERA) N P B
//
// with the Fukushima-Williams angles of frame bias and IAU 2006 precession
// (Hilton et al. 2006, Celest. Mech. 94, 351, table 1) and the nutation of
// the IAU 1980 theory. Against the IAU 2006/2000A matrix the error stays
// below 0.1 arcsec in 1850-2100: 3 m, or 0.2 mm/s, of an observer's place.
func axesOfDate(tt JD) matrix {
	t := centuries(tt)
	gamma := polynomial(t, -0.052928, 10.556378, 0.4932044, -0.00031238, -0.000002788, 0.0000000260)
	phi := polynomial(t, 84381.412819, -46.811016, 0.0511268, 0.00053289, -0.000000440, -0.0000000176)
	psi := polynomial(t, -0.041775, 5038.481484, 1.5584175, -0.00018522, -0.000026452, -0.0000000148)
	epsilon := polynomial(t, 84381.406, -46.836769, -0.0001831, 0.00200340, -0.000000576, -0.0000000434)

	deltaPsi, deltaEpsilon := nutation.Nutation(tt.Float())
	meanObliquity := epsilon * radPerArcsec
	trueObliquity := meanObliquity + deltaEpsilon.Rad()
	equinox := aboutX(-trueObliquity).
		after(aboutZ(-(psi*radPerArcsec + deltaPsi.Rad()))).
		after(aboutX(phi * radPerArcsec)).
		after(aboutZ(gamma * radPerArcsec))

	// The main complementary terms of the equation of the equinoxes (IERS
	// Conventions 2010, table 5.2e) come to 3 mas and are left out.
	equationOfEquinoxes := deltaPsi.Rad() * math.Cos(meanObliquity)
	return aboutZ(precessionInRA(t) + equationOfEquinoxes).after(equinox)
}

// The span of dayTable: JD 2396736 is in 1849, the end is in 2106. Outside it
// the values are computed anew each time.
const (
	tableFirstDay    = 2396736
	tableSegmentDays = 32
	tableSegments    = 2940
)

// dayTable interpolates what changes slowly, axesOfDate and TDB - TT, between
// daily values, kept in segments that are computed when first needed. The
// shortest large nutation term has a period of 13.7 days and 0.23 arcsec:
// straight lines between daily values err by less than 7 mas, those of TDB - TT
// by less than 0.1 microseconds. It is safe for concurrent use: two goroutines
// may compute the same segment, and either result serves.
type dayTable struct {
	segments [tableSegments]atomic.Pointer[tableSegment]
}

type tableSegment [tableSegmentDays + 1]dayValues

// dayValues are those of one instant.
type dayValues struct {
	axes        matrix
	tdbMinusTTS float64 // at the Earth's centre
}

func valuesOfDay(tt JD) dayValues { return dayValues{axesOfDate(tt), tdbMinusTT(TT{tt})} }

func (t *dayTable) at(tt JD) dayValues {
	days := (tt.Day - tableFirstDay) + tt.Frac
	if !(days >= 0 && days < tableSegments*tableSegmentDays) {
		return valuesOfDay(tt)
	}
	whole := int(days)
	segment := t.segment(whole / tableSegmentDays)
	index := whole % tableSegmentDays
	return mixed(&segment[index], &segment[index+1], days-float64(whole))
}

func (t *dayTable) segment(number int) *tableSegment {
	if segment := t.segments[number].Load(); segment != nil {
		return segment
	}
	segment := new(tableSegment)
	for i := range segment {
		segment[i] = valuesOfDay(JD{Day: tableFirstDay + float64(number*tableSegmentDays+i)})
	}
	t.segments[number].Store(segment)
	return segment
}

// mixed interpolates between two days. Nearly equal rotations are mixed
// element by element; the departure from a rotation is of second order in the
// nutation of one day.
func mixed(a, b *dayValues, share float64) dayValues {
	var v dayValues
	for i := range 3 {
		v.axes[i][0] = a.axes[i][0] + share*(b.axes[i][0]-a.axes[i][0])
		v.axes[i][1] = a.axes[i][1] + share*(b.axes[i][1]-a.axes[i][1])
		v.axes[i][2] = a.axes[i][2] + share*(b.axes[i][2]-a.axes[i][2])
	}
	v.tdbMinusTTS = a.tdbMinusTTS + share*(b.tdbMinusTTS-a.tdbMinusTTS)
	return v
}
