package contacts

import (
	"testing"
	"time"
	_ "time/tzdata" // the zones of the tests, on machines without them
)

func TestLocalDays(t *testing.T) {
	// Lengths of days from the rules of the IANA time zone database (2024a): Europe/London
	// changes on the last Sundays of March and October, Apia left out 30 December 2011,
	// Havana begins summer time at midnight, so that 2026-03-08 starts at 01:00.
	for _, row := range []struct {
		name, zone, start string
		days              int
		want              []float64 // hours of the days
	}{
		{"spring", "Europe/London", "2026-03-28T00:00:00Z", 3, []float64{24, 23, 24, 24}},
		{"autumn", "Europe/London", "2026-10-24T23:00:00Z", 2, []float64{25, 24}},
		{"a date that does not exist", "Pacific/Apia", "2011-12-29T10:00:00Z", 2, []float64{24, 24}},
		{"no midnight", "America/Havana", "2026-03-08T05:00:00Z", 2, []float64{23, 24, 24}},
		{"whole UTC days", "UTC", "2026-03-10T00:00:00Z", 2, []float64{24, 24}},
		{"beyond the date line", "Pacific/Kiritimati", "2026-03-10T00:00:00Z", 1, []float64{24, 24}},
	} {
		t.Run(row.name, func(t *testing.T) {
			zone, err := time.LoadLocation(row.zone)
			if err != nil {
				t.Fatal(err)
			}
			start, err := time.Parse(time.RFC3339, row.start)
			if err != nil {
				t.Fatal(err)
			}
			p := &Problem{Start: start, Length: Ms(row.days) * Day}
			days := p.LocalDays(zone)
			got := []float64{}
			for i, d := range days {
				got = append(got, d.Length().Seconds()/3600)
				if i > 0 && d.From != days[i-1].To {
					t.Errorf("day %d begins at %s, the one before ends at %s", i, p.At(d.From), p.At(days[i-1].To))
				}
			}
			if days[0].From > 0 || days[len(days)-1].To < p.Length {
				t.Errorf("days %v do not cover the horizon of %d ms", days, p.Length)
			}
			if len(got) != len(row.want) {
				t.Fatalf("days of %v h, want %v h", got, row.want)
			}
			for i := range got {
				if got[i] != row.want[i] {
					t.Errorf("day %d has %g h, want %g h", i, got[i], row.want[i])
				}
			}
		})
	}
}

func TestSpans(t *testing.T) {
	got := Span{0, 100}.Without([]Span{{90, 120}, {-5, 10}, {40, 50}, {45, 60}, {70, 70}})
	want := []Span{{10, 40}, {60, 90}}
	if len(got) != len(want) || got[0] != want[0] || got[1] != want[1] {
		t.Errorf("left %v, want %v", got, want)
	}
	if o := (Span{0, 10}).Overlap(Span{10, 20}); o != 0 {
		t.Errorf("spans that touch overlap by %d ms", o)
	}
	if r := up(-1500, 1000); r != -1000 {
		t.Errorf("-1500 rounded up to whole seconds is %d", r)
	}
	if r := down(-1500, 1000); r != -2000 {
		t.Errorf("-1500 rounded down to whole seconds is %d", r)
	}
}
