package modem

import (
	_ "embed" // the tables below
	"encoding/csv"
	"fmt"
	"math"
	"slices"
	"strconv"
	"strings"

	"slantwise/orbit/unit"
)

var (
	//go:embed modulations.csv
	modulationsCSV string
	//go:embed codings.csv
	codingsCSV string
	//go:embed thresholds.csv
	thresholdsCSV string
	//go:embed curves.csv
	curvesCSV string
	//go:embed spectra.csv
	spectraCSV string
)

// readTable returns the rows below the header and the row of units.
func readTable(text, header string) ([][]string, error) {
	rows, err := csv.NewReader(strings.NewReader(text)).ReadAll()
	if err != nil {
		return nil, err
	}
	if len(rows) < 3 || strings.Join(rows[0], ",") != header {
		return nil, fmt.Errorf("the header is not %s with a row of units and rows below it", header)
	}
	return rows[2:], nil
}

// thresholdRow is a row of thresholds.csv. The requirement is in Es/N0 where the source
// gives that.
type thresholdRow struct {
	Threshold
	coding      string
	modulations []string
	perSymbol   bool // EbN0 holds an Es/N0
}

func readThresholds(text string) ([]thresholdRow, error) {
	rows, err := readTable(text, "coding,modulations,required_eb_n0,required_es_n0,error_rate,metric,provenance,source")
	if err != nil {
		return nil, err
	}
	out := make([]thresholdRow, 0, len(rows))
	for i, r := range rows {
		t := thresholdRow{coding: r[0], modulations: words(r[1]), perSymbol: r[2] == ""}
		t.Metric, t.Provenance, t.Source = Metric(r[5]), r[6], r[7]
		need, errNeed := strconv.ParseFloat(r[2]+r[3], 64)
		t.EbN0 = unit.DB(need)
		var errRate error
		t.ErrorRate, errRate = strconv.ParseFloat(r[4], 64)
		if errNeed != nil || errRate != nil || !(math.Abs(need) <= 100) || !(t.ErrorRate > 0 && t.ErrorRate < 1) || !slices.Contains(metrics, t.Metric) || (r[2] == "") == (r[3] == "") {
			return nil, fmt.Errorf("row %d (%s): Eb/N0 %q or Es/N0 %q, error rate %q or metric %q is not in range", i+3, r[0], r[2], r[3], r[4], r[5])
		}
		out = append(out, t)
	}
	return out, nil
}

// curveRow is a curve of curves.csv.
type curveRow struct {
	Curve
	coding      string
	modulations []string
}

// readCurves gathers the points that stand together: same coding, modulations, metric
// and source.
func readCurves(text string) ([]curveRow, error) {
	rows, err := readTable(text, "coding,modulations,metric,eb_n0,error_rate,errors_counted,provenance,source")
	if err != nil {
		return nil, err
	}
	var out []curveRow
	for len(rows) > 0 {
		first := rows[0]
		var points []Point
		for len(rows) > 0 && sameCurve(rows[0], first) {
			db, errDB := strconv.ParseFloat(rows[0][3], 64)
			rate, errRate := strconv.ParseFloat(rows[0][4], 64)
			if errDB != nil || errRate != nil {
				return nil, fmt.Errorf("%s: Eb/N0 %q or error rate %q is not a number", first[0], rows[0][3], rows[0][4])
			}
			points = append(points, Point{unit.DB(db), rate})
			rows = rows[1:]
		}
		if !slices.Contains(metrics, Metric(first[2])) {
			return nil, fmt.Errorf("%s: the metric %q is not known", first[0], first[2])
		}
		c, err := NewCurve(Metric(first[2]), points, first[6], first[7])
		if err != nil {
			return nil, fmt.Errorf("%s, %s: %w", first[0], first[2], err)
		}
		out = append(out, curveRow{c, first[0], words(first[1])})
	}
	return out, nil
}

func sameCurve(a, b []string) bool {
	return a[0] == b[0] && a[1] == b[1] && a[2] == b[2] && a[7] == b[7]
}

func words(s string) []string { return strings.Fields(s) }

// fraction reads "223/510" or "1".
func fraction(s string) (float64, error) {
	above, below, divided := strings.Cut(s, "/")
	a, err := strconv.Atoi(above)
	if err != nil || !divided {
		return float64(a), err
	}
	b, err := strconv.Atoi(below)
	if err != nil || b <= 0 {
		return 0, fmt.Errorf("%q is not a fraction", s)
	}
	return float64(a) / float64(b), nil
}
