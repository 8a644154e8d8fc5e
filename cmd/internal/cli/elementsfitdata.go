package cli

import (
	"bytes"
	"errors"
	"fmt"
	"io"
	"os"
	"slices"
	"time"

	"slantwise/orbit"
	"slantwise/orbit/fit"
	"slantwise/orbit/oem"
)

// positions are what a set is fitted to.
type positions struct {
	data  []fit.Datum
	from  string         // where they are from, for people
	like  orbit.Elements // the object's name and numbers, as far as they are known
	notes []string
}

// gatherPositions reads the file, or flies a spacecraft.
func gatherPositions(env *Env, o *fitOptions) (*positions, error) {
	var p *positions
	var err error
	if o.file != "" {
		p, err = filePositions(env, o)
	} else {
		p, err = flownPositions(env, o)
	}
	if err != nil {
		return nil, err
	}
	if o.positionsOnly {
		for i := range p.data {
			p.data[i].HasVelocity = false
		}
		p.notes = append(p.notes, "velocities are left out (--positions-only)")
	}
	return p, nil
}

// filePositions reads a table or an OEM, told apart by content.
func filePositions(env *Env, o *fitOptions) (*positions, error) {
	p, earth := &positions{from: o.file}, orbit.EarthOrientation{}
	if env.Scenario != "" {
		s, err := env.load(needOrbits)
		if err != nil {
			return nil, err
		}
		earth = s.Earth
	}
	text, err := p.text(env, o.file)
	if err != nil {
		return nil, err
	}
	var frames []orbit.Frame
	if oem.Looks(text) {
		frames, err = p.message(text, o, earth)
	} else {
		frames, err = p.table(text, o, earth)
	}
	if err != nil {
		return nil, err
	}
	for _, f := range frames {
		p.notes = append(p.notes, "positions in the frame "+f.String()+inTEME(f))
		if f.Rotates() && env.Scenario == "" {
			p.notes = append(p.notes, "UT1-UTC and polar motion are taken as 0, which turns an Earth-fixed frame by up to 0.9 s of time; --scenario names a file with them")
		}
	}
	return p, nil
}

// text reads the file, or standard input.
func (p *positions) text(env *Env, file string) ([]byte, error) {
	in := env.In
	if file == "-" {
		p.from = "standard input"
	} else {
		f, err := os.Open(file)
		if err != nil {
			var pe *os.PathError
			if errors.As(err, &pe) {
				err = pe.Err
			}
			return nil, inputErrorf("%s: cannot be read: %w; check the name and the folder it is relative to", file, err)
		}
		defer f.Close()
		in = f
	}
	text, err := io.ReadAll(io.LimitReader(in, oem.MaxSize+1)) // the readers know how much is too much
	if err != nil {
		return nil, inputErrorf("%s: cannot be read: %w; check that it is a file", p.from, err)
	}
	return text, nil
}

func (p *positions) table(text []byte, o *fitOptions, earth orbit.EarthOrientation) ([]orbit.Frame, error) {
	if o.object != "" {
		return nil, inputErrorf("--object is about an OEM of several, and %s is a table", p.from)
	}
	var frame *orbit.Frame
	if o.frame != "" {
		f, err := fit.ParseFrame(o.frame)
		if err != nil {
			return nil, inputErrorf("--frame: %w", err)
		}
		frame = &f
	}
	table, err := fit.ReadTable(bytes.NewReader(text), p.from, frame, earth)
	if err != nil {
		return nil, &InputError{Err: err}
	}
	p.data = table.Data
	return table.Frames, nil
}

