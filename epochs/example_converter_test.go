package epochs_test

import (
	"fmt"

	"platemeld/epochs"
)

// A plate of 1908, dated in astronomical days from noon, becomes a BJD_TDB.
func ExampleConverter_Epoch() {
	star := epochs.Star{RADeg: 150, DecDeg: 20}
	converter, err := epochs.NewConverter(star, nil)
	if err != nil {
		fmt.Println(err)
		return
	}
	convention := epochs.Convention{Form: epochs.FormCivil, Scale: epochs.ScaleGMAT}
	reader, err := convention.NewStampReader()
	if err != nil {
		fmt.Println(err)
		return
	}
	stamp, err := reader.Read("1908 Jan 14.62")
	if err != nil {
		fmt.Println(err)
		return
	}
	site := &epochs.Site{Name: "Cloud Ridge", LongitudeDeg: -70.7, LatitudeDeg: -30.2, HeightM: 2500}
	epoch, err := converter.Epoch(stamp, site)
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Println("BJD_TDB", epoch.BJD.Text(3), "+-", fmt.Sprintf("%.4f d", epoch.SigmaDays))
	fmt.Printf("light time %.0f s, flags: %v\n", epoch.Terms.BarycentreMinusObserverS(), epoch.Flags)
	// Output:
	// BJD_TDB 2417955.625 +- 0.0029 d
	// light time 419 s, flags: through Delta T
}

// A velocity as observed is referred to the barycentre; a heliocentric one
// only loses the Sun's own motion.
func ExampleConverter_BarycentricVelocity() {
	converter, err := epochs.NewConverter(epochs.Star{RADeg: 150, DecDeg: 20}, nil)
	if err != nil {
		fmt.Println(err)
		return
	}
	stamp := epochs.Stamp{JD: epochs.NewJD(2460379.5, 0.1875), Scale: epochs.ScaleUTC}
	site := &epochs.Site{Name: "Cloud Ridge", LongitudeDeg: -70.7, LatitudeDeg: -30.2, HeightM: 2500}
	epoch, err := converter.Epoch(stamp, site)
	if err != nil {
		fmt.Println(err)
		return
	}
	for _, v := range []epochs.PublishedVelocity{
		{Kms: 40, Frame: epochs.FrameTopocentric},
		{Kms: 40, Frame: epochs.FrameHeliocentric},
	} {
		b, err := converter.BarycentricVelocity(v, epoch, site)
		if err != nil {
			fmt.Println(err)
			return
		}
		fmt.Printf("%s: %.3f km/s; Sun %.0f, relativity %.1f, cross term %.1f m/s\n",
			v.Frame, b.Kms, b.Terms.SunMs, b.Terms.RelativityMs, b.Terms.CrossMs)
	}
	// Output:
	// observatory: 27.902 km/s; Sun 0, relativity 4.7, cross term -1.6 m/s
	// heliocentric: 39.986 km/s; Sun -14, relativity 0.0, cross term -0.0 m/s
}
