package cli

import (
	"strings"
	"testing"
)

// TestSites ranks the demo's stations: single sites by falling bytes, then one set a size, each with
// more than the smaller one; a site that the licence does not name brings nothing; the
// bounds of the joint weather hold.
func TestSites(t *testing.T) {
	rows := records(t, "sites", "--days", "7", "--most", "2")
	size, bytes := numbersOf(t, rows, "size"), numbersOf(t, rows, "bytes_per_day")
	one, independent, inOrder := numbersOf(t, rows, "availability_one_weather_percent"), numbersOf(t, rows, "availability_independent_percent"), numbersOf(t, rows, "bytes_per_day_in_order")
	if len(rows) != 6 || size[5] != 2 {
		t.Fatalf("%d rows, the last of %g sites; want five sites and a pair", len(rows), size[len(size)-1])
	}
	for i := 1; i < 5; i++ {
		if bytes[i] > bytes[i-1] || size[i] != 1 {
			t.Errorf("row %d: %g sites with %g bytes after %g", i+1, size[i], bytes[i], bytes[i-1])
		}
	}
	if bytes[4] != 0 || !strings.Contains(rows[3]["stations"]+rows[4]["stations"], "Reedmere") {
		t.Errorf("the licence does not name Reedmere, the last rows are %v, %v", rows[3], rows[4])
	}
	if !(bytes[5] > bytes[0] && bytes[5] <= bytes[0]+bytes[1]+1 && inOrder[5] <= bytes[5]*1.02) {
		t.Errorf("the pair brings %g (%g in order), the best alone %g and %g", bytes[5], inOrder[5], bytes[0], bytes[1])
	}
	for i := range rows {
		if one[i] > independent[i]+1e-9 {
			t.Errorf("row %d: %g %% with one weather, %g %% with independent weather", i+1, one[i], independent[i])
		}
	}
	for _, c := range []struct {
		args []string
		want string
	}{{[]string{"--most", "9"}, "--most: 9"}, {[]string{"--station", "Nowhere"}, "Nowhere"}, {[]string{"--days", "2"}, "days"}} {
		if code, _, errOut := invoke(t, append([]string{"sites"}, c.args...)...); code != 2 || !strings.Contains(errOut, c.want) {
			t.Errorf("%v: exit %d, %s", c.args, code, errOut)
		}
	}
}
