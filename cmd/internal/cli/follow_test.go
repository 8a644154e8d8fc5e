package cli

import (
	"strings"
	"testing"
)

// TestFollow adds up the demo's passes: what is not followed is what passes --mount lists; a plan
// loses no more than none, faster axes and the X-Y mount, whose keyhole lies at the horizon, no more than
// the mount as it is; a larger dish, with its narrower beam, no less.
func TestFollow(t *testing.T) {
	rows := records(t, "follow", "--station", "Tussock Bay", "--diameter-m", "3", "--diameter-m", "13")
	lost := map[string]float64{}
	var byDiameter []float64
	for i, v := range numbersOf(t, rows, "not_followed_s") {
		if rows[i]["diameter_m"] != "" {
			byDiameter = append(byDiameter, v)
		}
		lost[rows[i]["mount"]] = v
	}
	sum := 0.0
	for _, r := range records(t, "passes", "--mount", "--station", "Tussock Bay") {
		if r["mount_antenna"] != "" {
			sum += numbersOf(t, []map[string]string{r}, "not_followed_s")[0]
		}
	}
	own := lost["as it is, planned"]
	if own == 0 || own-sum > 0.1 || sum-own > 0.1 {
		t.Errorf("%g s are not followed, the list of passes has %g s", own, sum)
	}
	if lost["as it is, without a plan"] < own {
		t.Errorf("without a plan %g s, planned %g s", lost["as it is, without a plan"], own)
	}
	for _, better := range []string{"one and a half times the rates", "over the top to 180 deg", "X-Y, X axis north-south"} {
		if v, ok := lost[better]; !ok || v > own+0.1 {
			t.Errorf("%s: %g s (%t), as it is %g s", better, v, ok, own)
		}
	}
	if len(byDiameter) != 2 || byDiameter[0] > byDiameter[1] {
		t.Errorf("3 m and 13 m: %v s", byDiameter)
	}
	for _, c := range []struct {
		args []string
		want string
	}{{[]string{"--station", "Reedmere"}, "no antenna of"}, {[]string{"--station", "Tussock Bay", "--tilt-deg", "0"}, "--tilt-deg"}, {[]string{"--station", "Tussock Bay", "--diameter-m=-1"}, "--diameter-m"}} {
		if code, _, errOut := invoke(t, append([]string{"follow"}, c.args...)...); code != 2 || !strings.Contains(errOut, c.want) {
			t.Errorf("%v: exit %d, %s", c.args, code, errOut)
		}
	}
}
