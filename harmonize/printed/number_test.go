package printed_test

import (
	"errors"
	"fmt"
	"math"
	"strconv"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"platemeld/harmonize/printed"
)

// TestReadNumber. How tables print minus signs, decimal marks and missing
// values is common practice, no source; the error in parentheses, in units of
// the last digit, is that of the Guide to the Expression of Uncertainty in
// Measurement (JCGM 100:2008, 7.2.2).
func TestReadNumber(t *testing.T) {
	point, comma := printed.Style{}, printed.Style{DecimalComma: true}
	sentinel := printed.Style{Missing: []string{"9.99", "-9999"}}
	for _, test := range []struct {
		text     string
		style    printed.Style
		value    float64
		decimals int
		err      float64
		marks    printed.Mark
	}{
		{"-12.3", point, -12.3, 1, 0, 0},
		{"+12.30", point, 12.3, 2, 0, 0},
		{"\u221212.3", point, -12.3, 1, 0, 0}, // minus sign
		{"\u201312.3", point, -12.3, 1, 0, 0}, // en dash
		{"\u201412.3", point, -12.3, 1, 0, 0}, // em dash
		{"\u201012.3", point, -12.3, 1, 0, 0}, // hyphen
		{"$-$12.3", point, -12.3, 1, 0, 0},
		{"- 12.3", point, -12.3, 1, 0, 0},
		{"14\u00b762", point, 14.62, 2, 0, 0}, // raised point
		{"-18,16", comma, -18.16, 2, 0, 0},
		{".5", point, 0.5, 1, 0, 0},
		{"5.", point, 5, 0, 0, 0},
		{"1.5e-3", point, 0.0015, 4, 0, 0},
		{"12.3(4)", point, 12.3, 1, 0.4, 0},
		{"12.34(15)", point, 12.34, 2, 0.15, 0},
		{"12.3(0.4)", point, 12.3, 1, 0.4, 0},
		{"12.3\u00b10.4", point, 12.3, 1, 0.4, 0},
		{"12.3 +/- 0.4", point, 12.3, 1, 0.4, 0},
		{"12.3:", point, 12.3, 1, 0, printed.MarkUncertain},
		{"12.3::", point, 12.3, 1, 0, printed.MarkVeryUncertain},
		{"(12.3)", point, 12.3, 1, 0, printed.MarkParentheses},
		{"[-12.3]", point, -12.3, 1, 0, printed.MarkBrackets},
		{"12.3*", point, 12.3, 1, 0, printed.MarkAsterisk},
		{"12.3\u2020", point, 12.3, 1, 0, printed.MarkDagger},
		{"-12.3a", point, -12.3, 1, 0, printed.MarkFootnote},
		{"-12.3\u00b2", point, -12.3, 1, 0, printed.MarkFootnote},
		{"(-12.3:)", point, -12.3, 1, 0, printed.MarkParentheses | printed.MarkUncertain},
		{"9.98", sentinel, 9.98, 2, 0, 0},
	} {
		t.Run(test.text, func(t *testing.T) {
			n, err := printed.ReadNumber(test.text, test.style)
			if err != nil {
				t.Fatal(err)
			}
			if n.Missing || !(math.Abs(n.Value-test.value) <= 1e-12) || n.Decimals != test.decimals || n.Marks != test.marks || n.HasError != (test.err != 0) || !(math.Abs(n.Error-test.err) <= 1e-12) {
				t.Errorf("got %+v (%v), want %+v", n, n.Marks, test)
			}
			if !(math.Abs(n.Quantum-math.Pow(10, -float64(test.decimals))) <= 1e-12) {
				t.Errorf("last digit %v", n.Quantum)
			}
		})
	}
}

