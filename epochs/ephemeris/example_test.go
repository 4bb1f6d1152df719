package ephemeris_test

import (
	"fmt"
	"math"

	"platemeld/epochs/ephemeris"
)

// The Earth's distance from the Sun at perihelion and aphelion of 2024
// (January 3 and July 5).
func ExampleEmbedded() {
	embedded, err := ephemeris.Embedded()
	if err != nil {
		fmt.Println(err)
		return
	}
	for _, jd := range []float64{2460312.5, 2460496.5} {
		state, err := embedded.At(jd, 0)
		if err != nil {
			fmt.Println(err)
			return
		}
		square := 0.0
		for k := range 3 {
			square += math.Pow(state.EarthKm[k]-state.SunKm[k], 2)
		}
		fmt.Printf("%.1f million km\n", math.Sqrt(square)/1e6)
	}
	// Output:
	// 147.1 million km
	// 152.1 million km
}
