package cli

import (
	"math"
	"os"
	"testing"
)

// One whole budget is worked out again from the printed formulas, apart from the
// program: every term, every contributor to the noise, and what follows from them.
// 20.2 GHz at 0.1 % of the year and 35° elevation over 1400 km, from a site at 48° N
// on the sea. The path is that of handpath_test.go.
const handScenario = `path: {exceeded_percent: 0.1}
spacecraft:
  - name: Probe A
    transmitters:
      - name: K-band
        frequency_mhz: 20200
        power_w: 2.5
        line_loss_db: 0.7
        antenna: {pattern: cosine_power, peak_gain_dbi: 12, exponent: 1.5}
        attitude: nadir
        polarization: rhcp
        axial_ratio_db: 2.0
        other_polarization_in_use: true
        modes: [{name: plain, modulation: qpsk, coding: none, data_rate_bps: 2.0e7, required_eb_n0_db: 9.6}]
        implementation_loss_db: 1.5
        required_margin_db: 2.0
        extra_losses: [{name: spacecraft pointing, loss_db: 0.4}]
stations:
  - name: Test Quay
    latitude_deg: 48
    longitude_deg: 0
    altitude_m: 0
    climate:
      reference_atmosphere: global
      rain_rate_001_mm_h: 32
      zero_degree_isotherm_height_km: 2.6
      cloud_liquid_water_kg_m2: [[1, 0.9], [5, 0.5]]
      wet_refractivity_n_units: 52
    antennas:
      - name: dish
        kind: dish
        diameter_m: 2.4
        efficiency: 0.62
        surface_rms_mm: 0.4
        blockage_fraction: 0.02
        pointing_error_deg: 0.1
        polarization: rhcp
        axial_ratio_db: 1.0
        feed_loss_db: 0.5
        extra_losses: [{name: radome, loss_db: 0.3, dissipative: true}]
        noise:
          physical_temperature_k: 288
          spill_over_fraction: 0.07
          ground_temperature_k: 285
          receiver_chain:
            - {name: low-noise amplifier, gain_db: 40, noise_temperature_k: 70}
            - {name: cable, gain_db: -5}
            - {name: receiver, gain_db: 30, noise_figure_db: 9}
`

func db(ratio float64) float64 { return 10 * math.Log10(ratio) }

func ratio(db float64) float64 { return math.Pow(10, db/10) }

// handTerms are the terms of the budget in dB with their sign.
func handTerms(path *handPath) map[string]float64 {
	const f, rangeM, c = 20.2e9, 1400e3, 299792458.0
	lambda := c / f
	// The site's distance from the Earth's centre on the ellipsoid of WGS-84.
	const a, flattening = 6378137.0, 1 / 298.257223563
	e2 := flattening * (2 - flattening)
	sin, cos := math.Sin(rad(48)), math.Cos(rad(48))
	n := a / math.Sqrt(1-e2*sin*sin)
	radius := math.Hypot(n*cos, n*(1-e2)*sin)
	off := math.Atan2(radius*math.Cos(rad(35)), rangeM+radius*math.Sin(rad(35)))
	// Axial ratios as voltage ratios; the worst angle between the axes.
	ra, rb := math.Pow(10, 2.0/20), math.Pow(10, 1.0/20)
	worst := ((1+ra*ra)*(1+rb*rb) + 4*ra*rb - (1-ra*ra)*(1-rb*rb)) / (2 * (1 + ra*ra) * (1 + rb*rb))
	width := 70 * lambda / 2.4
	return map[string]float64{
		"transmit power":          db(2.5) + 30,
		"line loss":               -0.7,
		"transmit antenna gain":   12 + 1.5*db(math.Cos(off)),
		"spacecraft pointing":     -0.4,
		"free-space loss":         -20 * math.Log10(4*math.Pi*rangeM/lambda),
		"polarisation mismatch":   db(worst),
		"gas attenuation":         -path.gas,
		"cloud attenuation":       -path.cloud,
		"rain attenuation":        -path.rain,
		"scintillation":           -path.scintillation,
		"atmospheric combination": path.gas + path.cloud + path.rain + path.scintillation - path.total(),
		"station antenna gain":    db(0.62 * math.Pow(math.Pi*2.4/lambda, 2)),
		"surface loss":            db(math.Exp(-math.Pow(4*math.Pi*0.4e-3/lambda, 2))),
		"blockage loss":           20 * math.Log10(1-0.02),
		"pointing loss":           -12 * math.Pow(0.1/width, 2),
		"feed loss":               -0.5,
		"radome":                  -0.3,
	}
}

