package reports

import (
	"html/template"
	"slices"
	"time"
)

// figureView is a chart as the page's template shows it.
type figureView struct {
	ID, Title, Caption string
	Table              template.HTML
	Many               bool          // many lines: a higher drawing
	Drawing            template.HTML // the chart itself on a page without script; else empty
}

// figures returns the charts of a pass and what the page shows of them.
func figures(p *Pass, fr *frame) ([]drawing, []figureView) {
	rows := thinned(p, tableRows)
	var drawings []drawing
	var views []figureView
	for _, fig := range timeFigures(p, fr) {
		drawings = append(drawings, fr.draw(&fig))
		views = append(views, figureView{ID: fig.id, Title: fig.title, Caption: fig.caption, Table: fig.table(p, rows), Many: fig.many})
	}
	// The sky is twice as high as the others: with an odd one after it the columns end
	// level.
	last := max(len(views)-1, 0)
	sky := figureView{ID: "sky", Title: "Track on the sky", Caption: skyText(p), Table: skyTable(p, rows)}
	return slices.Insert(drawings, last, drawSky(p, fr)), slices.Insert(views, last, sky)
}

// table holds the numbers of the chart, thinned.
func (fig *timeFigure) table(p *Pass, rows []int) template.HTML {
	var heads []string
	var cols []column
	for _, s := range fig.series {
		unit := fig.unit
		if s.right {
			unit = fig.rightUnit
		}
		heads = append(heads, axisName(s.name, unit))
		scaled := make([]float64, len(s.values))
		for _, i := range rows {
			scaled[i] = s.values[i] / s.divisor
		}
		cols = append(cols, column{decimals: s.decimals, values: scaled})
	}
	return numberTable(p, fig.title, heads, cols, rows)
}

func skyTable(p *Pass, rows []int) template.HTML {
	f := p.Profile
	return numberTable(p, "Track on the sky", []string{"azimuth, deg", "elevation, deg"},
		[]column{{decimals: 2, values: f.AzimuthDeg}, {decimals: 2, values: f.ElevationDeg}}, rows)
}

// numberTable writes a table with a row a sample: UTC, the station's time where it
// has a zone, and the columns. It goes by hand, since a report holds tens of
// thousands of cells; heads are escaped and all else is digits.
func numberTable(p *Pass, title string, heads []string, cols []column, rows []int) template.HTML {
	f, zone, layout := p.Profile, p.Site.TimeZone, layoutOf(p)
	dst := make([]byte, 0, 200+len(rows)*(60+30*len(cols)))
	dst = append(dst, "<table><caption>"...)
	dst = append(dst, template.HTMLEscapeString(title)...)
	dst = append(dst, "</caption><thead><tr><th scope=\"col\">UTC</th>"...)
	if zone != nil {
		dst = append(dst, "<th scope=\"col\">local</th>"...)
	}
	for _, h := range heads {
		dst = append(append(append(dst, "<th scope=\"col\">"...), template.HTMLEscapeString(h)...), "</th>"...)
	}
	dst = append(dst, "</tr></thead><tbody>\n"...)
	for _, i := range rows {
		t := sampleTime(f.Start, f.Seconds[i]).Round(time.Second)
		dst = append(dst, "<tr><th scope=\"row\">"...)
		dst = t.AppendFormat(dst, layout)
		dst = append(dst, "</th>"...)
		if zone != nil {
			dst = append(dst, "<td>"...)
			dst = t.In(zone).AppendFormat(dst, layout)
			dst = append(dst, "</td>"...)
		}
		for _, c := range cols {
			dst = append(append(append(dst, "<td>"...), fixed(c.values[i], c.decimals)...), "</td>"...)
		}
		dst = append(dst, "</tr>\n"...)
	}
	return template.HTML(append(dst, "</tbody></table>"...))
}
