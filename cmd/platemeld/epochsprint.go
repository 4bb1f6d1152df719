package main

import (
	"bufio"
	"encoding/csv"
	"encoding/json"
	"fmt"
	"math"

	"platemeld/epochs"
)

// epochDecimals prints a BJD_TDB to 1e-9 d, about 0.1 ms.
const epochDecimals = 9

// writer returns what prints one converted stamp in the form that was asked
// for, heading first.
func (o *epochsOptions) writer(out *bufio.Writer) func(text string, e epochs.Epoch) error {
	switch {
	case o.json:
		return jsonLines(out)
	case o.csv:
		return csvLines(out)
	case o.itemise:
		return func(text string, e epochs.Epoch) error { return itemise(out, text, e) }
	}
	return o.tableLines(out)
}

func (o *epochsOptions) tableLines(out *bufio.Writer) func(string, epochs.Epoch) error {
	begun := false
	return func(text string, e epochs.Epoch) error {
		if !begun {
			begun = true
			heading := fmt.Sprintf("%-32s %17s", "stamp", "BJD_TDB")
			if o.uncertainty {
				heading += fmt.Sprintf(" %10s", "+- s")
			}
			fmt.Fprintln(out, heading+"  remarks")
		}
		fmt.Fprintf(out, "%-32s %17s", text, e.BJD.Text(epochDecimals))
		if o.uncertainty {
			fmt.Fprintf(out, " %10.4f", e.SigmaDays*epochs.SecondsPerDay)
		}
		if remarks := e.Flags.String(); remarks != "" {
			fmt.Fprint(out, "  "+remarks)
		}
		return out.WriteByte('\n')
	}
}

func csvLines(out *bufio.Writer) func(string, epochs.Epoch) error {
	lines := csv.NewWriter(out)
	begun := false
	return func(text string, e epochs.Epoch) error {
		if !begun {
			begun = true
			if err := lines.Write([]string{"stamp", "bjd_tdb", "error_s", "remarks"}); err != nil {
				return err
			}
		}
		err := lines.Write([]string{text, e.BJD.Text(epochDecimals), fmt.Sprintf("%.6f", e.SigmaDays*epochs.SecondsPerDay), e.Flags.String()})
		lines.Flush() // into out, which is flushed at the end
		if err == nil {
			err = lines.Error()
		}
		return err
	}
}

// epochLine is the machine form of one converted stamp. Dates are text, so
// that no reader rounds them.
type epochLine struct {
	Stamp      string  `json:"stamp"`
	BJDTDB     string  `json:"bjd_tdb"`
	ErrorS     float64 `json:"error_s"`
	ObserverTT string  `json:"observer_tt_jd"`
	Terms      terms   `json:"terms_s"`
	Remarks    string  `json:"remarks"`
}

type terms struct {
	DeltaT           float64 `json:"delta_t"`
	TDBMinusTT       float64 `json:"tdb_minus_tt"`
	RoemerSun        float64 `json:"roemer_sun"`
	RoemerBarycentre float64 `json:"roemer_barycentre"`
	Curvature        float64 `json:"curvature"`
	Shapiro          float64 `json:"shapiro"`
	Site             float64 `json:"site"`
}

func jsonLines(out *bufio.Writer) func(string, epochs.Epoch) error {
	encoder := json.NewEncoder(out)
	return func(text string, e epochs.Epoch) error {
		t := e.Terms
		return encoder.Encode(epochLine{text, e.BJD.Text(epochDecimals), e.SigmaDays * epochs.SecondsPerDay, e.ObserverTT.Text(epochDecimals),
			terms{t.DeltaTS, t.TDBMinusTTS, t.RoemerSunS, t.RoemerBarycentreS, t.CurvatureS, t.ShapiroS, t.SiteS}, e.Flags.String()})
	}
}

// itemise prints every step from the stamp to BJD_TDB.
func itemise(out *bufio.Writer, text string, e epochs.Epoch) error {
	t := e.Terms
	fmt.Fprintf(out, "%s\n", text)
	line := func(name string, seconds float64) {
		fmt.Fprintf(out, "  %-44s %+17.6f s\n", name, seconds)
	}
	if t.DeltaTS != 0 {
		line("Delta T (TT - UT), contained in the next", t.DeltaTS)
	}
	line("TT - stamp, clock only", t.TTMinusStampS)
	fmt.Fprintf(out, "  %-44s %17s JD\n", "TT at the observer", e.ObserverTT.Text(epochDecimals))
	line("TDB - TT (Einstein)", t.TDBMinusTTS)
	line("light time to the Sun (Roemer), for comparison", t.RoemerSunS)
	line("light time to the barycentre (Roemer)", t.RoemerBarycentreS)
	line("of it from the observer's place on Earth", t.SiteS)
	line("curvature of the wave front", t.CurvatureS)
	line("Shapiro delay of the Sun", t.ShapiroS)
	fmt.Fprintf(out, "  %-44s %17s JD\n", "BJD_TDB", e.BJD.Text(epochDecimals))
	if e.SigmaDays > 0 && !math.IsNaN(e.SigmaDays) {
		fmt.Fprintf(out, "  %-44s %17.6f s\n", "standard uncertainty", e.SigmaDays*epochs.SecondsPerDay)
	}
	if remarks := e.Flags.String(); remarks != "" {
		fmt.Fprintf(out, "  remarks: %s\n", remarks)
	}
	return nil
}
