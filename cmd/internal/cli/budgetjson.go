package cli

import (
	"math"
	"strconv"

	"slantwise/downlink"
)

// nano is a number of a budget: nine decimals, no more than it has, or null. Terms
// are rounded before they are summed, so that what is printed adds exactly.
type nano float64

// rounded keeps nine decimals.
func rounded(v float64) float64 { return math.Round(v*1e9) / 1e9 }

// MarshalJSON writes the number, or null.
func (n nano) MarshalJSON() ([]byte, error) {
	v := rounded(float64(n))
	if math.IsNaN(v) || math.IsInf(v, 0) {
		return []byte("null"), nil
	}
	return strconv.AppendFloat(nil, v, 'f', -1, 64), nil
}

type budgetJSON struct {
	Spacecraft   string           `json:"spacecraft"`
	Station      string           `json:"station"`
	Transmitter  string           `json:"transmitter"` // of an uplink its name
	Direction    string           `json:"direction"`   // down, up
	FrequencyMHz nano             `json:"frequency_mhz"`
	Antenna      string           `json:"antenna"`
	Mode         *string          `json:"mode"`
	Orbit        *orbitJSON       `json:"elements"`                 // what was flown; null for a stated geometry
	Uncertainty  *string          `json:"position_uncertainty"`     // where its figures come from; null: the position is taken as exact
	NarrowFrom   *string          `json:"beam_too_narrow_from_utc"` // for a pass overhead; null: not known, or not within 30 days of the window
	Pass         *budgetPass      `json:"pass"`
	Path         budgetPath       `json:"path"`
	Samples      []budgetSample   `json:"samples"`
	Assumptions  []budgetNoteJSON `json:"assumptions"`
	Radiation    *radiationJSON   `json:"radiation"`       // of the station; null in a downlink
	Instant      *mountAtJSON     `json:"mount,omitempty"` // at one instant of a pass, where the antenna has a mount
}

// budgetPath says what the numbers of the path are.
type budgetPath struct {
	ClearSky        bool     `json:"clear_sky"`
	ExceededPercent *float64 `json:"exceeded_percent"` // null for a clear sky
	Missing         []string `json:"missing"`          // parts that the scenario does not state
}

type budgetPass struct {
	AOSUTC          string           `json:"aos_utc"`
	CulminationUTC  string           `json:"culmination_utc"`
	LOSUTC          string           `json:"los_utc"`
	MaxElevationDeg number           `json:"max_elevation_deg"`
	Closes          []budgetInterval `json:"closes"`
	ModeBytes       number           `json:"mode_bytes"`
	AchievableBytes number           `json:"achievable_bytes"`
	ClearModeBytes  number           `json:"clear_sky_mode_bytes"`
	ClearAchievable number           `json:"clear_sky_achievable_bytes"`
	SunInBeam       []budgetInterval `json:"sun_in_beam"`
	AOSPlusMinus    number           `json:"aos_plus_minus_s"` // one standard deviation, as the next two
	LOSPlusMinus    number           `json:"los_plus_minus_s"`
	MaxElPlusMinus  number           `json:"max_elevation_plus_minus_deg"`
	Existence       number           `json:"existence_probability"`
	BeamUnsure      []budgetInterval `json:"beam_too_narrow"`
	Mount           *mountJSON       `json:"mount,omitempty"`
}

type budgetInterval struct {
	FromUTC string `json:"from_utc"`
	ToUTC   string `json:"to_utc"`
}

type budgetNoteJSON struct {
	Kind string `json:"kind"`
	Text string `json:"text"`
}

type budgetTerm struct {
	Name  string `json:"name"`
	Sign  int    `json:"sign"`
	Value nano   `json:"value"`
	Unit  string `json:"unit"`
	From  string `json:"from"`
}

type budgetNoise struct {
	Name        string `json:"name"`
	Temperature nano   `json:"temperature_k"`
	From        string `json:"from"`
}

type budgetSample struct {
	UTC              *string       `json:"utc"`
	AzimuthDeg       nano          `json:"azimuth_deg"`
	ElevationDeg     nano          `json:"elevation_deg"`
	RangeKm          nano          `json:"range_km"`
	OffBoresightDeg  nano          `json:"off_boresight_deg"`
	AroundBoresight  nano          `json:"around_boresight_deg"` // null where no gain depends on it
	BodyOffZDeg      nano          `json:"body_off_z_deg"`
	BodyAroundZDeg   nano          `json:"body_around_z_deg"`
	Terms            []budgetTerm  `json:"terms"`
	ReceivedPowerDBm nano          `json:"received_power_dbm"`
	FluxDensity      nano          `json:"power_flux_density_dbw_m2"`
	Noise            []budgetNoise `json:"noise"`
	SystemNoiseK     nano          `json:"system_noise_k"`
	GOverT           nano          `json:"g_over_t_db_k"`
	CN0              nano          `json:"c_n0_dbhz"`
	CI               nano          `json:"c_i_other_polarization_db"`
	SunDeg           nano          `json:"sun_off_beam_deg"`
	MoonDeg          nano          `json:"moon_off_beam_deg"`
	EbN0             nano          `json:"eb_n0_db"`
	RequiredEbN0     nano          `json:"required_eb_n0_db"`
	Margin           nano          `json:"margin_db"`
	MarginOver       nano          `json:"margin_over_required_db"`
	DataRate         nano          `json:"data_rate_bps"`
	AchievableRate   nano          `json:"achievable_rate_bps"`
	AchievableLimit  string        `json:"achievable_rate_limit"`
	Usable           bool          `json:"usable"`
	Cautions         []string      `json:"cautions"`
	OrbitAlongDeg    nano          `json:"orbit_pointing_along_deg"`
	OrbitTotalDeg    nano          `json:"orbit_pointing_deg"`
	DopplerSpreadHz  nano          `json:"doppler_spread_hz"`
	SureErrorDeg     nano          `json:"pointing_error_95_deg"`
}

