package instance

import (
	"context"
	"fmt"
	"math"
	"math/rand/v2"
	"time"

	"slantwise/downlink/contacts"
	"slantwise/orbit"
	"slantwise/orbit/unit"
	"slantwise/station"
	"slantwise/station/pass"
)

// Start is when every problem begins.
var Start = time.Date(2026, 3, 10, 0, 0, 0, 0, time.UTC)

// Network says which passes to make.
type Network struct {
	Seed       uint64
	Spacecraft int // in low orbits of 500 to 650 km
	Stations   int // with one antenna each
	Days       int
	Crowded    float64 // share of the stations beyond 60° of latitude, where all polar orbits meet
}

// Passes makes the problem of a network from passes as the pass search finds them, over
// 5° of elevation. The rate goes with the inverse square of the range, in twelve steps a
// pass; bytes count one each, set-up and tear-down take a minute.
func Passes(n Network) (*contacts.Problem, error) {
	r := rand.New(rand.NewPCG(n.Seed, 7))
	p := &contacts.Problem{Start: Start, Length: contacts.Ms(n.Days) * contacts.Day}
	sites := n.sites(r, p)
	sets := n.orbits(r, p)
	w := pass.Window{From: Start, To: Start.Add(time.Duration(n.Days) * 24 * time.Hour)}
	job := pass.Job{
		Spacecraft: n.Spacecraft, Sites: sites, Window: w, Workers: 1,
		Ephemeris: func(i int, scratch *orbit.Ephemeris) (*orbit.Ephemeris, error) {
			return scratch, scratch.Rebuild(sets[i], w.From, w.To, orbit.EarthOrientation{})
		},
	}
	list, err := pass.SearchAll(context.Background(), job)
	if err != nil {
		return nil, err
	}
	craft, ephemeris := -1, &orbit.Ephemeris{}
	byCraft := make([][]pass.Found, n.Spacecraft)
	for f := range list.All() {
		byCraft[f.Spacecraft] = append(byCraft[f.Spacecraft], f)
	}
	for _, found := range byCraft {
		for _, f := range found {
			if f.Spacecraft != craft {
				craft = f.Spacecraft
				if err := ephemeris.Rebuild(sets[craft], w.From, w.To, orbit.EarthOrientation{}); err != nil {
					return nil, err
				}
			}
			add(p, &f, sites[f.Site], ephemeris)
		}
	}
	return p, nil
}

// add appends a pass that is long enough.
func add(p *contacts.Problem, f *pass.Found, site *station.Site, e *orbit.Ephemeris) {
	ceil := func(t time.Time) contacts.Ms { return (p.Ms(t) + 999) / 1000 * 1000 }
	window := contacts.Span{From: ceil(f.AOS), To: p.Ms(f.LOS) / 1000 * 1000}
	const least = 2 * contacts.Minute
	if window.Length() < least {
		return
	}
	frame := site.Frame()
	link := contacts.Link{Transmitter: "X-band", PerByte: 1}
	sum := 0.0
	const parts = 12
	before := window.From
	for k := range parts + 1 {
		at := window.From + window.Length()*contacts.Ms(k)/parts/1000*1000
		if k > 0 {
			middle := p.At(before + (at-before)/2)
			_, _, distance := frame.Direction(e.PositionAt(e.Seconds(middle)))
			sum += math.Round(25e6 * math.Pow(600/distance.Kilometres(), 2) * (at - before).Seconds())
		}
		link.Volume = append(link.Volume, contacts.Point{At: at, Bytes: sum})
		before = at
	}
	p.Candidates = append(p.Candidates, contacts.Candidate{
		Name:    fmt.Sprintf("%s %s %s", p.Spacecraft[f.Spacecraft].Name, p.Stations[f.Site].Name, f.AOS.UTC().Format("2006-01-02T15:04:05Z")),
		Request: -1, Spacecraft: f.Spacecraft, Antenna: f.Site, Window: window,
		Least: least, SetUp: contacts.Minute, TearDown: contacts.Minute, Links: []contacts.Link{link}, Downlink: true,
	})
}

func (n *Network) sites(r *rand.Rand, p *contacts.Problem) []*station.Site {
	sites := make([]*station.Site, n.Stations)
	for i := range sites {
		latitude := -60 + 120*r.Float64()
		if float64(i) < n.Crowded*float64(n.Stations) {
			latitude = 62 + 16*r.Float64()
		}
		sites[i] = &station.Site{
			Name: fmt.Sprintf("Site %d", i+1), Latitude: unit.Angle(latitude) * unit.Degree,
			Longitude: unit.Angle(-180+360*r.Float64()) * unit.Degree, MinimumElevation: 5 * unit.Degree,
		}
		p.Stations = append(p.Stations, contacts.Station{Name: sites[i].Name})
		p.Antennas = append(p.Antennas, contacts.Antenna{Name: "dish", Station: i})
	}
	return sites
}

func (n *Network) orbits(r *rand.Rand, p *contacts.Problem) []orbit.Elements {
	angle := func(lo, hi float64) unit.Angle {
		return unit.Angle(math.Round((lo+(hi-lo)*r.Float64())*1e4)/1e4) * unit.Degree
	}
	sets := make([]orbit.Elements, n.Spacecraft)
	for i := range sets {
		name := fmt.Sprintf("Invented %d", i+1)
		sets[i] = orbit.Elements{
			Name: name, CatalogNumber: 90001 + i, Epoch: Start.Add(-12 * time.Hour),
			MeanMotion: math.Round((14.8+0.4*r.Float64())*1e8) / 1e8, Eccentricity: 0.001,
			Inclination: angle(85, 98), RAAN: angle(0, 359), ArgPerigee: angle(0, 359), MeanAnomaly: angle(0, 359), BStar: 5e-5,
		}
		p.Spacecraft = append(p.Spacecraft, contacts.Spacecraft{Name: name})
	}
	return sets
}
