package cli

import (
	"bytes"
	"encoding/json"

	"slantwise/reports"
)

// shiftJSON is the whole sheet.
type shiftJSON struct {
	Station  string             `json:"station"`
	From     string             `json:"from_utc"`
	To       string             `json:"to_utc"`
	Zone     *string            `json:"time_zone"`
	Plan     *string            `json:"plan"`
	Contacts []shiftContactJSON `json:"contacts"`
	None     *string            `json:"no_contact"`
	Left     []string           `json:"left_out"`
	Warnings []string           `json:"warnings"`
	Caution  string             `json:"radiation_caution"`
}

// shiftContactJSON is a row of the contacts with the lists that belong to it.
type shiftContactJSON struct {
	row   json.RawMessage
	lists shiftLists
}

type shiftLists struct {
	Minutes  json.RawMessage    `json:"minutes"`
	Steps    json.RawMessage    `json:"steps"`
	Causes   json.RawMessage    `json:"causes"`
	Others   []shiftCarrierJSON `json:"also_received"`
	Uplinks  []shiftUplinkJSON  `json:"uplinks"`
	Lost     []shiftSpanJSON    `json:"not_followed"`
	Search   shiftSearchJSON    `json:"late_or_early"`
	Cautions []string           `json:"cautions"`
	Orbit    string             `json:"orbit"`
}

type shiftSpanJSON struct {
	From string `json:"from_utc"`
	To   string `json:"to_utc"`
}

type shiftCarrierJSON struct {
	Name string    `json:"name"`
	Hz   [3]number `json:"hz"` // at start, highest point and end
}

type shiftUplinkJSON struct {
	shiftCarrierJSON
	Frequency number          `json:"frequency_hz"`
	Works     []shiftSpanJSON `json:"works"`
	EIRP      number          `json:"eirp_dbw"`
}

type shiftSearchJSON struct {
	Unknown   *string   `json:"unknown"`
	Basis     *string   `json:"basis"`
	Assumed   bool      `json:"assumed"`
	Track     number    `json:"track_plus_minus_s"`
	Along     [3]number `json:"along_track_plus_minus_deg"`
	Direction [3]number `json:"direction_plus_minus_deg"`
	Beam      number    `json:"beamwidth_deg"`
	LateHz    number    `json:"received_higher_hz_per_s_late"`
	Shortest  number    `json:"shortest_contact_s"`
}

// MarshalJSON puts the lists into the row's object.
func (c shiftContactJSON) MarshalJSON() ([]byte, error) {
	lists, err := json.Marshal(c.lists)
	if err != nil {
		return nil, err
	}
	out := append(bytes.TrimSuffix(bytes.Clone(c.row), []byte("}")), ',')
	return append(out, lists[1:]...), nil
}

func shiftJSONOf(s *reports.Shift) (*shiftJSON, error) {
	out := &shiftJSON{Station: s.Station, From: utc(s.From), To: utc(s.To), Plan: orNull(s.Plan), None: orNull(s.None),
		Contacts: []shiftContactJSON{}, Left: append([]string{}, s.Left...), Warnings: []string{}, Caution: s.RadiationCaution}
	if s.Zone != nil {
		out.Zone = orNull(s.Zone.String())
	}
	for _, n := range s.Notes {
		out.Warnings = append(out.Warnings, n.Text)
	}
	contacts := shiftContactRows(s)
	for i := range s.Contacts {
		one := shiftContactJSON{}
		var err error
		if one.row, err = contacts.rowJSON(contacts.rows[i]); err != nil {
			return nil, err
		}
		alone := *s
		alone.Contacts = s.Contacts[i : i+1]
		for _, l := range []struct {
			of   *sheet
			into *json.RawMessage
		}{{shiftMinuteRows(&alone), &one.lists.Minutes}, {shiftStepRows(&alone), &one.lists.Steps}, {shiftCauseRows(&alone), &one.lists.Causes}} {
			if *l.into, err = withoutNumber(l.of).jsonRows(); err != nil {
				return nil, err
			}
		}
		one.lists.fill(&s.Contacts[i])
		out.Contacts = append(out.Contacts, one)
	}
	return out, nil
}

// withoutNumber leaves out the first column, the number of the contact in which the rows stand.
func withoutNumber(s *sheet) *sheet {
	out := &sheet{columns: s.columns[1:]}
	for _, r := range s.rows {
		out.rows = append(out.rows, r[1:])
	}
	return out
}

func (l *shiftLists) fill(c *reports.ShiftContact) {
	l.Others, l.Uplinks, l.Lost = []shiftCarrierJSON{}, []shiftUplinkJSON{}, []shiftSpanJSON{}
	for _, o := range c.Others {
		l.Others = append(l.Others, carrierJSON(&o))
	}
	for _, u := range c.Uplinks {
		one := shiftUplinkJSON{shiftCarrierJSON: carrierJSON(&u.ShiftCarrier), Frequency: num(u.Frequency.Hertz(), 3), Works: []shiftSpanJSON{}, EIRP: num(u.EIRPDBW, 2)}
		for _, w := range u.Works {
			one.Works = append(one.Works, shiftSpanJSON{utc(w.From), utc(w.To)})
		}
		l.Uplinks = append(l.Uplinks, one)
	}
	for _, w := range c.Lost {
		l.Lost = append(l.Lost, shiftSpanJSON{utc(w.From), utc(w.To)})
	}
	q := &c.Search
	l.Search = shiftSearchJSON{Unknown: orNull(q.Unknown), Basis: orNull(q.Basis), Assumed: q.Assumed, Track: num(q.TrackSeconds, 4),
		Beam: num(q.BeamDeg, 4), LateHz: num(q.LateHzPerS, 3), Shortest: num(q.ShortestSeconds, 0)}
	for i := range q.AlongDeg {
		l.Search.Along[i], l.Search.Direction[i] = num(q.AlongDeg[i], 6), num(q.TotalDeg[i], 6)
	}
	l.Cautions, l.Orbit = append([]string{}, c.Cautions...), c.Orbit
}

func carrierJSON(c *reports.ShiftCarrier) shiftCarrierJSON {
	out := shiftCarrierJSON{Name: c.Name}
	for i, f := range c.Hz {
		out.Hz[i] = num(f, 3)
	}
	return out
}
