package cli

import (
	"fmt"
	"io"

	"slantwise/cmd/internal/atomicfile"
	"slantwise/downlink"
	"slantwise/reports"
)

// writePage writes the sweep as a page with charts.
func (a *pathAnswer) writePage(env *Env, o *sweepOptions, axis *sweepAxis) error {
	file, content := o.into, a.curves(axis)
	content.Scriptless = o.static
	page, err := reports.CurvesPage(content)
	if err != nil {
		return err
	}
	err = atomicfile.Write(file, 0o644, func(w io.Writer) error {
		_, err := w.Write(page)
		return err
	})
	if err != nil {
		return err
	}
	env.note("open %s in a browser", printable(file))
	return nil
}

// column returns the values of one of pathColumns over the points.
func (a *pathAnswer) column(name string) []float64 {
	out := make([]float64, len(a.points))
	for i := range a.points {
		for k, c := range pathColumns {
			if c == name {
				out[i] = a.points[i].numbers()[k]
			}
		}
	}
	return out
}

// curves lays out the page of a sweep. Lines without a value anywhere are left out.
func (a *pathAnswer) curves(axis *sweepAxis) *reports.Curves {
	x := map[string]string{"elevation": "elevation_deg", "frequency": "frequency_mhz", "percentage": "exceeded_percent"}[axis.name]
	head := a.head()
	c := &reports.Curves{Title: "Path to " + a.target.station.Site.Name, Lines: head[:1], Warnings: head[1:],
		X: reports.Axis{Name: axis.name, Unit: axis.unit, Values: a.column(x), Logarithmic: axis.logarithmic, Decimals: 3}}
	c.Basis = about(basisOf(a.target.scenario, nil, reports.CautionPath), "station "+a.target.station.Site.Name)
	if axis.name != "elevation" {
		c.Lines = append(c.Lines, fmt.Sprintf("at an elevation of %g deg", a.points[0].elevation.Degrees()))
	}
	for _, n := range a.notes {
		if n.Kind == downlink.Warning {
			c.Warnings = append(c.Warnings, n.Text)
		} else {
			c.Notes = append(c.Notes, reports.Note{Kind: noteKinds[n.Kind], Text: n.Text})
		}
	}
	lines := func(names ...[2]string) []reports.Curve {
		var out []reports.Curve
		for _, n := range names {
			k := reports.Curve{Name: n[0], Values: a.column(n[1])}
			for _, v := range k.Values {
				if fixed(v, 3) != "" {
					out = append(out, k)
					break
				}
			}
		}
		return out
	}
	c.Charts = []reports.CurveChart{
		{ID: "attenuation", Title: "Attenuation", Quantity: "attenuation", Unit: "dB",
			Caption: "Attenuation over " + axis.name + ": the total by P.618's rule, and what it is made of.",
			Curves: lines([2]string{"total", "total_attenuation_db"}, [2]string{"gas", "gas_attenuation_db"}, [2]string{"cloud", "cloud_attenuation_db"},
				[2]string{"rain", "rain_attenuation_db"}, [2]string{"scintillation", "scintillation_db"}, [2]string{"gas, clear sky", "clear_sky_gas_attenuation_db"})},
		{ID: "brightness", Title: "Brightness of the sky", Quantity: "brightness", Unit: "K",
			Caption: "Brightness of the sky over " + axis.name + ", through the weather of the percentage and through a clear sky.",
			Curves:  lines([2]string{"with the weather", "sky_brightness_k"}, [2]string{"clear sky", "clear_sky_brightness_k"})},
	}
	if d := lines([2]string{"discrimination", "xpd_db"}); len(d) > 0 {
		c.Charts = append(c.Charts, reports.CurveChart{ID: "discrimination", Title: "Cross-polar discrimination", Quantity: "discrimination", Unit: "dB",
			Caption: "Discrimination between the polarisations that is not exceeded for the percentage, over " + axis.name + ".", Curves: d})
	}
	return c
}
