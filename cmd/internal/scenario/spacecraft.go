package scenario

import (
	"fmt"
	"time"

	"slantwise/cmd/internal/scenario/tree"
	"slantwise/orbit"
	"slantwise/orbit/elements"
)

var spacecraftKeys = []string{"name", "element_set", "state", "synthetic_orbit", "time_offset_s", "launch_slip_s", "valid_until_utc", "transmitters", "recorder", "rate_plan", "uplinks", "link_sets", "position_uncertainty"}

// spacecraft reads the spacecraft, or takes every object of the element files where
// the key is left out.
func (r *reader) spacecraft(top object, s *Scenario) []Spacecraft {
	middle := s.Window.Start.Add(s.Window.Length() / 2)
	if !top.has("spacecraft") {
		return r.everyObject(top, s, middle)
	}
	items := top.objects("spacecraft", "spacecraft", maxSpacecraft, spacecraftKeys)
	called := names("spacecraft", items)
	all := top.uncertainty()
	out := make([]Spacecraft, len(items))
	for i, o := range items {
		o.about = "spacecraft " + called[i]
		out[i] = Spacecraft{Name: called[i], Choice: s.Choice, Transmitters: r.transmitters(o)}
		out[i].Uplinks = r.uplinks(o, out[i].Transmitters)
		r.checkCoherent(o, &out[i])
		out[i].LinkSets = o.linkSets(&out[i])
		out[i].Recorder = o.recorder()
		out[i].RatePlan = o.ratePlan(&out[i])
		out[i].Uncertainty = o.craftUncertainty(all)
		if r.need != NeedOrbits {
			o.elementSetName()
			o.shifts(&out[i])
			if o.has("state") {
				o.state(called[i], s.Earth)
			}
			if o.has("synthetic_orbit") {
				o.syntheticOrbit(called[i], s.Window.Start)
			}
			continue
		}
		o.orbitOf(&out[i], s, middle)
	}
	return out
}

// elementSetName reads element_set, which may stand without quotes.
func (o object) elementSetName() (string, *tree.Node) {
	n := o.get("element_set")
	if n == nil {
		return "", nil
	}
	ref, _ := o.textAt(n, "element_set", true)
	return ref, n
}

// candidates finds the element sets of a spacecraft. Where element_set is left out,
// its name is looked for.
func (o object) candidates(name string, sets []orbit.Elements) []orbit.Elements {
	ref, at := o.elementSetName()
	if at == nil {
		ref, at = name, o.node
	}
	if ref == "" || len(sets) == 0 {
		return nil
	}
	found, err := elements.Match(sets, ref)
	switch {
	case err != nil && o.has("element_set"):
		o.fault(at, "element_set", "%s", "", err)
	case err != nil:
		o.fault(at, "element_set", "the key is missing, and by the spacecraft's name: %s", "give the catalogue number, or the name in the element file", err)
	case !o.has("element_set"):
		o.assume("element_set left out: the element set %s is used, by the name", elements.Label(found[0]))
	}
	return found
}

// tellAge says which element set is used where there was a choice, and warns of an
// old one.
func (o object) tellAge(c elements.Chosen) {
	if c.Among > 1 {
		o.assume("of %d element sets the one with epoch %s is used", c.Among, c.Epoch.Format(time.RFC3339))
	}
	if c.Caution != "" {
		o.warn("%s", c.Caution)
	}
}

// everyObject makes a spacecraft without transmitter of each object found.
func (r *reader) everyObject(top object, s *Scenario, middle time.Time) []Spacecraft {
	if r.need == NeedRadio {
		top.missing("spacecraft", "at least one spacecraft with a transmitter")
	}
	if r.need != NeedOrbits {
		return nil
	}
	if len(s.Sets) == 0 && len(s.Trajectories) == 0 {
		return nil // there is a fault for the element files already
	}
	chosen := elements.Choose(s.Sets, s.Choice, middle)
	top.assume("spacecraft left out: all %d objects of the element files, without transmitter", len(chosen)+len(s.Trajectories))
	all := top.uncertainty()
	byObject := map[string][]orbit.Elements{}
	for _, el := range s.Sets {
		byObject[objectKey(el)] = append(byObject[objectKey(el)], el)
	}
	out := make([]Spacecraft, len(chosen))
	count := map[string]int{}
	for i, c := range chosen {
		name := c.Name
		if name == "" {
			name = fmt.Sprintf("%05d", c.CatalogNumber)
		}
		count[name]++
		if count[name] == 2 {
			top.warn("several objects are named %s; what names one of them means the first", quote(name))
		}
		out[i] = Spacecraft{Name: name, Uncertainty: all, Elements: c, Candidates: byObject[objectKey(c.Elements)], Choice: s.Choice}
		named := top
		named.about = "spacecraft " + name
		named.tellAge(c)
	}
	for i := range s.Trajectories {
		t := &s.Trajectories[i]
		c := Spacecraft{Name: t.Name, Uncertainty: all, Choice: s.Choice}
		named := top
		named.about = "spacecraft " + t.Name
		named.follow(&c, t, 1, s)
		out = append(out, c)
	}
	return out
}

// objectKey is the same for all sets of one object: the catalogue number, or the
// name where that is 0.
func objectKey(el orbit.Elements) string {
	if el.CatalogNumber != 0 {
		return fmt.Sprint(el.CatalogNumber)
	}
	return "name " + el.Name
}
