package epochs

import (
	"regexp"
	"strconv"
)

var isoPattern = regexp.MustCompile(`^(\d{4})-(\d{2})-(\d{2})(?:[T ](\d{2})(?::?(\d{2})(?::?(\d{2}(?:[.,]\d{1,12})?))?)?(Z)?)?$`)

// acceptedISO says what an ISO date looks like.
const acceptedISO = "an ISO date such as 2003-06-01 or 2003-06-01T04:12:30.5, without a zone (Z is allowed for UTC)"

// readISO reads a date of ISO 8601.
func (r *StampReader) readISO(text string) (Stamp, error) {
	if len(text) > longestDate {
		return Stamp{}, r.unreadable(acceptedISO)
	}
	match := isoPattern.FindStringSubmatch(text)
	if match == nil || match[7] != "" && r.convention.Scale != ScaleUTC {
		return Stamp{}, r.unreadable(acceptedISO)
	}
	year, err1 := strconv.Atoi(match[1])
	month, err2 := strconv.Atoi(match[2])
	day, err3 := strconv.Atoi(match[3])
	if err1 != nil || err2 != nil || err3 != nil || day == 0 {
		return Stamp{}, r.unreadable(acceptedISO)
	}
	if month >= 1 && month <= 12 && day > DaysInMonth(r.convention.Calendar, year, month) {
		return Stamp{}, r.unreadable(acceptedISO + "; that month has no such day")
	}
	iso := *r
	iso.convention.DecimalComma = true // ISO 8601 takes either mark
	d, err := iso.addClock(civilDay{year: year, month: month, day: day, quantumDays: 1}, match[4], match[5], match[6])
	if err != nil {
		return Stamp{}, err
	}
	return r.fromCivil(text, d)
}
