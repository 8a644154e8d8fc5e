package downlink

import (
	"encoding/csv"
	"math"
	"os"
	"strconv"
	"strings"
	"testing"

	"slantwise/downlink/modem"
	"slantwise/orbit/unit"
	"slantwise/station"
)

// figures are the rows of a published budget, by case and quantity.
type figures map[string]map[string]figure

type figure struct {
	published  float64
	recomputed float64 // NaN where there is none
	text       string  // published, as printed
}

// readFigures reads a budget of testdata/link; testdata/SOURCES.md says where it is
// from.
func readFigures(t *testing.T, name string) figures {
	t.Helper()
	out := figures{}
	for _, r := range readRows(t, name) {
		if out[r["case"]] == nil {
			out[r["case"]] = map[string]figure{}
		}
		quantity := r["quantity"]
		if _, twice := out[r["case"]][quantity]; twice { // in another unit
			quantity += ", " + r["unit"]
		}
		out[r["case"]][quantity] = figure{number(r["published_value"]), number(r["recomputed_value"]), r["published_value"]}
	}
	return out
}

func readRows(t *testing.T, name string) []map[string]string {
	t.Helper()
	f, err := os.Open("../testdata/link/" + name)
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	rows, err := csv.NewReader(f).ReadAll()
	if err != nil || len(rows) < 2 {
		t.Fatalf("%s: %d rows, %v", name, len(rows), err)
	}
	var out []map[string]string
	for _, r := range rows[1:] {
		row := map[string]string{}
		for i, column := range rows[0] {
			row[column] = r[i]
		}
		out = append(out, row)
	}
	return out
}

func number(s string) float64 {
	v, err := strconv.ParseFloat(s, 64)
	if err != nil {
		return math.NaN()
	}
	return v
}

// in returns a printed input.
func (f figures) in(t *testing.T, name, quantity string) float64 {
	t.Helper()
	v, ok := f[name][quantity]
	if !ok || math.IsNaN(v.published) {
		t.Fatalf("%s: no printed %s", name, quantity)
	}
	return v.published
}

// agree compares with the printed value, to 0.05 dB or half of its last digit where
// that is coarser, and with the value recomputed from the printed inputs to 0.002 dB
// (-228.6 stands there for the Boltzmann constant, 0.0008 dB off, and three decimals).
func (f figures) agree(t *testing.T, name, quantity string, got float64) {
	t.Helper()
	f.agreeRecomputed(t, name, quantity, got)
	f.agreePrinted(t, name, quantity, got)
}

// agreePrinted compares with the printed value alone.
func (f figures) agreePrinted(t *testing.T, name, quantity string, got float64) {
	t.Helper()
	v := f[name][quantity]
	if tol := max(0.05, halfDigit(v.text)+1e-3); !(math.Abs(got-v.published) <= tol) {
		t.Errorf("%s, %s: got %.4f, printed %s, over %.3f apart", name, quantity, got, v.text, tol)
	}
}

func (f figures) agreeRecomputed(t *testing.T, name, quantity string, got float64) {
	t.Helper()
	v, ok := f[name][quantity]
	if !ok {
		t.Fatalf("%s has no %s", name, quantity)
	}
	if !math.IsNaN(v.recomputed) && math.Abs(got-v.recomputed) > 0.002 {
		t.Errorf("%s, %s: got %.4f, its inputs give %.4f", name, quantity, got, v.recomputed)
	}
}

// halfDigit is half of the last digit that a number is printed with.
func halfDigit(s string) float64 {
	_, decimals, _ := strings.Cut(s, ".")
	return 0.5 * math.Pow(10, -float64(len(decimals)))
}

// rangeOfLoss is the range at which the free-space loss is loss: some budgets print
// the loss and no range.
func rangeOfLoss(lossDB float64, f unit.Frequency) unit.Length {
	return unit.Length(math.Pow(10, lossDB/20) * f.Wavelength().Metres() / (4 * math.Pi))
}

// budgetOf evaluates a stated geometry at 30 deg of elevation, which no published
// budget depends on.
func budgetOf(t *testing.T, spec LinkSpec, slant unit.Length) *Budget {
	t.Helper()
	l, err := NewLink(spec)
	if err != nil {
		t.Fatal(err)
	}
	g, err := l.StatedGeometry(slant, 30*unit.Degree, nil, nil)
	if err != nil {
		t.Fatal(err)
	}
	b, err := l.At(g)
	if err != nil {
		t.Fatal(err)
	}
	return b
}

// radio is a transmitter with an EIRP in dBW and losses of its own, in dB.
func radio(mhz, eirpDBW float64, losses ...float64) Transmitter {
	eirp := unit.LevelDBW(eirpDBW)
	t := Transmitter{Name: "published", Frequency: unit.Frequency(mhz) * unit.Megahertz, EIRP: &eirp}
	for _, x := range losses {
		t.ExtraLosses = append(t.ExtraLosses, Loss{"loss", unit.DB(x)})
	}
	return t
}

// listener is an antenna with a gain in dBi and a system noise in K.
func listener(gain, kelvin float64) *station.Antenna {
	return &station.Antenna{Name: "published", Kind: station.Directive, Gain: station.Constant(gain),
		Noise: &station.Noise{SystemTemperature: station.Constant(kelvin)}}
}

// ratioListener is an antenna of which G/T in dB/K alone is known.
func ratioListener(gOverT float64) *station.Antenna {
	return &station.Antenna{Name: "published", Kind: station.Directive, GOverT: station.Constant(gOverT)}
}

// plainMode has a rate and a threshold of its own.
func plainMode(rate, required float64) *modem.Mode {
	r := unit.DB(required)
	return &modem.Mode{Name: "published", Modulation: "qpsk", Coding: "none", DataRate: unit.BitRate(rate), RequiredEbN0: &r}
}

// term returns a term's value by name, NaN where there is none.
func (b *Budget) term(name string) float64 {
	for _, t := range b.Terms {
		if t.Name == name {
			return t.Value
		}
	}
	return math.NaN()
}
