package epochs

import (
	"math"
	"math/big"
	"testing"

	"pgregory.net/rapid"
)

// TestJDText holds the printed date against arithmetic without rounding
// (math/big).
func TestJDText(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		d := NewJD(float64(rapid.IntRange(1, 9_999_999).Draw(t, "day")), rapid.Float64Range(-0.5, 0.5).Draw(t, "fraction"))
		if rapid.Bool().Draw(t, "tie") { // many dates lie exactly between two printed ones
			d = NewJD(d.Day, math.Round(d.Frac*1024)/1024)
		}
		decimals := rapid.IntRange(0, 15).Draw(t, "decimals")
		sum := new(big.Float).SetPrec(300).SetFloat64(d.Day)
		sum.Add(sum, new(big.Float).SetFloat64(d.Frac))
		if got, want := d.Text(decimals), sum.Text('f', decimals); got != want {
			t.Fatalf("%v with %d decimals: got %s, want %s", d, decimals, got, want)
		}
	})
}

// TestNewJDLosesNothing: the sum of the parts stays the same to the bit, and
// the fraction is in its range.
func TestNewJDLosesNothing(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		a := rapid.Float64Range(-3e6, 3e6).Draw(t, "a")
		b := rapid.Float64Range(-1, 1).Draw(t, "b")
		d := NewJD(math.Floor(a)+0.5, b)
		if d.Day != math.Round(d.Day) || !(d.Frac >= -0.5 && d.Frac < 0.5) {
			t.Fatalf("%v is not normalised", d)
		}
		if off := math.Abs(d.Sub(JD{Day: math.Floor(a) + 0.5, Frac: b})); !(off <= 1e-15) {
			t.Fatalf("%v is %g d off the sum of %v and %v", d, off, math.Floor(a)+0.5, b)
		}
	})
}
