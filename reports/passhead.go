package reports

import (
	"math"

	"slantwise/downlink"
	"slantwise/station"
)

// number is a float64 that marshals with a fixed count of decimals, and as null
// where it does not exist.
type number struct {
	v        float64
	decimals int
}

// MarshalJSON implements json.Marshaler.
func (n number) MarshalJSON() ([]byte, error) {
	return appendJSONNumber(nil, n.v, n.decimals), nil
}

// headJSON is what stands in a pass's JSON file before the samples. Fields get
// added, not renamed.
type headJSON struct {
	Spacecraft string        `json:"spacecraft"`
	Station    string        `json:"station"`
	Elements   elementsJSON  `json:"element_set"`
	Cut        string        `json:"cut"`
	Events     []eventJSON   `json:"events"`
	DurationS  number        `json:"duration_s"`
	Radio      *radioJSON    `json:"radio"`
	Uplinks    []uplinkJSON  `json:"uplinks"`
	LinkSets   []linkSetJSON `json:"link_sets"`
	Notes      []noteJSON    `json:"notes"`
	Surety     *suretyJSON   `json:"plus_minus"` // one standard deviation each; null: the position is taken as exact
	Ground     *groundJSON   `json:"ground"`     // at the culmination; null: no map

	Measured []measuredJSON `json:"measured,omitempty"` // left out where nothing was logged
}

type elementsJSON struct {
	Name          string  `json:"name"`
	CatalogNumber *int    `json:"catalog_number"`
	EpochUTC      *string `json:"epoch_utc"`
	AgeHours      number  `json:"age_at_aos_h"`
	File          string  `json:"file"`
	InPlace       string  `json:"in_place,omitempty"` // what is flown in place of an element set
}

// elementsHead leaves null what the kind of orbit does not have.
func elementsHead(e *Elements) elementsJSON {
	h := elementsJSON{Name: e.Name, AgeHours: number{math.NaN(), 3}, File: e.Source.File, InPlace: e.InPlace}
	if e.InPlace == "" {
		h.CatalogNumber = &e.CatalogNumber
	}
	if !e.NoEpoch {
		text := utcText(e.Epoch)
		h.EpochUTC, h.AgeHours = &text, number{e.Age.Hours(), 3}
	}
	return h
}

type eventJSON struct {
	Event        string `json:"event"`
	UTC          string `json:"utc"`
	AzimuthDeg   number `json:"azimuth_deg"`
	ElevationDeg number `json:"elevation_deg"`
}

type radioJSON struct {
	Transmitter      string         `json:"transmitter"`
	Antenna          string         `json:"antenna"`
	Mode             string         `json:"mode"`
	FrequencyHz      number         `json:"frequency_hz"`
	DataRateBps      number         `json:"data_rate_bps"`
	RequiredMarginDB number         `json:"required_margin_db"`
	LeastMarginDB    number         `json:"least_margin_db"`
	LeastMarginUTC   string         `json:"least_margin_utc"`
	GreatestMarginDB number         `json:"greatest_margin_db"`
	GreatestUTC      string         `json:"greatest_margin_utc"`
	AchievableBytes  number         `json:"achievable_bytes"`
	ModeBytes        number         `json:"mode_bytes"`
	Closes           []intervalJSON `json:"closes"`
	Modes            []modeJSON     `json:"modes"`
	Budgets          []budgetJSON   `json:"budgets"`
	Path             pathJSON       `json:"path"`
	SunInBeam        []intervalJSON `json:"sun_in_beam"`
	MoonInBeam       []intervalJSON `json:"moon_in_beam"`
	ClearSky         *clearJSON     `json:"clear_sky"` // null where there is no other sky to compare with
	Plan             *planJSON      `json:"plan"`      // null where none was made
	Sights           []sightJSON    `json:"sights"`    // how the antenna sees the station; empty where its attitude tells no direction
	Mount            *mountJSON     `json:"mount,omitempty"`
}

type modeJSON struct {
	Name             string `json:"name"`
	DataRateBps      number `json:"data_rate_bps"`
	ClosesS          number `json:"closes_s"`
	LeastMarginDB    number `json:"least_margin_db"`
	GreatestMarginDB number `json:"greatest_margin_db"`
	Bytes            number `json:"bytes"`
	Chosen           bool   `json:"chosen"`
}

type intervalJSON struct {
	FromUTC string `json:"from_utc"`
	ToUTC   string `json:"to_utc"`
}

type noteJSON struct {
	Kind   string `json:"kind"`
	About  string `json:"about"`
	Text   string `json:"text"`
	Source string `json:"source"`
}

var noteKinds = [...]string{Warning: "warning", Assumption: "assumption", Default: "default"}

