package epochs

import "math"

// LightTime lists the terms that lead from a stamp to BJD_TDB, in seconds.
// TTMinusStampS + TDBMinusTTS + RoemerBarycentreS + SiteS + CurvatureS +
// ShapiroS is BJD_TDB minus the stamp for a stamp made at the observer; for a
// heliocentric or barycentric stamp TTMinusStampS includes the light time that
// was taken out, so that the same sum holds.
type LightTime struct {
	ExposureShiftS    float64 // from the printed point of the exposure to its middle
	StampLightTimeS   float64 // light time inside a heliocentric or barycentric stamp, taken out; 0 otherwise
	ZoneS             float64 // from local or zone time to Greenwich: added to the stamp
	DeltaTS           float64 // TT - UT1 as used for the rotation of the Earth and for UT stamps
	TTMinusStampS     float64 // TT at the observer minus the stamp as printed
	TDBMinusTTS       float64 // TDB - TT at the observer
	RoemerSunS        float64 // light time from the Earth's centre to the Sun along the line of sight; not in the sum
	RoemerBarycentreS float64 // the same to the solar-system barycentre
	SiteS             float64 // from the site to the Earth's centre; 0 without a site
	CurvatureS        float64 // the wavefront is a sphere about the star: never positive, 0 without a parallax
	ShapiroS          float64 // slowing of light by the Sun: +6.8 microseconds opposite it, -113 at its limb
}

// BarycentreMinusObserverS returns BJD_TDB minus TDB at the observer: the
// sum of the light-time terms about the barycentre, in seconds.
func (l LightTime) BarycentreMinusObserverS() float64 {
	return l.RoemerBarycentreS + l.SiteS + l.CurvatureS + l.ShapiroS
}

// heliocentreMinusObserverS is the light time of a heliocentric stamp: the
// plane wave of the heliocentric Julian date, to the site when it is known.
func (l LightTime) heliocentreMinusObserverS() float64 { return l.RoemerSunS + l.SiteS }

const (
	// sunShapiroS is 2 GM/c^3 of the Sun (IAU 2015 Resolution B3: GM =
	// 1.3271244e11 km^3/s^2).
	sunShapiroS = 2 * sunGMKm3S2 / (lightKmS * lightKmS * lightKmS)
	sunGMKm3S2  = 1.3271244e11
	sunRadiusKm = 695700
)

// scene is where everything is at one instant: km and km/s on ICRS axes,
// Earth and Sun about the barycentre, the site about the Earth's centre.
type scene struct {
	earthKm, earthKmS vector
	sunKm, sunKmS     vector
	siteKm, siteKmS   vector  // zero without a site
	starAu            vector  // about the barycentre
	toStar            vector  // unit vector from the barycentre
	inverseAu         float64 // 1/distance of the star, 0 = not known
	tdbMinusTTS       float64 // for a clock at the observer

	observerKm     vector  // site or Earth's centre about the barycentre
	toSunKm        vector  // from the observer
	sunDistanceKm  float64 // length of toSunKm
	potentialKm2S2 float64 // of the Earth at the observer, positive
}

// sightline is the unit vector from the observer to the star: the barycentric
// direction less the parallax, to first order in it. The second, 1e-11 at 1.3
// pc, is worth less than a micrometre a second.
func (s *scene) sightline() vector {
	if s.inverseAu == 0 {
		return s.toStar
	}
	shift := s.observerKm.times(s.inverseAu / auKm)
	return s.toStar.times(1 + shift.dot(s.toStar)).minus(shift)
}

// lightTime fills in the four geometric terms.
//
// With r the observer about the barycentre, k the direction and D the distance
// of the star, |D k| - |D k - r| = r.k - (r^2 - (r.k)^2)/(2 D) + ...; the next
// term is below 10 ns at 1 pc. Shapiro: Eastman, Siverd and Gaudi 2010, PASP
// 122, 935, eq. 8, in the form ln(s - s.k) with s from observer to Sun in au
// (Hobbs, Edwards and Manchester 2006, MNRAS 369, 655), which differs by the
// 0.17 microseconds of the Earth's changing distance. Behind the Sun's disc the
// value of the limb is kept.
func (s *scene) lightTime(terms *LightTime) {
	terms.RoemerSunS = s.earthKm.minus(s.sunKm).dot(s.toStar) / lightKmS
	terms.RoemerBarycentreS = s.earthKm.dot(s.toStar) / lightKmS
	terms.SiteS = s.siteKm.dot(s.toStar) / lightKmS

	along := s.observerKm.dot(s.toStar)
	terms.CurvatureS = -(s.observerKm.dot(s.observerKm) - along*along) * s.inverseAu / (2 * auKm * lightKmS)

	limb := sunRadiusKm * sunRadiusKm / (2 * s.sunDistanceKm)
	terms.ShapiroS = sunShapiroS * math.Log(math.Max(s.sunDistanceKm-s.toSunKm.dot(s.toStar), limb)/auKm)
}
