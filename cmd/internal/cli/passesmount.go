package cli

import (
	"slices"
	"sync"

	"slantwise/orbit"
	"slantwise/orbit/unit"
	"slantwise/station"
	"slantwise/station/mount"
	"slantwise/station/pass"
)

// mountColumns are the columns that --mount adds at the end.
var mountColumns = []string{
	"mount_antenna", "not_followed_s", "not_followed_without_plan_s", "start_lower_axis_deg", "end_lower_axis_deg",
	"greatest_lower_rate_deg_s", "slews", "turn_overs",
}

// mountDecimals are those of the columns after the first.
var mountDecimals = [...]int{3, 3, 3, 3, 3, 0, 0}

// passMount is how a mount takes a pass, as mountColumns after the first.
type passMount [7]float64

// passMover is the mount that takes the passes of a spacecraft over a site.
type passMover struct {
	antenna   string
	drive     *mount.Drive
	tolerance unit.Angle
}

// mountList works out and keeps how mounts take the passes of a list. Its method measure
// is safe for use by many goroutines.
type mountList struct {
	frames     []station.Frame // by site
	refraction []*station.Refraction
	movers     [][]*passMover // by site, then spacecraft; nil: no mount

	mu    sync.Mutex
	known map[passPlace]passMount
	fault error
}

// newMountList prepares the mounts of the stations.
func (p *passSearch) newMountList(env *Env) (*mountList, error) {
	l := &mountList{known: map[passPlace]passMount{}}
	var without []string
	for i := range p.stations {
		st := &p.stations[i]
		l.frames = append(l.frames, st.Site.Frame())
		r, err := station.NewRefraction(st.Site.HeightAboveSea())
		if err != nil {
			return nil, err
		}
		l.refraction = append(l.refraction, r)
		var movers []*passMover
		if !slices.ContainsFunc(st.Antennas, func(a station.Antenna) bool { return a.Mount != nil }) {
			without = append(without, st.Site.Name)
		}
		for k := range p.spacecraft {
			m, err := moverFor(st.Antennas, p.frequencies(k))
			if err != nil {
				return nil, err
			}
			movers = append(movers, m)
		}
		l.movers = append(l.movers, movers)
	}
	if len(without) == len(p.stations) {
		return nil, inputErrorf("--mount: no antenna has a mount at %s; give one in the scenario's key mount", quotedList(without))
	}
	if len(without) > 0 {
		env.note("no antenna has a mount at %s", quotedList(without))
	}
	env.note("each pass is planned by itself: the mount has all the time that it needs to get to where it begins")
	return l, nil
}

// frequencies are those that a spacecraft sends on.
func (p *passSearch) frequencies(craft int) []unit.Frequency {
	var out []unit.Frequency
	for _, t := range p.spacecraft[craft].Transmitters {
		out = append(out, t.Frequency)
	}
	return out
}

// moverFor picks the first antenna with a mount that takes a frequency, else the first
// with a mount if no frequency is known; nil for none.
func moverFor(antennas []station.Antenna, frequencies []unit.Frequency) (*passMover, error) {
	for i := range antennas {
		a := &antennas[i]
		if a.Mount == nil {
			continue
		}
		var f unit.Frequency
		k := slices.IndexFunc(frequencies, func(f unit.Frequency) bool {
			return len(a.Bands) == 0 || slices.ContainsFunc(a.Bands, func(b station.Band) bool { return b.Holds(f) })
		})
		switch {
		case k >= 0:
			f = frequencies[k]
		case len(frequencies) > 0:
			continue
		}
		drive, err := mount.New(a.Mount)
		if err != nil {
			return nil, err
		}
		_, tolerance := a.FollowingError(f)
		return &passMover{a.Name, drive, tolerance}, nil
	}
	return nil, nil
}

// measure keeps how the mount takes a pass.
func (l *mountList) measure(e *orbit.Ephemeris, f *pass.Found) {
	m := l.movers[f.Site][f.Spacecraft]
	if m == nil || !f.LOS.After(f.AOS) {
		return
	}
	course, err := mount.PassCourse(l.frames[f.Site], e, f.AOS, f.LOS, l.refraction[f.Site])
	if err != nil {
		l.mu.Lock()
		defer l.mu.Unlock()
		l.fault = err
		return
	}
	p := m.drive.Plan(course, mount.Options{Tolerance: m.tolerance})
	out := passMount{p.LostSeconds(), p.Chase(m.tolerance).LostSeconds(), p.Start.Lower.Degrees(), p.End.Lower.Degrees(),
		p.GreatestLower.DegreesPerSecond(), float64(len(p.Slews)), 0}
	for _, s := range p.Slews {
		if s.TurnOver {
			out[6]++
		}
	}
	if !p.Reached {
		out[2], out[3] = none, none
	}
	l.mu.Lock()
	defer l.mu.Unlock()
	l.known[placeOf(f)] = out
}

// measuring returns a filter of passes that also keeps how mounts take those that stay.
func (l *mountList) measuring(keep func(*orbit.Ephemeris, *pass.Found) bool) func(*orbit.Ephemeris, *pass.Found) bool {
	if l == nil {
		return keep
	}
	return func(e *orbit.Ephemeris, f *pass.Found) bool {
		if keep != nil && !keep(e, f) {
			return false
		}
		l.measure(e, f)
		return true
	}
}

// of returns how a pass is taken; ok is false where there is no mount.
func (l *mountList) of(f *pass.Found) (antenna string, of passMount, ok bool) {
	of, ok = l.known[placeOf(f)]
	if ok {
		antenna = l.movers[f.Site][f.Spacecraft].antenna
	}
	return antenna, of, ok
}

func (l *mountList) appendCSV(b []byte, f *pass.Found) []byte {
	antenna, of, ok := l.of(f)
	b = append(b, ',')
	if ok {
		b = append(b, csvField(antenna)...)
	}
	for n, v := range of {
		if b = append(b, ','); ok {
			b = appendFixed(b, v, mountDecimals[n])
		}
	}
	return b
}

func (l *mountList) appendFields(b []byte, f *pass.Found) []byte {
	antenna, of, ok := l.of(f)
	name := "null"
	if ok {
		name = jsonField(antenna)
	}
	b = append(append(append(append(b, `, "`...), mountColumns[0]...), `": `...), name...)
	for n, v := range of {
		b = append(append(append(b, `, "`...), mountColumns[n+1]...), `": `...)
		if before := len(b); ok {
			if b = appendFixed(b, v, mountDecimals[n]); len(b) > before {
				continue
			}
		}
		b = append(b, "null"...)
	}
	return b
}

// cells are those of a table.
func (l *mountList) cells(f *pass.Found) []string {
	antenna, of, ok := l.of(f)
	if !ok {
		return []string{"", "", "", "", "", ""}
	}
	return []string{antenna, fixed(of[0], 1), fixed(of[1], 1), fixed(of[2], 1), fixed(of[3], 1), fixed(of[6], 0)}
}
