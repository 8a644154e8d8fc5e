package tolerance_test

import (
	"fmt"
	"math"
	"strings"
	"testing"

	"slantwise/downlink"
	"slantwise/downlink/modem"
	"slantwise/downlink/tolerance"
	"slantwise/orbit/unit"
	"slantwise/station"
)

func sampleBudget(t *testing.T, noise *station.Noise, gOverT *station.Tabulated) (*downlink.Budget, unit.DB) {
	t.Helper()
	eirp := unit.LevelDBm(38.3)
	antenna := &station.Antenna{Name: "5 m", Kind: station.Dish, Diameter: 5 * unit.Metre, Efficiency: 0.5, Noise: noise}
	if gOverT != nil {
		antenna = &station.Antenna{Name: "measured", Kind: station.Directive, GOverT: gOverT}
	}
	link, err := downlink.NewLink(downlink.LinkSpec{
		Transmitter: downlink.Transmitter{Name: "S-band", Frequency: 2200 * unit.Megahertz, EIRP: &eirp, ImplementationLoss: 1.5},
		Mode:        &modem.Mode{Name: "m", Modulation: "qpsk", Coding: "ccsds-conv-1-2", DataRate: 2e6},
		Antenna:     antenna,
	})
	if err != nil {
		t.Fatal(err)
	}
	g, err := link.StatedGeometry(1397*unit.Kilometre, 30*unit.Degree, nil, nil)
	if err != nil {
		t.Fatal(err)
	}
	b, err := link.At(g)
	if err != nil {
		t.Fatal(err)
	}
	return b, 1.5
}

// TestFromBudgetIsTheMargin: the sum of the items is the budget's own margin, with
// noise and with a measured G/T.
func TestFromBudgetIsTheMargin(t *testing.T) {
	for name, b := range map[string]func() (*downlink.Budget, unit.DB){
		"noise": func() (*downlink.Budget, unit.DB) {
			return sampleBudget(t, &station.Noise{SystemTemperature: station.Constant(130)}, nil)
		},
		"measured G/T": func() (*downlink.Budget, unit.DB) { return sampleBudget(t, nil, station.Constant(14.2)) },
	} {
		budget, loss := b()
		items, err := tolerance.FromBudget(budget, loss, []tolerance.Spread{
			{Term: "free-space loss", Favourable: 0.1, Adverse: -0.1, Law: tolerance.Uniform, Source: "orbit"},
			{Term: tolerance.ImplementationItem, Favourable: 0.3, Adverse: -0.6, Law: tolerance.Triangular},
		})
		if err != nil {
			t.Fatal(err)
		}
		table, err := tolerance.Evaluate(items, nil)
		if err != nil {
			t.Fatal(err)
		}
		near(t, name+": nominal", float64(table.Nominal), float64(budget.Margin), 1e-9)
		near(t, name+": worst", float64(table.Nominal-table.Worst), 0.7, 1e-9)
	}
}

func TestFromBudgetRefuses(t *testing.T) {
	b, loss := sampleBudget(t, &station.Noise{SystemTemperature: station.Constant(130)}, nil)
	for _, c := range []struct {
		spreads []tolerance.Spread
		want    string
	}{
		{[]tolerance.Spread{{Term: "rain"}}, `tolerance of "rain": the budget has no such term; it has "EIRP", "free-space loss"`},
		{[]tolerance.Spread{{Term: "EIRP"}, {Term: "EIRP"}}, `tolerance of "EIRP": it is given twice; give it once`},
	} {
		if _, err := tolerance.FromBudget(b, loss, c.spreads); err == nil || !strings.HasPrefix(err.Error(), c.want) {
			t.Errorf("got %v, want %s", err, c.want)
		}
	}
	b.Margin = unit.DB(math.NaN())
	if _, err := tolerance.FromBudget(b, loss, nil); err == nil {
		t.Error("a budget without margin was accepted")
	}
}

// Two terms, one known to half a decibel either way, one with a long tail to the
// worse side.
func ExampleEvaluate() {
	table, err := tolerance.Evaluate([]tolerance.Item{
		{Name: "transmitter power", Design: 10, Favourable: 0.5, Adverse: -0.5, Law: tolerance.Uniform},
		{Name: "all losses", Design: -6, Favourable: 0, Adverse: -1.5, Law: tolerance.Triangular},
	}, []tolerance.Criterion{{Name: "with care", Statement: tolerance.MeanLessSigmas, Sigmas: 3, Least: 2}})
	if err != nil {
		fmt.Println(err)
		return
	}
	v := table.Verdicts[0]
	fmt.Printf("nominal %.2f, mean %.2f, worst %.2f dB; %s reaches %.2f dB: %v\n",
		float64(table.Nominal), float64(table.Mean), float64(table.Worst), v.Name, float64(v.Reached), v.Met)
	// Output: nominal 4.00, mean 3.50, worst 2.00 dB; with care reaches 2.13 dB: true
}