func TestMissing(t *testing.T) {
	style := printed.Style{Missing: []string{"9.99", "-9999"}}
	for _, text := range []string{"", "  ", "...", "\u2026", ". . .", "--", "\u2014", "\\nodata", "NaN", "nan", "9.99", "-9999", "\u00b7 \u00b7 \u00b7"} {
		if n, err := printed.ReadNumber(text, style); err != nil || !n.Missing || n.Value != 0 {
			t.Errorf("%q: got %+v, %v; want a missing value", text, n, err)
		}
	}
}

func TestUnreadable(t *testing.T) {
	for _, test := range []struct {
		text  string
		style printed.Style
	}{
		{"O.15", printed.Style{}}, {"12.3x4", printed.Style{}}, {"12..3", printed.Style{}}, {"1,234.5", printed.Style{}}, {"12,3", printed.Style{}},
		{"12.3", printed.Style{DecimalComma: true}}, {"1.234,5", printed.Style{DecimalComma: true}}, {"--12", printed.Style{}}, {"1-2", printed.Style{}},
		{"12.3(4", printed.Style{}}, {"12.3\u00b1", printed.Style{}}, {"12.3\u00b1-0.4", printed.Style{}}, {"1e999", printed.Style{}}, {"Inf", printed.Style{}},
		{"12.3 14.5", printed.Style{}}, {"0x1F", printed.Style{}}, {"1_000", printed.Style{}}, {"a", printed.Style{}}, {"12.3ab", printed.Style{}},
	} {
		n, err := printed.ReadNumber(test.text, test.style)
		if !errors.Is(err, printed.ErrUnreadable) {
			t.Errorf("%q (comma: %v): got %+v, %v; want ErrUnreadable", test.text, test.style.DecimalComma, n, err)
		} else if !strings.Contains(err.Error(), "accepted") {
			t.Errorf("%q: the message does not say what is accepted: %v", test.text, err)
		}
	}
}

// TestPrintedNumbersReadBack: a number printed in any style reads back.
func TestPrintedNumbersReadBack(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		value := rapid.Float64Range(-1000, 1000).Draw(t, "value")
		decimals := rapid.IntRange(0, 6).Draw(t, "decimals")
		text := strconv.FormatFloat(value, 'f', decimals, 64)
		want, err := strconv.ParseFloat(text, 64)
		if err != nil {
			t.Fatal(err)
		}
		style := printed.Style{DecimalComma: rapid.Bool().Draw(t, "comma")}
		if style.DecimalComma {
			text = strings.Replace(text, ".", ",", 1)
		}
		text = strings.Replace(text, "-", rapid.SampledFrom([]string{"-", "\u2212", "\u2013"}).Draw(t, "minus"), 1)
		text = fmt.Sprintf(rapid.SampledFrom([]string{"%s", " %s ", "%s:", "(%s)", "[%s]", "%s*"}).Draw(t, "marks"), text)
		n, err := printed.ReadNumber(text, style)
		if err != nil || n.Value != want || n.Decimals != decimals {
			t.Fatalf("%q reads %+v, %v; want %v", text, n, err, want)
		}
	})
}

// FuzzReadNumber: no text makes the reader panic, and what is read is finite.
func FuzzReadNumber(f *testing.F) {
	for _, text := range []string{"-12.3", "\u221212.3(4)", "12.3\u00b10.4", "(12.3:)", "...", "12,3", "1e5", "((((", "[(1)]", "1(2)(3)", "a", "\u00b1"} {
		f.Add(text, false)
		f.Add(text, true)
	}
	f.Fuzz(func(t *testing.T, text string, comma bool) {
		n, err := printed.ReadNumber(text, printed.Style{DecimalComma: comma})
		if err == nil && (math.IsNaN(n.Value+n.Error+n.Quantum) || math.IsInf(n.Value, 0) || n.Error < 0) {
			t.Errorf("%q reads %+v", text, n)
		}
	})
}

func ExampleReadNumber() {
	n, err := printed.ReadNumber("\u221217\u00b742:", printed.Style{})
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Println(n.Value, n.Decimals, n.Marks)
	// Output: -17.42 2 uncertain
}
