package zeropoints_test

import (
	"context"
	"fmt"
	"math"

	"platemeld/zeropoints"
)

// Two instruments of a star whose velocity swings by 2 km/s in 1000 days; the
// second reads 3.5 km/s too high.
func ExampleFit() {
	p := zeropoints.Problem{
		Instruments: []zeropoints.Instrument{{Name: "first"}, {Name: "second"}},
		Signal:      zeropoints.Signal{PeriodDays: 990, Harmonics: 1},
	}
	for i := range 40 {
		day := 2450000 + 71.3*float64(i)
		o := zeropoints.Observation{TimeDays: day, VelocityKms: 2 * math.Sin(2*math.Pi*day/1000), SigmaKms: 0.1, Instrument: i % 2}
		if o.Instrument == 1 {
			o.VelocityKms += 3.5
		}
		p.Observations = append(p.Observations, o)
	}
	s, err := zeropoints.Fit(context.Background(), p)
	if err != nil {
		fmt.Println(err)
		return
	}
	second := s.ZeroPoints[1]
	fmt.Printf("subtract %.2f +- %.2f km/s; period %.1f d\n", second.Kms, second.SigmaKms, s.PeriodDays)
	// Output: subtract 3.50 +- 0.03 km/s; period 1000.0 d
}
