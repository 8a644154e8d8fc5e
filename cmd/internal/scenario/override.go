package scenario

import (
	"fmt"
	"os"
	"strings"

	"github.com/spf13/pflag"
	"github.com/spf13/viper"

	"slantwise/cmd/internal/nearest"
	"slantwise/cmd/internal/scenario/tree"
)

// scalarKeys are the keys outside lists, which environment variables may set.
var scalarKeys = []string{
	"window.start_utc", "window.length_h", "window.end_utc",
	"earth.ut1_minus_utc_s", "element_choice", "horizon",
	"path.exceeded_percent", "path.clear_sky", "path.noise_environment", "path.ionospheric_scintillation_loss_db",
	"path.ionospheric_rotation_loss_db", "path.electron_content_1_m2", "path.magnetic_field_ut",
	"position_uncertainty.along_km", "position_uncertainty.along_km_per_day", "position_uncertainty.along_km_per_day2",
	"position_uncertainty.across_km", "position_uncertainty.across_km_per_day", "position_uncertainty.across_km_per_day2",
	"position_uncertainty.radial_km", "position_uncertainty.radial_km_per_day", "position_uncertainty.radial_km_per_day2",
	"position_uncertainty.pointing_probability",
	"sizing.spacecraft", "sizing.transmitter", "sizing.mode", "sizing.antenna", "sizing.days",
	"sizing.antenna_family.surface_rms_share", "sizing.antenna_family.pointing_error_deg", "sizing.antenna_family.wind_pointing_error_deg", "sizing.antenna_family.receiver_noise_k",
	"sizing.requirements.worst_week_bytes_per_day", "sizing.requirements.worst_month_bytes_per_day",
	"sizing.requirements.margin_for_contact_share.contact_percent", "sizing.requirements.margin_for_contact_share.margin_db",
	"sizing.requirements.bytes_per_day", "sizing.requirements.availability_percent",
	"sizing.requirements.longest_gap_h", "sizing.requirements.latency_p95_h",
	"sizing.requirements.margin_at_elevation.elevation_deg", "sizing.requirements.margin_at_elevation.margin_db",
}

const envPrefix = "SLANTWISE_"

// envName returns the variable that sets a key: SLANTWISE_WINDOW_LENGTH_H.
func envName(key string) string {
	return envPrefix + strings.ToUpper(strings.ReplaceAll(key, ".", "_"))
}

// override replaces scalars of the file by those of the environment, and these by
// flags. Names are values in lists and never keys, so that viper's lower case and
// its dots do no harm.
func (r *reader) override(root *tree.Node, flags map[string]*pflag.Flag) {
	r.refuseUnknownVariables()
	v := viper.New()
	v.SetEnvPrefix(strings.TrimSuffix(envPrefix, "_"))
	v.SetEnvKeyReplacer(strings.NewReplacer(".", "_"))
	for _, key := range scalarKeys {
		if n := lookUp(root, key); n != nil {
			v.SetDefault(key, n.Text) // the file's value, which the others replace
		}
		origin := ""
		if os.Getenv(envName(key)) != "" {
			origin = "environment " + envName(key)
		}
		err := v.BindEnv(key)
		if f := flags[key]; err == nil && f != nil && f.Changed {
			origin = "flag --" + f.Name
			err = v.BindPFlag(key, f)
		}
		if err != nil {
			r.faults.add(fmt.Errorf("%s: %w", key, err))
		}
		if origin != "" {
			set(root, key, &tree.Node{Kind: tree.Loose, Text: v.GetString(key), Origin: origin})
		}
	}
}

// refuseUnknownVariables finds variables that were meant for this program and set
// nothing.
func (r *reader) refuseUnknownVariables() {
	known := make([]string, len(scalarKeys))
	isKnown := map[string]bool{}
	for i, k := range scalarKeys {
		known[i] = envName(k)
		isKnown[known[i]] = true
	}
	for _, e := range os.Environ() {
		name, _, _ := strings.Cut(e, "=")
		if !strings.HasPrefix(name, envPrefix) || isKnown[name] {
			continue
		}
		next := "unset it; variables set scalars outside lists, as SLANTWISE_WINDOW_LENGTH_H does"
		if near := nearest.Names(name, known, 1); len(near) > 0 {
			next = "did you mean " + near[0] + "?"
		}
		r.faults.add(&Fault{Place: "environment " + name, Problem: "the variable is not known", Next: next})
	}
}

// lookUp returns the value of a dotted key, or nil.
func lookUp(n *tree.Node, key string) *tree.Node {
	for _, part := range strings.Split(key, ".") {
		if n == nil || n.Kind != tree.Map {
			return nil
		}
		n = n.Get(part)
	}
	return n
}

// alternatives are keys of which one replaces the other.
var alternatives = map[string]string{"window.length_h": "end_utc", "window.end_utc": "length_h"}

// set puts a value at a dotted key and makes the groups that are missing. Where the
// file holds something else than a group, it is left for the reader to refuse.
func set(n *tree.Node, key string, value *tree.Node) {
	parts := strings.Split(key, ".")
	for _, part := range parts[:len(parts)-1] {
		next := n.Get(part)
		if next == nil {
			next = &tree.Node{Kind: tree.Map, Origin: value.Origin}
			n.Entries = append(n.Entries, tree.Entry{Key: part, Value: next})
		}
		if next.Kind != tree.Map {
			return
		}
		n = next
	}
	last := parts[len(parts)-1]
	kept := n.Entries[:0]
	for _, e := range n.Entries {
		// An alternative in the file gives way; one from outside it stands and is told.
		replaced := e.Key == last || e.Key == alternatives[key] && e.Value.Origin == ""
		if !replaced {
			kept = append(kept, e)
		}
	}
	n.Entries = append(kept, tree.Entry{Key: last, Value: value})
}
