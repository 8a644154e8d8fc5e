package propagation

import "math"

// latitudeAir holds one of the reference atmospheres by latitude, P.835-6 Annex 1 §2
// to §4. Heights are geometric, in km.
type latitudeAir struct {
	temperature func(h float64) float64 // K
	p0, p1, p2  float64                 // hPa, up to 10 km: p0 + p1 h + p2 h²
	fall10      float64                 // 1/km from 10 km to 72 km
	fall72      float64                 // 1/km above 72 km
	rho0        float64                 // g/m³
	e1, e2      float64                 // exponent of the vapour: e1 h + e2 h² + e3 h³ + e4 h⁴
	e3, e4      float64
	vapourTop   float64 // km; none above
}

func (l latitudeAir) at(h float64) air {
	a := air{tK: l.temperature(h), hPa: l.pressure(h)}
	if h <= l.vapourTop {
		a.rho = l.rho0 * math.Exp(h*(l.e1+h*(l.e2+h*(l.e3+h*l.e4))))
	}
	return a
}

func (l latitudeAir) pressure(h float64) float64 {
	switch {
	case h <= 10:
		return l.p0 + h*(l.p1+h*l.p2)
	case h <= 72:
		return l.pressure(10) * math.Exp(-l.fall10*(h-10))
	}
	return l.pressure(72) * math.Exp(-l.fall72*(h-72))
}

var lowLatitude = latitudeAir{
	temperature: func(h float64) float64 {
		switch {
		case h < 17:
			return 300.4222 - 6.3533*h + 0.005886*h*h
		case h < 47:
			return 194 + (h-17)*2.533
		case h < 52:
			return 270
		case h < 80:
			return 270 - (h-52)*3.0714
		}
		return 184
	},
	p0: 1012.0306, p1: -109.0338, p2: 3.6316, fall10: 0.147, fall72: 0.165,
	rho0: 19.6542, e1: -0.2313, e2: -0.1122, e3: 0.01351, e4: -0.0005923, vapourTop: 15,
}

var middleSummer = latitudeAir{
	temperature: func(h float64) float64 {
		switch {
		case h < 13:
			return 294.9838 - 5.2159*h - 0.07109*h*h
		case h < 17:
			return 215.15
		case h < 47:
			return 215.15 * math.Exp((h-17)*0.008128)
		case h < 53:
			return 275
		case h < 80:
			return 275 + (1-math.Exp((h-53)*0.06))*20
		}
		return 175
	},
	p0: 1012.8186, p1: -111.5569, p2: 3.8646, fall10: 0.147, fall72: 0.165,
	rho0: 14.3542, e1: -0.4174, e2: -0.02290, e3: 0.001007, vapourTop: 15,
}

var middleWinter = latitudeAir{
	temperature: func(h float64) float64 {
		switch {
		case h < 10:
			return 272.7241 - 3.6217*h - 0.1759*h*h
		case h < 33:
			return 218
		case h < 47:
			return 218 + (h-33)*3.3571
		case h < 53:
			return 265
		case h < 80:
			return 265 - (h-53)*2.0370
		}
		return 210
	},
	p0: 1018.8627, p1: -124.2954, p2: 4.8307, fall10: 0.147, fall72: 0.155,
	rho0: 3.4742, e1: -0.2697, e2: -0.03604, e3: 0.0004489, vapourTop: 10,
}

var highSummer = latitudeAir{
	temperature: func(h float64) float64 {
		switch {
		case h < 10:
			return 286.8374 - 4.7805*h - 0.1402*h*h
		case h < 23:
			return 225
		case h < 48:
			return 225 * math.Exp((h-23)*0.008317)
		case h < 53:
			return 277
		case h < 79:
			return 277 - (h-53)*4.0769
		}
		return 171
	},
	p0: 1008.0278, p1: -113.2494, p2: 3.9408, fall10: 0.140, fall72: 0.165,
	rho0: 8.988, e1: -0.3614, e2: -0.005402, e3: -0.001955, vapourTop: 15,
}

var highWinter = latitudeAir{
	temperature: func(h float64) float64 {
		switch {
		case h < 8.5:
			return 257.4345 + 2.3474*h - 1.5479*h*h + 0.08473*h*h*h
		case h < 30:
			return 217.5
		case h < 50:
			return 217.5 + (h-30)*2.125
		case h < 54:
			return 260
		}
		return 260 - (h-54)*1.667
	},
	p0: 1010.8828, p1: -122.2411, p2: 4.554, fall10: 0.147, fall72: 0.150,
	rho0: 1.2319, e1: 0.07481, e2: -0.0981, e3: 0.00281, vapourTop: 10,
}
