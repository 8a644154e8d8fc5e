package cli

import (
	"context"
	"encoding/csv"
	"math"
	"os"
	"path/filepath"
	"strconv"
	"strings"
	"testing"
)

const sheets = "../../../downlink/propagation/testdata"

// TestPathBatchAnswersTheSheets runs every published sheet through the command and
// holds its result column to what was published. Tolerances are those of the sheets'
// own digits as SOURCES.md tells them: 1e-6 but where the publication is coarser.
func TestPathBatchAnswersTheSheets(t *testing.T) {
	for _, c := range []struct {
		model, sheet string
		published    []string
		tolerance    float64
		more         []string
	}{
		{"gas-specific", "p676_13_specific_attenuation", []string{"gas_specific_attenuation_db_km"}, 1e-6, nil},
		{"gas-slant", "p676_13_slant_path_annex1", []string{"gas_attenuation_db"}, 1e-4, nil}, // layers of the publication are coarser
		{"gas-slant", "p676_13_slant_path_annex2", []string{"gas_attenuation_db"}, 1e-6, nil},
		{"gas-slant", "p676_12_slant_path", []string{"gas_attenuation_db"}, 1e-6, []string{"--edition", "676-12"}},
		{"rain-coefficients", "p838_3_rain_specific_attenuation", []string{"coefficient_k", "coefficient_alpha"}, 1e-6, nil},
		{"rain-specific", "p838_3_rain_specific_attenuation", []string{"rain_specific_attenuation_db_km"}, 1e-6, nil},
		{"rain", "p618_14_rain_attenuation", []string{"rain_attenuation_db"}, 1e-6, nil},
		{"rain-rate", "p837_7_rain_rate", []string{"rain_rate_mm_h"}, 2e-5, nil}, // the publication's own root finding
		{"rain-height", "p839_4_rain_height", []string{"rain_height_km"}, 1e-6, nil},
		{"cloud", "p840_9_cloud_attenuation", []string{"cloud_attenuation_db"}, 1e-6, nil},
		{"cloud", "p840_9_cloud_attenuation", []string{"cloud_attenuation_lognormal_db"}, 1e-6, []string{"--lognormal"}},
		{"cloud", "p840_8_cloud_attenuation", []string{"cloud_attenuation_db"}, 1e-6, []string{"--edition", "840-8"}},
		{"scintillation", "p618_14_scintillation", []string{"scintillation_fade_db"}, 1e-6, nil},
		{"total", "p618_14_total_attenuation", []string{"total_attenuation_db"}, 2e-5, nil}, // 2e-4 dB of 10: the gas column is implied
		{"total", "p618_13_total_attenuation", []string{"total_attenuation_db"}, 1e-6, []string{"--edition", "618-13"}},
		{"xpd", "p618_14_cross_polarization", []string{"xpd_db"}, 1e-6, nil},
		{"wet-refractivity", "p453_14_wet_refractivity", []string{"wet_refractivity_surface_estimate_n_units"}, 1e-6, nil},
	} {
		args := append([]string{"path", "--model", c.model, "--batch", filepath.Join(sheets, c.sheet+".csv"), "--format", "csv"}, c.more...)
		code, out, errOut := invoke(t, args...)
		if code != ExitAnswer {
			t.Errorf("%s on %s: code %d, stderr %s", c.model, c.sheet, code, errOut)
			continue
		}
		rows, err := csv.NewReader(strings.NewReader(out)).ReadAll()
		if err != nil || len(rows) < 2 {
			t.Fatalf("%s: %d rows, %v", c.sheet, len(rows), err)
		}
		head := map[string]int{}
		for i, h := range rows[0] {
			head[h] = i
		}
		first := len(rows[0]) - len(c.published)
		for k, column := range c.published {
			if h := rows[0][first+k]; !strings.HasPrefix(h, "result_") {
				t.Errorf("%s: column %q, want a result", c.sheet, h)
			}
			compared := 0
			for i, row := range rows[1:] {
				if row[head[column]] == "" {
					continue
				}
				want, err1 := strconv.ParseFloat(row[head[column]], 64)
				got, err2 := strconv.ParseFloat(row[first+k], 64)
				if err1 != nil || err2 != nil || math.Abs(got-want) > c.tolerance*math.Abs(want)+1e-15 {
					t.Errorf("%s line %d: %s %s, published %s, difference %.2g of it", c.sheet, i+2, column, row[first+k], row[head[column]], math.Abs(got/want-1))
				}
				compared++
			}
			if compared == 0 {
				t.Errorf("%s: no row of %s was compared", c.sheet, column)
			}
		}
	}
}

