package web

import (
	"bytes"
	"context"
	"encoding/csv"
	"math"
	"net/http"
	"strconv"
	"time"
)

// cell writes a number as in JSON, and nothing for one that does not exist.
func cell(n Number) string {
	if v := float64(n); !math.IsNaN(v) && !math.IsInf(v, 0) {
		return strconv.FormatFloat(v, 'f', 4, 64)
	}
	return ""
}

func instant(t time.Time) string { return t.UTC().Format("2006-01-02T15:04:05.000Z") }

// table answers with a table; its name is that of the file when it is kept.
func table(w http.ResponseWriter, name string, rows [][]string) {
	var b bytes.Buffer
	if err := csv.NewWriter(&b).WriteAll(rows); err != nil {
		fail(w, err)
		return
	}
	w.Header().Set("Content-Type", "text/csv; charset=utf-8; header=present")
	w.Header().Set("Content-Disposition", `attachment; filename="`+name+`.csv"`)
	w.Write(b.Bytes()) // a client that has gone gets nothing
}

func (s *Server) getContactsCSV(w http.ResponseWriter, _ *http.Request) {
	m, _, _ := s.keeper.now()
	rows := [][]string{{"id", "spacecraft", "station", "transmitter", "antenna", "aos_utc", "culmination_utc", "los_utc",
		"aos_azimuth_deg", "max_elevation_deg", "los_azimuth_deg", "min_range_km", "minimum_elevation_deg"}}
	for _, c := range m.Contacts() {
		rows = append(rows, []string{c.ID, c.Spacecraft, c.Station, c.Transmitter, c.Antenna, instant(c.AOS), instant(c.Culmination), instant(c.LOS),
			cell(c.AOSAzimuthDeg), cell(c.MaxElevationDeg), cell(c.LOSAzimuthDeg), cell(c.MinimumRangeKm), cell(c.MinimumElevation)})
	}
	table(w, "contacts", rows)
}

// getDetailCSV gives the charts of a contact, a row a sample.
func (s *Server) getDetailCSV(w http.ResponseWriter, r *http.Request) {
	s.detail(w, r, func(d *Detail) {
		columns := []struct {
			name   string
			values []Number
		}{
			{"azimuth_deg", d.AzimuthDeg}, {"elevation_deg", d.ElevationDeg}, {"range_km", d.RangeKm}, {"doppler_hz", d.DopplerHz},
			{"margin_db", d.MarginDB}, {"received_power_dbm", d.ReceivedPowerDBm}, {"latitude_deg", d.LatitudeDeg}, {"longitude_deg", d.LongitudeDeg},
		}
		head := []string{"time_utc", "seconds"}
		for _, c := range columns {
			head = append(head, c.name)
		}
		rows := [][]string{head}
		for i, second := range d.Seconds {
			row := []string{instant(d.AOS.Add(time.Duration(float64(second) * float64(time.Second)))), cell(second)}
			for _, c := range columns {
				text := ""
				if i < len(c.values) {
					text = cell(c.values[i])
				}
				row = append(row, text)
			}
			rows = append(rows, row)
		}
		table(w, "contact", rows)
	})
}

// getLinesCSV gives what else stands in a contact's map and sky.
func (s *Server) getLinesCSV(w http.ResponseWriter, r *http.Request) {
	s.detail(w, r, func(d *Detail) {
		rows := [][]string{{"line", "latitude_deg", "longitude_deg", "azimuth_deg", "elevation_deg"}}
		for _, l := range []struct {
			name string
			at   Outline
		}{{"circle", d.Circle}, {"before", d.Before}, {"after", d.After}} {
			for i := range l.at.LatitudeDeg {
				rows = append(rows, []string{l.name, cell(l.at.LatitudeDeg[i]), cell(l.at.LongitudeDeg[i]), "", ""})
			}
		}
		for i := range d.Horizon.AzimuthDeg {
			rows = append(rows, []string{"horizon", "", "", cell(d.Horizon.AzimuthDeg[i]), cell(d.Horizon.ElevationDeg[i])})
		}
		for _, b := range d.Sky {
			rows = append(rows, []string{b.Name, "", "", cell(b.AzimuthDeg), cell(b.ElevationDeg)})
		}
		table(w, "contact-lines", rows)
	})
}

// getCraftCSV gives the map of this instant.
func (s *Server) getCraftCSV(w http.ResponseWriter, _ *http.Request) {
	m, _, _ := s.keeper.now()
	now := s.config.Clock.Now()
	st, err := m.At(now)
	if err != nil {
		fail(w, err)
		return
	}
	rows := [][]string{{"time_utc", "what", "name", "latitude_deg", "longitude_deg", "radius_km", "light", "element_epoch_utc", "element_age_days"}}
	at := instant(now)
	for _, c := range st.Spacecraft {
		rows = append(rows, []string{at, "spacecraft", c.Name, cell(c.LatitudeDeg), cell(c.LongitudeDeg), cell(c.RadiusKm), c.Light, instant(c.Epoch), cell(c.AgeDays)})
	}
	for _, p := range st.Stations {
		rows = append(rows, []string{at, "station", p.Name, cell(p.LatitudeDeg), cell(p.LongitudeDeg), "", "", "", ""})
	}
	rows = append(rows, []string{at, "under the Sun", "Sun", cell(st.SunLatitudeDeg), cell(st.SunLongitudeDeg), "", "", "", ""})
	table(w, "map", rows)
}

// detail works out a contact and hands it on, or answers why not.
func (s *Server) detail(w http.ResponseWriter, r *http.Request, then func(*Detail)) {
	if !s.turn(w, r) {
		return
	}
	defer func() { <-s.questions }()
	m, _, _ := s.keeper.now()
	ctx, stop := context.WithTimeout(r.Context(), s.limits.patience)
	defer stop()
	d, err := m.Detail(ctx, r.PathValue("id"))
	switch {
	case err != nil:
		fail(w, err)
	case d == nil:
		refuse(w, http.StatusNotFound, noContact)
	default:
		then(d)
	}
}
