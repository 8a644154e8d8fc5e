package reports

import (
	"bytes"
	"fmt"
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"time"

	"github.com/chromedp/cdproto/page"
	"github.com/chromedp/chromedp"

	"slantwise/downlink"
)

// fixtureShift is a sheet of n contacts, a bit different each.
func fixtureShift(n int) *Shift {
	zone, err := time.LoadLocation("Europe/London")
	if err != nil {
		panic(err)
	}
	s := &Shift{Title: "rehearsal", Version: "1.2.3", Station: "Skerry Point", From: firstAOS.Truncate(time.Hour), To: firstAOS.Truncate(time.Hour).Add(12 * time.Hour),
		Zone: zone, Plan: "plan.csv", Left: []string{"2 passes not here: shorter than the shortest contact, 60 s"}, Pages: 1, RainPercent: 0.1,
		RadiationCaution: "Radiation: nobody may stand in the beam or near the feed until the power is off and locked off."}
	for i := range n {
		s.Contacts = append(s.Contacts, fixtureContact(firstAOS.Add(time.Duration(i)*95*time.Minute), float64(i)))
	}
	return s
}

func fixtureContact(aos time.Time, k float64) ShiftContact {
	los := aos.Add(10*time.Minute + 4*time.Second)
	c := ShiftContact{Name: fmt.Sprintf("contact-of-%g", k), Spacecraft: "Wagtail 1", Antenna: "dish", Start: aos, End: los, AOS: aos, LOS: los,
		Transmitter: "X-band", Frequency: 8180e6, Bytes: 1.3e9 + k*1e7, Orbit: "element set 99001 of 2026-03-09T12:00:00.000Z, 0.95 days old"}
	for i, name := range []string{"AOS", "culmination", "LOS"} {
		c.Events[i] = ShiftEvent{Name: name, Time: aos.Add(time.Duration(i) * 302 * time.Second), AzimuthDeg: 20.04 + 100*float64(i) + k, ElevationDeg: []float64{5, 61.2 + k, 5}[i],
			RangeKm: 600, ReceivedHz: 8180e6 + 191875.25*float64(1-i) + k, ShiftHz: 191875.25*float64(1-i) + k}
	}
	for t := aos; t.Before(los); t = t.Truncate(time.Minute).Add(time.Minute) {
		c.Minutes = append(c.Minutes, ShiftMinute{Time: t, ElevationDeg: 30 + k, ReceivedDBm: -100 - k/10, CN0DBHz: 75, MarginDB: 6.4 + k/10, Mode: "fast"})
	}
	c.Minutes = append(c.Minutes, ShiftMinute{Time: los, ElevationDeg: 5, ReceivedDBm: -103, CN0DBHz: 72, MarginDB: math.NaN()})
	c.Steps = []PlanStep{{From: aos, To: aos.Add(100 * time.Second), Mode: "safe", InformationRate: 2e6}, {From: aos.Add(100 * time.Second), To: los, Mode: "fast", InformationRate: 4e7}}
	c.Uplinks = []ShiftUplink{{ShiftCarrier: ShiftCarrier{Name: "command", Hz: [3]float64{2064.95e6 + k, 2065e6, 2065.05e6}}, Frequency: 2065e6, Works: []downlink.Interval{{From: aos.Add(20 * time.Second), To: los}}, EIRPDBW: 47.6}}
	c.Search = ShiftSearch{Basis: "by its age", AOSSeconds: 2.1, LOSSeconds: 2.2, Existence: 1, TrackSeconds: 2, AlongDeg: [3]float64{0.4, 1.4, 0.4}, TotalDeg: [3]float64{0.5, 1.5, 0.5},
		BeamDeg: 0.69, MostSeconds: 6, StepSeconds: 0.5, Steps: 11, LateHzPerS: 2550, Until: los.Add(-time.Minute), ShortestSeconds: 60}
	c.Causes = []ShiftCause{{Kind: ShiftPointing, LowDB: 2.1, HighDB: math.Inf(1)}, {Kind: ShiftRain, LowDB: 4.2 + k, HighDB: 0.5}, {Kind: ShiftWrongMode, LowDB: 14.3, HighDB: 0, Detail: "were it fast"}}
	return c
}

// flat is a text with single blanks.
func flat(text string) string { return strings.Join(strings.Fields(text), " ") }

