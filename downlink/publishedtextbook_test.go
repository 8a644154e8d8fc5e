package downlink

import (
	"math"
	"testing"

	"slantwise/orbit/unit"
	"slantwise/station"
)

// addedLoss and addedNoise are a path and a noise model with one fixed figure each.
type addedLoss struct{ db float64 }

func (m addedLoss) Terms() []TermInfo {
	return []TermInfo{{Name: "rain attenuation", Sign: -1, Unit: "dB", Source: "test"}}
}
func (m addedLoss) Losses(_ *Geometry, into []float64) error { into[0] = m.db; return nil }
func (m addedLoss) Notes() []Note                            { return []Note{{Assumption, "rain as stated"}} }

type addedNoise struct{ kelvin float64 }

func (m addedNoise) Parts() []NoisePart                        { return []NoisePart{{Name: "rain", Source: "test"}} }
func (m addedNoise) Kelvins(_ *Geometry, into []float64) error { into[0] = m.kelvin; return nil }
func (m addedNoise) Notes() []Note                             { return nil }

// ratio is C/N0 of an EIRP in dBW over a printed loss into a G/T.
func ratio(t *testing.T, mhz, eirp, fsl, gOverT float64, losses ...float64) float64 {
	tx := radio(mhz, eirp, losses...)
	return float64(budgetOf(t, LinkSpec{Transmitter: tx, Antenna: ratioListener(gOverT)}, rangeOfLoss(fsl, tx.Frequency)).CN0)
}

// Roddy, Satellite Communications, chapter 12; answers of 12.9 and on from memory, so
// that they are compared with what the inputs give too.
func TestTextbookRoddy(t *testing.T) {
	f := readFigures(t, "budget_b7.csv")
	p, err := unit.LevelWatts(f.in(t, "eirp", "transmit power"))
	if err != nil {
		t.Fatal(err)
	}
	tx := Transmitter{Frequency: unit.Gigahertz, Power: p, Pattern: Pattern{Kind: Isotropic, PeakGain: unit.DB(f.in(t, "eirp", "antenna gain"))}}
	b := budgetOf(t, LinkSpec{Transmitter: tx, Antenna: ratioListener(0)}, 1e6)
	f.agree(t, "eirp", "EIRP", b.term("transmit power")-30+b.term("transmit antenna gain"))

	c := "free-space loss" // printed by the 32.4 rule, 0.076 dB under the exact constant
	f.agreeRecomputed(t, c, "free-space loss", float64(FreeSpaceLoss(unit.Length(f.in(t, c, "range"))*unit.Kilometre, unit.Frequency(f.in(t, c, "frequency"))*unit.Gigahertz)))

	c = "sum of losses"
	tx = radio(1000, 0, f.in(t, c, "receiver feeder loss"), f.in(t, c, "atmospheric absorption"), f.in(t, c, "antenna alignment loss"))
	b = budgetOf(t, LinkSpec{Transmitter: tx, Antenna: ratioListener(0)}, rangeOfLoss(f.in(t, c, "free-space loss"), tx.Frequency))
	total := 0.0
	for _, x := range b.Terms[1:] {
		total += x.Value
	}
	f.agree(t, c, "total loss", total)

	c = "C/N0 at 12 GHz"
	f.agree(t, c, "C/N0", ratio(t, 12000, f.in(t, c, "EIRP"), f.in(t, c, "free-space loss"), f.in(t, c, "G/T"),
		f.in(t, c, "pointing loss"), f.in(t, c, "atmospheric absorption"), f.in(t, c, "receiver feeder loss")))

	c = "required satellite EIRP" // turned around: the EIRP that the inputs need gives the C/N
	need := f[c]["required EIRP"].recomputed
	cn := ratio(t, 12000, need, f.in(t, c, "losses"), f.in(t, c, "G/T")) - hz(f.in(t, c, "bandwidth")*1e6)
	if math.Abs(cn-f.in(t, c, "C/N")) > 0.002 {
		t.Errorf("%s: C/N %.4f dB, want %g", c, cn, f.in(t, c, "C/N"))
	}

	c = "digital carrier"
	rate := f.in(t, c, "bandwidth") * 1e6 / (1 + f.in(t, c, "roll-off")) * f.in(t, c, "modulation")
	f.agree(t, c, "bit rate", hz(rate))
	tx = radio(12000, f[c]["required EIRP"].recomputed)
	b = budgetOf(t, LinkSpec{Transmitter: tx, Mode: plainMode(rate, f.in(t, c, "required Eb/N0")), Antenna: ratioListener(f.in(t, c, "G/T"))}, rangeOfLoss(f.in(t, c, "losses"), tx.Frequency))
	if math.Abs(float64(b.Margin)) > 0.002 {
		t.Errorf("%s: margin %.4f dB at the required EIRP, want 0", c, float64(b.Margin))
	}

	c = "downlink with back-off"
	f.agree(t, c, "C/N0", ratio(t, 12000, f.in(t, c, "saturation EIRP"), f.in(t, c, "free-space loss"), f.in(t, c, "G/T"), f.in(t, c, "output back-off"), f.in(t, c, "other downlink losses")))

	c = "two-way link"
	f.agree(t, c, "downlink C/N0", ratio(t, 4000, f.in(t, c, "satellite EIRP"), f.in(t, c, "free-space loss"), f.in(t, c, "station G/T"), f.in(t, c, "output back-off")))
}

