package propagation

import (
	"errors"
	"math"
	"testing"

	"slantwise/orbit/unit"
)

func rise(t *testing.T, d Disc, gain unit.DB, width, off unit.Angle) float64 {
	t.Helper()
	k, err := AntennaRise(d, gain, width, off)
	if err != nil {
		t.Fatal(err)
	}
	return k.Kelvins()
}

// The noise reference: 70 solar flux units at 2250 MHz into 35 dBi raise the antenna
// by S lambda² G/(8 pi k) = 1132 K (computed there), where the beam is wide.
func TestSunInAWideBeam(t *testing.T) {
	sun, err := SunOfFlux(2250*unit.Megahertz, 70*SolarFluxUnit)
	if err != nil {
		t.Fatal(err)
	}
	if got := rise(t, sun, 35, 30*unit.Degree, 0); math.Abs(got-1132) > 1 {
		t.Errorf("got %.2f K, want 1132 K", got)
	}
}

// On the axis the integral has a closed form: T G w²/(16 x 1.2 ln 10) (1 - 10^(-1.2 (D/2w)²)), with
// the disc's radius in the exponent; derived. Off the axis by a half beamwidth a small
// disc falls by 3 dB.
func TestRiseAgainstClosedForm(t *testing.T) {
	for _, width := range []float64{0.1, 0.3, 0.7, 3} {
		d := Disc{1e4, SunDiameter}
		w := width * math.Pi / 180
		x := SunDiameter.Radians() / (2 * w)
		want := 1e4 * 1e4 / (4 * math.Pi) * math.Pi * w * w / (1.2 * math.Ln10) * (1 - math.Pow(10, -1.2*x*x))
		if got := rise(t, d, 40, unit.Angle(width)*unit.Degree, 0); math.Abs(got/want-1) > 1e-3 {
			t.Errorf("beam of %g deg: got %.4f K, want %.4f K", width, got, want)
		}
	}
	d := Disc{1e4, 0.01 * unit.Degree}
	if got := rise(t, d, 30, 4*unit.Degree, 2*unit.Degree) / rise(t, d, 30, 4*unit.Degree, 0); math.Abs(10*math.Log10(got)+3) > 1e-3 {
		t.Errorf("half a beamwidth off the axis: %.4f dB, want -3 dB", 10*math.Log10(got))
	}
	if got := rise(t, d, 30, 1*unit.Degree, 5*unit.Degree); got != 0 {
		t.Errorf("far outside the beam: %g K", got)
	}
}

// The quiet Sun's flux at 2800 MHz is 65 to 70 units (noise reference, from memory);
// the reading of the figure is good to a factor of 1.5.
func TestQuietSun(t *testing.T) {
	sun, err := QuietSun(2.8 * unit.Gigahertz)
	if err != nil {
		t.Fatal(err)
	}
	lambda := (2.8 * unit.Gigahertz).Wavelength().Metres()
	units := 2 * unit.Boltzmann * sun.Brightness.Kelvins() / (lambda * lambda) * solidAngle(SunDiameter) / SolarFluxUnit
	if units < 67.5/1.5 || units > 67.5*1.5 {
		t.Errorf("%.1f K is a flux of %.1f units", sun.Brightness, units)
	}
	var re *unit.RangeError
	if _, err := QuietSun(200 * unit.Gigahertz); !errors.As(err, &re) {
		t.Errorf("200 GHz: got %v, want a *RangeError", err)
	}
	for _, bad := range []struct{ width, off unit.Angle }{{0, 0}, {1, -1}, {unit.Angle(math.NaN()), 0}} {
		if _, err := AntennaRise(sun, 30, bad.width, bad.off); !errors.As(err, &re) {
			t.Errorf("beam %v, off axis %v: got %v, want a *RangeError", bad.width, bad.off, err)
		}
	}
}
