package epochs

import (
	_ "embed"
	"errors"
	"fmt"
	"strconv"
	"strings"
	"sync"
)

// ErrDeltaT is returned for a date outside the table of Delta T.
var ErrDeltaT = errors.New("epochs: no value of Delta T")

//go:embed deltat.csv
var deltaTText string

// deltaTTable holds Delta T at first, first + 0.5, first + 1 ... years.
type deltaTTable struct {
	first  float64
	values []float64 // s
}

// loadDeltaT reads the embedded table once. Its text is part of the program,
// so a fault in it is a programming mistake.
var loadDeltaT = sync.OnceValue(func() deltaTTable {
	t := deltaTTable{first: -1}
	for line := range strings.Lines(deltaTText) {
		line = strings.TrimSpace(line)
		if line == "" || strings.HasPrefix(line, "#") {
			continue
		}
		yearText, valueText, _ := strings.Cut(line, ",")
		year, err1 := strconv.ParseFloat(yearText, 64)
		value, err2 := strconv.ParseFloat(valueText, 64)
		if err1 != nil || err2 != nil {
			panic("epochs: the embedded table of Delta T is damaged: " + line)
		}
		if t.first < 0 {
			t.first = year
		}
		if year != t.first+0.5*float64(len(t.values)) {
			panic("epochs: the embedded table of Delta T has a gap before " + yearText)
		}
		t.values = append(t.values, value)
	}
	return t
})

// DeltaT returns TT - UT1 and its standard uncertainty, both in seconds, at a
// Julian date in UT between 1657 and 1984.
//
// The values are the half-yearly ones of the U.S. Naval Observatory (McCarthy
// and Babcock 1986), with straight lines between them. They follow the
// decade-long swings of the Earth's rotation that the smooth spline of
// Stephenson, Morrison and Hohenkerk 2016 leaves out: the two differ by up to
// 2.2 s in 1880-1900, 1.2 s in 1900-1925 and 0.6 s in 1925-1955, and near 1955
// the table joins atomic time, from which the spline is 0.6 s off in 1965. The
// standard uncertainty is of the size of these differences: 2 s before 1900,
// 0.5 s to 1960. Later dates go through UTC and need no Delta T. The error
// wraps ErrDeltaT.
func DeltaT(jd float64) (seconds, sigmaSeconds float64, err error) {
	table := loadDeltaT()
	year := 2000 + (jd-2451544.5)/365.25
	place := (year - table.first) * 2
	last := len(table.values) - 1
	if !(place >= 0 && place <= float64(last)) {
		return 0, 0, fmt.Errorf("%w for JD %.1f; the table holds the years %.0f to %.1f", ErrDeltaT, jd, table.first, table.first+float64(last)/2)
	}
	i := min(int(place), last-1)
	seconds = table.values[i] + (place-float64(i))*(table.values[i+1]-table.values[i])
	return seconds, deltaTSigma(year), nil
}

// deltaTSigma returns the standard uncertainty in seconds.
func deltaTSigma(year float64) float64 {
	switch {
	case year < 1800:
		return 5
	case year < 1900:
		return 2
	default:
		return 0.5
	}
}
