package station

import (
	"math"
	"math/cmplx"
	"testing"

	"slantwise/orbit/unit"
)

// onAxis is the density on the axis of a uniformly lit circular aperture over P/A, by
// Fresnel's integral summed over rings: |k/R ∫ r exp(i k r²/(2R)) dr|².
func onAxis(d, lambda, distance float64) float64 {
	const rings = 200_000
	k, h := 2*math.Pi/lambda, d/2/rings
	sum := complex(0, 0)
	for i := range rings {
		r := (float64(i) + 0.5) * h
		sum += complex(r*h, 0) * cmplx.Exp(complex(0, k*r*r/(2*distance)))
	}
	a := cmplx.Abs(sum) * k / distance
	return a * a
}

func sender(t *testing.T) *Antenna {
	t.Helper()
	power, err := unit.LevelWatts(100)
	if err != nil {
		t.Fatal(err)
	}
	a := &Antenna{Name: "dish", Kind: Dish, Diameter: 3.7, Efficiency: 1, Transmit: &Transmit{Power: power}}
	out, err := a.Sending(2065 * unit.Megahertz)
	if err != nil {
		t.Fatal(err)
	}
	return out
}

// TestNearField holds the bound to Fresnel's integral, and the far field to EIRP over the
// sphere.
func TestNearField(t *testing.T) {
	a := sender(t)
	f := 2065 * unit.Megahertz
	lambda, area := f.Wavelength().Metres(), math.Pi*3.7*3.7/4
	r, ok := a.RadiationAt(f)
	if !ok {
		t.Fatal("no radiation")
	}
	if got := r.NearFieldEnd.Metres(); math.Abs(got-3.7*3.7/4/lambda) > 1e-9 {
		t.Errorf("near field ends at %v m", got)
	}
	for x := 0.05; x < 40; x *= 1.11 {
		d := r.NearFieldEnd.Metres() * x
		want := onAxis(3.7, lambda, d) * 100 / area
		got := r.DensityAt(unit.Length(d))
		if want > got*(1+1e-6) || x > 1 && x < 8 && math.Abs(got/want-1) > 1e-6 {
			t.Errorf("at %.3g near fields: %.6g W/m², Fresnel's integral %.6g", x, got, want)
		}
	}
	d := 100 * r.FarFieldFrom.Metres()
	if got, want := r.DensityAt(unit.Length(d)), r.EIRP.Watts()/(4*math.Pi*d*d); math.Abs(got/want-1) > 1e-5 {
		t.Errorf("far away %.6g W/m², want %.6g", got, want)
	}
	if got := r.DensityAt(1e-3); got != 4*100/area {
		t.Errorf("at the aperture %v W/m²", got)
	}
}

// TestRadiationWithoutAperture: of an antenna whose size is not known the far field alone.
func TestRadiationWithoutAperture(t *testing.T) {
	power, err := unit.LevelWatts(50)
	if err != nil {
		t.Fatal(err)
	}
	a := &Antenna{Name: "yagi", Kind: Directive, Gain: Constant(13), Transmit: &Transmit{Power: power, LineLoss: 3},
		ExtraLosses: []Loss{{Name: "splitter", Loss: 1}}}
	r, ok := a.RadiationAt(145 * unit.Megahertz)
	// 50 W less 4 dB times 13 dBi: 397 W over 4π (10 m)².
	if got, want := r.DensityAt(10), 50*math.Pow(10, 0.9)/(400*math.Pi); !ok || math.Abs(got/want-1) > 1e-9 || !math.IsNaN(r.NearFieldMost) {
		t.Errorf("%v W/m², want %v; near field %v", got, want, r.NearFieldMost)
	}
}