// handNoise are the contributors in K at the input of the first amplifier.
func handNoise(path *handPath) map[string]float64 {
	feed, radome := ratio(-0.5), ratio(-0.3)
	share, sky := feed*radome, 1-0.07
	gas, cloud, rain := ratio(-path.gas), ratio(-path.cloud), ratio(-path.rain)
	medium := 37.34 + 0.81*288.15 // P.618-14 equation (70) at the surface of P.835-6
	galaxy := 290 * ratio(52-46) * math.Pow(202, -2.75)
	return map[string]float64{
		"cosmic background":   share * sky * 2.7 * gas * cloud * rain,
		"galactic noise":      share * sky * galaxy * gas * cloud * rain,
		"gas emission":        share * sky * medium * (1 - gas) * cloud * rain,
		"cloud emission":      share * sky * medium * (1 - cloud) * rain,
		"rain emission":       share * sky * medium * (1 - rain),
		"ground":              share * 0.07 * 285,
		"radome":              288 * (1 - radome) * feed,
		"feed loss":           288 * (1 - feed),
		"low-noise amplifier": 70,
		"cable":               288 * (ratio(5) - 1) / 1e4,
		"receiver":            290 * (ratio(9) - 1) / (1e4 * ratio(-5)),
	}
}

func TestOneBudgetByHand(t *testing.T) {
	t.Chdir(handData(t))
	if err := os.WriteFile("slantwise.yaml", []byte(handScenario), 0o644); err != nil {
		t.Fatal(err)
	}
	path := newHandPath(t)
	a := askHand(t)
	near := func(what string, got, want, tolerance float64) {
		t.Helper()
		if !(math.Abs(got-want) <= tolerance) {
			t.Errorf("%s: got %.5f, by hand %.5f, difference %.2g over %g", what, got, want, got-want, tolerance)
		}
	}
	const tenMillibels = 0.01 // dB, what the budget is held to
	terms, received := handTerms(path), 0.0
	if len(a.Terms) != len(terms) {
		t.Errorf("%d terms, by hand %d", len(a.Terms), len(terms))
	}
	for _, term := range a.Terms {
		want, is := terms[term.Name]
		if !is {
			t.Errorf("term %q was not worked out by hand", term.Name)
		}
		near(term.Name, term.Sign*term.Value, want, tenMillibels)
		received += want
	}
	noise, system := handNoise(path), 0.0
	if len(a.Noise) != len(noise) {
		t.Errorf("%d contributors to the noise, by hand %d", len(a.Noise), len(noise))
	}
	for _, part := range a.Noise {
		want, is := noise[part.Name]
		if !is {
			t.Errorf("contributor %q was not worked out by hand", part.Name)
		}
		near(part.Name+", K", part.Kelvin, want, 0.1) // 0.1 K of some 300 K is 0.0015 dB
		system += want
	}
	cn0 := received - 30 - db(system) - db(1.380649e-23)
	near("received power", a.Received, received, tenMillibels)
	near("system noise, dB(K)", db(a.System), db(system), tenMillibels)
	near("C/N0", a.CN0, cn0, tenMillibels)
	near("Eb/N0", a.EbN0, cn0-db(2e7), tenMillibels)
	near("margin", a.Margin, cn0-db(2e7)-1.5-9.6, tenMillibels)
	near("C/I", a.CI, path.discrimination(), tenMillibels)
	flux := terms["transmit power"] + terms["line loss"] + terms["transmit antenna gain"] + terms["spacecraft pointing"] - 30 - db(4*math.Pi*math.Pow(1400e3, 2))
	near("power flux density", a.Flux, flux, tenMillibels)
	t.Logf("C/N0 %.4f dBHz, by hand %.4f dBHz", a.CN0, cn0)
}
