package station

import (
	"math"
	"strings"
	"testing"

	"slantwise/orbit/unit"
)

// testdata/link/dish_gain.csv: computed to three decimals, beamwidth to four.
func TestDishGainTable(t *testing.T) {
	rows := readTable(t, "dish_gain.csv")
	for _, r := range rows {
		f := unit.Frequency(r.number(t, "frequency_mhz")) * unit.Megahertz
		d := unit.Length(r.number(t, "diameter_m"))
		for _, e := range []struct {
			column string
			eff    float64
		}{{"gain_eff_50pct_dbi", .5}, {"gain_eff_55pct_dbi", .55}, {"gain_eff_60pct_dbi", .6}, {"gain_eff_65pct_dbi", .65}, {"gain_eff_70pct_dbi", .7}} {
			want := r.number(t, e.column)
			if got := float64(DishGain(d, f, e.eff)); math.Abs(got-want) > 5.1e-4 {
				t.Errorf("%g m at %g MHz, %g: got %.4f dBi, want %.3f, half the last digit allowed", d.Metres(), f.Megahertz(), e.eff, got, want)
			}
		}
		want := r.number(t, "hpbw_70_lambda_over_d_deg")
		if got := DishBeamwidth(d, f, DefaultBeamwidthFactor).Degrees(); math.Abs(got-want) > 5.1e-5 {
			t.Errorf("%g m at %g MHz: beamwidth got %.5f deg, want %.4f", d.Metres(), f.Megahertz(), got, want)
		}
	}
	if len(rows) < 70 {
		t.Errorf("only %d rows", len(rows))
	}
}

// testdata/link/published_antennas.csv, rows that were seen: half of the last printed
// digit, and 0.05 dB more for a printed efficiency in whole percent.
func TestPublishedAntennas(t *testing.T) {
	checked := 0
	for _, r := range readTable(t, "published_antennas.csv") {
		if r["diameter_m"] == "" {
			continue // a gain without a size has nothing to compare
		}
		f := unit.Frequency(r.number(t, "frequency_mhz")) * unit.Megahertz
		d := unit.Length(r.number(t, "diameter_m"))
		printed := r.number(t, "gain_min_dbi")
		if r["efficiency_percent"] == "" {
			// The efficiency is not printed: the gain must be one that a dish can have.
			if perfect := float64(DishGain(d, f, 1)); printed > perfect || printed < perfect-10*math.Log10(1/0.3) {
				t.Errorf("%s: %g dBi printed, a perfect dish has %.2f dBi", r["antenna"], printed, perfect)
			}
			continue
		}
		checked++
		got := float64(DishGain(d, f, r.number(t, "efficiency_percent")/100))
		if math.Abs(got-printed) > halfDigit(r["gain_min_dbi"])+0.005 {
			t.Errorf("%s (%s): got %.3f dBi, want %s", r["antenna"], r["source"], got, r["gain_min_dbi"])
		}
	}
	if checked < 6 {
		t.Errorf("only %d antennas with an efficiency", checked)
	}
}

// halfDigit is half of the last digit that a number is printed with.
func halfDigit(s string) float64 {
	_, decimals, _ := strings.Cut(s, ".")
	return 0.5 * math.Pow(10, -float64(len(decimals)))
}

func TestDishGainOfNothing(t *testing.T) {
	for _, g := range []unit.DB{DishGain(0, unit.Gigahertz, .6), DishGain(1, 0, .6), DishGain(1, unit.Gigahertz, 0), DishGain(1, unit.Gigahertz, 1.1), DishGain(unit.Length(math.NaN()), unit.Gigahertz, .6)} {
		if !math.IsNaN(float64(g)) {
			t.Errorf("a dish that cannot be has %g dBi", float64(g))
		}
	}
}

// testdata/link/surface_loss.csv: Ruze, computed to four decimals.
func TestSurfaceLoss(t *testing.T) {
	for _, r := range readTable(t, "surface_loss.csv") {
		f := unit.Frequency(r.number(t, "frequency_mhz")) * unit.Megahertz
		rms := unit.Length(r.number(t, "surface_rms_mm")) * unit.Millimetre
		want := r.number(t, "ruze_loss_db")
		if got := float64(SurfaceLoss(rms, f)); math.Abs(got-want) > 5.1e-5 {
			t.Errorf("%g mm at %g MHz: got %.5f dB, want %.4f", rms.Metres()*1000, f.Megahertz(), got, want)
		}
		if got, want := SurfaceLossHolds(rms, f), r.number(t, "rms_over_wavelength") <= 0.05; got != want {
			t.Errorf("%g mm at %g MHz: formula holds %v, want %v", rms.Metres()*1000, f.Megahertz(), got, want)
		}
	}
}

// The unblocked part of the aperture illuminates the axis alone: a tenth in shadow
// leaves 0.9² of the power (aperture theory, derived).
func TestBlockageLoss(t *testing.T) {
	for _, c := range []struct{ b, want float64 }{{0, 0}, {0.1, -10 * math.Log10(0.81)}, {0.5, 10 * math.Log10(4)}} {
		if got := float64(BlockageLoss(c.b)); math.Abs(got-c.want) > 1e-12 {
			t.Errorf("blockage %g: got %.6f dB, want %.6f", c.b, got, c.want)
		}
	}
}

// testdata/link/pointing_loss.csv: the rule as it is, and how far a uniform circular
// aperture lies from it.
func TestPointingLoss(t *testing.T) {
	const w = 2 * unit.Degree
	for _, r := range readTable(t, "pointing_loss.csv") {
		x := r.number(t, "error_over_hpbw")
		e := unit.Angle(x * w.Radians())
		got := float64(PointingLoss(e, w))
		if want := r.number(t, "loss_12_rule_db"); math.Abs(got-want) > 5.1e-5 {
			t.Errorf("%g beamwidths: got %.5f dB, want %.4f", x, got, want)
		}
		allowed := 4.3
		if x <= 0.5 {
			allowed = 0.04
		}
		if exact := r.number(t, "loss_uniform_circular_aperture_db"); math.Abs(got-exact) > allowed {
			t.Errorf("%g beamwidths: the rule gives %.3f dB, a uniform aperture %.3f, over %g apart", x, got, exact, allowed)
		}
		if !InMainLobe(e, w*(1+1e-12)) {
			t.Errorf("%g beamwidths count as outside the main lobe", x)
		}
	}
	if InMainLobe(w*1.001, w) || InMainLobe(unit.Angle(math.NaN()), w) {
		t.Error("more than a beamwidth counts as inside the main lobe")
	}
}

func TestAngleBetween(t *testing.T) {
	for _, c := range []struct {
		name                   string
		az1, el1, az2, el2, to float64
	}{
		{"zenith from the horizon: definition", 0, 90, 123, 0, 90},
		{"along the horizon over north: definition", 350, 0, 20, 0, 30},
		{"opposite: definition", 10, 20, 190, -20, 180},
		{"same direction: definition", 10, 20, 370, 20, 0},
		{"60 deg of azimuth at 45 deg elevation: acos(1/2 + 1/2 cos 60 deg)", 0, 45, 60, 45, 41.40962210927086},
	} {
		a := Direction{unit.Angle(c.az1) * unit.Degree, unit.Angle(c.el1) * unit.Degree}
		b := Direction{unit.Angle(c.az2) * unit.Degree, unit.Angle(c.el2) * unit.Degree}
		if got := AngleBetween(a, b).Degrees(); math.Abs(got-c.to) > 1e-12*180 {
			t.Errorf("%s: got %.15g deg, want %.15g", c.name, got, c.to)
		}
	}
}
