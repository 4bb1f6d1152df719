package epochs

import (
	"math"
	"testing"

	"platemeld/epochs/ephemeris"
)

// Source: liberfa/erfa src/t_erfa_c.c (Oct 2025), t_epv00, MJD 53411.52501161
// TDB. That series and the one here are both fits to the Earth's motion: epv00
// is good to 13.4 km and 4.9 mm/s against DE405 by its own Note 4, the embedded
// series to 15 km and 5 mm/s, hence the tolerances.
func TestEarthAgainstEpv00(t *testing.T) {
	eph, err := ephemeris.Embedded()
	if err != nil {
		t.Fatal(err)
	}
	d := NewJD(2400000.5, 53411.52501161)
	s, err := eph.At(d.Day, d.Frac)
	if err != nil {
		t.Fatal(err)
	}
	const auDayKmS = auKm / SecondsPerDay
	earth, sun := vector(s.EarthKm), vector(s.SunKm)
	earthV, sunV := vector(s.EarthKmS), vector(s.SunKmS)
	nearVector(t, "heliocentric, km", earth.minus(sun), vector{-0.7757238809297706813, 0.5598052241363340596, 0.2426998466481686993}.times(auKm), 15)
	nearVector(t, "heliocentric, km/s", earthV.minus(sunV), vector{-0.1091891824147313846e-1, -0.1247187268440845008e-1, -0.5407569418065039061e-2}.times(auDayKmS), 5e-6)
	nearVector(t, "barycentric, km", earth, vector{-0.7714104440491111971, 0.5598412061824171323, 0.2425996277722452400}.times(auKm), 15)
	nearVector(t, "barycentric, km/s", earthV, vector{-0.1091874268116823295e-1, -0.1246525461732861538e-1, -0.5404773180966231279e-2}.times(auDayKmS), 5e-6)
}

// Source: Meeus, Astronomical Algorithms, example 25.a: Sun's true longitude
// 199.90988 deg and distance 0.99766 au on 1992 October 13.0 TD by formulas of
// 0.01 deg; 199.90728329 deg and 0.99760854 au by epv00 and ecm06 of pyerfa
// 2.0.0.1, mean equinox of date, to 0.02 arcsec and 15 km.
func TestSunOfMeeus(t *testing.T) {
	c := converterFor(t, fixedStar, nil)
	e, err := c.Epoch(Stamp{JD: NewJD(2448908.5, 0), Scale: ScaleTT, Place: PlaceGeocentre}, nil)
	if err != nil {
		t.Fatal(err)
	}
	var view scene
	now := e.instant()
	if err := c.look(&view, &now, nil); err != nil {
		t.Fatal(err)
	}
	// The mean ecliptic and equinox of date, from the true equator.
	axes := axesOfDate(now.tt.JD)
	direction := axes.times(view.toSunKm.unit())
	psi, epsilon, obliquity := nutationAt(now.tt.Float())
	toTrueEquinox := aboutZ(-(precessionInRA(centuries(now.tt.JD)) + psi*math.Cos(obliquity)))
	toEcliptic := aboutZ(psi).after(aboutX(obliquity + epsilon)).after(toTrueEquinox)
	longitude, _ := toEcliptic.times(direction).spherical()

	near(t, "longitude by low precision, deg", longitude/radPerDeg, 199.90988, 0.01)
	near(t, "longitude by ERFA, deg", longitude/radPerDeg, 199.90728328655527, 6e-6)
	near(t, "distance by low precision, au", view.sunDistanceKm/auKm, 0.99766, 1e-4)
	near(t, "distance by ERFA, au", view.sunDistanceKm/auKm, 0.9976085375540785, 1e-7)
}

// Source: Meeus, Astronomical Algorithms, example 17.a, Arcturus and Spica:
// 32d47'35".
func TestAngleBetweenTexts(t *testing.T) {
	place := func(raText, decText string) vector {
		ra, err := ParseRA(raText)
		if err != nil {
			t.Fatal(err)
		}
		dec, err := ParseDec(decText)
		if err != nil {
			t.Fatal(err)
		}
		return fromSpherical(ra*radPerDeg, dec*radPerDeg)
	}
	a, b := place("14h15m39.7s", "+19°10'57\""), place("13 25 11.6", "-11:09:41")
	near(t, "arcsec", math.Acos(a.dot(b))*arcsecPerRad, (32*60+47)*60+35, 1)
}

