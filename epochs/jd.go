package epochs

import (
	"math"
	"strconv"
	"strings"
)

// JD is a Julian date held in two parts whose sum is the date, so that no
// step of a conversion loses digits: near J2000 a single float64 steps by 40
// microseconds, the two parts resolve better than 0.01 ns.
//
// A JD made by NewJD has a whole-numbered Day and a Frac in [-0.5, 0.5). The
// zero value is JD 0 (noon of 1 January 4713 BC, Julian calendar). JD itself
// names no time scale: UTC, TT and the other scale types below wrap it.
type JD struct {
	Day  float64 // whole number of days
	Frac float64 // remainder in days
}

// NewJD returns the sum of two numbers of days, normalised without loss.
func NewJD(a, b float64) JD {
	wholeA, wholeB := math.RoundToEven(a), math.RoundToEven(b) // one instruction each
	fraction := (a - wholeA) + (b - wholeB)
	carry := math.Floor(fraction + 0.5)
	return JD{Day: wholeA + wholeB + carry, Frac: fraction - carry}
}

// Float returns the Julian date as one float64, with a step of 40
// microseconds near J2000.
func (d JD) Float() float64 { return d.Day + d.Frac }

// Add returns d moved by a number of days, of which whole days go to the
// whole part: an offset of 2400000 leaves every digit of the fraction.
func (d JD) Add(days float64) JD {
	whole := math.RoundToEven(days)
	return NewJD(d.Day+whole, d.Frac+(days-whole))
}

// AddSeconds returns d moved by a number of seconds of 86400 to the day.
func (d JD) AddSeconds(s float64) JD { return d.Add(s / SecondsPerDay) }

// Sub returns d - other in days.
func (d JD) Sub(other JD) float64 { return (d.Day - other.Day) + (d.Frac - other.Frac) }

// Text returns the date in decimal digits with the given number of decimals,
// 0 to 15, rounded half to even on the exact binary value of the two parts.
func (d JD) Text(decimals int) string {
	return string(d.AppendText(nil, decimals))
}

// AppendText appends to dst what Text returns, and returns the longer slice.
func (d JD) AppendText(dst []byte, decimals int) []byte {
	if decimals < 0 || decimals > 15 {
		panic("epochs: a date has 0 to 15 decimals")
	}
	d = NewJD(d.Day, d.Frac)
	if !d.IsFinite() || d.Day < 1 || d.Day > 1e15 {
		return append(dst, strings.TrimPrefix(strconv.FormatFloat(d.Float(), 'f', decimals, 64), zeroSign(d, decimals))...)
	}
	scale := powersOfTen[decimals]
	product := float64(d.Frac * scale)
	lost := math.FMA(d.Frac, scale, -product) // product + lost is exact
	units := math.RoundToEven(product)
	switch rest := product - units; {
	case rest == 0.5 && lost > 0:
		units++
	case rest == -0.5 && lost < 0:
		units--
	case decimals == 0 && product == -0.5 && math.Mod(d.Day, 2) != 0:
		units-- // half way between two days: the day before is the even one
	}
	day := int64(d.Day)
	if units < 0 {
		day, units = day-1, units+scale
	}
	if units >= scale {
		day, units = day+1, units-scale
	}
	dst = strconv.AppendInt(dst, day, 10)
	if decimals == 0 {
		return dst
	}
	dst = append(dst, '.')
	var buffer [16]byte
	digits := strconv.AppendInt(buffer[:0], int64(units), 10)
	for range decimals - len(digits) {
		dst = append(dst, '0')
	}
	return append(dst, digits...)
}

// zeroSign returns the minus sign that d would be printed with although all
// of its digits are zero, else "".
func zeroSign(d JD, decimals int) string {
	if d.Float() < 0 && -d.Float()*powersOfTen[decimals] <= 0.5 {
		return "-"
	}
	return ""
}

// powersOfTen holds 10^0 to 10^15, each exact in a float64.
var powersOfTen = [16]float64{1, 1e1, 1e2, 1e3, 1e4, 1e5, 1e6, 1e7, 1e8, 1e9, 1e10, 1e11, 1e12, 1e13, 1e14, 1e15}

// IsFinite reports whether both parts are finite numbers.
func (d JD) IsFinite() bool {
	return !math.IsNaN(d.Day+d.Frac) && !math.IsInf(d.Day, 0) && !math.IsInf(d.Frac, 0)
}

// SecondsPerDay is the length of a day of any uniform scale, in its seconds.
const SecondsPerDay = 86400.0

// The time scales. Each type is a Julian date on that scale; the methods
// that lead from one to another are the only way across.
type (
	// UTC is Coordinated Universal Time as a quasi Julian date: on a day
	// that ends with a leap second the day is stretched to 86401 s, the
	// convention of ERFA's eraUtctai. Before 1960 it does not exist.
	UTC struct{ JD }
	// UT1 is Universal Time, the rotation angle of the Earth; for dates
	// before 1960 also what was printed as G.M.T. or U.T.
	UT1 struct{ JD }
	// TAI is International Atomic Time.
	TAI struct{ JD }
	// TT is Terrestrial Time (before 1984 Ephemeris Time, "ET").
	TT struct{ JD }
	// TDB is Barycentric Dynamical Time (IAU 2006 Resolution B3).
	TDB struct{ JD }
	// TCB is Barycentric Coordinate Time.
	TCB struct{ JD }
)
