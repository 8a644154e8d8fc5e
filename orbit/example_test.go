package orbit_test

import (
	"fmt"
	"log"
	"time"

	"slantwise/orbit"
	"slantwise/orbit/unit"
)

func ExampleNewEphemeris() {
	set := orbit.Elements{
		Name: "Wagtail 1", CatalogNumber: 99001,
		Epoch:      time.Date(2026, 3, 10, 0, 0, 0, 0, time.UTC),
		MeanMotion: 15.2, Eccentricity: 0.001,
		Inclination: 97.5 * unit.Degree, MeanAnomaly: 10 * unit.Degree,
		BStar: 1e-4,
	}
	from := set.Epoch.Add(6 * time.Hour)
	eph, err := orbit.NewEphemeris(set, from, from.Add(24*time.Hour), orbit.EarthOrientation{})
	if err != nil {
		log.Fatal(err)
	}
	at, err := eph.At(from.Add(90 * time.Minute))
	if err != nil {
		log.Fatal(err)
	}
	fmt.Printf("%.0f km from the Earth's centre, %s\n", at.Position.Norm()/1000, eph.LightAt(5400))
	// Output: 6890 km from the Earth's centre, sun
}