// A second of UT1 turns the Earth by 15 arcsec: an observer at latitude -30.2
// deg, 402.4 m/s (2 pi 5518 km in a sidereal day), is 29.3 mm/s further round
// where the star culminates. On a day that ends with a leap second UT1 runs on
// evenly, 86401 s to the UTC day.
func TestRotationOfTheEarth(t *testing.T) {
	stamp := Stamp{JD: NewJD(2457753.5, 0.5*86400/86401), Scale: ScaleUTC} // 2016 Dec 31, 12:00:00
	late, err := NewConverterWith(fixedStar, nil, Options{UT1MinusUTC: func(UTC) float64 { return -1 }})
	if err != nil {
		t.Fatal(err)
	}
	even := converterFor(t, fixedStar, nil)
	a, err := even.Epoch(stamp, &southernSite)
	if err != nil {
		t.Fatal(err)
	}
	b, err := late.Epoch(stamp, &southernSite)
	if err != nil {
		t.Fatal(err)
	}
	near(t, "UT1 after midnight, s", a.ObserverUT1.Sub(NewJD(2457753, 0.5))*86400, 43200, 1e-6)
	near(t, "difference of UT1, s", b.ObserverUT1.Sub(a.ObserverUT1.JD)*86400, -1, 1e-6)
	near(t, "TT is the same, s", b.ObserverTT.Sub(a.ObserverTT.JD)*86400, 0, 1e-9)
	near(t, "Delta T, s", b.Terms.DeltaTS-a.Terms.DeltaTS, 1, 1e-12)

	// At the meridian the velocity along the sight changes fastest.
	turn := fixedStar.RADeg*radPerDeg - earthRotationAngle(a.ObserverUT1) - southernSite.LongitudeDeg*radPerDeg
	stamp.JD = stamp.JD.AddSeconds(math.Mod(turn, 2*math.Pi) / earthRotationRadS)
	v := func(c *Converter) float64 {
		_, v, err := c.Convert(stamp, PublishedVelocity{}, &southernSite)
		if err != nil {
			t.Fatal(err)
		}
		return v.Terms.RotationMs
	}
	want := -402.4 * math.Cos(20*radPerDeg) * 7.292e-5 // m/s per second
	near(t, "m/s", v(even)-v(late), want, 2e-4)
}

func TestUT1AfterUTC(t *testing.T) {
	jd := NewJD(2455000, 0.25)
	even := converterFor(t, fixedStar, nil)
	known, err := NewConverterWith(fixedStar, nil, Options{UT1MinusUTC: func(UTC) float64 { return 0.4 }})
	if err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct {
		name      string
		converter *Converter
		scale     Scale
		ttMinusS  float64 // TT - stamp: 34 s of leap seconds by then, and 32.184 s
		sigmaS    float64
		flags     EpochFlag
	}{
		{"UTC", even, ScaleUTC, 66.184, 0, 0},
		{"UT is UTC", even, ScaleUT, 66.184, 0, FlagUTAsUTC},
		{"UT is UTC whatever UT1 does", known, ScaleUT, 66.184, 0, FlagUTAsUTC},
		{"UT1 within 0.9 s", even, ScaleUT1, 66.184, 0.9 / math.Sqrt(3), 0},
		{"UT1 known", known, ScaleUT1, 65.784, 0, 0},
	} {
		e, err := c.converter.Epoch(Stamp{JD: jd, Scale: c.scale}, &southernSite)
		if err != nil {
			t.Fatal(err)
		}
		near(t, c.name+", s", e.Terms.TTMinusStampS, c.ttMinusS, 1e-6)
		near(t, c.name+", sigma in s", e.SigmaDays*SecondsPerDay, c.sigmaS, 1e-9)
		if e.Flags != c.flags {
			t.Errorf("%s: flags %q, want %q", c.name, e.Flags, c.flags)
		}
	}
}

// Nothing that a caller can put into a stamp may panic, and what is accepted is
// a date.
func FuzzEpoch(f *testing.F) {
	f.Add(2451545.0, 0.25, 0, 0, 0.0, 0.0, 0, 0.0)
	f.Add(2417955.0, 0.62, 3, 2, 0.0, 0.01, 1, 3600.0)
	f.Add(math.NaN(), 0.0, 1, 3, -5.0, 1.0, 2, -1.0)
	f.Add(2441317.5, math.Inf(1), 6, 1, 99.0, math.NaN(), 3, 1e300)
	f.Add(2396758.5, -0.5, 11, 3, 0.0, 0.0, 9, 0.0)
	eph, err := ephemeris.Embedded()
	if err != nil {
		f.Fatal(err)
	}
	converter, err := NewConverter(fastStar, eph)
	if err != nil {
		f.Fatal(err)
	}
	f.Fuzz(func(t *testing.T, day, frac float64, scale, place int, zone, quantum float64, point int, exposure float64) {
		s := Stamp{
			JD: JD{day, frac}, Scale: Scale(scale), Place: Place(place), ZoneHours: zone,
			QuantumDays: quantum, Exposure: ExposurePoint(point), ExposureLengthS: exposure,
		}
		for _, site := range []*Site{nil, &southernSite} {
			e, err := converter.Epoch(s, site)
			if err == nil && !(e.BJD.Float() > 2e6 && e.BJD.Float() < 3e6) {
				t.Fatalf("%+v became %v", s, e.BJD)
			}
		}
	})
}
