package mount_test

import (
	"fmt"
	"math"

	"slantwise/orbit/unit"
	"slantwise/station"
	"slantwise/station/mount"
)

// A mount with a cable of one and a half turns: every way to look east, and how long it takes
// from one end of a pass to the beginning of another.
func ExampleDrive_SlewTime() {
	degrees := func(v float64) unit.Angle { return unit.Angle(v) * unit.Degree }
	rate := func(v float64) unit.AngularRate { return unit.AngularRate(v * math.Pi / 180) }
	drive, err := mount.New(&station.Mount{
		Lower: station.Axis{Low: degrees(-270), High: degrees(270), Rate: rate(10), Acceleration: unit.AngularAcceleration(rate(5))},
		Upper: station.Axis{Low: 0, High: degrees(90), Rate: rate(5), Acceleration: unit.AngularAcceleration(rate(5))},
	})
	if err != nil {
		fmt.Println(err)
		return
	}
	for _, p := range drive.Positions(station.Direction{Azimuth: degrees(90), Elevation: degrees(20)}) {
		fmt.Printf("azimuth axis at %.0f deg: %v from -200 deg\n", p.Lower.Degrees(), drive.SlewTime(station.AxisAngles{Lower: degrees(-200), Upper: degrees(20)}, p))
	}
	// Output:
	// azimuth axis at -270 deg: 9s from -200 deg
	// azimuth axis at 90 deg: 31s from -200 deg
}

// Choices tells a chain of passes in which positions each can begin, and where it then ends.
func ExampleDrive_Choices() {
	degrees := func(v float64) unit.Angle { return unit.Angle(v) * unit.Degree }
	rate := unit.AngularRate(10 * math.Pi / 180)
	at := unit.AngularAcceleration(math.Inf(1))
	drive, err := mount.New(&station.Mount{
		Lower: station.Axis{Low: degrees(-270), High: degrees(270), Rate: rate, Acceleration: at},
		Upper: station.Axis{Low: 0, High: degrees(90), Rate: rate, Acceleration: at},
	})
	if err != nil {
		fmt.Println(err)
		return
	}
	// A target that stands still in the west for a minute.
	for _, p := range drive.Choices(mount.FixedCourse(station.Direction{Azimuth: degrees(260), Elevation: degrees(30)}, 60), mount.Options{}) {
		fmt.Printf("from %.0f to %.0f deg, %g s not followed\n", p.Start.Lower.Degrees(), p.End.Lower.Degrees(), p.LostSeconds())
	}
	// Output:
	// from -100 to -100 deg, 0 s not followed
	// from 260 to 260 deg, 0 s not followed
}
