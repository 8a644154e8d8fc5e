package propagation

import "fmt"

var rainCoefficientsBatch = batchModel{
	name:    "rain-coefficients",
	inputs:  fixed("frequency_ghz", "elevation_deg", "polarization_tilt_deg"),
	results: []string{"result_coefficient_k", "result_coefficient_alpha"},
	evaluate: func(_ *Batch, r *batchRow, out []float64) (err error) {
		out[0], out[1], err = rainCoefficients(r.number("frequency_ghz"), r.number("elevation_deg"), r.number("polarization_tilt_deg"))
		return err
	},
}

var rainSpecificBatch = batchModel{
	name:    "rain-specific",
	inputs:  fixed("frequency_ghz", "elevation_deg", "polarization_tilt_deg", "rain_rate_mm_h"),
	results: []string{"result_rain_specific_attenuation_db_km"},
	evaluate: func(_ *Batch, r *batchRow, out []float64) (err error) {
		out[0], err = rainSpecific(r.number("rain_rate_mm_h"), r.number("frequency_ghz"), r.number("elevation_deg"), r.number("polarization_tilt_deg"))
		return err
	},
}

var rainColumns = []string{"latitude_deg", "station_height_km", "frequency_ghz", "elevation_deg", "polarization_tilt_deg",
	"exceedance_percent", "rain_rate_001_mm_h", "rain_height_km"}

var rainBatch = batchModel{
	name:    "rain",
	inputs:  fixed(rainColumns...),
	results: []string{"result_rain_attenuation_db"},
	evaluate: func(_ *Batch, r *batchRow, out []float64) (err error) {
		out[0], err = rainOfRow(r)
		return err
	},
}

func rainOfRow(r *batchRow) (float64, error) {
	s := rainSite{r.number("latitude_deg"), r.number("station_height_km"), r.number("rain_height_km"), r.number("rain_rate_001_mm_h")}
	return rainAttenuationChecked(s, r.number("frequency_ghz"), r.number("elevation_deg"), r.number("polarization_tilt_deg"),
		r.number("exceedance_percent"), &r.notes)
}

func monthColumn(pattern string, month int) string { return fmt.Sprintf(pattern, month+1) }

const (
	temperatureColumn = "temperature_month_%02d_c"
	rainfallColumn    = "rainfall_month_%02d_mm"
)

var rainRateBatch = batchModel{
	name: "rain-rate",
	inputs: func(b *Batch) ([]string, error) {
		columns := []string{"exceedance_percent"}
		for i := range 12 {
			columns = append(columns, monthColumn(temperatureColumn, i))
		}
		for i := range 12 {
			columns = append(columns, monthColumn(rainfallColumn, i))
		}
		return b.need(columns...)
	},
	results: []string{"result_rain_rate_mm_h"},
	evaluate: func(_ *Batch, r *batchRow, out []float64) error {
		var celsius, rainfall [12]float64
		for i := range celsius {
			celsius[i], rainfall[i] = r.number(monthColumn(temperatureColumn, i)), r.number(monthColumn(rainfallColumn, i))
		}
		rain, err := newRain(celsius, rainfall)
		if err != nil {
			return err
		}
		out[0], err = rain.rate(r.number("exceedance_percent"))
		return err
	},
}

var rainHeightBatch = batchModel{
	name:    "rain-height",
	inputs:  fixed("zero_degree_isotherm_height_km"),
	results: []string{"result_rain_height_km"},
	evaluate: func(_ *Batch, r *batchRow, out []float64) (err error) {
		out[0], err = rainHeight(r.number("zero_degree_isotherm_height_km"))
		return err
	},
}

var xpdBatch = batchModel{
	name:    "xpd",
	inputs:  fixed("frequency_ghz", "elevation_deg", "polarization_tilt_deg", "exceedance_percent", "rain_attenuation_db"),
	results: []string{"result_xpd_db"},
	evaluate: func(_ *Batch, r *batchRow, out []float64) (err error) {
		out[0], err = crossPolar(r.number("frequency_ghz"), r.number("elevation_deg"), r.number("polarization_tilt_deg"),
			r.number("exceedance_percent"), r.number("rain_attenuation_db"), &r.notes)
		return err
	},
}
