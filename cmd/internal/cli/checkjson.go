package cli

import "slantwise/cmd/internal/scenario"

// checkAnswer is the JSON of check. Fields get added, not renamed.
type checkAnswer struct {
	Scenario       string            `json:"scenario"`
	WindowStartUTC string            `json:"window_start_utc"`
	WindowEndUTC   string            `json:"window_end_utc"`
	Spacecraft     []checkSpacecraft `json:"spacecraft"`
	Stations       []checkStation    `json:"stations"`
	Warnings       []checkNote       `json:"warnings"`
	Defaults       []checkNote       `json:"defaults"`
}

type checkSpacecraft struct {
	Name          string     `json:"name"`
	ElementSet    *string    `json:"element_set"` // what an element set has, null for another orbit
	CatalogNumber *int       `json:"catalog_number"`
	EpochUTC      *string    `json:"epoch_utc"`
	AgeDays       number     `json:"age_days"` // at the middle of the window
	Sets          *int       `json:"sets"`
	Transmitters  []string   `json:"transmitters"`
	Uplinks       []string   `json:"uplinks"`
	Orbit         *orbitJSON `json:"orbit"`
}

type checkStation struct {
	Name         string   `json:"name"`
	LatitudeDeg  number   `json:"latitude_deg"`
	LongitudeDeg number   `json:"longitude_deg"`
	AltitudeM    number   `json:"altitude_m"`
	Antennas     []string `json:"antennas"`
}

type checkNote struct {
	About string `json:"about"`
	Text  string `json:"text"`
}

func checkResult(s *scenario.Scenario) checkAnswer {
	a := checkAnswer{
		Scenario:       s.Label,
		WindowStartUTC: utc(s.Window.Start),
		WindowEndUTC:   utc(s.Window.End),
		Spacecraft:     []checkSpacecraft{},
		Stations:       []checkStation{},
		Warnings:       checkNoteList(s.Warnings),
		Defaults:       checkNoteList(s.Assumptions),
	}
	for _, c := range s.Spacecraft {
		names := []string{}
		for _, t := range c.Transmitters {
			names = append(names, t.Name)
		}
		flown := newOrbitHead(&c, c.Elements, s.Window.Start.Add(s.Window.Length()/2)).json(3)
		row := checkSpacecraft{Name: c.Name, CatalogNumber: flown.CatalogNumber, EpochUTC: flown.EpochUTC, AgeDays: flown.AgeDays,
			Transmitters: names, Uplinks: append([]string{}, uplinkNames(&c)...), Orbit: flown}
		if c.Orbit == scenario.OnElementSet {
			row.ElementSet, row.Sets = &c.Elements.Name, &c.Elements.Among
		}
		a.Spacecraft = append(a.Spacecraft, row)
	}
	for _, st := range s.Stations {
		names := []string{}
		for _, an := range st.Antennas {
			names = append(names, an.Name)
		}
		a.Stations = append(a.Stations, checkStation{
			Name: st.Site.Name, LatitudeDeg: num(st.Site.Latitude.Degrees(), 6), LongitudeDeg: num(st.Site.Longitude.Degrees(), 6),
			AltitudeM: num(st.Site.Altitude.Metres(), 1), Antennas: names,
		})
	}
	return a
}

func checkNoteList(notes []scenario.Note) []checkNote {
	out := []checkNote{}
	for _, n := range notes {
		out = append(out, checkNote(n))
	}
	return out
}
