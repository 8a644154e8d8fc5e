package cli

import (
	"strings"

	"slantwise/orbit"
	"slantwise/orbit/fit"
)

// fitAnswer is the JSON of elements fit. Fields get added, not renamed.
type fitAnswer struct {
	Object     fitObject           `json:"object"`
	EpochUTC   string              `json:"epoch_utc"`
	Frame      string              `json:"frame"`
	Elements   map[string]number   `json:"elements"`
	Sigmas     map[string]number   `json:"standard_deviations"`
	BStar      string              `json:"b_star"` // fitted or stated
	Data       fitData             `json:"data"`
	RMSM       number              `json:"rms_m"`
	Residuals  map[string]fitStats `json:"residuals"`
	Covariance fitCovariance       `json:"covariance"`
	Spread     []fitAhead          `json:"spread"`
	AgeRule    map[string]number   `json:"position_uncertainty"` // as a scenario takes it; empty where there is none
	TwoLine    fitTwoLine          `json:"two_line"`
	FarOff     []fitDatum          `json:"far_off"`
	LeftOut    []fitDatum          `json:"left_out"`
	Notes      []string            `json:"notes"`
	Position   []fitCovarianceAt   `json:"position_covariances"` // as a scenario takes them: covariances of its position_uncertainty
}

// fitCovarianceAt is the covariance at an instant in km², km²/s and km²/s²: radial, along,
// across, then the velocities.
type fitCovarianceAt struct {
	UTC   string     `json:"utc"`
	Lower [][]number `json:"lower_triangle_km_s"`
}

type fitObject struct {
	Name          string `json:"name"`
	CatalogNumber int    `json:"catalog_number"`
	Designator    string `json:"international_designator"`
}

type fitData struct {
	Source       string `json:"source"`
	Count        int    `json:"count"`
	Used         int    `json:"used"`
	WithVelocity int    `json:"with_velocity"`
	FirstUTC     string `json:"first_utc"`
	LastUTC      string `json:"last_utc"`
}

// fitStats are in m, those of velocities in m/s.
type fitStats struct {
	Unit     string  `json:"unit"`
	RMS      number  `json:"rms"`
	Mean     number  `json:"mean"`
	Worst    number  `json:"worst"`
	WorstUTC *string `json:"worst_utc"`
}

type fitCovariance struct {
	Parameters         []string   `json:"parameters"`
	Matrix             [][]number `json:"matrix"`
	DataPerIndependent number     `json:"data_per_independent"`
	Redundancy         int        `json:"redundancy"`
	Condition          number     `json:"condition"`
	Rounds             int        `json:"rounds"`
}

type fitAhead struct {
	UTC         string `json:"utc"`
	Days        number `json:"days_from_epoch"`
	RadialM     number `json:"radial_m"`
	AlongM      number `json:"along_m"`
	AcrossM     number `json:"across_m"`
	RadialAlong number `json:"radial_along_correlation"`
}

type fitTwoLine struct {
	Lines     []string `json:"lines"`
	FarthestM number   `json:"farthest_m"` // from the fit, over the data
	Lost      []string `json:"lost"`
	Why       *string  `json:"why_none"`
}

type fitDatum struct {
	UTC     string `json:"utc"`
	Line    int    `json:"line"`
	RadialM number `json:"radial_m"`
	AlongM  number `json:"along_m"`
	AcrossM number `json:"across_m"`
}

func (f *fitReport) answer() fitAnswer {
	r := f.r
	a := fitAnswer{
		Object:   fitObject{r.Elements.Name, r.Elements.CatalogNumber, r.Elements.InternationalDesignator},
		EpochUTC: utc(r.Elements.Epoch), Frame: orbit.TEME.String(), BStar: "stated",
		Elements: map[string]number{}, Sigmas: map[string]number{}, Residuals: map[string]fitStats{}, AgeRule: map[string]number{},
		Data: fitData{f.in.from, len(r.Residuals), r.Used, f.states, utc(f.first), utc(f.last)},
		RMSM: num(r.RMS, 6), Spread: []fitAhead{}, FarOff: []fitDatum{}, LeftOut: []fitDatum{}, Notes: append([]string{}, f.notes...),
		Covariance: fitCovariance{Parameters: fit.Parameters[:], DataPerIndependent: num(r.DataPerIndependent, 3), Redundancy: r.Redundancy,
			Condition: num(r.Condition, 3), Rounds: r.Rounds},
		TwoLine: fitTwoLine{Lines: []string{}, FarthestM: num(f.twoLine.farthest, 6), Lost: append([]string{}, f.twoLine.lost...), Why: orNull(f.twoLine.why)},
	}
	if r.DragFound {
		a.BStar = "fitted"
	}
	for _, e := range f.elements() {
		a.Elements[e.key], a.Sigmas[e.key] = num(e.value, 12), num(e.sigma, 15)
	}
	for _, s := range f.statistics() {
		a.Residuals[s.key] = fitStats{s.unit, num(s.RMS, 6), num(s.Mean, 6), num(s.Worst, 6), orNull(utc(s.At))}
	}
	for _, row := range r.Covariance {
		var out []number
		for _, c := range row {
			out = append(out, num(c, 30))
		}
		a.Covariance.Matrix = append(a.Covariance.Matrix, out)
	}
	a.Position = []fitCovarianceAt{}
	for _, s := range f.ahead {
		a.Position = append(a.Position, covarianceOut(s))
		a.Spread = append(a.Spread, fitAhead{utc(s.at), num(s.days, 3), num(s.spread.Radial.Metres(), 3), num(s.spread.Along.Metres(), 3),
			num(s.spread.Across.Metres(), 3), num(s.spread.RadialAlong, 6)})
	}
	if f.rule != (orbit.AgeRule{}) {
		keys, km := f.ruleKeys()
		for i, k := range keys {
			a.AgeRule[k] = num(km[i], 6)
		}
	}
	if f.twoLine.lines != "" {
		a.TwoLine.Lines = strings.Split(strings.TrimSpace(f.twoLine.lines), "\n")
	}
	for i := range r.Residuals {
		x := &r.Residuals[i]
		d := fitDatum{utc(x.Time), x.Line, num(x.Radial, 3), num(x.Along, 3), num(x.Across, 3)}
		switch {
		case x.Rejected:
			a.LeftOut = append(a.LeftOut, d)
		case x.Suspect:
			a.FarOff = append(a.FarOff, d)
		}
	}
	return a
}

// covarianceOut writes all digits that a velocity needs: its variances are a millionth of a
// position's, and the matrix must stay positive.
func covarianceOut(s fitSpread) fitCovarianceAt {
	out := fitCovarianceAt{UTC: utc(s.at)}
	for i := range 6 {
		var row []number
		for j := range i + 1 {
			row = append(row, num(s.whole[i][j]/1e6, 30))
		}
		out.Lower = append(out.Lower, row)
	}
	return out
}
