package scenario

import (
	"errors"

	"slantwise/cmd/internal/scenario/tree"
	"slantwise/orbit/elements"
	"slantwise/station"
)

// Load reads and checks the scenario of a request. All faults come at once, joined
// with errors.Join; most are *Fault.
func Load(req Request) (*Scenario, error) {
	src, err := find(req)
	if err != nil {
		return nil, err
	}
	return load(src, req)
}

func load(src *source, req Request) (*Scenario, error) {
	root, err := tree.Parse(src.text, src.format)
	if err != nil {
		f := &Fault{Place: src.label, Problem: err.Error()}
		var se *tree.SyntaxError
		if errors.As(err, &se) {
			f.Line = se.Line
		}
		return nil, f
	}
	return build(root, src, req)
}

// build turns the tree of a scenario into domain values.
func build(root *tree.Node, src *source, req Request) (*Scenario, error) {
	r := &reader{place: src.label, src: src, need: req.Need}
	r.override(root, req.Flags)
	s := r.scenario(root)
	if err := r.faults.err(); err != nil {
		return nil, err
	}
	s.Label, s.Demo = src.label, src.files != nil
	s.Assumptions, s.Warnings, s.root = r.assumptions, r.warnings, root
	return s, nil
}

var topKeys = []string{"window", "earth", "element_files", "coding_files", "element_choice", "horizon", "path", "spacecraft", "stations", "sizing", "licence", "design_control", "position_uncertainty", "contact_plan", "measurements"}

// scenario reads everything; the value is of use only where no fault was noted.
func (r *reader) scenario(root *tree.Node) *Scenario {
	o := r.object(root, "", topKeys)
	o.about = "scenario"
	s := &Scenario{Window: r.window(o), Earth: r.earth(o)}
	r.earthTurn, r.span = s.Earth, s.Window
	s.Choice = r.choice(o)
	s.Horizon = elevationKind(o, "horizon", "AOS and LOS are decided by")
	s.Sets, s.Trajectories = r.elementFiles(o, s.Earth)
	s.Path = r.path(o)
	r.catalogue = r.codingFiles(o)
	s.Spacecraft = r.spacecraft(o, s)
	s.Stations = r.stations(o, s.Path.Environment)
	s.Sizing = r.sizing(o, s)
	s.Licences = r.licences(o, s)
	s.Control = r.control(o)
	s.ContactPlan = r.contactPlan(o, s)
	s.Measurements = r.measurements(o)
	return s
}

func (r *reader) choice(o object) elements.Choice {
	word, given := o.word("element_choice", "newest", "nearest")
	if !o.has("element_choice") && r.need == NeedOrbits {
		o.assume("element_choice left out: of several element sets of one object the newest is used")
	}
	if given && word == "nearest" {
		return elements.Nearest
	}
	return elements.Newest
}

// elevationKind reads geometric or apparent, the first where the key is left out.
func elevationKind(o object, key, what string) station.ElevationKind {
	word, _ := o.word(key, "geometric", "apparent")
	if !o.has(key) {
		o.assume("%s left out: %s geometric elevation, without refraction", key, what)
	}
	if word == "apparent" {
		return station.Apparent
	}
	return station.Geometric
}
