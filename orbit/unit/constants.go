package unit

import "math"

// SpeedOfLight is the speed of light in vacuum in m/s, exact by the definition of
// the metre (SI Brochure, 9th edition, 2019).
const SpeedOfLight = 299792458.0

// Boltzmann is the Boltzmann constant in J/K, exact since 2019 (SI Brochure, 9th
// edition, 2019).
const Boltzmann = 1.380649e-23

// ReferenceTemperature is the 290 K that noise figures are defined against
// (IEEE Std 161; ITU-R V.573).
const ReferenceTemperature Temperature = 290

// BoltzmannDB is 10 log10 of the Boltzmann constant in dB(W/K/Hz), -228.5992.
var BoltzmannDB = DB(10 * math.Log10(Boltzmann))
