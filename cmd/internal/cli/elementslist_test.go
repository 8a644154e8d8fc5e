package cli

import (
	"encoding/json"
	"strconv"
	"strings"
	"testing"
)

// Heights, period (of the recovered mean motion) and nodes (z changes sign, by
// bisection) are those of python-sgp4 2.15: 488.3215 and 505.2958 km, 94.55037 min,
// 00:17:30.1284 for the first set, 806.8552 and 824.6169 km, 101.20536 min,
// 01:09:10.8211 for the second. The clock of the tests stands at 12 March 2026.
func TestElementsList(t *testing.T) {
	code, out, errOut := elementsRun(t, wagtailSet+pipitSet+wagtailLater, "-", "--format", "csv")
	want := "name,catalog_number,international_designator,epoch_utc,age_d,perigee_km,apogee_km,inclination_deg,period_min,next_ascending_node_utc,used,file,line\n" +
		"WAGTAIL 1,99001,2026-001A,2026-03-10T12:00:00.000Z,1.500,488.3,505.3,97.4012,94.550,2026-03-12T00:17:30.128Z,no,standard input,1\n" +
		"PIPIT 2,99002,2026-001B,2026-03-10T12:00:00.000Z,1.500,806.9,824.6,97.4012,101.205,2026-03-12T01:09:10.821Z,yes,standard input,4\n" +
		"WAGTAIL 1,99001,2026-001A,2026-03-12T12:00:00.000Z,-0.500,488.3,505.3,97.4012,94.550,2026-03-12T00:57:17.690Z,yes,standard input,7\n"
	if code != ExitAnswer || errOut != "" || out != want {
		t.Errorf("exit %d, %s\n got\n%s\nwant\n%s", code, errOut, out, want)
	}
	code, out, _ = elementsRun(t, wagtailSet+wagtailLater, "-", "--element-choice", "nearest", "--at", "2026-03-10T18:00:00Z", "--format", "csv")
	if lines := strings.Split(out, "\n"); code != ExitAnswer || !strings.Contains(lines[1], ",0.250,") || !strings.Contains(lines[1], ",yes,") || !strings.Contains(lines[2], ",no,") {
		t.Errorf("exit %d, nearest\n%s", code, out)
	}
}

func TestElementsTable(t *testing.T) {
	code, out, errOut := elementsRun(t, wagtailSet, "-")
	want := `1 element set; age and next node at 2026-03-12T00:00:00.000Z; of several sets of an object the newest is used

name       number  epoch UTC                 age d  perigee km  apogee km  inclination deg  period min  next ascending node UTC   used
---------  ------  ------------------------  -----  ----------  ---------  ---------------  ----------  ------------------------  ----
WAGTAIL 1   99001  2026-03-10T12:00:00.000Z  1.500       488.3      505.3          97.4012      94.550  2026-03-12T00:17:30.128Z  yes
`
	if code != ExitAnswer || errOut != "" || out != want {
		t.Errorf("exit %d, %s\n got\n%s\nwant\n%s", code, errOut, out, want)
	}
}

func TestElementsJSON(t *testing.T) {
	code, out, _ := elementsRun(t, wagtailSet, "-", "--format", "json", "--at", "2026-03-15T00:00:00Z")
	var got struct {
		AtUTC string `json:"at_utc"`
		Sets  []struct {
			Number  int     `json:"catalog_number"`
			Age     float64 `json:"age_d"`
			Perigee float64 `json:"perigee_km"`
			Node    *string `json:"next_ascending_node_utc"`
			Remark  *string `json:"remark"`
		} `json:"sets"`
	}
	if err := json.Unmarshal([]byte(out), &got); err != nil || code != ExitAnswer {
		t.Fatalf("exit %d, %v in\n%s", code, err, out)
	}
	if s := got.Sets[0]; got.AtUTC != "2026-03-15T00:00:00.000Z" || s.Number != 99001 || s.Age != 4.5 || s.Perigee != 488.3 || s.Node == nil ||
		s.Remark == nil || !strings.Contains(*s.Remark, "is 4.5 days old") {
		t.Errorf("got %+v", got)
	}
}

// TestElementsWithoutNode: an orbit in the equator's plane has no node, one whose
// perigee lies under the ground is not flown; the list comes all the same.
func TestElementsWithoutNode(t *testing.T) {
	flat := strings.NewReplacer(" 97.4012", "  0.0000", "12348", "12345").Replace(wagtailSet)
	fallen := strings.NewReplacer("0012345", "2012345", "12348", "12340").Replace(wagtailSet)
	for name, text := range map[string]string{"flat": flat, "fallen": fallen} {
		t.Run(name, func(t *testing.T) {
			code, out, errOut := elementsRun(t, text, "-", "--format", "csv")
			if code != ExitAnswer || !strings.Contains(out, ",,yes,") {
				t.Errorf("exit %d\n%s", code, out)
			}
			if !strings.Contains(errOut, "warning: WAGTAIL 1 (99001): no next node: ") {
				t.Errorf("stderr %s", errOut)
			}
		})
	}
}

func TestElementsRemarksAreCapped(t *testing.T) {
	text := strings.Repeat(wagtailSet, 30)
	code, _, errOut := elementsRun(t, text, "-", "--at", "2026-04-10T00:00:00Z")
	if code != ExitAnswer || strings.Count(errOut, "\n") != 1 {
		t.Errorf("exit %d, one object gave\n%s", code, errOut)
	}
	_, table, _ := elementsRun(t, wagtailSet, "-", "--convert", "omm-csv")
	head, row, _ := strings.Cut(table, "\n")
	rows := head + "\n"
	for i := range 30 {
		rows += strings.Replace(row, ",99001,", ","+strconv.Itoa(99001+i)+",", 1)
	}
	code, _, errOut = elementsRun(t, rows, "-", "--at", "2026-04-10T00:00:00Z")
	if code != ExitAnswer || strings.Count(errOut, "\n") != listLimit+1 || !strings.HasSuffix(errOut, "slantwise: and 10 more warnings; --format json has them all\n") {
		t.Errorf("exit %d, 30 objects gave\n%s", code, errOut)
	}
}

func TestElementsOfTheDemo(t *testing.T) {
	code, out, errOut := elementsRun(t, "", "--format", "csv")
	if code != ExitAnswer || strings.Count(out, ",yes,") != 4 || !strings.Contains(errOut, "embedded demo") || strings.Contains(errOut, "warning") {
		t.Errorf("exit %d, %s\n%s", code, errOut, out)
	}
}
