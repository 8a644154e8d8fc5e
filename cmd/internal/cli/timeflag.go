package cli

import (
	"fmt"
	"strconv"
	"strings"
	"time"

	"github.com/spf13/pflag"

	"slantwise/cmd/internal/scenario"
)

// addTime adds a flag that takes an instant: ISO 8601 in UTC, ending in Z. A time
// without a zone is refused, since nobody could tell which one was meant.
func addTime(fs *pflag.FlagSet, t *time.Time, name, usage string) {
	fs.Var((*timeFlag)(t), name, usage)
}

type timeFlag time.Time

// String returns the instant, empty for the zero time.
func (t *timeFlag) String() string { return utc(time.Time(*t)) }

// Type names the value in the help text.
func (t *timeFlag) Type() string { return "UTC" }

// Set takes an instant.
func (t *timeFlag) Set(s string) error {
	v, err := scenario.ParseUTC(s)
	if err != nil {
		return err
	}
	*t = timeFlag(v)
	return nil
}

// addDuration adds a flag that takes a length of time with its unit: 250ms, 1.5s,
// 10m, 2h30m, 3d. Zero and less are refused.
func addDuration(fs *pflag.FlagSet, d *time.Duration, name string, value time.Duration, usage string) {
	*d = value
	fs.Var((*durationFlag)(d), name, usage)
}

type durationFlag time.Duration

// String returns the length of time.
func (d *durationFlag) String() string {
	if *d == 0 {
		return ""
	}
	return time.Duration(*d).String()
}

// Type names the value in the help text.
func (d *durationFlag) Type() string { return "DURATION" }

// Set takes a length of time greater than zero.
func (d *durationFlag) Set(s string) error {
	v, err := parseDuration(s)
	if err != nil {
		return fmt.Errorf("%q is not a length of time; give one with its unit, for instance 250ms, 10s, 5m, 2h or 3d", s)
	}
	if v <= 0 {
		return fmt.Errorf("%q is not allowed; it must be greater than 0", s)
	}
	*d = durationFlag(v)
	return nil
}

// parseDuration adds whole and fractional days to what the library reads.
func parseDuration(s string) (time.Duration, error) {
	if days, ok := strings.CutSuffix(s, "d"); ok {
		v, err := strconv.ParseFloat(days, 64)
		if err != nil || !(v >= 0 && v <= 36525) {
			return 0, fmt.Errorf("not a number of days: %q", days)
		}
		return time.Duration(v * 24 * float64(time.Hour)), nil
	}
	return time.ParseDuration(s)
}