// budgetOut makes the JSON result.
func budgetOut(r *budgetResult) budgetJSON {
	out := budgetJSON{
		Spacecraft: r.spacecraft.Name, Station: r.station.Site.Name, Transmitter: r.transmitter.Name,
		FrequencyMHz: nano(r.transmitter.Frequency.Megahertz()), Antenna: r.antenna.Name,
		Samples: []budgetSample{}, Assumptions: []budgetNoteJSON{}, Direction: r.link.Direction().String(), Instant: r.instant,
	}
	if rad, ok := r.radiation(); ok {
		out.Radiation = radiationOut(&rad)
	}
	if r.mode != nil {
		out.Mode = &r.mode.Name
	}
	out.Path.ClearSky, out.Path.Missing = r.scenario.Path.ClearSky, append([]string{}, r.sky.missing...)
	if p := r.scenario.Path.Exceedance.Percents(); !r.scenario.Path.ClearSky {
		out.Path.ExceededPercent = &p
	}
	if r.flown != nil {
		out.Orbit = r.flown.json(4)
	}
	if r.orbit != nil {
		basis := r.orbit.Uncertainty.Basis()
		out.Uncertainty = &basis
	}
	if p := r.pass; p != nil {
		out.Pass = &budgetPass{utc(p.AOS), utc(p.Culmination), utc(p.LOS), num(p.MaxElevation.Degrees(), 4), nil,
			num(r.volume.ModeBytes, 0), num(r.volume.AchievableBytes, 0), num(math.NaN(), 0), num(math.NaN(), 0), intervalsOut(r.sunInBeam), num(math.NaN(), 3), num(math.NaN(), 3), num(math.NaN(), 4), num(math.NaN(), 4), []budgetInterval{}, nil}
		out.Pass.Closes = intervalsOut(r.volume.Closes)
		out.Pass.Mount = mountOut(r.mount, p.AOS)
		r.surety.into(&out)
		if v := r.clearVolume; v != nil {
			out.Pass.ClearModeBytes, out.Pass.ClearAchievable = num(v.ModeBytes, 0), num(v.AchievableBytes, 0)
		}
	}
	for _, b := range r.samples {
		out.Samples = append(out.Samples, sampleOut(b))
	}
	for _, n := range r.notes {
		out.Assumptions = append(out.Assumptions, budgetNoteJSON{n.Kind.String(), n.Text})
	}
	return out
}

func intervalsOut(list []downlink.Interval) []budgetInterval {
	out := []budgetInterval{}
	for _, c := range list {
		out = append(out, budgetInterval{utc(c.From), utc(c.To)})
	}
	return out
}

func sampleOut(b *downlink.Budget) budgetSample {
	s := budgetSample{
		AzimuthDeg: nano(b.Azimuth.Degrees()), ElevationDeg: nano(b.Elevation.Degrees()), RangeKm: nano(b.Range.Kilometres()), OffBoresightDeg: nano(b.OffBoresight.Degrees()),
		AroundBoresight: nano(b.AroundBoresight.Degrees()), BodyOffZDeg: nano(b.BodyOffZ.Degrees()), BodyAroundZDeg: nano(b.BodyAroundZ.Degrees()),
		Terms: []budgetTerm{}, ReceivedPowerDBm: nano(printedSum(b)), FluxDensity: nano(b.PowerFluxDensity),
		Noise: []budgetNoise{}, SystemNoiseK: nano(b.SystemNoise.Kelvins()), GOverT: nano(b.GOverT), CN0: nano(b.CN0), CI: nano(b.CI), SunDeg: nano(b.Sun.Degrees()), MoonDeg: nano(b.Moon.Degrees()),
		EbN0: nano(b.EbN0), RequiredEbN0: nano(b.RequiredEbN0), Margin: nano(b.Margin), MarginOver: nano(b.MarginOver),
		DataRate: nano(ifAny(float64(b.DataRate))), AchievableRate: nano(b.AchievableRate), AchievableLimit: b.AchievableLimit.String(),
		Usable: b.Usable, Cautions: append([]string{}, b.Cautions...),
		OrbitAlongDeg: nano(b.OrbitAlong.Degrees()), OrbitTotalDeg: nano(b.OrbitTotal.Degrees()), DopplerSpreadHz: nano(b.DopplerSpread), SureErrorDeg: nano(b.SureError.Degrees()),
	}
	if !b.Time.IsZero() {
		t := utc(b.Time)
		s.UTC = &t
	}
	for _, t := range b.Terms {
		s.Terms = append(s.Terms, budgetTerm{t.Name, t.Sign, nano(t.Value), t.Unit, t.Source})
	}
	for _, p := range b.NoiseParts {
		s.Noise = append(s.Noise, budgetNoise{p.Name, nano(p.Temperature), p.Source})
	}
	return s
}

// printedSum is the received power as the sum of the terms as they are printed; NaN
// where there is no received power.
func printedSum(b *downlink.Budget) float64 {
	if math.IsNaN(b.ReceivedPowerDBm) {
		return math.NaN()
	}
	sum := 0.0
	for _, t := range b.Terms {
		sum += float64(t.Sign) * rounded(t.Value)
	}
	return sum
}
