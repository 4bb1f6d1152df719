package epochs

import (
	"math"
	"strconv"
	"strings"
)

// decimalNumber is a number read from its digits in two parts, so that a date
// with ten decimals keeps them all.
type decimalNumber struct {
	whole, fraction float64 // of one sign
	quantum         float64 // one unit of the last digit
}

// parseDecimal reads sign, digits, one decimal mark (a point, a raised point,
// or a comma) and more digits. Digits before the mark may be grouped by
// blanks. ok is an error text when the text is anything else.
func parseDecimal(text string, decimalComma bool) (n decimalNumber, digits int, err error) {
	text = strings.TrimSpace(text)
	body, negative := text, false
	switch {
	case strings.HasPrefix(body, "-"), strings.HasPrefix(body, "−"):
		negative = true
		body = strings.TrimPrefix(strings.TrimPrefix(body, "-"), "−")
	case strings.HasPrefix(body, "+"):
		body = body[1:]
	}
	whole, fraction := body, ""
	if i := strings.IndexAny(body, ".,·"); i >= 0 {
		mark := body[i:]
		width := 1
		if strings.HasPrefix(mark, "·") {
			width = len("·")
		}
		if mark[0] == ',' && !decimalComma {
			return n, 0, ErrUnreadable
		}
		whole, fraction = body[:i], body[i+width:]
	}
	if whole, err = ungroup(whole); err != nil {
		return n, 0, err
	}
	if len(whole)+len(fraction) == 0 || len(whole) > 15 || len(fraction) > 30 || !allDigits(whole) || !allDigits(fraction) {
		return n, 0, ErrUnreadable
	}
	if whole != "" {
		if n.whole, err = strconv.ParseFloat(whole, 64); err != nil {
			return n, 0, ErrUnreadable
		}
	}
	if fraction != "" {
		if n.fraction, err = strconv.ParseFloat("0."+fraction, 64); err != nil {
			return n, 0, ErrUnreadable
		}
	}
	if negative {
		n.whole, n.fraction = -n.whole, -n.fraction
	}
	n.quantum = math.Pow(10, -float64(len(fraction)))
	return n, len(whole), nil
}

// ungroup takes the blanks out of grouped digits: groups behind the first
// have three digits.
func ungroup(text string) (string, error) {
	groups := strings.FieldsFunc(text, func(r rune) bool { return r == ' ' || r == '\u00a0' || r == '\u2009' || r == '\u202f' || r == '\'' })
	for _, group := range groups[min(1, len(groups)):] {
		if len(group) != 3 {
			return "", ErrUnreadable
		}
	}
	return strings.Join(groups, ""), nil
}

func allDigits(text string) bool {
	for i := range len(text) {
		if text[i] < '0' || text[i] > '9' {
			return false
		}
	}
	return true
}
