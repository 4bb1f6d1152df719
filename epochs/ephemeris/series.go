package ephemeris

import (
	_ "embed"
	"fmt"
	"math"
	"strings"
	"sync"

	"github.com/soniakeys/meeus/v3/pluto"
)

//go:embed series.txt
var seriesText string

const (
	auKm        = 149597870.7 // IAU 2012 Resolution B2
	j2000       = 2451545.0
	daysPerMill = 365250.0 // Julian millennium
)

// term is A cos(B + C t).
type term struct{ a, b, c float64 }

// planet holds the series of one planet: for L, B and R, for each power of t.
type planet struct {
	series [3][6][]term
	mass   float64 // in units of the Sun's
}

// The planets' places in a solar system's list.
const (
	mercury = iota
	venus
	earth
	mars
	jupiter
	saturn
	uranus
	neptune
	planets
)

// planetNames and sunMasses: the Sun's mass in units of each planet's, of the
// Earth with the Moon (JPL DE405: Standish 1998, JPL IOM 312.F-98-048).
var (
	planetNames = [planets]string{"mercury", "venus", "earth", "mars", "jupiter", "saturn", "uranus", "neptune"}
	sunMasses   = [planets]float64{6023600, 408523.71, 328900.561400, 3098708, 1047.3486, 3497.898, 22902.98, 19412.24}
)

const plutoSunMass = 135200000

// loadSeries reads the embedded table once.
var loadSeries = sync.OnceValues(func() (*[planets]planet, error) {
	var list [planets]planet
	index := map[string]int{}
	for i, name := range planetNames {
		index[name] = i
		list[i].mass = 1 / sunMasses[i]
	}
	for line := range strings.Lines(seriesText) {
		if strings.HasPrefix(line, "#") {
			continue
		}
		var name, coordinate string
		var power int
		var t term
		if _, err := fmt.Sscan(line, &name, &coordinate, &power, &t.a, &t.b, &t.c); err != nil {
			return nil, fmt.Errorf("ephemeris: the embedded series is damaged at %q: %w", line, err)
		}
		i, ok := index[name]
		k := strings.Index("LBR", coordinate)
		if !ok || k < 0 || power < 0 || power > 5 {
			return nil, fmt.Errorf("ephemeris: the embedded series is damaged at %q", line)
		}
		list[i].series[k][power] = append(list[i].series[k][power], t)
	}
	return &list, nil
})

// place returns the heliocentric place in km, VSOP87 ecliptic of J2000, at a
// number of Julian millennia from J2000.
func (p *planet) place(t float64) [3]float64 {
	var lbr [3]float64
	for k := range lbr {
		for power := 5; power >= 0; power-- {
			sum := 0.0
			for _, s := range p.series[k][power] {
				sum += s.a * math.Cos(s.b+s.c*t)
			}
			lbr[k] = lbr[k]*t + sum
		}
	}
	return rectangular(lbr[0], lbr[1], lbr[2])
}

func rectangular(l, b, rAu float64) [3]float64 {
	sinL, cosL := math.Sincos(l)
	sinB, cosB := math.Sincos(b)
	r := rAu * auKm
	return [3]float64{r * cosB * cosL, r * cosB * sinL, r * sinB}
}

// earthFromSun returns the Earth about the Sun in km on ICRS axes, from the
// series. days count TDB from J2000.
func earthFromSun(list *[planets]planet, days float64) [3]float64 {
	return toICRS(list[earth].place(days / daysPerMill))
}

// sunFromBarycentre returns the Sun about the barycentre in km on ICRS axes,
// from the series of all planets: the centre of mass stays where it is.
func sunFromBarycentre(list *[planets]planet, days float64) [3]float64 {
	l, b, r := pluto.Heliocentric(j2000 + days)
	moment := rectangular(l.Rad(), b.Rad(), r)
	total := 1 + 1.0/plutoSunMass
	for k := range moment {
		moment[k] /= plutoSunMass
	}
	for i := range list {
		place := list[i].place(days / daysPerMill)
		for k := range moment {
			moment[k] += list[i].mass * place[k]
		}
		total += list[i].mass
	}
	for k := range moment {
		moment[k] /= -total
	}
	return toICRS(moment)
}
