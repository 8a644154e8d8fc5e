package downlink

import (
	"strings"
	"testing"

	"slantwise/downlink/propagation"
	"slantwise/orbit/unit"
)

// Terms and warnings by frequency and percentage. 0.2 dB at 0.5 GHz and 1 % is P.618-14
// Table 2; 2.36e-14 B N/f² of P.531-14 §4.2 at 0.4 GHz, 2e17 1/m² and 50 µT is 1.475 rad,
// whose mean of cos² is 0.5 + sin(2.95)/5.9 = 0.5323, 2.74 dB.
func TestIonosphere(t *testing.T) {
	stated := unit.DB(1.5)
	for _, c := range []struct {
		what    string
		spec    IonosphereSpec
		names   string
		values  []float64
		missing string
	}{
		{"UHF", IonosphereSpec{Frequency: 500 * unit.Megahertz, Exceedance: 1 * propagation.Percent}, "ionospheric scintillation", []float64{0.2}, ""},
		{"clear sky", IonosphereSpec{Frequency: 500 * unit.Megahertz, Exceedance: 1 * propagation.Percent, ClearSky: true}, "", nil, ""},
		{"S band", IonosphereSpec{Frequency: 2200 * unit.Megahertz, Exceedance: 1 * propagation.Percent}, "", nil, ""},
		{"10 %", IonosphereSpec{Frequency: 500 * unit.Megahertz, Exceedance: 10 * propagation.Percent}, "", nil, "not 10 %"},
		{"stated", IonosphereSpec{Frequency: 500 * unit.Megahertz, Exceedance: 10 * propagation.Percent, Scintillation: &stated}, "ionospheric scintillation", []float64{1.5}, ""},
		{"linear", IonosphereSpec{Frequency: 400 * unit.Megahertz, ClearSky: true, Linear: true}, "ionospheric polarisation rotation", []float64{2.738}, ""},
		{"50 MHz", IonosphereSpec{Frequency: 50 * unit.Megahertz, Exceedance: 1 * propagation.Percent, Linear: true}, "", nil, "begins at 100 MHz"},
	} {
		m, err := NewIonosphere(c.spec)
		if err != nil {
			t.Errorf("%s: %v", c.what, err)
			continue
		}
		var names []string
		for _, term := range m.Terms() {
			names = append(names, term.Name)
		}
		values := make([]float64, len(names))
		if err := m.Losses(&Geometry{}, values); err != nil {
			t.Fatal(err)
		}
		if strings.Join(names, ", ") != c.names || len(values) != len(c.values) {
			t.Errorf("%s: terms %q, want %q", c.what, names, c.names)
			continue
		}
		for i, want := range c.values {
			if d := values[i] - want; d > 1e-3 || d < -1e-3 { // half the last digit of the sources, about
				t.Errorf("%s: %s %.4f dB, want %.3f", c.what, names[i], values[i], want)
			}
		}
		told := ""
		for _, n := range m.Notes() {
			if n.Kind == Warning {
				told += n.Text
			}
		}
		if !strings.Contains(told, c.missing) || c.missing == "" && told != "" {
			t.Errorf("%s: warnings %q, want %q in them", c.what, told, c.missing)
		}
	}
}
