package cli

import (
	"testing"
	"time"

	"github.com/spf13/pflag"
)

func TestDurationFlag(t *testing.T) {
	for _, tt := range []struct {
		give string
		want time.Duration // 0: refused
	}{
		{"1ms", time.Millisecond}, {"1.5s", 1500 * time.Millisecond}, {"2h30m", 150 * time.Minute}, {"3d", 72 * time.Hour}, {"0.5d", 12 * time.Hour},
		{"10", 0}, {"0s", 0}, {"-5s", 0}, {"NaNd", 0}, {"Infd", 0}, {"1e9d", 0}, {"-1d", 0}, {"", 0}, {"10 s", 0}, {"d", 0},
	} {
		fs := pflag.NewFlagSet("test", pflag.ContinueOnError)
		var d time.Duration
		addDuration(fs, &d, "step", time.Second, "step")
		err := fs.Parse([]string{"--step=" + tt.give})
		if refused := err != nil; refused != (tt.want == 0) || !refused && d != tt.want {
			t.Errorf("%q: got %v, %v; want %v (0: refused)", tt.give, d, err, tt.want)
		}
	}
}

func TestTimeFlag(t *testing.T) {
	for _, tt := range []struct{ give, want string }{
		{"2026-03-10T14:05:00Z", "2026-03-10T14:05:00.000Z"},
		{"2026-03-10T14:05Z", "2026-03-10T14:05:00.000Z"},
		{"2026-03-10T14:05:00.123456789Z", "2026-03-10T14:05:00.123Z"},
		{"2026-03-10T14:05:00", ""}, {"2026-03-10T14:05:00+00:00", ""}, {"2026-03-10", ""}, {"2026-03-10 14:05:00Z", ""},
		{"2026-03-10T14:05:00,5Z", ""}, {"2026-02-29T00:00:00Z", ""}, {"2026-03-10T24:00:00Z", ""}, {"now", ""}, {"", ""},
	} {
		fs := pflag.NewFlagSet("test", pflag.ContinueOnError)
		var at time.Time
		addTime(fs, &at, "at", "instant")
		err := fs.Parse([]string{"--at=" + tt.give})
		if refused := err != nil; refused != (tt.want == "") || !refused && utc(at) != tt.want {
			t.Errorf("%q: got %s, %v; want %q (empty: refused)", tt.give, utc(at), err, tt.want)
		}
	}
}