func TestPathBatchRefuses(t *testing.T) {
	t.Chdir(t.TempDir())
	const head = "frequency_ghz,elevation_deg,polarization_tilt_deg,rain_rate_mm_h\n"
	const bad = head + "12,30,45,20\n0.5,30,45,20\n14,30,45,much\n14,30,45\n20,30,45,10\n"
	write := func(name, text string) {
		if err := os.WriteFile(name, []byte(text), 0o644); err != nil {
			t.Fatal(err)
		}
	}
	write("bad.csv", bad)
	write("other.csv", "frequency_ghz\n12\n")
	write("empty.csv", "")
	for _, c := range []struct {
		args []string
		want []string
	}{
		{[]string{"--model", "rain-specific", "--batch", "bad.csv"}, []string{"line 3: column frequency_ghz:", "0.5 GHz is not allowed; it must be 1 to 1000 GHz",
			`line 4: column rain_rate_mm_h: "much" is not a finite number`, "line 5: 3 cells where the header has 4 columns", "with --keep-going the other rows are answered"}},
		{[]string{"--model", "rain-specific", "--batch", "other.csv"}, []string{"missing: elevation_deg, polarization_tilt_deg, rain_rate_mm_h"}},
		{[]string{"--model", "rain-specific", "--batch", "empty.csv"}, []string{"the table is empty"}},
		{[]string{"--model", "rain-specific", "--batch", "none.csv"}, []string{"--batch: open none.csv: no such file or directory; name a table in CSV that is there"}},
		{[]string{"--model", "rainy", "--batch", "bad.csv"}, []string{`model "rainy" is not known; give one of gas-specific, gas-slant`}},
		{[]string{"--model", "rain-specific"}, []string{"--model goes with --batch FILE"}},
		{[]string{"--batch", "bad.csv"}, []string{"--batch needs --model"}},
		{[]string{"--model", "rain-specific", "--batch", "bad.csv", "--edition", "618-7"}, []string{`edition "618-7" is not built in`}},
		{[]string{"--model", "rain-specific", "--batch", "bad.csv", "--lognormal"}, []string{`belongs to model "cloud"`}},
		{[]string{"--model", "rain-specific", "--batch", "bad.csv", "--format", "json"}, []string{"a batch is written as CSV"}},
		{[]string{"--model", "rain-specific", "--batch", "bad.csv", "--sweep", "elevation"}, []string{"give one of them"}},
	} {
		code, out, errOut := invoke(t, append([]string{"path"}, c.args...)...)
		if code != ExitInput || out != "" {
			t.Errorf("%q: code %d, stdout %q, want %d and nothing", c.args, code, out, ExitInput)
		}
		for _, w := range c.want {
			if !strings.Contains(errOut, w) {
				t.Errorf("%q: stderr %s\nwant %q in it", c.args, errOut, w)
			}
		}
	}
	code, out, errOut := invoke(t, "path", "--model", "rain-specific", "--batch", "bad.csv", "--keep-going")
	lines := strings.Split(strings.TrimSpace(out), "\n")
	if code != ExitAnswer || len(lines) != 6 || !strings.HasSuffix(lines[2], "20,") || strings.HasSuffix(lines[5], ",") || strings.Count(errOut, "no result: line ") != 3 {
		t.Errorf("--keep-going: code %d, stdout %s, stderr %s", code, out, errOut)
	}
}

// A value beyond a stated range is given, with a warning and exit code 0; the standard
// input is a table, too.
func TestPathBatchWarnsBeyondTheRange(t *testing.T) {
	var out, errOut strings.Builder
	in := strings.NewReader("frequency_ghz,elevation_deg,cloud_liquid_water_kg_m2,site\n20,3,0.5,\"a, b\"\n")
	code := run(context.Background(), []string{"path", "--model", "cloud", "--batch", "-"}, newEnv(in, &out, &errOut))
	if code != ExitAnswer || !strings.Contains(errOut.String(), "warning: line 2: P.840-9: elevation 3 deg is outside the stated range 5 to 90 deg") ||
		!strings.Contains(out.String(), `20,3,0.5,"a, b",`) {
		t.Errorf("code %d, stdout %s, stderr %s", code, out.String(), errOut.String())
	}
}