// Roddy, examples 12.16 and 12.17: rain takes from the carrier and adds to the noise.
func TestTextbookRain(t *testing.T) {
	f, c := readFigures(t, "budget_b7.csv"), "rain on the downlink"
	inRain := func(kelvin, attenuation, rainKelvin float64) (fall, added, rise float64) {
		clear := LinkSpec{Transmitter: radio(12000, 50), Antenna: listener(50, kelvin)}
		wet := clear
		added = rainKelvin * (1 - math.Pow(10, -attenuation/10))
		wet.PathModels, wet.NoiseModels = []PathModel{addedLoss{attenuation}}, []NoiseModel{addedNoise{added}}
		dry, rain := budgetOf(t, clear, 4e7), budgetOf(t, wet, 4e7)
		return float64(dry.CN0 - rain.CN0), float64(rain.SystemNoise - dry.SystemNoise), hz(float64(rain.SystemNoise / dry.SystemNoise))
	}
	fall, added, rise := inRain(f.in(t, c, "clear-sky system noise temperature"), f.in(t, c, "rain attenuation"), f.in(t, c, "rain physical temperature"))
	f.agree(t, c, "noise temperature added by rain", added)
	f.agree(t, c, "rise of noise", rise)
	f.agree(t, c, "C/N in rain", f.in(t, c, "clear-sky C/N")-fall)

	c = "fade margin with noise rise"
	fall, _, _ = inRain(f.in(t, c, "clear-sky system noise temperature"), f[c]["attenuation that brings C/N to the threshold"].recomputed, f.in(t, c, "rain physical temperature"))
	if d := f.in(t, c, "clear-sky C/N") - fall - f.in(t, c, "threshold C/N"); math.Abs(d) > 0.002 {
		t.Errorf("%s: %.4f dB over the threshold at %.4f dB of rain, want 0", c, d, f[c]["attenuation that brings C/N to the threshold"].recomputed)
	}
}

