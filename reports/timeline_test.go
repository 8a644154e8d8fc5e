package reports

import (
	"regexp"
	"strings"
	"testing"
	"time"
)

func timelineFixture() *Timeline {
	at := func(h, m int) time.Time { return time.Date(2026, 3, 10, h, m, 0, 0, time.UTC) }
	return &Timeline{
		Head: "Contact plan", From: at(12, 0), To: at(36, 0), Answer: "Value 10: proven.", Files: []string{"plan.csv", "plan.json"},
		Spacecraft: []string{`Wagtail </script><b>"1"`, "Pipit 2"}, Antennas: []string{"Skerry Point, dish"},
		Contacts: []TimelineContact{
			{Spacecraft: 0, Name: "one", SetUp: at(13, 0), Start: at(13, 5), End: at(13, 15), TearDown: at(13, 16), Links: "X-band: 4 MB", Value: 1234567.5},
			{Spacecraft: 1, Name: "two", Request: "r1", SetUp: at(23, 50), Start: at(23, 55), End: at(24, 5), TearDown: at(24, 6), Fixed: true, Links: "UHF: 1 MB", Value: 2},
		},
		Windows:   []TimelineWindow{{Spacecraft: 1, Name: "three", Start: at(13, 10), End: at(13, 20), Why: "antenna: it serves one at a time"}},
		Closed:    []TimelineSpan{{From: at(30, 0), To: at(60, 0)}},
		Recorders: []TimelineRecorder{{Spacecraft: 0, Capacity: 4e9, Points: []TimelinePoint{{at(12, 0), 0}, {at(36, 0), 2e9}}}},
		Volumes:   []TimelineVolume{{0, at(0, 0), 4e6}, {1, at(0, 0), 1e6}, {1, at(24, 0), 5e5}},
		Limits:    []string{"calls: one more contact is worth 5"},
	}
}

// Every bar leads to an entry that is there, nothing runs, names cannot break out.
func TestTimelinePage(t *testing.T) {
	out, err := TimelinePage(timelineFixture())
	if err != nil {
		t.Fatal(err)
	}
	page := string(out)
	if strings.Contains(page, "<script") || strings.Contains(page, "<b>\"1\"") {
		t.Error("a name breaks out of the page")
	}
	links := regexp.MustCompile(`href="#((?:contact|window)-\d+)"`).FindAllStringSubmatch(page, -1)
	if len(links) != 4 { // the contact over midnight has a bar on either day
		t.Errorf("%d bars lead to entries, want 4", len(links))
	}
	for _, l := range links {
		if strings.Count(page, `id="`+l[1]+`"`) != 1 {
			t.Errorf("%s leads to no entry, or to several", l[1])
		}
	}
	for _, want := range []string{
		"Tuesday, 2026-03-10 UTC", "Wednesday, 2026-03-11 UTC",
		`<rect x="54.5139%" width="0.6944%"`,    // 13:05 to 13:15: 13.08333/24 and 10/1440
		`<rect x="0.0000%" width="0.3472%"`,     // what of the contact lies on the second day, 5/1440
		`points="500.00,100.00 1000.00,50.00 "`, // noon to midnight of the first day
		"r1: Pipit 2 over Skerry Point, dish", "fixed; set-up from 23:50:00", "value 1\u2009234\u2009567",
		"antenna: it serves one at a time", `<td>1.500</td>`, `href="plan.json"`, "one more contact is worth 5",
	} {
		if !strings.Contains(page, want) {
			t.Errorf("no %q in the page", want)
		}
	}
}

func TestLetter(t *testing.T) {
	for i, want := range map[int]string{0: "A", 25: "Z", 26: "AA", 51: "AZ", 52: "BA", 701: "ZZ", 702: "AAA"} {
		if got := letter(i); got != want {
			t.Errorf("%d: %s, want %s", i, got, want)
		}
	}
}

func TestTimelineWithoutLength(t *testing.T) {
	f := timelineFixture()
	f.To = f.From
	if _, err := TimelinePage(f); err == nil {
		t.Error("accepted")
	}
}
