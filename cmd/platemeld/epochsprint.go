package main

import (
	"bufio"
	"encoding/json"
	"fmt"
	"math"
	"strconv"
	"strings"

	"platemeld/epochs"
)

// epochDecimals prints a BJD_TDB to 1e-9 d, about 0.1 ms.
const epochDecimals = 9

// writer returns what prints one converted stamp in the form that was asked
// for, heading first.
func (o *epochsOptions) writer(out *bufio.Writer) func(string, epochs.Epoch, epochs.BarycentricVelocity) error {
	switch {
	case o.json:
		return jsonLines(out)
	case o.csv:
		return csvLines(out)
	case o.itemise:
		return func(text string, e epochs.Epoch, v epochs.BarycentricVelocity) error { return itemise(out, text, e, v) }
	}
	return o.tableLines(out)
}

func (o *epochsOptions) tableLines(out *bufio.Writer) func(string, epochs.Epoch, epochs.BarycentricVelocity) error {
	begun := false
	return func(text string, e epochs.Epoch, _ epochs.BarycentricVelocity) error {
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

// csvLines builds each line in one buffer: a million stamps leave nothing to
// collect.
func csvLines(out *bufio.Writer) func(string, epochs.Epoch, epochs.BarycentricVelocity) error {
	line := []byte("stamp,bjd_tdb,error_s,remarks\n")
	return func(text string, e epochs.Epoch, _ epochs.BarycentricVelocity) error {
		line = appendCell(line, text)
		line = append(line, ',')
		line = e.BJD.AppendText(line, epochDecimals)
		line = append(line, ',')
		line = strconv.AppendFloat(line, e.SigmaDays*epochs.SecondsPerDay, 'f', 6, 64)
		line = append(line, ',')
		if e.Flags != 0 {
			line = appendCell(line, e.Flags.String())
		}
		line = append(line, '\n')
		_, err := out.Write(line)
		line = line[:0]
		return err
	}
}

// appendCell appends a cell of comma-separated values (RFC 4180), in quotation
// marks where it needs them.
func appendCell(line []byte, text string) []byte {
	if !strings.ContainsAny(text, ",\"\r\n") {
		return append(line, text...)
	}
	line = append(line, '"')
	line = append(line, strings.ReplaceAll(text, `"`, `""`)...)
	return append(line, '"')
}

// epochLine is the machine form of one converted stamp. Dates are text, so
// that no reader rounds them.
type epochLine struct {
	Stamp        string  `json:"stamp"`
	BJDTDB       string  `json:"bjd_tdb"`
	ErrorS       float64 `json:"error_s"`
	ObserverTT   string  `json:"observer_tt_jd"`
	Terms        terms   `json:"terms_s"`
	CorrectionMs float64 `json:"velocity_correction_ms"`
	Remarks      string  `json:"remarks"`
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

func jsonLines(out *bufio.Writer) func(string, epochs.Epoch, epochs.BarycentricVelocity) error {
	encoder := json.NewEncoder(out)
	return func(text string, e epochs.Epoch, v epochs.BarycentricVelocity) error {
		t := e.Terms
		return encoder.Encode(epochLine{text, e.BJD.Text(epochDecimals), e.SigmaDays * epochs.SecondsPerDay, e.ObserverTT.Text(epochDecimals),
			terms{t.DeltaTS, t.TDBMinusTTS, t.RoemerSunS, t.RoemerBarycentreS, t.CurvatureS, t.ShapiroS, t.SiteS}, v.Kms * 1e3, e.Flags.String()})
	}
}

// itemise prints every step from the stamp to BJD_TDB.
func itemise(out *bufio.Writer, text string, e epochs.Epoch, v epochs.BarycentricVelocity) error {
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
	velocity := func(name string, ms float64) { fmt.Fprintf(out, "  %-44s %+17.3f m/s\n", name, ms) }
	velocity("velocity correction: orbit of the Earth", v.Terms.OrbitMs)
	velocity("rotation of the Earth", v.Terms.RotationMs)
	velocity("relativity (time dilation, gravity)", v.Terms.RelativityMs)
	velocity("all, to be combined as (1+z) factors", v.Kms*1e3)
	velocity("for comparison, the Sun's own motion", v.SunAlongSightMs)
	if e.SigmaDays > 0 && !math.IsNaN(e.SigmaDays) {
		fmt.Fprintf(out, "  %-44s %17.6f s\n", "standard uncertainty", e.SigmaDays*epochs.SecondsPerDay)
	}
	if remarks := e.Flags.String(); remarks != "" {
		fmt.Fprintf(out, "  remarks: %s\n", remarks)
	}
	return nil
}
