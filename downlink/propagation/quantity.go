package propagation

// Pressure is a pressure in pascals.
type Pressure float64

// Units of Pressure.
const (
	Pascal      Pressure = 1
	Hectopascal Pressure = 100
)

// Hectopascals returns the pressure in hPa.
func (p Pressure) Hectopascals() float64 { return float64(p) / 100 }

// VapourDensity is a density of water vapour in kg/m³.
type VapourDensity float64

// GramPerCubicMetre is the unit in which the Recommendations print VapourDensity.
const GramPerCubicMetre VapourDensity = 1e-3

// GramsPerCubicMetre returns the density in g/m³.
func (d VapourDensity) GramsPerCubicMetre() float64 { return float64(d) * 1e3 }

// Column is a mass of water over an area, along the vertical, in kg/m² (which is
// also millimetres of water).
type Column float64

// KilogramPerSquareMetre is the unit of Column.
const KilogramPerSquareMetre Column = 1

// RainRate is a rain rate in mm/h, over an integration time of one minute.
type RainRate float64

// MillimetrePerHour is the unit of RainRate.
const MillimetrePerHour RainRate = 1

// MillimetresPerHour returns the rate in mm/h.
func (r RainRate) MillimetresPerHour() float64 { return float64(r) }

// Exceedance is the fraction of an average year, 0 to 1, during which a value is
// exceeded. Write 1 % as 1*Percent.
type Exceedance float64

// Percent is one percent of an average year.
const Percent Exceedance = 0.01

// Percents returns the fraction in percent.
func (e Exceedance) Percents() float64 { return float64(e) * 100 }