// message takes the states of an OEM as they are, without its interpolation; the usable
// spans alone.
func (p *positions) message(text []byte, o *fitOptions, earth orbit.EarthOrientation) (frames []orbit.Frame, err error) {
	if o.frame != "" {
		return nil, inputErrorf("--frame is about a table, and %s is an OEM, which names its own", p.from)
	}
	file, err := oem.Read(bytes.NewReader(text), p.from, earth)
	if err != nil {
		return nil, &InputError{Err: err}
	}
	for _, w := range file.Warnings {
		p.notes = append(p.notes, "warning: "+w.String())
	}
	t, err := pickTrajectory(file.Trajectories, o.object, p.from)
	if err != nil {
		return nil, err
	}
	turner, err := orbit.NewTurner(earth)
	if err != nil {
		return nil, &InputError{Err: err}
	}
	p.like = orbit.Elements{Name: t.Name, InternationalDesignator: t.ID}
	for i := range t.Segments {
		s := &t.Segments[i]
		if !slices.Contains(frames, s.Frame) {
			frames = append(frames, s.Frame)
		}
		for _, x := range s.States {
			if x.Time.Before(s.From) || x.Time.After(s.To) {
				continue
			}
			d := fit.Datum{Time: x.Time, HasVelocity: true}
			d.Position, d.Velocity = turner.Between(s.Frame, orbit.TEME, x.Position, x.Velocity, x.Time)
			p.data = append(p.data, d)
		}
	}
	return frames, nil
}

// pickTrajectory returns the object of a name or designator, or the only one.
func pickTrajectory(all []orbit.Trajectory, name, from string) (*orbit.Trajectory, error) {
	var names []string
	for i := range all {
		if t := &all[i]; name != "" && (t.Name == name || t.ID == name) {
			return t, nil
		}
		names = append(names, all[i].Name)
	}
	switch {
	case name != "":
		return nil, inputErrorf("--object: %q is not in %s%s; it holds %s", name, from, meant(name, names), quotedList(names))
	case len(all) > 1:
		return nil, inputErrorf("--object: left out, and %s holds %d; name one of %s", from, len(all), quotedList(names))
	}
	return &all[0], nil
}

// inTEME says what is done with positions of a frame.
func inTEME(f orbit.Frame) string {
	if f == orbit.TEME {
		return ", that of SGP4"
	}
	return " are turned into TEME"
}

// mostFlown is how many positions of a spacecraft are taken.
const mostFlown = 1_000_000

// flownPositions flies a spacecraft of the scenario, by whatever it has: an element set, a
// state, an ephemeris.
func flownPositions(env *Env, o *fitOptions) (*positions, error) {
	s, err := env.load(needOrbits)
	if err != nil {
		return nil, err
	}
	craft, err := pick("spacecraft", o.spacecraft, s.Spacecraft, spacecraftName)
	if err != nil {
		return nil, err
	}
	from, to := o.from, o.to
	if from.IsZero() {
		from = s.Window.Start
	}
	if to.IsZero() {
		to = from.Add(24 * time.Hour)
		if s.Window.End.After(from) && s.Window.End.Before(to) {
			to = s.Window.End
		}
	}
	if count := to.Sub(from)/o.step + 1; to.Before(from) || count > mostFlown {
		return nil, inputErrorf("%s to %s in steps of %s are not 1 to %d positions; give another --to or --step", utc(from), utc(to), o.step, mostFlown)
	}
	eph, err := s.Ephemeris(craft, from, to, nil)
	if err != nil {
		return nil, &InputError{Err: fmt.Errorf("spacecraft %s: %w", craft.Name, err)}
	}
	turner, err := orbit.NewTurner(s.Earth)
	if err != nil {
		return nil, &InputError{Err: err}
	}
	p := &positions{from: "spacecraft " + craft.Name, like: craft.Elements.Elements}
	if craft.Trajectory != nil {
		p.like.Name = craft.Trajectory.Name
	}
	if p.like.Name == "" && p.like.CatalogNumber == 0 {
		p.like.Name = craft.Name
	}
	missing := 0
	for at := from; !at.After(to); at = at.Add(o.step) {
		state, err := eph.At(at)
		if err != nil { // a gap, or the end of the orbit
			missing++
			continue
		}
		d := fit.Datum{Time: at, HasVelocity: true}
		d.Position, d.Velocity = turner.FromEarthFixed(orbit.TEME, state, at)
		p.data = append(p.data, d)
	}
	if missing > 0 {
		p.notes = append(p.notes, fmt.Sprintf("%d of the instants asked for have no position", missing))
	}
	if why := eph.Truncated(); why != nil {
		p.notes = append(p.notes, "the positions end early: "+why.Error())
	}
	return p, nil
}
