package harmonize_test

import (
	"context"
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"platemeld/harmonize"
	"platemeld/harmonize/plan"
)

// realFolder returns the folder of published velocities of a real star, which
// lies beside the project and never in it.
func realFolder(t *testing.T, star string) string {
	t.Helper()
	folder, err := filepath.Abs(filepath.Join("..", "..", "shared", "real", star))
	if err != nil {
		t.Fatal(err)
	}
	if _, err := os.Stat(folder); err != nil {
		t.Skipf("the published velocities of %s are not beside this checkout (%v)", star, err)
	}
	return folder
}

// mergeText merges a plan given as text; FOLDER in it stands for folder.
func mergeText(t *testing.T, folder, text string) *harmonize.Series {
	t.Helper()
	p, err := plan.Parse("real.toml", []byte(strings.ReplaceAll(text, "FOLDER", folder)))
	if err != nil {
		t.Fatal(err)
	}
	series, err := harmonize.Merge(context.Background(), p, nil)
	if err != nil {
		t.Fatal(err)
	}
	return series
}

const plan51Peg = `
[star]
name = "51 Peg"
ra = "22 57 27.98"
dec = "+20 46 07.8"
pm_ra = 207.4
pm_dec = 61.9
parallax = 64.6
systemic_velocity = -33.2
[[instrument]]
name = "ELODIE"
[[instrument]]
name = "HARPS"
[[instrument]]
name = "HIRES"
[[instrument]]
name = "Lick6"
[[instrument]]
name = "Lick8"
[[instrument]]
name = "Lick13"
[[source]]
name = "table1"
file = "FOLDER/table1.dat"
readme = "FOLDER/ReadMe"
reference = "Birkby et al. 2017, AJ 153, 138 (CDS J/AJ/153/138)"
columns = {time = "BJD", velocity = "RV", error = "e_RV", instrument = "Set"}
time = {form = "jd", scale = "tdb", place = "barycentre"}
velocity = {frame = "barycentric"}
[fit]
trend = 1
period_range = [2.0, 20.0]
gauge = "mean"
`

// Test51Peg merges six data sets published together in one fixed-width table
// with its byte-by-byte ReadMe. The unit is the ReadMe's. Against the offsets
// that the authors published with the table (added to the velocities, so of
// the opposite sign), the period in the ReadMe and the semi-amplitude of an
// independent REML fit (55.1 km/s +- 0.2 m/s).
func Test51Peg(t *testing.T) {
	series := mergeText(t, realFolder(t, "51peg"), plan51Peg)
	published := map[string]float64{ // m/s, to be added
		"Lick13": -21.70, "Lick8": -4.52, "Lick6": -14.64, "ELODIE": 33251.59, "HIRES": 2.24, "HARPS": 33152.54,
	}
	// The common level is the gauge's and not data: compare after taking out
	// the mean difference, weighted as the zero points are known.
	var sum, weights float64
	for i, z := range series.ZeroPoints {
		fit := series.Solution.ZeroPoints[i]
		w := 1 / (fit.SigmaKms*fit.SigmaKms + 1e-9)
		sum += w * (fit.Kms*1000 + published[z.Name])
		weights += w
	}
	level := sum / weights
	for i, z := range series.ZeroPoints {
		fit := series.Solution.ZeroPoints[i]
		off := fit.Kms*1000 + published[z.Name] - level
		t.Logf("%-8s zero point %+11.2f +- %.2f m/s, off the published by %+.2f; jitter %.2f m/s", z.Name, fit.Kms*1000, fit.SigmaKms*1000, off, fit.JitterKms*1000)
		if !(math.Abs(off) <= 4) {
			t.Errorf("the zero point of %s is %.2f m/s from the published one", z.Name, off)
		}
	}
	if got := series.Solution.PeriodDays; !(math.Abs(got-4.2307869) <= 0.0001) {
		t.Errorf("period %.6f d, published 4.2307869 d", got)
	}
	k := 0.0
	for _, term := range series.Solution.Terms {
		if term.Name == "harmonic 1, semi-amplitude" {
			k = term.Value * 1000
		}
	}
	t.Logf("period %.7f +- %.7f d, semi-amplitude %.2f m/s", series.Solution.PeriodDays, series.Solution.PeriodSigmaDays, k)
	if !(k >= 54.5 && k <= 55.8) {
		t.Errorf("semi-amplitude %.2f m/s, want 54.5 to 55.8", k)
	}
}

