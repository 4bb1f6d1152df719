package epochs

import (
	"bytes"
	"encoding/csv"
	"fmt"
	"math"
	"math/rand/v2"
	"os"
	"os/exec"
	"strconv"
	"testing"
	"time"

	"platemeld/epochs/ephemeris"
)

// crossCase is one random observation: what the reference chain is told, and
// how the stamp is printed.
type crossCase struct {
	star   Star
	site   Site
	clock  JD     // observer's clock on the base scale
	base   string // scale of the reference chain
	place  Place
	deltaT float64
	conv   Convention
	shift  float64 // seconds from the base scale to the printed one
}

// TestAgainstAstropy converts 2,000 random observations of 1885 to 2050 and
// compares BJD_TDB and the relativistic velocity correction with astropy and
// ERFA, run by testdata/reference/astropy_epochs.py. Without python3-astropy it
// is skipped, unless PLATEMELD_CROSSCHECKS=required.
//
// Tolerances: from 1960 on 0.05 ms and 1 cm/s; before, with the same Delta T,
// 0.1 ms and 1 cm/s. ERFA's Earth is good to 13.4 km (45 microseconds) and 4.9
// mm/s at most by its own documentation.
func TestAgainstAstropy(t *testing.T) {
	const python = "/usr/bin/python3"
	if out, err := exec.Command(python, "-c", "import astropy, erfa").CombinedOutput(); err != nil {
		message := fmt.Sprintf("no astropy for %s (Debian: python3-astropy): %v %s", python, err, bytes.TrimSpace(out))
		if os.Getenv("PLATEMELD_CROSSCHECKS") == "required" {
			t.Fatal(message)
		}
		t.Skip(message)
	}
	cases := randomCases(2000)
	answers := askAstropy(t, python, cases)
	eph, err := ephemeris.Embedded()
	if err != nil {
		t.Fatal(err)
	}

	var times, velocities [2]spread
	for i, c := range cases {
		e, v := convertPrinted(t, eph, c, answers[i])
		era := 1
		if c.clock.Float() < utcStart {
			era = 0
		}
		times[era].add(e.BJD.Sub(answers[i].bjd)*SecondsPerDay*1e3, i)
		velocities[era].add(v.Kms*1e5-answers[i].correctionMs*100, i)
	}
	for era, name := range []string{"1885-1960", "1960-2050"} {
		text := fmt.Sprintf("%s: BJD_TDB %v ms, velocity correction %v cm/s", name, &times[era], &velocities[era])
		fmt.Println("against astropy,", text)
		worst := cases[times[era].worst]
		if limit := []float64{0.1, 0.05}[era]; !(times[era].max <= limit) {
			t.Errorf("%s; BJD beyond %g ms, worst: %+v", text, limit, worst)
		}
		worst = cases[velocities[era].worst]
		if !(velocities[era].max <= 1) {
			t.Errorf("%s; velocity beyond 1 cm/s, worst: %+v", text, worst)
		}
		if times[era].count < 500 {
			t.Errorf("only %d cases in %s", times[era].count, name)
		}
	}
}

// spread gathers differences.
type spread struct {
	count, worst int
	squares, max float64
}

func (s *spread) add(difference float64, index int) {
	s.count++
	s.squares += difference * difference
	if !(math.Abs(difference) <= s.max) {
		s.max, s.worst = math.Abs(difference), index
	}
}

func (s *spread) String() string {
	return fmt.Sprintf("rms %.4f, max %.4f (%d cases)", math.Sqrt(s.squares/float64(s.count)), s.max, s.count)
}

func randomCases(n int) []crossCase {
	random := rand.New(rand.NewPCG(1885, 2050))
	between := func(low, high float64) float64 { return low + (high-low)*random.Float64() }
	cases := make([]crossCase, n)
	for i := range cases {
		c := &cases[i]
		c.star = randomStar(between, random.IntN(3))
		c.site = Site{
			LongitudeDeg: between(-180, 180),
			LatitudeDeg:  math.Asin(between(-0.99, 0.99)) / radPerDeg,
			HeightM:      between(0, 5000),
		}
		// JD 2409542.5 is 1885 Jan 1, JD 2469807.5 is 2050 Jan 1.
		c.clock = NewJD(2409542.5+math.Floor(between(0, 60265)), math.Round(between(0, 1)*1e10)/1e10)
		c.place = []Place{PlaceObservatory, PlaceObservatory, PlaceGeocentre, PlaceHeliocentre, PlaceBarycentre}[random.IntN(5)]
		if c.place == PlaceGeocentre {
			c.place = PlaceObservatory // three in five
		}
		c.chooseScale(random)
		c.chooseForm(random)
	}
	return cases
}

