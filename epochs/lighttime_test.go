package epochs

import (
	"math"
	"testing"
)

// observedFrom is the sky of an observer about a Sun at the barycentre.
func observedFrom(observerKm, toStar vector) scene {
	return scene{
		earthKm: observerKm, observerKm: observerKm, toStar: toStar,
		toSunKm: observerKm.times(-1), sunDistanceKm: observerKm.length(),
	}
}

// Fermat: rays stand upright on the surfaces of equal arrival time, so the
// gradient of the delay by the Sun, across the line of sight, is the bending of
// the ray. Source of the bending: liberfa/erfa src/t_erfa_c.c (Oct 2025),
// t_ldsun, where p is the direction to the star, e the unit vector from Sun to
// observer and em the distance in au.
func TestShapiroBendsLight(t *testing.T) {
	p := vector{-0.763276255, -0.608633767, -0.216735543}
	e := vector{-0.973644023, -0.20925523, -0.0907169552}
	const em = 0.999809214
	bent := vector{-0.7632762580731413169, -0.6086337635262647900, -0.2167355419322321302}

	delayS := func(observer vector) float64 {
		s := observedFrom(observer, p.unit())
		var terms LightTime
		s.lightTime(&terms)
		return -terms.ShapiroS
	}
	observer := e.times(em * auKm)
	const stepKm = 1000.0
	var gradient vector
	for i := range 3 {
		var step vector
		step[i] = stepKm
		gradient[i] = (delayS(observer.plus(step)) - delayS(observer.minus(step))) / (2 * stepKm) * lightKmS
	}
	// The time of arrival falls along -k, the direction of travel: the apparent
	// direction is k less the gradient of the delay.
	k := p.unit()
	across := gradient.minus(k.times(gradient.dot(k)))
	nearVector(t, "direction", p.minus(across), bent, 3e-12)
}

// Sizes: 2 GM/c^3 = 9.851 microseconds times ln 2 opposite the Sun, times
// ln(R^2/2) at its limb (Eastman, Siverd and Gaudi 2010, section 2.4.1).
func TestShapiroSizes(t *testing.T) {
	at := func(star vector) float64 {
		s := observedFrom(vector{auKm, 0, 0}, star)
		var terms LightTime
		s.lightTime(&terms)
		return terms.ShapiroS * 1e6
	}
	near(t, "opposite the Sun, microseconds", at(vector{1, 0, 0}), 6.83, 0.01)
	near(t, "at a right angle", at(vector{0, 1, 0}), 0, 1e-9)
	near(t, "behind the Sun", at(vector{-1, 0, 0}), -112.6, 0.2)
}

// The curvature of the wavefront against the distances themselves:
// |D k| - |D k - r| less the plane wave's r.k.
func TestCurvature(t *testing.T) {
	for _, parsec := range []float64{1.3, 10, 100} {
		distance := parsec * 206264.806 * auKm
		k := vector{0.6, 0.64, 0.48}
		earth := vector{0.3 * auKm, -0.9 * auKm, -0.1 * auKm}
		s := observedFrom(earth, k)
		s.inverseAu = auKm / distance
		var terms LightTime
		s.lightTime(&terms)

		star := k.times(distance)
		across := earth.minus(k.times(earth.dot(k)))
		// |D k - r| = sqrt((D - r.k)^2 + across^2), expanded without
		// cancellation by the difference of squares.
		along := distance - earth.dot(k)
		want := -(across.dot(across) / (math.Hypot(along, across.length()) + along)) / lightKmS
		near(t, "microseconds", terms.CurvatureS*1e6, want*1e6, 0.01)
		near(t, "plane wave, s", terms.RoemerBarycentreS, (star.length()-along)/lightKmS, 0.01)
	}
}
