package cli

import (
	"fmt"
	"slices"

	"slantwise/cmd/internal/scenario"
	"slantwise/downlink"
)

// choose pairs the spacecraft and stations of both files and checks the names given.
func (c *comparison) choose() error {
	o := c.options
	var err error
	if c.craft, err = inBoth("spacecraft", o.spacecraft, c.sides[0].Spacecraft, c.sides[1].Spacecraft, spacecraftName, &c.notes); err != nil {
		return err
	}
	if c.stations, err = inBoth("station", o.stations, c.sides[0].Stations, c.sides[1].Stations, stationName, &c.notes); err != nil {
		return err
	}
	if err := inEither("transmitter", o.transmitter, c.craft, func(s *scenario.Spacecraft) (names []string) {
		for i := range s.Transmitters {
			names = append(names, s.Transmitters[i].Name)
		}
		return names
	}); err != nil {
		return err
	}
	return inEither("uplink", o.uplink, c.craft, uplinkNames)
}

// inBoth pairs what has the same name in both files, or only those named. What only
// one file has becomes a note.
func inBoth[T any](what string, named []string, before, after []T, name func(*T) string, notes *[]string) ([][2]*T, error) {
	var found [][2]*T
	for i := range before {
		j := slices.IndexFunc(after, func(x T) bool { return name(&x) == name(&before[i]) })
		if j >= 0 {
			found = append(found, [2]*T{&before[i], &after[j]})
		} else {
			*notes = append(*notes, fmt.Sprintf("%s %s is only in the first file", what, name(&before[i])))
		}
	}
	for j := range after {
		if !slices.ContainsFunc(before, func(x T) bool { return name(&x) == name(&after[j]) }) {
			*notes = append(*notes, fmt.Sprintf("%s %s is only in the second file", what, name(&after[j])))
		}
	}
	if len(found) == 0 {
		return nil, inputErrorf("no %s has the same name in both files; names pair them", what)
	}
	return pickMany(what, named, found, func(p *[2]*T) string { return name(p[0]) })
}

// inEither refuses a name, of a transmitter or an uplink, that no spacecraft has.
func inEither(what, name string, craft [][2]*scenario.Spacecraft, names func(*scenario.Spacecraft) []string) error {
	if name == "" {
		return nil
	}
	var all []string
	for _, c := range craft {
		for _, n := range append(names(c[0]), names(c[1])...) {
			if !slices.Contains(all, n) {
				all = append(all, n)
			}
		}
	}
	_, err := pick(what, name, all, func(s *string) string { return *s })
	return err
}

// transmitter is the one named or the only one; nil: none is meant.
func (o *compareOptions) transmitterOf(c *scenario.Spacecraft) *downlink.Transmitter {
	if o.transmitter == "" {
		if len(c.Transmitters) == 1 && len(c.Transmitters[0].Modes) > 0 {
			return &c.Transmitters[0]
		}
		return nil
	}
	i := slices.IndexFunc(c.Transmitters, func(t downlink.Transmitter) bool { return t.Name == o.transmitter })
	if i < 0 || len(c.Transmitters[i].Modes) == 0 {
		return nil
	}
	return &c.Transmitters[i]
}

// uplinkOf is the one named or the only one; nil: none is meant, or it has no mode.
func (o *compareOptions) uplinkOf(c *scenario.Spacecraft) *downlink.Receiver {
	var u *downlink.Receiver
	switch {
	case o.uplink != "":
		u = c.Uplink(o.uplink)
	case len(c.Uplinks) == 1:
		u = &c.Uplinks[0]
	}
	if u == nil || len(u.Modes) == 0 {
		return nil
	}
	return u
}
