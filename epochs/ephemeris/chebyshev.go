package ephemeris

import (
	"errors"
	"fmt"
	"math"
	"sync/atomic"
)

// State is where the Earth's centre and the Sun are about the solar-system
// barycentre and how they move, on ICRS axes.
type State struct {
	EarthKm, EarthKmS [3]float64 // km, km/s
	SunKm, SunKmS     [3]float64 // km, km/s
}

// ErrRange is returned for an instant outside an ephemeris.
var ErrRange = errors.New("ephemeris: the date is outside the ephemeris")

// The span of the embedded ephemeris, 1850 January 1 to 2100 January 1, and
// the degrees of its polynomials over a segment.
const (
	FirstJD     = 2396758.5
	LastJD      = 2488069.5
	segmentDays = 32.0
	segments    = 2854 // the last reaches beyond LastJD
	earthNodes  = 21
	sunNodes    = 10
)

// Chebyshev is an ephemeris of Chebyshev polynomials. It is safe for
// concurrent use: segments are built when first needed, and when two
// goroutines build the same one either result serves.
type Chebyshev struct {
	planets *[planets]planet
	built   [segments]atomic.Pointer[segment]
}

// segment holds the coefficients over 32 days: the Earth about the Sun and the
// Sun about the barycentre.
type segment struct {
	earth [3][earthNodes]float64
	sun   [3][sunNodes]float64
}

// Embedded returns an ephemeris from the series that the package holds.
func Embedded() (*Chebyshev, error) {
	list, err := loadSeries()
	if err != nil {
		return nil, err
	}
	return &Chebyshev{planets: list}, nil
}

// At returns the state at an instant of TDB, a Julian date in two parts. An
// instant outside FirstJD to LastJD is an error that wraps ErrRange.
func (c *Chebyshev) At(day, fraction float64) (State, error) {
	since := (day - FirstJD) + fraction
	if !(since >= 0 && since < LastJD-FirstJD) {
		return State{}, fmt.Errorf("%w: JD %.1f; it spans 1850 to 2100 (JD %.1f to %.1f)", ErrRange, day+fraction, FirstJD, LastJD)
	}
	number := int(since / segmentDays)
	s := c.built[number].Load()
	if s == nil {
		s = buildSegment(c.planets, number)
		c.built[number].Store(s)
	}
	// x runs from -1 to 1 over the segment.
	x := 2*(since-float64(number)*segmentDays)/segmentDays - 1
	const perSecond = 2 / (segmentDays * 86400)
	var state State
	for k := range 3 {
		earthKm, earthRate := evaluate(s.earth[k][:], x)
		sunKm, sunRate := evaluate(s.sun[k][:], x)
		state.SunKm[k], state.SunKmS[k] = sunKm, sunRate*perSecond
		state.EarthKm[k], state.EarthKmS[k] = earthKm+sunKm, (earthRate+sunRate)*perSecond
	}
	return state, nil
}

// evaluate returns the sum of c[i] T_i(x) and its derivative in x, by
// Clenshaw's recurrence for both at once.
func evaluate(c []float64, x float64) (value, rate float64) {
	var b1, b2, d1, d2 float64
	for i := len(c) - 1; i >= 1; i-- {
		b1, b2, d1, d2 = c[i]+2*x*b1-b2, b1, 2*b1+2*x*d1-d2, d1
	}
	return c[0] + x*b1 - b2, b1 + x*d1 - d2
}

// buildSegment interpolates the series at the Chebyshev nodes of a segment.
func buildSegment(list *[planets]planet, number int) *segment {
	middle := FirstJD - j2000 + (float64(number)+0.5)*segmentDays
	var earthAt [earthNodes][3]float64
	for i := range earthAt {
		earthAt[i] = earthFromSun(list, middle+node(i, earthNodes)*segmentDays/2)
	}
	var sunAt [sunNodes][3]float64
	for i := range sunAt {
		sunAt[i] = sunFromBarycentre(list, middle+node(i, sunNodes)*segmentDays/2)
	}
	s := new(segment)
	for k := range 3 {
		interpolate(s.earth[k][:], func(i int) float64 { return earthAt[i][k] })
		interpolate(s.sun[k][:], func(i int) float64 { return sunAt[i][k] })
	}
	return s
}

// node returns the i-th of n zeros of T_n.
func node(i, n int) float64 { return math.Cos(math.Pi * (float64(i) + 0.5) / float64(n)) }

// interpolate sets the coefficients of the polynomial that has the given
// values at the nodes.
func interpolate(dst []float64, value func(i int) float64) {
	n := len(dst)
	for j := range dst {
		sum := 0.0
		for i := range n {
			sum += value(i) * math.Cos(math.Pi*float64(j)*(float64(i)+0.5)/float64(n))
		}
		dst[j] = 2 * sum / float64(n)
	}
	dst[0] /= 2
}
