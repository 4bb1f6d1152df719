package harmonize_test

import (
	"context"
	"encoding/json"
	"math"
	"os"
	"strconv"
	"strings"
	"testing"

	"platemeld/epochs"
	"platemeld/harmonize"
	"platemeld/harmonize/plan"
)

// demoTruth is testdata/demo/truth.json: what the script that made the demo
// planted, with every date and velocity converted by ERFA.
type demoTruth struct {
	ReferenceInstrument string `json:"reference_instrument"`
	Instruments         map[string]struct {
		ZeroPointKms float64 `json:"zero_point_kms"`
		JitterKms    float64 `json:"jitter_kms"`
	} `json:"instruments"`
	Rows []demoRow `json:"rows"`
}

type demoRow struct {
	Source         string  `json:"source"`
	Row            int     `json:"row"`
	BJDTDB         string  `json:"bjd_tdb"`
	BarycentricKms float64 `json:"barycentric_kms"`
	Outlier        bool    `json:"outlier"`
	SetAside       string  `json:"set_aside"`
	DuplicateOf    *struct {
		Source string `json:"source"`
		Row    int    `json:"row"`
	} `json:"duplicate_of"`
}

func (r demoRow) id() string { return r.Source + ":" + strconv.Itoa(r.Row) }

func readDemo(t *testing.T) (*harmonize.Series, demoTruth) {
	t.Helper()
	var truth demoTruth
	text, err := os.ReadFile("../testdata/demo/truth.json")
	if err != nil {
		t.Fatal(err)
	}
	if err := json.Unmarshal(text, &truth); err != nil {
		t.Fatal(err)
	}
	p, err := plan.Load("../testdata/demo/plan.toml")
	if err != nil {
		t.Fatal(err)
	}
	series, err := harmonize.Merge(context.Background(), p, nil)
	if err != nil {
		t.Fatal(err)
	}
	return series, truth
}

// parseBJD reads a decimal date exactly into two parts.
func parseBJD(t *testing.T, text string) epochs.JD {
	t.Helper()
	whole, fraction, _ := strings.Cut(text, ".")
	day, err1 := strconv.ParseFloat(whole, 64)
	part, err2 := strconv.ParseFloat("0."+fraction, 64)
	if err1 != nil || err2 != nil {
		t.Fatalf("the date %q of the truth is unreadable", text)
	}
	return epochs.NewJD(day, part)
}

// TestDemo runs the main job on the demo and holds it against what ERFA, an
// independent implementation, made of the same printed digits. The limits:
// 0.1 ms from 1960, where both chains use TAI; 1 ms before, where both
// interpolate the same table of Delta T; 2 cm/s.
func TestDemo(t *testing.T) {
	series, truth := readDemo(t)
	if got, want := len(series.Measurements), len(truth.Rows); got != want {
		t.Errorf("%d rows read, %d rows were printed", got, want)
	}
	byID := map[string]*harmonize.Measurement{}
	for i := range series.Measurements {
		m := &series.Measurements[i]
		byID[m.ID(series.Plan)] = m
	}
	weight := map[*harmonize.Measurement]float64{}
	for _, row := range series.Rows {
		weight[&series.Measurements[row.Measurement]] = row.RobustWeight
	}
	const year1960 = 2436934.5
	var worstEarly, worstLate, worstKms float64 // days, days, km/s
	outliers := 0
	for _, row := range truth.Rows {
		m := byID[row.id()]
		if m == nil {
			t.Errorf("%s was not read", row.id())
			continue
		}
		checkFate(t, series, row, m)
		if m.ZeroPoint < 0 || row.BJDTDB == "" {
			continue
		}
		want := parseBJD(t, row.BJDTDB)
		apart := math.Abs(m.Epoch.BJD.Sub(want))
		limit := 0.1e-3 / 86400
		if want.Float() < year1960 {
			limit, worstEarly = 1e-3/86400, math.Max(worstEarly, apart)
		} else {
			worstLate = math.Max(worstLate, apart)
		}
		if !(apart <= limit) {
			t.Errorf("%s: BJD_TDB %s, ERFA gives %s, %.3f ms apart", row.id(), m.Epoch.BJD.Text(10), row.BJDTDB, apart*86400e3)
		}
		off := math.Abs(m.Velocity.Kms - row.BarycentricKms)
		worstKms = math.Max(worstKms, off)
		if !(off <= 2e-5) {
			t.Errorf("%s: barycentric velocity %.6f km/s, ERFA gives %.6f", row.id(), m.Velocity.Kms, row.BarycentricKms)
		}
		if row.Outlier && m.Fate == harmonize.FateMerged {
			outliers++
			if !(weight[m] < 0.5) {
				t.Errorf("%s is a planted outlier and has the robust weight %.3f", row.id(), weight[m])
			}
		}
	}
	t.Logf("%d rows; BJD_TDB apart at most %.4f ms before 1960, %.4f ms from 1960; velocity at most %.3f cm/s; %d outliers merged",
		len(truth.Rows), worstEarly*86400e3, worstLate*86400e3, worstKms*1e5, outliers)
	checkDemoZeroPoints(t, series, truth)
}

