package scenario

import (
	"fmt"

	"slantwise/downlink/linkset"
)

var linkSetKeys = []string{"name", "links", "order", "change_s", "turn_s", "up_share", "up_first_s", "up_first_bytes"}

// LinkSet is links of a spacecraft that share a pass and an antenna.
type LinkSet struct {
	Name  string
	Links []string // names of transmitters and uplinks of the spacecraft, in the order of the file
	Rule  linkset.Rule
}

// linkSets reads how a spacecraft's links share a pass.
func (o object) linkSets(s *Spacecraft) []LinkSet {
	items := o.objects("link_sets", "link sets", maxParts, linkSetKeys)
	called := names("link set", items)
	var out []LinkSet
	for i, it := range items {
		it.about = o.about + ", link set " + called[i]
		before := o.r.faults.count()
		set := LinkSet{Name: called[i], Rule: it.sharing()}
		set.Links = it.setLinks(s, set.Rule.Order)
		if o.r.faults.count() == before {
			it.addAll(it.node, "", set.Rule.Check())
		}
		out = append(out, set)
	}
	return out
}

func (o object) sharing() linkset.Rule {
	var r linkset.Rule
	seconds := atLeast(0, 86_400, "s")
	word, _ := o.word("order", "together", "in_turns", "up_first")
	if !o.has("order") {
		o.assume("order left out: together, all links at once")
	}
	r.Order = map[string]linkset.Order{"together": linkset.Together, "in_turns": linkset.InTurns, "up_first": linkset.UpFirst}[word]
	if r.Order == linkset.Together {
		o.useless("with order: together", "change_s")
	} else {
		r.Change = o.zeroLeftOut("change_s", atLeast(0, 3600, "s"))
	}
	if r.Order == linkset.InTurns {
		r.Turn = o.required("turn_s", atLeast(0.1, 86_400, "s"), "the time from one turn up to the next")
		r.UpShare = o.required("up_share", span{low: 0, high: 1, lowOpen: true, highOpen: true}, "the share of a turn that is for up")
	} else {
		o.useless("unless order is in_turns", "turn_s", "up_share")
	}
	if r.Order != linkset.UpFirst {
		o.useless("unless order is up_first", "up_first_s", "up_first_bytes")
		return r
	}
	switch which, given := o.exclusive("up_first_s", "up_first_bytes"); {
	case !given:
		o.missing("up_first_s", "how long the uplink works before the downlink begins, or up_first_bytes")
	case which == "up_first_s":
		r.UpSeconds = o.numberOr(which, seconds, 0)
	default:
		r.UpBytes = o.numberOr(which, above(0, 1e15, "B"), 0)
	}
	return r
}

// setLinks reads the names of a set's links; where they take turns there must be both
// directions.
func (o object) setLinks(s *Spacecraft, order linkset.Order) []string {
	var known []string
	up := map[string]bool{}
	for i := range s.Transmitters {
		known = append(known, s.Transmitters[i].Name)
	}
	for i := range s.Uplinks {
		known = append(known, s.Uplinks[i].Name)
		up[s.Uplinks[i].Name] = true
	}
	if !o.has("links") {
		o.missing("links", "the names of transmitters and uplinks that share a pass")
		return nil
	}
	var out []string
	before := o.r.faults.count()
	seen := map[string]bool{}
	ups := 0
	for i, n := range o.items("links", "names of transmitters and uplinks", maxParts) {
		key := fmt.Sprintf("links[%d]", i)
		name, ok := o.textAt(n, key, false)
		if !ok {
			continue
		}
		o.knownNameAt(n, key, name, known)
		if seen[name] {
			o.fault(n, key, "%s stands twice", "name each link once", quote(name))
		}
		seen[name] = true
		if up[name] {
			ups++
		}
		out = append(out, name)
	}
	if o.r.faults.count() == before && order != linkset.Together && (ups == 0 || ups == len(out)) {
		o.fault(o.get("links"), "links", "all links go the same way", "name a transmitter and an uplink, or take order: together")
	}
	return out
}
