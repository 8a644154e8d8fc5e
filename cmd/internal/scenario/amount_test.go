package scenario_test

import (
	"math"
	"strings"
	"testing"

	"slantwise/cmd/internal/scenario"
)

// Powers of 1000 by the SI brochure (9th ed. 2019, table 7), of 1024 by IEC 80000-13.
func TestParseBytes(t *testing.T) {
	for text, want := range map[string]float64{
		"32 GB": 32e9, "30 GiB": 30 * 1073741824, "1kB": 1000, "1 KiB": 1024, "2.5 MiB": 2621440, "7 B": 7, "1.5e3 MB": 1.5e9, "1_000 TB": 1e15, "2 TiB": 2199023255552, "0 B": 0,
	} {
		if got, err := scenario.ParseBytes(text); err != nil || got != want {
			t.Errorf("%q: got %v, %v, want %v", text, got, err, want)
		}
	}
	for text, want := range map[string]string{
		"32 Gb": "b are bits to many", "32 gb": "b are bits to many", "3 Mbit": "b are bits to many", "32 G": "1000 and 1024 are told apart", "32 KB": "1000 and 1024",
		"32 GBi": "did you mean", "-3 GB": "not allowed", "GB": "not allowed", "1,5 GB": "not allowed", "32": "give a number of bytes", "1e999 GB": "not allowed", "": "not allowed",
	} {
		if got, err := scenario.ParseBytes(text); err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("%q: got %v, %v, want %q", text, got, err, want)
		}
	}
}

func FuzzParseBytes(f *testing.F) {
	for _, s := range []string{"32 GB", "30GiB", "1e300 TiB", "-1 B", "3 Gb", ".5 kB", "_1 B"} {
		f.Add(s)
	}
	f.Fuzz(func(t *testing.T, text string) {
		if v, err := scenario.ParseBytes(text); err == nil && (!(v >= 0) || math.IsInf(v, 0)) {
			t.Errorf("%q is %v bytes", text, v)
		}
	})
}

// What was written in another form is told as it was understood.
func TestUnderstood(t *testing.T) {
	t.Setenv("SLANTWISE_SIZING_REQUIREMENTS_BYTES_PER_DAY", "20 GiB")
	s := loadGood(t, "testdata/good/everything.yaml")
	var all []string
	for _, n := range s.Assumptions {
		all = append(all, n.String())
	}
	told := strings.Join(all, "\n")
	for _, want := range []string{
		`spacecraft Wagtail 1, recorder: capacity_bytes "64 GB" understood as 64000000000 bytes`,
		`bytes_per_orbit "1.5 GiB" understood as 1610612736 bytes`,
		`bytes_per_day "20 GiB" understood as 21474836480 bytes`,
		`spacecraft Pipit, transmitter UHF: power_dbm 30 understood as 30 dBm, 0 dBW, 1 W`,
		`spacecraft Pipit, transmitter stated: eirp_dbm 36 understood as 36 dBm, 6 dBW, 3.981 W`,
		`licence stated downlink: highest_eirp_dbm 40 understood as 40 dBm, 10 dBW, 10 W`,
		`station Fellside: latitude_deg "54 30 36.0 S" understood as -54.51 deg`,
		`station Fellside: longitude_deg "3°15'W" understood as -3.25 deg`,
		`station Sluice: locator JO22ab understood as 52.06250 deg north, 4.04167 deg east, the middle of a rectangle of 5.7 by 4.63 km: the station may be up to 3.67 km away`,
		// By erfa 2.0.0.1, pn06a and the equation of the equinoxes: 40.32554, -9.88415; the pole here is within 0.1 arcseconds.
		`the spin axis of J2000 understood as right ascension 40.3256 deg and declination -9.8842 deg of date`,
		`boresight_body [0, 3, 4] understood as 36.8699 deg off body z, 90 deg around it from x toward y`,
	} {
		if !strings.Contains(told, want) {
			t.Errorf("nothing says %q", want)
		}
	}
	t.Setenv("SLANTWISE_SIZING_REQUIREMENTS_BYTES_PER_DAY", "20 G")
	if _, err := scenario.Load(scenario.Request{Path: "testdata/good/everything.yaml"}); err == nil || !strings.Contains(err.Error(), "environment SLANTWISE_SIZING_REQUIREMENTS_BYTES_PER_DAY") {
		t.Errorf("an ambiguous unit from the environment gives %v", err)
	}
}
