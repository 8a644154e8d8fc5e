package propagation_test

import (
	"fmt"
	"os"
	"strings"

	"slantwise/downlink/propagation"
	"slantwise/orbit/unit"
)

// A Ka-band path to a site that states its rain, cloud and humidity.
func ExampleNewPath() {
	rate, rainHeight := 35*propagation.MillimetrePerHour, 3*unit.Kilometre
	cloud, err := propagation.NewCurve("cloud liquid water", "kg/m2", propagation.Exceeded{P: 5 * propagation.Percent, Value: 0.45})
	if err != nil {
		fmt.Println(err)
		return
	}
	path, err := propagation.NewPath(propagation.PathSpec{
		Frequency:  26.25 * unit.Gigahertz,
		Exceedance: 1 * propagation.Percent,
		Tilt:       45 * unit.Degree, // circular
		Aperture:   &propagation.Aperture{Diameter: 3.7 * unit.Metre, Efficiency: 0.6},
		Climate: propagation.Climate{Latitude: 58 * unit.Degree, Height: 42 * unit.Metre,
			Rate001: &rate, RainHeight: &rainHeight, CloudWater: cloud},
	})
	if err != nil {
		fmt.Println(err)
		return
	}
	for _, el := range []unit.Angle{10 * unit.Degree, 60 * unit.Degree} {
		s, err := path.At(el)
		if err != nil {
			fmt.Println(err)
			return
		}
		fmt.Printf("%.0f deg: gas %.2f, cloud %.2f, rain %.2f, scintillation %.2f, together %.2f dB\n",
			el.Degrees(), s.Gas, s.Cloud, s.Rain, s.Scintillation, s.Total)
	}
	// Output:
	// 10 deg: gas 1.39, cloud 1.43, rain 5.12, scintillation 1.01, together 8.02 dB
	// 60 deg: gas 0.28, cloud 0.29, rain 2.06, scintillation 0.11, together 2.64 dB
}

// A table goes in and comes out with the model's results behind.
func ExampleRunBatch() {
	in := "site,frequency_ghz,elevation_deg,polarization_tilt_deg,rain_rate_mm_h\nSkerry Point,26.25,30,45,25\n"
	_, err := propagation.RunBatch(propagation.BatchOptions{Model: "rain-specific"}, strings.NewReader(in), os.Stdout, false)
	if err != nil {
		fmt.Println(err)
	}
	// Output:
	// site,frequency_ghz,elevation_deg,polarization_tilt_deg,rain_rate_mm_h,result_rain_specific_attenuation_db_km
	// Skerry Point,26.25,30,45,25,3.85308799546
}
