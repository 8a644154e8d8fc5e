package cli

import (
	"encoding/json"
	"math"
	"testing"
	"time"
)

func TestFixed(t *testing.T) {
	for _, tt := range []struct {
		v        float64
		decimals int
		want     string
	}{
		{1.005, 1, "1.0"},
		{-0.004, 2, "0.00"},
		{math.Copysign(0, -1), 0, "0"},
		{-0.4, 0, "0"},
		{-0.006, 2, "-0.01"},
		{-10, 1, "-10.0"},
		{math.NaN(), 2, ""},
		{math.Inf(-1), 2, ""},
	} {
		if got := fixed(tt.v, tt.decimals); got != tt.want {
			t.Errorf("fixed(%g, %d) = %q, want %q", tt.v, tt.decimals, got, tt.want)
		}
	}
	got, err := json.Marshal([]number{num(-0.001, 2), num(math.NaN(), 2), num(math.Inf(1), 2), num(2.5, 0)})
	if err != nil || string(got) != "[0.00,null,null,2]" {
		t.Errorf("JSON %s (%v), want [0.00,null,null,2]", got, err)
	}
}

func TestUTC(t *testing.T) {
	zone := time.FixedZone("", 3600)
	for _, tt := range []struct {
		t    time.Time
		want string
	}{
		{time.Date(2026, 1, 1, 0, 59, 59, 999_500_000, zone), "2026-01-01T00:00:00.000Z"}, // rounds up over the year's end
		{time.Date(2026, 1, 1, 0, 0, 0, 1_499_999, time.UTC), "2026-01-01T00:00:00.001Z"},
		{time.Time{}, ""},
	} {
		if got := utc(tt.t); got != tt.want {
			t.Errorf("utc(%v) = %q, want %q", tt.t, got, tt.want)
		}
	}
}

func TestAppendFixedDoesNotAllocate(t *testing.T) {
	b := make([]byte, 0, 64)
	if n := testing.AllocsPerRun(100, func() { b = appendFixed(b[:0], -12.345, 3) }); n != 0 {
		t.Errorf("%g allocations a number, want none", n)
	}
}