// checkFate: what was planted to be set aside or repeated is, and nothing
// else.
func checkFate(t *testing.T, series *harmonize.Series, row demoRow, m *harmonize.Measurement) {
	t.Helper()
	want := harmonize.FateMerged
	if row.DuplicateOf != nil {
		want = harmonize.FateDuplicate
	}
	if row.SetAside != "" {
		want = harmonize.FateSetAside
	}
	if m.Fate != want {
		t.Errorf("%s is %s (%s), want %s", row.id(), m.Fate, m.Reason, want)
		return
	}
	if row.DuplicateOf != nil {
		used := series.Measurements[m.DuplicateOf].ID(series.Plan)
		if planted := row.DuplicateOf.Source + ":" + strconv.Itoa(row.DuplicateOf.Row); used != planted {
			t.Errorf("%s repeats %s, but %s is used for it", row.id(), planted, used)
		}
	}
}

// checkDemoZeroPoints: each within 3 of its own standard errors of what was
// planted, and together as far off as their errors say.
func checkDemoZeroPoints(t *testing.T, series *harmonize.Series, truth demoTruth) {
	t.Helper()
	sum, n := 0.0, 0
	for i, z := range series.ZeroPoints {
		planted, ok := truth.Instruments[z.Name]
		if !ok {
			t.Errorf("the truth knows no instrument %q", z.Name)
			continue
		}
		fit := series.Solution.ZeroPoints[i]
		if !fit.Anchored {
			t.Errorf("%s is called unanchored", z.Name)
			continue
		}
		if z.Name == truth.ReferenceInstrument {
			if fit.Kms != 0 {
				t.Errorf("the reference instrument has the zero point %v", fit.Kms)
			}
			continue
		}
		pull := (fit.Kms - planted.ZeroPointKms) / fit.SigmaKms
		t.Logf("%-24s zero point %+.4f +- %.4f, planted %+.4f, pull %+.2f; jitter %.4f, planted %.4f",
			z.Name, fit.Kms, fit.SigmaKms, planted.ZeroPointKms, pull, fit.JitterKms, planted.JitterKms)
		if !(math.Abs(pull) <= 3) {
			t.Errorf("the zero point of %s is %.1f standard errors off", z.Name, pull)
		}
		sum += pull * pull
		n++
	}
	reduced := sum / float64(n)
	t.Logf("reduced chi-square of %d pulls: %.3f", n, reduced)
	if !(reduced >= 0.5 && reduced <= 1.6) {
		t.Errorf("reduced chi-square of the pulls is %.3f, want 0.5 to 1.6", reduced)
	}
}
