package propagation

import (
	"errors"
	"testing"

	"slantwise/orbit/unit"
)

func TestCurvePublished(t *testing.T) {
	w := worst{rel: 1e-6}
	at := func(r sheetRow, lower, upper string) float64 {
		t.Helper()
		points := []Exceeded{{Exceedance(r.number("lower_node_percent")) * Percent, r.number(lower)}}
		if r.text("lower_node_percent") != r.text("upper_node_percent") {
			points = append(points, Exceeded{Exceedance(r.number("upper_node_percent")) * Percent, r.number(upper)})
		}
		c, err := NewCurve("value", "", points...)
		noError(r, err)
		v, err := c.At(Exceedance(r.number("exceedance_percent")) * Percent)
		noError(r, err)
		return v
	}
	openSheet(t, "p836_6_water_vapour.csv").each(func(r sheetRow) {
		w.check(r, "density", at(r, "water_vapour_density_lower_node_g_m3", "water_vapour_density_upper_node_g_m3"), r.number("water_vapour_density_g_m3"))
		w.check(r, "column", at(r, "integrated_water_vapour_lower_node_kg_m2", "integrated_water_vapour_upper_node_kg_m2"), r.number("integrated_water_vapour_kg_m2"))
	})
	openSheet(t, "p840_9_cloud_liquid_water.csv").each(func(r sheetRow) {
		w.check(r, "liquid water", at(r, "cloud_liquid_water_lower_node_kg_m2", "cloud_liquid_water_upper_node_kg_m2"), r.number("cloud_liquid_water_kg_m2"))
	})
	w.report(t, "P.836-6 and P.840-9 between percentages")
}

func TestCurveKeepsToItsPercentages(t *testing.T) {
	c, err := NewCurve("column", "kg/m2", Exceeded{5 * Percent, 30}, Exceeded{1 * Percent, 40})
	if err != nil {
		t.Fatal(err)
	}
	for _, p := range []Exceedance{0.5 * Percent, 6 * Percent} {
		var re *unit.RangeError
		if _, err := c.At(p); !errors.As(err, &re) {
			t.Errorf("At(%g %%): got %v, want a *RangeError", p.Percents(), err)
		}
	}
	for _, bad := range [][]Exceeded{
		{{0, 1}}, {{1.5, 1}}, {{0.1, -1}}, {{0.1, 1}, {0.1, 1}}, {{0.1, 1}, {0.2, 2}},
	} {
		if _, err := NewCurve("column", "kg/m2", bad...); err == nil {
			t.Errorf("NewCurve(%v): no error", bad)
		}
	}
}
