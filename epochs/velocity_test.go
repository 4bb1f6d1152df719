package epochs

import (
	"errors"
	"math"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"platemeld/epochs/ephemeris"
)

// frozen is an ephemeris that stands still.
type frozen ephemeris.State

func (f frozen) At(day, frac float64) (ephemeris.State, error) { return ephemeris.State(f), nil }

// quiet is a frozen ephemeris with the Earth 1 au from a Sun at rest.
func quiet() frozen { return frozen{EarthKm: [3]float64{0, auKm, 0}} }

func converterFor(t *testing.T, s Star, eph Ephemeris) *Converter {
	t.Helper()
	c, err := NewConverter(s, eph)
	if err != nil {
		t.Fatal(err)
	}
	return c
}

var j2000 = Epoch{ObserverTT: TT{JD{Day: 2451545}}, ObserverUT1: UT1{JD{Day: 2451544, Frac: 0.99926}}}

// Source: c ((1 + v1/c)(1 + v2/c) - 1) worked out with c = 299792458 m/s.
func TestShiftsAreMultiplied(t *testing.T) {
	for _, c := range []struct{ kms, sunKms, wantMs float64 }{
		{100, -25, 74991.660898},
		{-300, 29, -271029.020076},
	} {
		eph := quiet()
		eph.SunKmS = [3]float64{c.sunKms, 0, 0}
		converter := converterFor(t, Star{}, eph) // RA 0, Dec 0: the x axis
		got, err := converter.BarycentricVelocity(PublishedVelocity{Kms: c.kms, Frame: FrameHeliocentric}, j2000, nil)
		if err != nil {
			t.Fatal(err)
		}
		near(t, "m/s", got.Kms*1e3, c.wantMs, 1e-5)
		near(t, "cross term, m/s", got.Terms.CrossMs, c.kms*c.sunKms/lightKmS*1e3, 1e-9)
		if got.Flags != FlagNoRelativity {
			t.Errorf("flags %v", got.Flags)
		}
	}
}

// Source: the definitions, worked out for c z = 100 km/s.
func TestVelocityConventions(t *testing.T) {
	converter := converterFor(t, Star{}, quiet())
	for _, c := range []struct {
		convention VelocityConvention
		kms        float64
	}{
		{VelocityPlain, 100},
		{VelocityRelativistic, 99.983321796},
		{VelocityRadio, 99.966654713},
	} {
		got, err := converter.BarycentricVelocity(PublishedVelocity{Kms: c.kms, Frame: FrameBarycentric, Convention: c.convention}, j2000, nil)
		if err != nil {
			t.Fatal(err)
		}
		near(t, c.convention.String()+", m/s", got.Kms*1e3, 100e3, 1e-5)
		near(t, c.convention.String()+" term, m/s", got.Terms.ConventionMs, 100e3-c.kms*1e3, 1e-5)
	}
}

// An observer at rest 1 au from the Sun sees light blue-shifted by falling
// into the two potentials: GM/(r c), 2.959 m/s for the Sun and 0.209 m/s for the
// Earth; on circular motion at 29.785 km/s across the sight time dilation adds
// v^2/2c, 1.480 m/s (common practice: the sizes quoted for these terms are
// 2.96, 0.21 and 1.48 m/s).
func TestRelativity(t *testing.T) {
	eph := quiet()
	converter := converterFor(t, Star{}, eph)
	got, err := converter.BarycentricVelocity(PublishedVelocity{Frame: FrameGeocentric}, j2000, nil)
	if err != nil {
		t.Fatal(err)
	}
	near(t, "potentials, m/s", got.Terms.RelativityMs, 2.959+0.209, 2e-3)

	eph.EarthKmS = [3]float64{0, 0, 29.785}
	converter = converterFor(t, Star{}, eph)
	got, err = converter.BarycentricVelocity(PublishedVelocity{Frame: FrameGeocentric}, j2000, nil)
	if err != nil {
		t.Fatal(err)
	}
	near(t, "with time dilation, m/s", got.Terms.RelativityMs, 2.959+0.209+1.480, 2e-3)
	near(t, "projection, m/s", got.Terms.OrbitMs, 0, 1e-9)
}

