package cli

import (
	"errors"
	"fmt"
	"io"
	"os"
	"time"

	"slantwise/orbit"
	"slantwise/orbit/fit"
)

// positions are what a set is fitted to.
type positions struct {
	data  []fit.Datum
	from  string         // where they are from, for people
	like  orbit.Elements // the object's name and numbers, as far as they are known
	notes []string
}

// gatherPositions reads the table, or flies a spacecraft.
func gatherPositions(env *Env, o *fitOptions) (*positions, error) {
	var p *positions
	var err error
	if o.file != "" {
		p, err = tablePositions(env, o)
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

func tablePositions(env *Env, o *fitOptions) (*positions, error) {
	var frame *orbit.Frame
	if o.frame != "" {
		f, err := fit.ParseFrame(o.frame)
		if err != nil {
			return nil, inputErrorf("--frame: %w", err)
		}
		frame = &f
	}
	earth := orbit.EarthOrientation{}
	p := &positions{from: o.file}
	if env.Scenario != "" {
		s, err := env.load(needOrbits)
		if err != nil {
			return nil, err
		}
		earth = s.Earth
	}
	in := env.In
	if o.file == "-" {
		p.from = "standard input"
	} else {
		f, err := os.Open(o.file)
		if err != nil {
			var pe *os.PathError
			if errors.As(err, &pe) {
				err = pe.Err
			}
			return nil, inputErrorf("%s: cannot be read: %w; check the name and the folder it is relative to", o.file, err)
		}
		defer f.Close()
		in = io.Reader(f)
	}
	table, err := fit.ReadTable(in, p.from, frame, earth)
	if err != nil {
		return nil, &InputError{Err: err}
	}
	p.data = table.Data
	for _, f := range table.Frames {
		p.notes = append(p.notes, "positions in the frame "+f.String()+inTEME(f))
		if f.Rotates() && env.Scenario == "" {
			p.notes = append(p.notes, "UT1-UTC and polar motion are taken as 0, which turns an Earth-fixed frame by up to 0.9 s of time; --scenario names a file with them")
		}
	}
	return p, nil
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
	if p.like.Name == "" && p.like.CatalogNumber == 0 {
		p.like.Name = craft.Name
	}
	for at := from; !at.After(to) && eph.Seconds(at) <= eph.Span(); at = at.Add(o.step) {
		d := fit.Datum{Time: at, HasVelocity: true}
		state := eph.StateAt(eph.Seconds(at))
		d.Position, d.Velocity = turner.FromEarthFixed(orbit.TEME, state, at)
		p.data = append(p.data, d)
	}
	if why := eph.Truncated(); why != nil {
		p.notes = append(p.notes, "the positions end early: "+why.Error())
	}
	return p, nil
}