// randomStar has no motion, motion without parallax, or all of it.
func randomStar(between func(low, high float64) float64, kind int) Star {
	s := Star{RADeg: between(0, 360), DecDeg: math.Asin(between(-1, 1)) / radPerDeg, EpochJY: 2000}
	if kind == 0 {
		return s
	}
	s.EpochJY = math.Round(between(1900, 2020))
	s.PMRAMasYr, s.PMDecMasYr = between(-700, 700), between(-700, 700)
	if kind == 2 {
		// 0.1 to 750 mas, up to 200 km/s across and along
		s.ParallaxMas = math.Pow(10, between(-1, 2.875))
		speed := s.ParallaxMas / 4.74
		s.PMRAMasYr, s.PMDecMasYr = between(-200, 200)*speed, between(-200, 200)*speed
		s.SystemicKms = between(-200, 200)
	}
	return s
}

func (c *crossCase) chooseScale(random *rand.Rand) {
	type choice struct {
		scale Scale
		base  string
	}
	early := c.clock.Float() < utcStart
	choices := []choice{{ScaleUT1, "ut1"}, {ScaleTAI, "tai"}, {ScaleTT, "tt"}, {ScaleTDB, "tdb"}, {ScaleTCB, "tcb"}}
	if early {
		choices = append(choices, choice{ScaleUT, "ut1"}, choice{ScaleUT, "ut1"}, choice{ScaleGMT, "ut1"})
		if c.place == PlaceObservatory { // no local time at the Sun
			choices = append(choices, choice{ScaleLocalMean, "ut1"}, choice{ScaleZone, "ut1"})
		}
		if c.clock.Float() < 2424151 {
			choices = append(choices, choice{ScaleGMAT, "ut1"}, choice{ScaleGMAT, "ut1"})
		}
	} else {
		choices = append(choices, choice{ScaleUTC, "utc"}, choice{ScaleUTC, "utc"}, choice{ScaleUTC, "utc"}, choice{ScaleUTC, "utc"})
	}
	chosen := choices[random.IntN(len(choices))]
	c.base = chosen.base
	c.conv = Convention{Scale: chosen.scale, Place: c.place}
	switch chosen.scale {
	case ScaleLocalMean:
		c.shift = c.site.LongitudeHours() * 3600
	case ScaleZone:
		c.conv.ZoneHours = float64(random.IntN(25) - 12)
		c.shift = c.conv.ZoneHours * 3600
	}
	if early {
		c.deltaT, _, _ = DeltaT(c.clock.Float())
	}
}

func (c *crossCase) chooseForm(random *rand.Rand) {
	forms := []Form{FormJD, FormJD, FormMJD, FormISO, FormCivil, FormFields}
	c.conv.Form = forms[random.IntN(len(forms))]
	month := time.Unix(0, 0).UTC().Add(time.Duration(c.clock.Sub(NewJD(2440587, 0.5))*24) * time.Hour)
	monthEnd := month.Day() >= 30 || month.Day() == 1
	if c.base == "utc" && monthEnd {
		c.conv.Form = FormJD // a leap second may stretch the day: keep to the Julian date
	}
	switch c.conv.Form {
	case FormJD:
		offsets := []string{"", "2400000", "2400000.5", "2440000"}
		if c.clock.Float() < 2440001 { // no negative numbers
			offsets = offsets[:3]
		}
		c.conv.Offset = offsets[random.IntN(len(offsets))]
	case FormISO, FormCivil, FormFields:
		if c.conv.Scale == ScaleGMT {
			c.conv.DayStart = []DayStart{DayStartMidnight, DayStartNoon}[random.IntN(2)]
		}
	}
	if c.conv.Scale == ScaleGMT && c.conv.DayStart == DayStartUnstated {
		c.conv.DayStart = DayStartMidnight // a Julian date does not depend on it
	}
}

// answer is what the reference chain says of one case.
type answer struct {
	stamp, bjd   JD
	correctionMs float64
}