func TestPerspectiveNeverTwice(t *testing.T) {
	fast := Star{RADeg: 269.45, DecDeg: 4.69, PMRAMasYr: -801.551, PMDecMasYr: 10362.394, ParallaxMas: 546.9759}
	far := fast
	far.ParallaxMas = 0
	e := Epoch{ObserverTT: TT{JD{Day: 2451545 + 36525}}, ObserverUT1: UT1{JD{Day: 2451545 + 36525}}}
	for _, c := range []struct {
		name           string
		star           Star
		removed, asked bool
		flags          VelocityFlag
		taken          bool
	}{
		{"not asked", fast, false, false, 0, false},
		{"asked", fast, false, true, 0, true},
		{"removed by the source", fast, true, false, 0, false},
		{"removed and asked", fast, true, true, FlagPerspectiveAlreadyRemoved, false},
		{"without parallax", far, false, true, FlagPerspectiveUnknown, false},
	} {
		t.Run(c.name, func(t *testing.T) {
			v := PublishedVelocity{Kms: -110, Frame: FrameBarycentric, PerspectiveRemoved: c.removed, RemovePerspective: c.asked}
			got, err := converterFor(t, c.star, quiet()).BarycentricVelocity(v, e, nil)
			if err != nil {
				t.Fatal(err)
			}
			want := 0.0
			if c.taken {
				// 4.539 m/s a year, less 1.5 m/s over the century as the motion
				// slows down with the growing distance from the nearest point.
				want = -453.9
			}
			near(t, "m/s", got.Terms.PerspectiveMs, want, 2)
			near(t, "km/s", got.Kms, -110+got.Terms.PerspectiveMs/1e3, 1e-12)
			if got.Flags != c.flags {
				t.Errorf("flags %q, want %q", got.Flags, c.flags)
			}
		})
	}
}

// The classical apex on ICRS axes: precessing 18h +30 deg of 1900 by Newcomb's
// rates of 1900 (Explanatory Supplement 1961: m = 3.073 s, n = 20.05 arcsec a
// year), right ascension grows by (m + n/15 sin ra tan dec) 100 = 230 s, the
// declination does not change at 18h: 18h03m50s (271.0 deg), +30.0 deg
// (common practice: 18h03m50.3s +30d00'17" for J2000).
func TestClassicalSolarMotion(t *testing.T) {
	m := ClassicalSolarMotion()
	near(t, "ra, s of time", m.ApexRADeg*240, (18*60+3)*60+50.3, 0.2)
	near(t, "dec, arcsec", m.ApexDecDeg*3600, 30*3600+17, 2)

	// A star at the apex that is at rest in the local standard of rest comes
	// towards the Sun with the Sun's speed.
	s := Star{RADeg: m.ApexRADeg, DecDeg: m.ApexDecDeg}
	got, err := converterFor(t, s, quiet()).BarycentricVelocity(PublishedVelocity{Frame: FrameLSR, LSR: &m}, j2000, nil)
	if err != nil {
		t.Fatal(err)
	}
	near(t, "km/s", got.Kms, -20, 1e-9)
}