const planHD154345 = `
[star]
name = "HD 154345"
ra = "17 02 36.40"
dec = "+47 04 54.8"
pm_ra = 123.3
pm_dec = 853.6
parallax = 54.7
systemic_velocity = -46.9
[[instrument]]
name = "2007 reduction"
spectrograph = "S"
[[instrument]]
name = "2008 reduction"
spectrograph = "S"
[[instrument]]
name = "2017 reduction"
spectrograph = "S"
[[instrument]]
name = "2021 reduction, first detector"
spectrograph = "S"
aliases = ["k"]
[[instrument]]
name = "2021 reduction, second detector"
spectrograph = "S"
aliases = ["j"]
[[source]]
name = "2007"
file = "FOLDER/wright2007.txt"
year = 2007
reference = "Wright et al. 2007, ApJ 657, 533"
instrument = "2007 reduction"
columns = {time = "jd", velocity = "rv", error = "e_rv"}
time = {form = "jd", offset = 2440000}
velocity = {frame = "barycentric", unit = "m/s"}
[[source]]
name = "2008"
file = "FOLDER/wright2008.txt"
year = 2008
reference = "Wright et al. 2008, ApJ 683, L63"
instrument = "2008 reduction"
columns = {time = "jd", velocity = "rv", error = "e_rv"}
time = {form = "jd", offset = 2440000}
velocity = {frame = "barycentric", unit = "m/s"}
[[source]]
name = "2017"
file = "FOLDER/butler2017.csv"
year = 2017
reference = "Butler et al. 2017, AJ 153, 208"
instrument = "2017 reduction"
columns = {time = "BJD", velocity = "RV", error = "e_RV"}
time = {form = "jd"}
velocity = {frame = "barycentric", unit = "m/s"}
[[source]]
name = "2021"
file = "FOLDER/hirsch2021.csv"
year = 2021
means = true
reference = "Hirsch et al. 2021, AJ 161, 134"
columns = {time = "_tab3_3", velocity = "RVel", error = "e_RVel", instrument = "Inst"}
time = {form = "jd"}
velocity = {frame = "barycentric", unit = "m/s"}
[duplicates]
within_days = WITHIN
[fit]
period_range = [1500.0, 8000.0]
reference_instrument = "2021 reduction, second detector"
`

// TestHD154345 merges four papers that publish in part the same exposures of
// one spectrograph, the last as means of a night. The counts of rows whose
// times agree were made by a separate count over the four files: within
// 0.0002 d of a row of a better paper 52 of 2017, 42 of 2008 and 30 of 2007;
// within 0.01 d 121 of 2017 belong to a mean of 2021, and no row of 2007 or
// 2008 is left.
//
// All four tables print the times of one correction, so reading them all on
// one scale and place, whichever, keeps them comparable.
func TestHD154345(t *testing.T) {
	folder := realFolder(t, "hd154345")
	tests := []struct {
		within string
		want   map[[2]string]int
	}{
		{"0.0002", map[[2]string]int{{"2017", "2021"}: 52, {"2008", "2021"}: 37, {"2008", "2017"}: 5, {"2007", "2021"}: 27, {"2007", "2008"}: 1, {"2007", "2017"}: 2}},
		{"0.01", map[[2]string]int{{"2017", "2021"}: 121}},
	}
	for _, test := range tests {
		t.Run(test.within, func(t *testing.T) {
			series := mergeText(t, folder, strings.Replace(planHD154345, "WITHIN", test.within, 1))
			got := map[[2]string]int{}
			for _, d := range series.Duplicates {
				got[[2]string{d.SetAside, d.Used}] = d.Rows
				t.Logf("%3d rows of %s: the exposure is used from %s", d.Rows, d.SetAside, d.Used)
			}
			for pair, n := range test.want {
				if got[pair] != n {
					t.Errorf("%d rows of %s give way to %s, want %d", got[pair], pair[0], pair[1], n)
				}
			}
			t.Logf("%d rows in, %d merged", len(series.Measurements), len(series.Rows))
			for i, z := range series.ZeroPoints {
				fit := series.Solution.ZeroPoints[i]
				t.Logf("%-32s %3d rows, zero point %+.2f +- %.2f m/s, jitter %.2f m/s", z.Name, fit.Rows, fit.Kms*1000, fit.SigmaKms*1000, fit.JitterKms*1000)
			}
		})
	}
}
