package reports

// uplinkJSON is an uplink in a pass's JSON file. Fields get added, not renamed.
type uplinkJSON struct {
	Name             string         `json:"name"`
	Antenna          string         `json:"antenna"`
	Mode             string         `json:"mode"`
	FrequencyHz      number         `json:"frequency_hz"`
	DataRateBps      number         `json:"data_rate_bps"`
	RequiredMarginDB number         `json:"required_margin_db"`
	LeastMarginDB    number         `json:"least_margin_db"`
	LeastMarginUTC   string         `json:"least_margin_utc"`
	GreatestMarginDB number         `json:"greatest_margin_db"`
	GreatestUTC      string         `json:"greatest_margin_utc"`
	Works            []intervalJSON `json:"works"`
	Budgets          []budgetJSON   `json:"budgets"`
	Radiation        *radiationJSON `json:"radiation"` // null where the antenna's gain is not known
}

// radiationJSON is how much a station radiates; a number that is not known is null.
type radiationJSON struct {
	FedW          number        `json:"fed_w"`
	EIRPDBW       number        `json:"eirp_dbw"`
	NearFieldEndM number        `json:"near_field_end_m"`
	NearFieldMost number        `json:"near_field_most_w_m2"`
	FarFieldFromM number        `json:"far_field_from_m"`
	Densities     []densityJSON `json:"power_densities"`
	Caution       string        `json:"caution"`
}

type densityJSON struct {
	DistanceM number `json:"distance_m"`
	WattsM2   number `json:"w_m2"`
}

func uplinkHeads(p *Pass) []uplinkJSON {
	list := []uplinkJSON{}
	for i := range p.Uplinks {
		u := &p.Uplinks[i]
		h := uplinkJSON{
			Name: u.Name, Antenna: u.Antenna, Mode: u.Mode, FrequencyHz: number{u.Frequency.Hertz(), 0}, DataRateBps: number{u.DataRate.BitsPerSecond(), 0},
			RequiredMarginDB: number{u.RequiredMarginDB, 3},
			LeastMarginDB:    number{u.Least.Value, 3}, LeastMarginUTC: utcText(u.Least.Time),
			GreatestMarginDB: number{u.Greatest.Value, 3}, GreatestUTC: utcText(u.Greatest.Time),
			Works: intervals(u.Works), Budgets: []budgetJSON{},
		}
		for _, at := range u.budgets(p) {
			h.Budgets = append(h.Budgets, budgetHead(at.key, at.budget))
		}
		if r := u.Radiation; r != nil {
			h.Radiation = &radiationJSON{FedW: number{r.Fed.Watts(), 4}, EIRPDBW: number{r.EIRP.DBW(), 3}, NearFieldEndM: number{r.NearFieldEnd.Metres(), 3},
				NearFieldMost: number{r.NearFieldMost, 6}, FarFieldFromM: number{r.FarFieldFrom.Metres(), 3}, Densities: []densityJSON{}, Caution: r.Caution}
			for _, d := range r.At {
				h.Radiation.Densities = append(h.Radiation.Densities, densityJSON{number{d.Distance.Metres(), 3}, number{d.WattsM2, 6}})
			}
		}
		list = append(list, h)
	}
	return list
}