// cellsOf are the texts of a contact that must be found on paper, the heads apart.
func cellsOf(b *shiftBlock) []string {
	want := []string{b.Begin + " to " + b.End + " UTC", b.Local, b.Length}
	for _, r := range append(append([]shiftRow{}, b.Points[1:]...), b.Signal...) {
		want = append(want, flat(r.Name+" "+strings.Join(r.Cells, " ")))
	}
	return append(want, b.Alarm...)
}

func TestShiftOnPaperHasTheNumbers(t *testing.T) {
	s := fixtureShift(3)
	v := newShiftView(s)
	pdf, err := ShiftPaper(s)
	if err != nil {
		t.Fatal(err)
	}
	text := flat(tool(t, pdf, "pdftotext", "-layout", "FILE", "-"))
	plain := flat(tool(t, pdf, "pdftotext", "FILE", "-"))
	count := 0
	for i := range v.Blocks {
		b := &v.Blocks[i]
		if b.Page != 1 {
			t.Errorf("contact %d is on page %d", i+1, b.Page)
		}
		for _, want := range cellsOf(b) {
			count++
			if !strings.Contains(text, flat(want)) && !strings.Contains(plain, flat(want)) && !beside(text, want) {
				t.Errorf("the sheet on paper lacks %q", want)
			}
		}
		for _, w := range b.Words {
			for _, word := range strings.Fields(w.Text) {
				if !strings.Contains(text, word) {
					t.Errorf("the sheet on paper lacks %q of %q", word, w.Text)
				}
			}
		}
	}
	if count < 30 {
		t.Errorf("only %d texts to look for", count)
	}
	for _, want := range append(v.Cautions, v.Left...) {
		if !strings.Contains(plain, flat(want)) {
			t.Errorf("the sheet on paper lacks %q", want)
		}
	}
	if info := tool(t, pdf, "pdfinfo", "FILE"); !strings.Contains(info, "Pages:           1\n") || !strings.Contains(info, "595.28 x 841.89 pts (A4)") {
		t.Errorf("pdfinfo says\n%s", info)
	}
	if again, err := ShiftPaper(fixtureShift(3)); err != nil || !bytes.Equal(pdf, again) {
		t.Errorf("the same sheet made another PDF: %v", err)
	}
}

// beside tells whether the words of a text stand in this order, with those of a column beside
// it between them.
func beside(text, want string) bool {
	for _, word := range strings.Fields(want) {
		i := strings.Index(text, word)
		if i < 0 {
			return false
		}
		text = text[i+len(word):]
	}
	return true
}

// However many contacts there are, no more pages are filled than were asked for, what found no
// room is named, and nothing is painted below the page.
func TestShiftKeepsToItsPages(t *testing.T) {
	for n := range 15 {
		for pages := 1; pages <= 3; pages++ {
			s := fixtureShift(n)
			s.Pages = pages
			if n == 0 {
				s.None = "No contact; the next is tomorrow."
			}
			for range 10 * (n % 2) {
				s.Notes = append(s.Notes, Note{Kind: Warning, About: "spacecraft Wagtail 1", Text: strings.Repeat("its element set is old, ", 6)})
			}
			v := newShiftView(s)
			last, placed := 0, 0
			for i, b := range v.Blocks {
				if b.Page > 0 {
					placed++
					if b.Page < last || b.Page > pages {
						t.Errorf("%d contacts, %d pages: contact %d is on page %d after %d", n, pages, i+1, b.Page, last)
					}
					last = b.Page
				}
			}
			if beyond := n - placed; (beyond > 0) != (v.Beyond != "") || beyond > 0 && !strings.HasPrefix(v.Beyond, fmt.Sprintf("%d contact", beyond)) {
				t.Errorf("%d contacts, %d pages: %d found room, and the sheet says %q", n, pages, placed, v.Beyond)
			}
			if n >= 4 && placed < 4-n%2 {
				t.Errorf("%d contacts, %d pages: only %d found room", n, pages, placed)
			}
			if v.Pages > pages || v.Pages != max(1, last) {
				t.Errorf("%d contacts: %d pages of %d, the last contact on %d", n, v.Pages, pages, last)
			}
			for p := 1; p <= v.Pages; p++ {
				pen := &lowest{}
				(&sheetPen{c: pen, w: sheetSpaceW, h: sheetSpaceH}).page(v, p)
				if pen.y > sheetSpaceH || pen.x > sheetSpaceW+0.1 || pen.overlap != "" {
					t.Errorf("%d contacts, page %d of %d: painted to %.1f, %.1f of %.1f, %.1f; %s", n, p, pages, pen.x, pen.y, sheetSpaceW, sheetSpaceH, pen.overlap)
				}
			}
		}
	}
}