func askAstropy(t *testing.T, python string, cases []crossCase) []answer {
	t.Helper()
	var in bytes.Buffer
	fmt.Fprintln(&in, "ra,dec,epoch,pmra,pmdec,parallax,rv,lon,lat,height,scale,day,frac,place,deltat")
	for _, c := range cases {
		s, o := c.star, c.site
		fmt.Fprintf(&in, "%v,%v,%v,%v,%v,%v,%v,%v,%v,%v,%s,%v,%v,%v,%v\n", s.RADeg, s.DecDeg, s.EpochJY, s.PMRAMasYr, s.PMDecMasYr,
			s.ParallaxMas, s.SystemicKms, o.LongitudeDeg, o.LatitudeDeg, o.HeightM, c.base, c.clock.Day, c.clock.Frac, c.place, c.deltaT)
	}
	command := exec.Command(python, "../testdata/reference/astropy_epochs.py")
	command.Stdin = &in
	var complaints bytes.Buffer
	command.Stderr = &complaints
	out, err := command.Output()
	if err != nil {
		t.Fatalf("the reference chain failed: %v\n%s", err, &complaints)
	}
	lines, err := csv.NewReader(bytes.NewReader(out)).ReadAll()
	if err != nil || len(lines) != len(cases)+1 {
		t.Fatalf("the reference chain gave %d lines for %d cases: %v", len(lines), len(cases), err)
	}
	answers := make([]answer, len(cases))
	for i, line := range lines[1:] {
		var numbers [6]float64
		for j, text := range line {
			if numbers[j], err = strconv.ParseFloat(text, 64); err != nil {
				t.Fatal(err)
			}
		}
		answers[i] = answer{NewJD(numbers[0], numbers[1]), NewJD(numbers[2], numbers[3]), numbers[4]}
	}
	return answers
}

// convertPrinted prints the stamp as its convention would, reads it back and
// converts it; the velocity correction is that of a star seen at rest.
func convertPrinted(t *testing.T, eph Ephemeris, c crossCase, a answer) (Epoch, BarycentricVelocity) {
	t.Helper()
	fail := func(err error) {
		t.Helper()
		if err != nil {
			t.Fatalf("%v: %+v", err, c)
		}
	}
	reader, err := c.conv.NewStampReader()
	fail(err)
	var stamp Stamp
	printed := a.stamp.AddSeconds(c.shift)
	if c.conv.Form == FormFields {
		stamp, err = reader.ReadFields(printedFields(printed, c.conv))
	} else {
		stamp, err = reader.Read(printedStamp(printed, c.conv))
	}
	fail(err)
	converter, err := NewConverter(c.star, eph)
	fail(err)
	e, err := converter.Epoch(stamp, &c.site)
	fail(err)
	v, err := converter.BarycentricVelocity(PublishedVelocity{}, e, &c.site)
	fail(err)
	return e, v
}

func printedStamp(jd JD, conv Convention) string {
	switch conv.Form {
	case FormJD:
		offset, _ := strconv.ParseFloat("0"+conv.Offset, 64)
		return without(jd, offset).Text(13)
	case FormMJD:
		return without(jd, 2400000.5).Text(13)
	case FormISO:
		day, seconds := splitDay(jd, conv)
		hour := math.Floor(seconds / 3600)
		minute := math.Floor((seconds - hour*3600) / 60)
		return fmt.Sprintf("%sT%02.0f:%02.0f:%011.8f", day.Format("2006-01-02"), hour, minute, seconds-hour*3600-minute*60)
	}
	day, seconds := splitDay(jd, conv)
	return day.Format("2006 Jan ") + strconv.FormatFloat(float64(day.Day())+seconds/SecondsPerDay, 'f', 13, 64)
}

// without takes off an offset part by part: Add would round the fraction.
func without(jd JD, offset float64) JD {
	whole := math.Floor(offset)
	return NewJD(jd.Day-whole, jd.Frac-(offset-whole))
}

func printedFields(jd JD, conv Convention) Fields {
	day, seconds := splitDay(jd, conv)
	hour := math.Floor(seconds / 3600)
	minute := math.Floor((seconds - hour*3600) / 60)
	return Fields{
		Year: day.Format("2006"), Month: day.Format("Jan."), Day: day.Format("2"),
		Hour: fmt.Sprintf("%.0f", hour), Minute: fmt.Sprintf("%.0f", minute),
		Second: fmt.Sprintf("%.8f", seconds-hour*3600-minute*60),
	}
}

// splitDay splits a Julian date into the Gregorian day of its convention and
// the seconds since that day began, rounded to what is printed.
func splitDay(jd JD, conv Convention) (day time.Time, seconds float64) {
	fromStart := jd.Sub(NewJD(2440587, 0.5))
	if conv.Scale == ScaleGMAT || conv.DayStart == DayStartNoon {
		fromStart -= 0.5
	}
	whole := math.Floor(fromStart)
	// The remainder from the two parts, not from their large difference.
	seconds = math.Mod(jd.Frac+0.5, 1) * SecondsPerDay
	if conv.Scale == ScaleGMAT || conv.DayStart == DayStartNoon {
		seconds = math.Mod(jd.Frac+1, 1) * SecondsPerDay
	}
	return time.Unix(int64(whole)*86400, 0).UTC(), math.Floor(seconds*1e7) / 1e7
}
