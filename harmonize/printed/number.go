package printed

import (
	"errors"
	"fmt"
	"math"
	"strconv"
	"strings"
)

// ErrUnreadable is what every error about a printed cell unwraps to.
var ErrUnreadable = errors.New("printed: unreadable")

// Style says how the numbers of a table are printed.
type Style struct {
	DecimalComma bool     // "12,3" is twelve and three tenths
	Missing      []string // texts that mean "no value", beside those always known
}

// Number is a number as printed.
type Number struct {
	Value    float64
	Missing  bool    // the cell holds no number; Value is 0
	Decimals int     // digits printed after the decimal mark
	Quantum  float64 // one unit of the last printed digit
	Error    float64 // of a cell such as 12.3(4) or 12.3±0.4
	HasError bool
	Marks    Mark
	Text     string // the cell as printed
}

// Mark is a set of marks that a table prints beside a number.
type Mark uint

// The marks.
const (
	MarkUncertain     Mark = 1 << iota // a colon
	MarkVeryUncertain                  // two colons
	MarkParentheses                    // the whole number in parentheses
	MarkBrackets                       // the whole number in brackets
	MarkAsterisk
	MarkDagger
	MarkFootnote // a letter or raised digit behind the number
)

// String names the marks, separated by commas.
func (m Mark) String() string {
	names := []string{"uncertain", "very uncertain", "in parentheses", "in brackets", "asterisk", "dagger", "footnote"}
	var list []string
	for i, name := range names {
		if m&(1<<i) != 0 {
			list = append(list, name)
		}
	}
	return strings.Join(list, ", ")
}

// missingTexts are the ways in which tables print that there is no value.
var missingTexts = map[string]bool{"": true, "-": true, "--": true, "---": true, "\\nodata": true, "nan": true, "...": true, "..": true, ". . .": true, "· · ·": true, "null": true, "n/a": true}

// plain replaces typographic signs by the plain ones they stand for.
var plain = strings.NewReplacer("−", "-", "–", "-", "—", "-", "‐", "-", "‑", "-", "﹣", "-", "-", "-", "$-$", "-", "&minus;", "-",
	"\u00ad", "", "…", "...", "·", ".", "\u00a0", " ", "\u202f", " ", "\u2009", " ", "＋", "+", "\\pm", "±", "+/-", "±", "+-", "±")

// ReadNumber reads the number printed in a cell. A cell without one is not an
// error: Missing is set. A character that is not understood is an error that
// wraps ErrUnreadable; nothing is guessed.
func ReadNumber(text string, style Style) (Number, error) {
	n := Number{Text: text}
	cell := strings.TrimSpace(plain.Replace(text))
	for _, missing := range style.Missing {
		if strings.TrimSpace(text) == strings.TrimSpace(missing) {
			n.Missing = true
			return n, nil
		}
	}
	if missingTexts[strings.ToLower(cell)] {
		n.Missing = true
		return n, nil
	}
	cell = n.takeMarks(cell)
	value, errorText, hasError := splitError(cell)
	digits, decimals, err := decimal(value, style)
	if err != nil {
		return n, unreadable(text, style)
	}
	n.Value, n.Decimals, n.Quantum = digits, decimals, math.Pow(10, float64(-decimals))
	if !hasError {
		return n, nil
	}
	e, errorDecimals, err := decimal(errorText, style)
	if err != nil || e < 0 {
		return n, unreadable(text, style)
	}
	n.Error, n.HasError = e, true
	if strings.HasSuffix(cell, ")") && errorDecimals == 0 {
		n.Error *= n.Quantum
	}
	return n, nil
}

func unreadable(text string, style Style) error {
	mark := "point"
	if style.DecimalComma {
		mark = "comma"
	}
	return fmt.Errorf("%w: %q is no number; a sign, digits and one decimal %s are accepted, with marks such as : * or a footnote letter", ErrUnreadable, text, mark)
}

// takeMarks takes the marks off a cell and notes them.
func (n *Number) takeMarks(cell string) string {
	pairs := []struct {
		open, close string
		mark        Mark
	}{{"(", ")", MarkParentheses}, {"[", "]", MarkBrackets}}
	for again := true; again; {
		again = false
		for _, p := range pairs {
			if strings.HasPrefix(cell, p.open) && strings.HasSuffix(cell, p.close) {
				cell, n.Marks, again = strings.TrimSpace(cell[1:len(cell)-1]), n.Marks|p.mark, true
			}
		}
		trimmed := strings.TrimRight(cell, " ")
		for _, s := range []struct {
			suffix string
			mark   Mark
		}{{"::", MarkVeryUncertain}, {":", MarkUncertain}, {"*", MarkAsterisk}, {"†", MarkDagger}, {"‡", MarkDagger}, {"¹", MarkFootnote}, {"²", MarkFootnote}, {"³", MarkFootnote}} {
			if strings.HasSuffix(trimmed, s.suffix) {
				trimmed, n.Marks, again = strings.TrimSuffix(trimmed, s.suffix), n.Marks|s.mark, true
				break
			}
		}
		cell = trimmed
	}
	if k := len(cell); k > 1 && cell[k-1] >= 'a' && cell[k-1] <= 'z' && cell[k-2] >= '0' && cell[k-2] <= '9' {
		cell, n.Marks = cell[:k-1], n.Marks|MarkFootnote
	}
	return cell
}

// splitError splits 12.3(4) and 12.3±0.4.
func splitError(cell string) (value, errorText string, hasError bool) {
	if before, after, ok := strings.Cut(cell, "±"); ok {
		return strings.TrimSpace(before), strings.TrimSpace(after), true
	}
	if before, after, ok := strings.Cut(cell, "("); ok && strings.HasSuffix(after, ")") && strings.TrimSpace(before) != "" {
		return strings.TrimSpace(before), strings.TrimSuffix(after, ")"), true
	}
	return cell, "", false
}

// decimal reads sign, digits, one decimal mark and an exponent.
func decimal(text string, style Style) (value float64, decimals int, err error) {
	if style.DecimalComma {
		if strings.Count(text, ",") > 1 || strings.Contains(text, ".") {
			return 0, 0, ErrUnreadable
		}
		text = strings.Replace(text, ",", ".", 1)
	}
	if strings.HasPrefix(text, "- ") || strings.HasPrefix(text, "+ ") {
		text = text[:1] + strings.TrimSpace(text[2:])
	}
	body := strings.TrimLeft(text, "+-")
	if len(text)-len(body) > 1 || body == "" || strings.Trim(body, "0123456789.eE+-") != "" {
		return 0, 0, ErrUnreadable
	}
	value, err = strconv.ParseFloat(text, 64)
	if err != nil || math.IsInf(value, 0) {
		return 0, 0, ErrUnreadable
	}
	mantissa, exponent, _ := strings.Cut(strings.ToLower(body), "e")
	if _, fraction, ok := strings.Cut(mantissa, "."); ok {
		decimals = len(fraction)
	}
	if exponent != "" {
		e, err := strconv.Atoi(exponent)
		if err != nil {
			return 0, 0, ErrUnreadable
		}
		decimals -= e
	}
	return value, decimals, nil
}
