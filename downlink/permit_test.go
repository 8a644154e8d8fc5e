package downlink_test

import (
	"math"
	"testing"
	"time"

	"slantwise/downlink"
)

// rising is a profile whose achievable rate climbs by 8 kbit/s a second from 0, and whose
// mode of 8 kbit/s closes from 10 s on.
func rising() *downlink.Profile {
	p := &downlink.Profile{Start: time.Date(2026, 3, 10, 6, 0, 0, 0, time.UTC), DataRate: 8000}
	for i := range 21 {
		p.Seconds = append(p.Seconds, float64(i))
		p.AchievableRateBps = append(p.AchievableRateBps, 8000*float64(i))
		p.MarginOverDB = append(p.MarginOverDB, float64(i-10))
		p.Usable = append(p.Usable, true)
	}
	return p
}

// TestPermit by hand: the integral of 1000 t bytes a second over 2.5 s to 6 s and 8 s to
// 15 s is 500 (36 - 6.25 + 225 - 64) bytes; the mode closes in 10 s to 15 s of it, with
// 1000 bytes a second.
func TestPermit(t *testing.T) {
	p := rising()
	at := func(s float64) time.Time { return p.Start.Add(time.Duration(s * 1e9)) }
	p.Permit([]downlink.Interval{{From: at(2.5), To: at(6)}, {From: at(8), To: at(15)}})
	near := func(what string, got, want float64) {
		t.Helper()
		if math.Abs(got-want) > 1e-6 {
			t.Errorf("%s: got %.6f, want %.6f", what, got, want)
		}
	}
	near("achievable", p.Volume.AchievableBytes, 500*(36-6.25+225-64))
	near("mode", p.Volume.ModeBytes, 5000)
	if len(p.Volume.Closes) != 1 || !p.Volume.Closes[0].From.Equal(at(10)) || !p.Volume.Closes[0].To.Equal(at(15)) {
		t.Errorf("closes %v", p.Volume.Closes)
	}
	achievable, mode := p.VolumeSoFar()
	near("achievable by 5 s", achievable[5], 500*(25-6.25))
	near("achievable at the end", achievable[20], p.Volume.AchievableBytes)
	near("mode by 12 s", mode[12], 2000)
	near("mode at the end", mode[20], 5000)
	p.Permit(nil)
	near("nothing permitted", p.Volume.AchievableBytes+p.Volume.ModeBytes, 0)
	if len(p.Volume.Closes) != 0 {
		t.Errorf("nothing permitted, and it closes in %v", p.Volume.Closes)
	}
}

// TestPermitTwice keeps to what both permit: 3 s to 5 s and 9 s to 12 s, by the same
// integral as TestPermit.
func TestPermitTwice(t *testing.T) {
	p := rising()
	at := func(s float64) time.Time { return p.Start.Add(time.Duration(s * 1e9)) }
	p.Permit([]downlink.Interval{{From: at(2), To: at(5)}, {From: at(6), To: at(7)}, {From: at(9), To: at(20)}})
	p.Permit([]downlink.Interval{{From: at(3), To: at(5.5)}, {From: at(7.5), To: at(12)}})
	if want := 500.0 * (25 - 9 + 144 - 81); math.Abs(p.Volume.AchievableBytes-want) > 1e-6 {
		t.Errorf("got %.6f bytes, want %.6f", p.Volume.AchievableBytes, want)
	}
	if p.Permits(6.5) || !p.Permits(4) || p.Permits(2.5) {
		t.Error("what one of the two does not permit is permitted")
	}
}
