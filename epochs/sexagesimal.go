package epochs

import (
	"errors"
	"fmt"
	"math"
	"strconv"
	"strings"
)

// ErrAngle is what every error about the text of a coordinate unwraps to.
var ErrAngle = errors.New("epochs: unreadable coordinate")

// AngleError says which text could not be read as a coordinate.
type AngleError struct {
	Text     string // as given
	Problem  string // what is wrong with it
	Accepted string // what would have been read
}

func (e *AngleError) Error() string {
	return fmt.Sprintf("%v %q: %s; accepted: %s", ErrAngle, e.Text, e.Problem, e.Accepted)
}

// Unwrap returns ErrAngle.
func (e *AngleError) Unwrap() error { return ErrAngle }

const (
	acceptedRA  = `hours, minutes, seconds as "14 22 31.8", "14:22:31.8" or "14h22m31.8s", minutes or seconds may be left out; or degrees as one number "215.6325"`
	acceptedDec = `degrees, minutes, seconds as "-00 03 12.4", "-00:03:12.4" or "-0d03m12.4s" (also ° ′ ″); or degrees as one number "-0.0534"`
)

// ParseRA reads a right ascension and returns degrees, 0 <= ra < 360. The
// text holds hours, minutes and seconds separated by blanks, colons or the
// letters h m s; a single number without a letter is degrees. Only the last
// number may have decimals, minutes and seconds must be below 60. The error
// is an *AngleError.
func ParseRA(text string) (deg float64, err error) {
	parts, marked, problem := splitAngle(text, "hms")
	switch {
	case problem != "":
	case parts.negative:
		problem = "a right ascension has no minus sign"
	case !marked && parts.count == 1:
		if deg = parts.value[0]; deg < 360 {
			return deg, nil
		}
		problem = "360 degrees or more"
	default:
		if deg = parts.sum() * 15; deg < 360 {
			return deg, nil
		}
		problem = "24 hours or more"
	}
	return 0, &AngleError{Text: text, Problem: problem, Accepted: acceptedRA}
}

// ParseDec reads a declination and returns degrees, -90 <= dec <= 90. The
// text holds degrees, minutes and seconds separated by blanks, colons, the
// letters d m s or the signs for them, with an optional sign in front that
// counts also before 00; a single number is degrees. Only the last number may
// have decimals, minutes and seconds must be below 60. The error is an
// *AngleError.
func ParseDec(text string) (deg float64, err error) {
	parts, _, problem := splitAngle(text, "dms")
	if problem == "" {
		deg = parts.sum()
		if deg <= 90 {
			if parts.negative {
				deg = -deg
			}
			return deg, nil
		}
		problem = "beyond the pole"
	}
	return 0, &AngleError{Text: text, Problem: problem, Accepted: acceptedDec}
}

// sexagesimal is a whole number with up to two parts of sixty.
type sexagesimal struct {
	negative bool
	value    [3]float64
	count    int
}

func (s sexagesimal) sum() float64 { return s.value[0] + s.value[1]/60 + s.value[2]/3600 }

// angleSigns replaces typographic signs by their plain equivalents.
var angleSigns = strings.NewReplacer("−", "-", "–", "-", "°", "d", "º", "d", "′", "m", "'", "m",
	"″", "s", `"`, "s", "ʰ", "h", "ᵐ", "m", "ˢ", "s", "\u00a0", " ", "\u2009", " ")

// splitAngle separates the numbers of an angle. letters are the three unit
// letters in order; marked says whether any was there. A problem is empty
// when all is well.
func splitAngle(text, letters string) (parts sexagesimal, marked bool, problem string) {
	rest := strings.ToLower(strings.TrimSpace(angleSigns.Replace(text)))
	if len(rest) > 0 && (rest[0] == '-' || rest[0] == '+') {
		parts.negative = rest[0] == '-'
		rest = strings.TrimSpace(rest[1:])
	}
	if rest == "" {
		return parts, false, "no number"
	}
	for rest != "" {
		if parts.count == 3 {
			return parts, marked, fmt.Sprintf("%q is left over", rest)
		}
		end := strings.IndexFunc(rest, func(r rune) bool { return (r < '0' || r > '9') && r != '.' })
		if end < 0 {
			end = len(rest)
		}
		if problem = parts.add(rest[:end]); problem != "" {
			return parts, marked, problem
		}
		rest = rest[end:]
		if rest == "" {
			break
		}
		unit, after, problem := separator(rest, letters, parts.count-1)
		if problem != "" {
			return parts, marked, problem
		}
		marked = marked || unit
		rest = after
	}
	return parts, marked, ""
}

// add takes the digits of the next part.
func (s *sexagesimal) add(digits string) (problem string) {
	if digits == "" {
		return "a number is missing or an unexpected character stands in its place"
	}
	if len(digits) > 40 {
		return "a number of more than 40 digits"
	}
	value, err := strconv.ParseFloat(digits, 64)
	if err != nil || math.IsInf(value, 0) {
		return fmt.Sprintf("%q is not a number", digits)
	}
	if s.count > 0 && s.value[s.count-1] != math.Trunc(s.value[s.count-1]) {
		return "decimals before the last number"
	}
	if s.count > 0 && value >= 60 {
		return fmt.Sprintf("%s is not below 60", digits)
	}
	s.value[s.count] = value
	s.count++
	return ""
}

// separator removes what follows a number: blanks, with one colon or the
// unit letter of the place.
func separator(rest, letters string, place int) (unit bool, after, problem string) {
	after = strings.TrimLeft(rest, " \t")
	switch {
	case after == "":
		return false, after, ""
	case after[0] == ':':
		after = strings.TrimLeft(after[1:], " \t")
		if after == "" {
			return false, after, "a colon at the end"
		}
		return false, after, ""
	case after[0] == letters[place]:
		return true, strings.TrimLeft(after[1:], " \t"), ""
	case len(after) == len(rest) || after[0] < '0' || after[0] > '9':
		return false, after, fmt.Sprintf("unexpected %q", after)
	}
	return false, after, ""
}