// The clock alone would be ambiguous on a sheet through midnight.
func TestShiftThroughMidnight(t *testing.T) {
	v := newShiftView(fixtureShift(10))
	first, last := v.Blocks[0].Begin, v.Blocks[9].Begin
	if first != "10:42:31" || last != "2026-03-11 00:57:31" {
		t.Errorf("contacts begin at %s and %s", first, last)
	}
}

func TestLocalSpan(t *testing.T) {
	zone, err := time.LoadLocation("Europe/London")
	if err != nil {
		t.Fatal(err)
	}
	at := func(text string) time.Time {
		v, err := time.Parse(time.RFC3339, text)
		if err != nil {
			t.Fatal(err)
		}
		return v
	}
	for _, c := range []struct{ from, to, want string }{
		{"2026-07-01T10:00:00Z", "2026-07-01T10:10:00Z", "11:00:00 to 11:10:00 BST"},
		{"2026-07-01T23:10:00Z", "2026-07-01T23:20:00Z", "2026-07-02 00:10:00 to 00:20:00 BST"},
		{"2026-07-01T22:55:00Z", "2026-07-01T23:05:00Z", "23:55:00 to 2026-07-02 00:05:00 BST"},
		// The tz database: Europe/London goes back to GMT on 25 October 2026, 01:00 UTC.
		{"2026-10-25T00:55:00Z", "2026-10-25T01:05:00Z", "01:55:00 BST to 01:05:00 GMT"},
	} {
		if got := localSpan(at(c.from), at(c.to), zone); got != c.want {
			t.Errorf("%s to %s: %s, want %s", c.from, c.to, got, c.want)
		}
	}
}

func TestShiftOddNames(t *testing.T) {
	s := fixtureShift(2)
	long := strings.Repeat("Wagtail-with-a-very-long-name", 8)
	s.Station, s.Plan = "Скала 岬 🛰 "+long, long+".csv"
	for i := range s.Contacts {
		c := &s.Contacts[i]
		c.Spacecraft, c.Name, c.Transmitter, c.Antenna = "محطة 衛星 🛰\x07 "+long, long, long, "<b>&\""
		c.Steps[0].Mode = long
		c.Uplinks[0].Name = long
		c.Cautions = []string{"<script>alert(1)</script>"}
		c.Orbit = long
	}
	pdf, err := ShiftPaper(s)
	if err != nil {
		t.Fatal(err)
	}
	if info := tool(t, pdf, "pdfinfo", "FILE"); !strings.Contains(info, "Pages:           1\n") {
		t.Errorf("pdfinfo says\n%s", info)
	}
	html, err := ShiftPage(s)
	if err != nil || bytes.Contains(html, []byte("<script")) || bytes.Contains(html, []byte("<b>&\"")) {
		t.Errorf("the page lets a name be markup, or %v", err)
	}
	for n := 1; n < 60; n++ {
		for _, line := range wrapped("a "+long+" b", sheetText, float64(n), float64(n)/2, false) {
			if len([]rune(line)) > 1 && sheetWidth(line, sheetText, false) > float64(n) {
				t.Fatalf("%q is wider than %d points", line, n)
			}
		}
	}
}

// The page prints on as many pages of A4 as the sheet may have, and shows every contact on a screen of
// any width without anything sticking out.
func TestShiftPageInABrowser(t *testing.T) {
	ctx := browser(t)
	for _, c := range []struct{ contacts, pages, want int }{{9, 1, 1}, {9, 3, 2}} {
		s := fixtureShift(c.contacts)
		s.Pages = c.pages
		html, err := ShiftPage(s)
		if err != nil {
			t.Fatal(err)
		}
		file := filepath.Join(t.TempDir(), "shift.html")
		if err := os.WriteFile(file, html, 0o600); err != nil {
			t.Fatal(err)
		}
		show(t, ctx, "file://"+file, screen{375, "dark"})
		if wide := ask[int](t, ctx, "document.documentElement.scrollWidth"); wide > 375 {
			t.Errorf("the page is %d px wide on a screen of 375", wide)
		}
		if n := ask[int](t, ctx, "[...document.querySelectorAll('.contact')].filter(e => e.offsetHeight > 0).length"); n != c.contacts {
			t.Errorf("%d contacts are shown of %d", n, c.contacts)
		}
		yes := true
		pdf, err := chromedp.Run(ctx, chromedp.PrintToPDF(func(p *page.PrintToPDFParams) { p.PreferCSSPageSize = &yes }))
		if err != nil {
			t.Fatal(err)
		}
		info := tool(t, pdf, "pdfinfo", "FILE")
		if !strings.Contains(info, fmt.Sprintf("Pages:           %d\n", c.want)) || !strings.Contains(info, "(A4)") {
			t.Errorf("%d contacts on %d pages: pdfinfo says\n%s", c.contacts, c.pages, info)
		}
		if v := newShiftView(s); v.Beyond != "" && !strings.Contains(flat(tool(t, pdf, "pdftotext", "FILE", "-")), flat(v.Beyond)) {
			t.Errorf("the print does not say %q", v.Beyond)
		}
	}
}

