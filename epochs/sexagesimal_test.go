package epochs

import (
	"errors"
	"math"
	"testing"
)

// Wanted values are the arithmetic written out; 1e-12 deg is the rounding of
// a float64 at 360.
func TestParseRA(t *testing.T) {
	want := 15 * (14 + 22.0/60 + 31.8/3600)
	for _, c := range []struct {
		text string
		deg  float64
	}{
		{"14 22 31.8", want},
		{"14:22:31.8", want},
		{" 14 : 22 : 31.8 ", want},
		{"14h22m31.8s", want},
		{"14h 22m 31.8s", want},
		{"14ʰ22ᵐ31.8ˢ", want},
		{"+14 22 31.8", want},
		{"14 22.53", 15 * (14 + 22.53/60)},
		{"14h22.5m", 15 * (14 + 22.5/60)},
		{"14h", 210},
		{"215.6325", 215.6325},
		{"0", 0},
		{"23 59 59.999", 15 * (23 + 59.0/60 + 59.999/3600)},
	} {
		got, err := ParseRA(c.text)
		if err != nil {
			t.Errorf("%q: %v", c.text, err)
		}
		near(t, c.text, got, c.deg, 1e-12)
	}
}

func TestParseDec(t *testing.T) {
	for _, c := range []struct {
		text string
		deg  float64
	}{
		{"-12 04 55.1", -(12 + 4.0/60 + 55.1/3600)},
		{"−12 04 55.1", -(12 + 4.0/60 + 55.1/3600)},
		{"-00 03 00", -0.05},
		{"-0 03", -0.05},
		{"- 0 03", -0.05},
		{"+00 03 00", 0.05},
		{"-0d03m12.4s", -(3.0/60 + 12.4/3600)},
		{`-0°03'12.4"`, -(3.0/60 + 12.4/3600)},
		{"-0°03′12.4″", -(3.0/60 + 12.4/3600)},
		{"-0.0534", -0.0534},
		{"90", 90},
		{"+89:59:60", math.NaN()},
	} {
		got, err := ParseDec(c.text)
		if math.IsNaN(c.deg) {
			if !errors.Is(err, ErrAngle) {
				t.Errorf("%q: got %v, %v, want an error of ErrAngle", c.text, got, err)
			}
			continue
		}
		if err != nil {
			t.Errorf("%q: %v", c.text, err)
		}
		near(t, c.text, got, c.deg, 1e-13)
	}
}

func TestUnreadableCoordinates(t *testing.T) {
	for _, text := range []string{
		"", " ", "-", "-14 22 31", "24 00 00", "360", "14 60 00", "14 22 60", "14.5 22", "14 22 31 8",
		"14;22", "14d22m31s", "14h22h", "h14", "14::22", "14:22:", "1e2", "NaN", "inf", "14,5", "14 22 31.8x",
		"1.2.3", "14 -22 31", "99999999999999999999999999999999999999999999999",
	} {
		_, err := ParseRA(text)
		var angle *AngleError
		if !errors.As(err, &angle) || !errors.Is(err, ErrAngle) {
			t.Errorf("%q: got %v, want an *AngleError", text, err)
		} else if angle.Text != text || angle.Problem == "" || angle.Accepted == "" {
			t.Errorf("%q: the error does not say enough: %+v", text, angle)
		}
	}
	for _, text := range []string{"90 00 01", "-90.0001", "12h", "1 60", "", "5 4 3 2"} {
		if _, err := ParseDec(text); !errors.Is(err, ErrAngle) {
			t.Errorf("%q: got %v, want an error of ErrAngle", text, err)
		}
	}
}

func FuzzParseRA(f *testing.F) {
	for _, seed := range []string{"14 22 31.8", "14:22:31.8", "14h22m31.8s", "215.6325", "14ʰ22ᵐ", "24 0 0", "-1", "1 2 3 4", "", "..", "14 22."} {
		f.Add(seed)
	}
	f.Fuzz(func(t *testing.T, text string) {
		deg, err := ParseRA(text)
		if err != nil {
			if !errors.Is(err, ErrAngle) {
				t.Fatalf("%q: %v", text, err)
			}
			return
		}
		if !(deg >= 0 && deg < 360) {
			t.Fatalf("%q: %v deg", text, deg)
		}
	})
}

func FuzzParseDec(f *testing.F) {
	for _, seed := range []string{"-12 04 55.1", "-00 03", "+89d59m59.9s", "-0.05", "−5°", "91", "", "-", "1 2 3 4"} {
		f.Add(seed)
	}
	f.Fuzz(func(t *testing.T, text string) {
		deg, err := ParseDec(text)
		if err != nil {
			if !errors.Is(err, ErrAngle) {
				t.Fatalf("%q: %v", text, err)
			}
			return
		}
		if !(deg >= -90 && deg <= 90) {
			t.Fatalf("%q: %v deg", text, deg)
		}
	})
}