func TestVelocityRefused(t *testing.T) {
	c := converterFor(t, Star{}, quiet())
	motion := ClassicalSolarMotion()
	for _, test := range []struct {
		name string
		v    PublishedVelocity
		want error
	}{
		{"no site", PublishedVelocity{Frame: FrameTopocentric}, ErrSiteNeeded},
		{"not a number", PublishedVelocity{Kms: math.NaN(), Frame: FrameBarycentric}, ErrVelocity},
		{"speed of light", PublishedVelocity{Kms: 3e5, Frame: FrameBarycentric}, ErrVelocity},
		{"no solar motion", PublishedVelocity{Frame: FrameLSR}, ErrVelocity},
		{"solar motion too many", PublishedVelocity{Frame: FrameHeliocentric, LSR: &motion}, ErrVelocity},
		{"solar motion in m/s", PublishedVelocity{Frame: FrameLSR, LSR: &SolarMotion{SpeedKms: 20000}}, ErrVelocity},
		{"frame", PublishedVelocity{Frame: 9}, ErrVelocity},
		{"convention", PublishedVelocity{Frame: FrameBarycentric, Convention: -1}, ErrVelocity},
	} {
		if _, err := c.BarycentricVelocity(test.v, j2000, nil); !errors.Is(err, test.want) {
			t.Errorf("%s: got %v, want %v", test.name, err, test.want)
		}
	}
	if _, err := ParseFrame("galactic"); !errors.Is(err, ErrWord) || !strings.Contains(err.Error(), "heliocentric") {
		t.Errorf("got %v, want the accepted words", err)
	}
	if _, err := ParseVelocityConvention("z"); !errors.Is(err, ErrWord) || !strings.Contains(err.Error(), "radio") {
		t.Errorf("got %v, want the accepted words", err)
	}
}

func TestVelocityWords(t *testing.T) {
	for f := FrameTopocentric; f <= FrameLSR; f++ {
		if got, err := ParseFrame(f.String()); err != nil || got != f {
			t.Errorf("%v: got %v, %v", f, got, err)
		}
	}
	for c := VelocityPlain; c <= VelocityRadio; c++ {
		if got, err := ParseVelocityConvention(c.String()); err != nil || got != c {
			t.Errorf("%v: got %v, %v", c, got, err)
		}
	}
}

// Whatever the frame, the terms are the whole change.
func TestVelocityTermsAddUp(t *testing.T) {
	motion := ClassicalSolarMotion()
	site := Site{LongitudeDeg: 12, LatitudeDeg: 40, HeightM: 500}
	rapid.Check(t, func(t *rapid.T) {
		eph := quiet()
		eph.EarthKmS = [3]float64{rapid.Float64Range(-30, 30).Draw(t, "vx"), rapid.Float64Range(-30, 30).Draw(t, "vy"), 3}
		eph.SunKmS = [3]float64{0.01, -0.005, 0.002}
		c, err := NewConverter(Star{
			RADeg: rapid.Float64Range(0, 359).Draw(t, "ra"), DecDeg: rapid.Float64Range(-90, 90).Draw(t, "dec"),
			PMRAMasYr: 900, ParallaxMas: 200, SystemicKms: 30,
		}, eph)
		if err != nil {
			t.Fatal(err)
		}
		v := PublishedVelocity{
			Kms:               rapid.Float64Range(-500, 500).Draw(t, "kms"),
			Frame:             Frame(rapid.IntRange(0, 4).Draw(t, "frame")),
			Convention:        VelocityConvention(rapid.IntRange(0, 2).Draw(t, "convention")),
			RemovePerspective: rapid.Bool().Draw(t, "remove"),
		}
		if v.Frame == FrameLSR {
			v.LSR = &motion
		}
		got, err := c.BarycentricVelocity(v, j2000, &site)
		if err != nil {
			t.Fatal(err)
		}
		if !(math.Abs(got.Kms-v.Kms-got.Terms.SumMs()/1e3) <= 1e-12*500) {
			t.Fatalf("%v km/s became %v, terms add up to %v m/s", v.Kms, got.Kms, got.Terms.SumMs())
		}
		if v.Frame == FrameTopocentric {
			// (1 + z)(1 + z_c) with z_c from a star at rest
			rest := v
			rest.Kms, rest.Convention, rest.RemovePerspective = 0, VelocityPlain, false
			correction, err := c.BarycentricVelocity(rest, j2000, &site)
			if err != nil {
				t.Fatal(err)
			}
			want := ((1+v.shift())*(1+correction.Kms/lightKmS) - 1) * lightKmS * 1e3
			if !(math.Abs(got.Kms*1e3-got.Terms.PerspectiveMs-want) <= 1e-6) {
				t.Fatalf("got %v m/s, want %v", got.Kms*1e3, want)
			}
		}
	})
}