func TestShiftWords(t *testing.T) {
	s := ShiftSearch{AOSSeconds: 0.13, LOSSeconds: math.NaN(), MostSeconds: 0.4, AlongDeg: [3]float64{0.01, 0.09, 0.01}, BeamDeg: 0.7, StepSeconds: 0.46}
	c := ShiftContact{Search: s}
	for _, tt := range []struct {
		name   string
		change func(*ShiftContact)
		want   string
	}{
		{"held", func(*ShiftContact) {}, "AOS ±0.13 s. Up to ±0.40 s, 0.27° along the track, which the beam of 0.70° holds: no search, look at frequency and mode."},
		{"one step", func(c *ShiftContact) { c.Search.Steps = 1 }, "AOS ±0.13 s. Up to ±0.40 s, 0.27° along the track; beam 0.70°. Offset the time by +0.5, −0.5 s; then it is not the orbit."},
		{"many", func(c *ShiftContact) { c.Search.Steps, c.Search.StepSeconds = 5, 0.1 }, "AOS ±0.13 s. Up to ±0.40 s, 0.27° along the track; beam 0.70°. Offset the time by +0.10, −0.10, +0.20, −0.20 … ±0.50 s; then it is not the orbit."},
		{"no beam", func(c *ShiftContact) { c.Search.BeamDeg = math.NaN() }, "AOS ±0.13 s. Up to ±0.40 s, 0.27° along the track; how wide the beam is, is not known."},
		{"unknown", func(c *ShiftContact) { c.Search.Unknown = "no covariance" }, "How late or early it may be is not known: no covariance."},
		{"grazing", func(c *ShiftContact) { c.Search.MayVanish, c.Search.Existence = true, 0.62 }, "AOS ±0.13 s. It grazes the horizon, and rises at all with 62 %. Up to ±0.40 s, 0.27° along the track, which the beam of 0.70° holds: no search, look at frequency and mode."},
	} {
		one := c
		tt.change(&one)
		if got := one.searchText(); got != tt.want {
			t.Errorf("%s:\n got %s\nwant %s", tt.name, got, tt.want)
		}
	}
	c.Causes = []ShiftCause{{ShiftRain, 4.23, 0.5, ""}, {ShiftPointing, 1, math.Inf(1), ""}, {ShiftKeyhole, 0, math.Inf(1), "the mount does not follow 11:05:10 to 11:05:22"}, {ShiftPolarisation, 22, 22, "were the feed set to lhcp"}}
	if got, want := c.lowText(), "rain 4.2/0.5, pointing 1.0/all, keyhole (the mount does not follow 11:05:10 to 11:05:22); set wrong: polarisation 22.0 (were the feed set to lhcp)."; got != want {
		t.Errorf("got %s\nwant %s", got, want)
	}
	long := fixtureContact(firstAOS, 0)
	long.Minutes = nil
	for i := range 301 {
		long.Minutes = append(long.Minutes, ShiftMinute{Time: firstAOS.Truncate(time.Minute).Add(time.Duration(i) * time.Minute), ReceivedDBm: math.NaN(), CN0DBHz: 70, MarginDB: math.NaN()})
	}
	var b shiftBlock
	b.addSignal(&long)
	if n := len(b.Signal[0].Cells); b.SignalName != "Expected every 30 minutes" || n > mostSignalColumns || len(b.Signal) != 3 || b.Signal[2].Name != "C/N0, dBHz" {
		t.Errorf("%s: %d columns, rows %v", b.SignalName, n, b.Signal)
	}
}