func passHead(p *Pass) headJSON {
	h := headJSON{
		Spacecraft: p.Spacecraft,
		Station:    p.Site.Name,
		Elements:   elementsHead(&p.Elements),
		Cut:        p.Pass.Cut.String(),
		DurationS:  number{p.Pass.Duration().Seconds(), 3},
		Events:     []eventJSON{},
		Notes:      []noteJSON{},
		Uplinks:    uplinkHeads(p),
		LinkSets:   linkSetsOf(p.LinkSets),
		Surety:     suretyHead(p.Surety),
		Ground:     groundHead(p.Ground),
		Measured:   measuredHeads(p),
	}
	for _, ev := range events(p) {
		h.Events = append(h.Events, eventJSON{ev.key, utcText(ev.at), number{ev.azimuthDeg, 4}, number{ev.elevationDeg, 4}})
	}
	if p.Radio != nil {
		h.Radio = radioHead(p)
	}
	for _, n := range p.Notes {
		h.Notes = append(h.Notes, noteJSON{noteKinds[n.Kind], n.About, n.Text, n.Source})
	}
	return h
}

func radioHead(p *Pass) *radioJSON {
	r, f := p.Radio, p.Profile
	h := &radioJSON{
		Sights:      sightsJSON(r),
		Transmitter: r.Transmitter, Antenna: r.Antenna, Mode: r.Mode,
		FrequencyHz:      number{r.Frequency.Hertz(), 0},
		DataRateBps:      number{f.DataRate.BitsPerSecond(), 0},
		RequiredMarginDB: number{f.RequiredMarginDB, 3},
		LeastMarginDB:    number{r.Least.Value, 3}, LeastMarginUTC: utcText(r.Least.Time),
		GreatestMarginDB: number{r.Greatest.Value, 3}, GreatestUTC: utcText(r.Greatest.Time),
		AchievableBytes: number{f.Volume.AchievableBytes, 0},
		ModeBytes:       number{f.Volume.ModeBytes, 0},
		Closes:          intervals(f.Volume.Closes),
		Modes:           []modeJSON{},
		Budgets:         []budgetJSON{},
		Path:            pathOf(&r.Path),
		SunInBeam:       intervals(f.SunInBeam), MoonInBeam: intervals(f.MoonInBeam),
		ClearSky: clearOf(r), Plan: planOf(r.Plan), Mount: mountOf(r.Mount),
	}
	for _, m := range r.Modes {
		h.Modes = append(h.Modes, modeJSON{m.Name, number{m.Rate.BitsPerSecond(), 0}, number{m.Closed.Seconds(), 3},
			number{m.LeastMarginDB, 3}, number{m.GreatestMarginDB, 3}, number{m.Bytes, 0}, m.Chosen})
	}
	for _, at := range budgetsOf(p) {
		h.Budgets = append(h.Budgets, budgetHead(at.key, at.budget))
	}
	return h
}

type budgetJSON struct {
	At             string     `json:"at"`
	UTC            string     `json:"utc"`
	Terms          []termJSON `json:"terms"`
	ReceivedPower  number     `json:"received_power_dbm"`
	FluxDensity    number     `json:"power_flux_density_dbw_m2"`
	SystemNoiseK   number     `json:"system_noise_k"`
	NoiseParts     []partJSON `json:"noise_parts"`
	GOverT         number     `json:"g_over_t_db_k"`
	CN0            number     `json:"c_n0_dbhz"`
	EbN0           number     `json:"eb_n0_db"`
	RequiredEbN0   number     `json:"required_eb_n0_db"`
	Margin         number     `json:"margin_db"`
	MarginOver     number     `json:"margin_over_required_db"`
	AchievableRate number     `json:"achievable_rate_bps"`
	Limit          string     `json:"achievable_limit"`
}

type termJSON struct {
	Name   string `json:"name"`
	Sign   int    `json:"sign"`
	Value  number `json:"value"`
	Unit   string `json:"unit"`
	Source string `json:"source"`
}

type partJSON struct {
	Name         string `json:"name"`
	TemperatureK number `json:"temperature_k"`
	Source       string `json:"source"`
}

func budgetHead(at string, b *downlink.Budget) budgetJSON {
	j := budgetJSON{
		At: at, UTC: utcText(b.Time), Terms: []termJSON{}, NoiseParts: []partJSON{},
		ReceivedPower: number{b.ReceivedPowerDBm, 3}, FluxDensity: number{b.PowerFluxDensity, 3},
		SystemNoiseK: number{b.SystemNoise.Kelvins(), 2}, GOverT: number{float64(b.GOverT), 3},
		CN0: number{float64(b.CN0), 3}, EbN0: number{float64(b.EbN0), 3}, RequiredEbN0: number{float64(b.RequiredEbN0), 3},
		Margin: number{float64(b.Margin), 3}, MarginOver: number{float64(b.MarginOver), 3},
		AchievableRate: number{b.AchievableRate.BitsPerSecond(), 0}, Limit: limitName(b.AchievableLimit),
	}
	for _, t := range b.Terms {
		j.Terms = append(j.Terms, termJSON{t.Name, t.Sign, number{t.Value, 3}, t.Unit, t.Source})
	}
	for _, n := range b.NoiseParts {
		j.NoiseParts = append(j.NoiseParts, partJSON{n.Name, number{n.Temperature.Kelvins(), 2}, n.Source})
	}
	return j
}

// kindOfElevation names a kind in words.
func kindOfElevation(k station.ElevationKind) string {
	if k == station.Apparent {
		return "apparent"
	}
	return "geometric"
}