// Maini & Agrawal, Satellite Communication, examples 7.1 and 7.15; a university
// exercise (UPCT); Pratt, Bostian & Allnutt, table 4.4 (inputs from memory).
func TestTextbookOthers(t *testing.T) {
	f, c := readFigures(t, "budget_b7.csv"), "flux density"
	eirp := hz(f.in(t, c, "transmit power") * f.in(t, c, "antenna gain"))
	b := budgetOf(t, LinkSpec{Transmitter: radio(4000, eirp), Antenna: ratioListener(0)}, unit.Length(f.in(t, c, "distance"))*unit.Kilometre)
	if got := math.Pow(10, b.PowerFluxDensity/10) * 1e12; math.Abs(got-f.in(t, c, "flux density")) > 5e-5 {
		t.Errorf("%s: got %.6f pW/m², printed %g", c, got, f.in(t, c, "flux density"))
	}

	// The loss is computed with c = 3e8 m/s there and the noise with k = 1.38e-23 J/K,
	// which makes 0.006 and 0.002 dB.
	c = "complete uplink budget 6 GHz"
	tx := radio(f.in(t, c, "frequency")*1e3, f.in(t, c, "station EIRP"), f.in(t, c, "atmospheric loss"))
	gain := 10 * math.Log10(4*math.Pi*f.in(t, c, "satellite antenna effective efficiency")*f.in(t, c, "satellite antenna area")/0.0025) // λ 0.05 m as there
	near(t, c+", gain", gain, f[c]["satellite antenna gain"].recomputed, 5e-4)
	b = budgetOf(t, LinkSpec{Transmitter: tx, Antenna: listener(gain, f.in(t, c, "receiver noise temperature"))}, unit.Length(f.in(t, c, "distance"))*unit.Kilometre)
	cn := float64(b.CN0) - hz(f.in(t, c, "bandwidth")*1e6)
	for quantity, got := range map[string]float64{"received power": b.ReceivedPowerDBm - 30, "C/N": cn, "margin": cn - f.in(t, c, "required C/N"), "free-space loss": b.term("free-space loss")} {
		near(t, c+", "+quantity, got, f[c][quantity].published, 0.05)
		near(t, c+", "+quantity, got, f[c][quantity].recomputed, 0.0085)
	}

	c = "C-band uplink design"
	carrier := unit.Frequency(f.in(t, c, "frequency")) * unit.Gigahertz
	dish := &station.Antenna{Kind: station.Dish, Diameter: unit.Length(f.in(t, c, "dish diameter")), Efficiency: f.in(t, c, "aperture efficiency") / 100,
		Noise: &station.Noise{SystemTemperature: station.Constant(f.in(t, c, "system noise temperature"))}}
	b = budgetOf(t, LinkSpec{Transmitter: radio(carrier.Megahertz(), 0), Antenna: dish}, unit.Length(f.in(t, c, "distance"))*unit.Kilometre)
	f.agree(t, c, "antenna gain", b.term("station antenna gain"))
	f.agree(t, c, "free-space loss", b.term("free-space loss"))
	f.agree(t, c, "noise power", b.ReceivedPowerDBm-30-float64(b.CN0)+hz(f.in(t, c, "noise bandwidth")*1e6))

	c = "C-band GEO downlink, clear sky"
	tx = radio(4000, f.in(t, c, "transmit power")+f.in(t, c, "satellite antenna gain"), f.in(t, c, "output back-off"), f.in(t, c, "edge-of-beam loss"), f.in(t, c, "atmospheric loss"), f.in(t, c, "other losses"))
	b = budgetOf(t, LinkSpec{Transmitter: tx, Antenna: listener(f.in(t, c, "station antenna gain"), f.in(t, c, "system noise temperature"))}, rangeOfLoss(f.in(t, c, "free-space loss 4 GHz"), tx.Frequency))
	near(t, c+", received power", b.ReceivedPowerDBm-30, f[c]["received power"].published, 0.05)
	near(t, c+", C/N", float64(b.CN0)-hz(f.in(t, c, "noise bandwidth")*1e6), f[c]["C/N"].published, 0.05)
}

func near(t *testing.T, what string, got, want, tol float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tol) {
		t.Errorf("%s: got %.6f, want %.6f, over %g apart", what, got, want, tol)
	}
}

// testdata/link/free_space_loss.csv (computed to four decimals), the published losses,
// and the spreading losses: what the flux density of a budget is under its EIRP.
func TestFreeSpaceTables(t *testing.T) {
	for _, r := range readRows(t, "free_space_loss.csv") {
		got := float64(FreeSpaceLoss(unit.Length(number(r["distance_km"]))*unit.Kilometre, unit.Frequency(number(r["frequency_mhz"]))*unit.Megahertz))
		near(t, r["frequency_mhz"]+" MHz, "+r["distance_km"]+" km", got, number(r["fsl_exact_db"]), 5.1e-5)
	}
	for _, r := range readRows(t, "free_space_loss_published.csv") {
		got := float64(FreeSpaceLoss(unit.Length(number(r["distance_km"]))*unit.Kilometre, unit.Frequency(number(r["frequency_mhz"]))*unit.Megahertz))
		near(t, r["source"]+", from the inputs", got, number(r["fsl_exact_db"]), 5.1e-4)
		// 0.1 dB holds every printed constant (32.4, c = 3e8) and rounding but the 1 dB ones.
		near(t, r["source"]+", printed", got, number(r["published_fsl_db"]), max(0.1, halfDigit(r["published_fsl_db"])))
	}
	for _, r := range readRows(t, "spreading_loss.csv") {
		b := budgetOf(t, LinkSpec{Transmitter: radio(4000, 0), Antenna: ratioListener(0)}, unit.Length(number(r["slant_range_km"]))*unit.Kilometre)
		got := -b.PowerFluxDensity
		near(t, r["slant_range_km"]+" km", got, number(r["spreading_loss_10log_4_pi_d2_db_m2"]), 5.1e-5)
	}
	for _, v := range []unit.DB{FreeSpaceLoss(0, 1), FreeSpaceLoss(1, 0), FreeSpaceLoss(-1, 1), FreeSpaceLoss(unit.Length(math.NaN()), 1)} {
		if !math.IsNaN(float64(v)) {
			t.Errorf("no distance has the loss %g dB", float64(v))
		}
	}
}
