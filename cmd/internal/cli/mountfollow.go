package cli

import (
	"fmt"
	"math"
	"sort"
	"strings"

	"slantwise/cmd/internal/scenario"
	"slantwise/downlink"
	"slantwise/orbit/unit"
	"slantwise/station"
	"slantwise/station/mount"
)

// mountOnPass is how an antenna's mount takes a pass, and what that costs.
type mountOnPass struct {
	plan      *mount.Plan
	chase     *mount.Plan // without looking ahead
	tolerance unit.Angle
	beamwidth unit.Angle // 0: not known
	// What the pass would bring down if the mount followed all of it, less what it does.
	lostAchievableBytes, lostModeBytes float64
}

// keepToLimits keeps the volume of a pass to what the licences allow and the mount
// follows, and returns what they take; the mount is nil where nothing is said of it.
func keepToLimits(s *scenario.Scenario, c *chosenLink, f *downlink.Profile) ([]downlink.Note, *mountOnPass, error) {
	out, err := keepToLicences(s, c, f)
	if err != nil {
		return nil, nil, err
	}
	m, err := keepToMount(c, f)
	if err != nil || m == nil {
		return out, nil, err
	}
	return append(out, m.notes(f)...), m, nil
}

// keepToMount keeps the volume of a pass to what the antenna's mount follows; nil where
// nothing is said of the mount.
func keepToMount(c *chosenLink, f *downlink.Profile) (*mountOnPass, error) {
	if c.antenna.Mount == nil || len(f.Seconds) < 2 {
		return nil, nil
	}
	course, err := mount.SampledCourse(f.Seconds, profileDirections(f))
	if err != nil {
		return nil, err
	}
	m := &mountOnPass{}
	m.beamwidth, m.tolerance = c.antenna.FollowingError(c.link.Frequency())
	drive, err := mount.New(c.antenna.Mount)
	if err != nil {
		return nil, err
	}
	m.plan = drive.Plan(course, mount.Options{Tolerance: m.tolerance, Worth: worthOf(f)})
	m.chase = m.plan.Chase(m.tolerance)
	if len(m.plan.Lost) == 0 {
		return m, nil
	}
	before := f.Volume
	var spans []downlink.Interval
	for _, p := range m.plan.Followed() {
		spans = append(spans, downlink.Interval{From: after(f.Start, p.From), To: after(f.Start, p.To)})
	}
	f.Permit(spans)
	m.lostAchievableBytes = before.AchievableBytes - f.Volume.AchievableBytes
	m.lostModeBytes = before.ModeBytes - f.Volume.ModeBytes
	return m, nil
}

// profileDirections is where the antenna must look: by the refracted ray where that
// arrives all the while, else by the straight line.
func profileDirections(f *downlink.Profile) []station.Direction {
	elevation := f.ApparentElevationDeg
	for _, v := range elevation {
		if math.IsNaN(v) {
			elevation = f.ElevationDeg
			break
		}
	}
	out := make([]station.Direction, len(f.Seconds))
	for i := range out {
		out[i] = station.Direction{Azimuth: unit.Angle(f.AzimuthDeg[i]) * unit.Degree, Elevation: unit.Angle(elevation[i]) * unit.Degree}
	}
	return out
}

// worthOf is the achievable rate at an instant of a pass; nil where there is none.
func worthOf(f *downlink.Profile) func(float64) float64 {
	any := false
	for _, r := range f.AchievableRateBps {
		any = any || r > 0
	}
	if !any {
		return nil
	}
	return func(t float64) float64 {
		i := min(sort.SearchFloat64s(f.Seconds, t), len(f.Seconds)-1)
		if r := f.AchievableRateBps[i]; r > 0 && f.Permits(t) {
			return r
		}
		return 0
	}
}

// notes says what the mount takes from the pass.
func (m *mountOnPass) notes(f *downlink.Profile) []downlink.Note {
	if len(m.plan.Lost) == 0 {
		return nil
	}
	var spans []string
	for _, l := range m.plan.Lost {
		spans = append(spans, fmt.Sprintf("%s to %s", utc(after(f.Start, l.From)), laterUTC(after(f.Start, l.To), after(f.Start, l.From))))
	}
	text := fmt.Sprintf("the mount does not follow %s s of the pass (%s) within %.2g deg", fixed(m.plan.LostSeconds(), 1), strings.Join(spans, "; "), m.tolerance.Degrees())
	if !math.IsNaN(m.lostModeBytes) {
		text += fmt.Sprintf("; %s bytes of the mode are lost", fixed(m.lostModeBytes, 0))
	} else {
		text += fmt.Sprintf("; %s bytes at the achievable rate are lost", fixed(m.lostAchievableBytes, 0))
	}
	return []downlink.Note{{Kind: downlink.Warning, Text: text + "; volumes are without them"}}
}
