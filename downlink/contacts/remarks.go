package contacts

import "fmt"

// Remarks returns what is allowed and yet looks like a slip, each with the place: limits
// that allow nothing, closed times that overlap (they are taken together), contacts of
// the plan in force that no longer stand. None: an empty slice.
func (p *Problem) Remarks() []string {
	out := []string{}
	say := func(format string, a ...any) { out = append(out, fmt.Sprintf(format, a...)) }
	for i := range p.Limits {
		l := &p.Limits[i]
		if l.Contacts != nil && *l.Contacts == 0 {
			say("limit %q allows no contact", l.Name)
		}
		if l.Time != nil && *l.Time == 0 {
			say("limit %q allows no contact time", l.Name)
		}
		if l.Price != nil && *l.Price == 0 {
			say("limit %q is a budget of zero: nothing that has a price can be taken", l.Name)
		}
	}
	overlap := func(who string, closed []Span) {
		for k, a := range closed {
			for _, b := range closed[:k] {
				if a.Overlap(b) > 0 {
					say("%s is closed from %s to %s and from %s to %s, which overlap; they are taken together", who,
						clock(p.At(b.From)), clock(p.At(b.To)), clock(p.At(a.From)), clock(p.At(a.To)))
				}
			}
		}
	}
	for i := range p.Stations {
		overlap(fmt.Sprintf("station %q", p.Stations[i].Name), p.Stations[i].Closed)
	}
	for i := range p.Antennas {
		overlap(fmt.Sprintf("antenna %q of station %q", p.Antennas[i].Name, p.Stations[p.Antennas[i].Station].Name), p.Antennas[i].Closed)
	}
	for i := range p.Spacecraft {
		overlap(fmt.Sprintf("spacecraft %q", p.Spacecraft[i].Name), p.Spacecraft[i].Closed)
	}
	for _, c := range p.InForce {
		if !p.Stands(c) {
			say("the contact in force %s no longer stands: its window has moved, or something of it is closed", p.tell(c))
		}
	}
	return out
}
