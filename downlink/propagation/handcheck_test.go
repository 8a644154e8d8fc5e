package propagation_test

import (
	"encoding/csv"
	"math"
	"os"
	"strconv"
	"testing"

	"slantwise/downlink/propagation"
	"slantwise/orbit/unit"
)

// One path is worked out again from the printed formulas, apart from the package: the
// air of P.835-6, refraction and gas integrated over height in plain steps, rain,
// cloud and scintillation in one line a step, their combination, and the sky's noise.
// 26.25 GHz, circular, at 20° from a site at 35° N, 0.3 km, exceeded for 0.1 %.
const (
	fGHz, elevation, p, latitude, stationKm = 26.25, 20.0, 0.1, 35.0, 0.3
	rate001, rainKm                         = 42.0, 4.1
	liquid5, wet, diameterM, efficiency     = 0.55, 70.0, 3.4, 0.62
)

func rad(deg float64) float64 { return deg * math.Pi / 180 }

// summerAir is P.835-6 Annex 1 §3.1: T in K, dry pressure and vapour pressure in hPa,
// density in g/m³, up to where the gas ends to matter.
func summerAir(h float64) (t, dry, e, rho float64) {
	switch {
	case h < 13:
		t = 294.9838 - 5.2159*h - 0.07109*h*h
	case h < 17:
		t = 215.15
	default:
		t = 215.15 * math.Exp((h-17)*0.008128)
	}
	pressure := 1012.8186 - 111.5569*h + 3.8646*h*h
	if h > 10 {
		pressure = (1012.8186 - 1115.569 + 386.46) * math.Exp(-0.147*(h-10))
	}
	if h <= 15 {
		rho = 14.3542 * math.Exp(-0.4174*h-0.02290*h*h+0.001007*h*h*h)
	}
	e = rho * t / 216.7
	return t, pressure - e, e, rho
}

func lines(t *testing.T, file string) [][]float64 {
	t.Helper()
	f, err := os.Open(file)
	if err != nil {
		t.Fatal(err)
	}
	defer func() { _ = f.Close() }()
	records, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	var all [][]float64
	for _, r := range records[1:] {
		var row []float64
		for _, c := range r {
			v, err := strconv.ParseFloat(c, 64)
			if err != nil {
				t.Fatal(err)
			}
			row = append(row, v)
		}
		all = append(all, row)
	}
	return all
}

// gamma is P.676-13 Annex 1 equations (1) to (9).
func gamma(oxygen, vapour [][]float64, tK, dry, e float64) float64 {
	theta := 300 / tK
	var n float64
	for _, l := range oxygen {
		s := l[1] * 1e-7 * dry * math.Pow(theta, 3) * math.Exp(l[2]*(1-theta))
		w := l[3] * 1e-4 * (dry*math.Pow(theta, 0.8-l[4]) + 1.1*e*theta)
		w = math.Sqrt(w*w + 2.25e-6)
		d := (l[5] + l[6]*theta) * 1e-4 * (dry + e) * math.Pow(theta, 0.8)
		n += s * fGHz / l[0] * ((w-d*(l[0]-fGHz))/(math.Pow(l[0]-fGHz, 2)+w*w) + (w-d*(l[0]+fGHz))/(math.Pow(l[0]+fGHz, 2)+w*w))
	}
	d := 5.6e-4 * (dry + e) * math.Pow(theta, 0.8)
	n += fGHz * dry * theta * theta * (6.14e-5/(d*(1+math.Pow(fGHz/d, 2))) + 1.4e-12*dry*math.Pow(theta, 1.5)/(1+1.9e-5*math.Pow(fGHz, 1.5)))
	for _, l := range vapour {
		s := l[1] * 0.1 * e * math.Pow(theta, 3.5) * math.Exp(l[2]*(1-theta))
		w := l[3] * 1e-4 * (dry*math.Pow(theta, l[4]) + l[5]*e*math.Pow(theta, l[6]))
		w = 0.535*w + math.Sqrt(0.217*w*w+2.1316e-12*l[0]*l[0]/theta)
		n += s * fGHz / l[0] * (w/(math.Pow(l[0]-fGHz, 2)+w*w) + w/(math.Pow(l[0]+fGHz, 2)+w*w))
	}
	return 0.1820 * fGHz * n
}

// gasByHand integrates along the ray: its elevation at height h follows from
// n r cos(el) = const (P.676-13 Annex 1 §2.2), and dx = dh/sin(el). The apparent
// elevation is the geometric one raised by the bending, the integral of -dn/n cot(el).
func gasByHand(t *testing.T, elevation float64) float64 {
	oxygen, vapour := lines(t, "data/p676_13_oxygen_lines.csv"), lines(t, "data/p676_13_water_vapour_lines.csv")
	index := func(h float64) float64 {
		tK, dry, e, _ := summerAir(h)
		return 1 + 1e-6*(77.6*dry/tK+72*e/tK+3.75e5*e/(tK*tK))
	}
	const step, top = 0.025, 47.0
	apparent := elevation
	var attenuation float64
	for range 6 { // the bending changes little with the angle: this converges, slowest at 2°
		constant := index(stationKm) * (6371 + stationKm) * math.Cos(rad(apparent))
		attenuation = 0
		var bending float64
		for h := stationKm + step/2; h < top; h += step {
			el := math.Acos(constant / (index(h) * (6371 + h)))
			tK, dry, e, _ := summerAir(h)
			attenuation += gamma(oxygen, vapour, tK, dry, e) * step / math.Sin(el)
			bending += (index(h-step/2) - index(h+step/2)) / math.Tan(el)
		}
		apparent = elevation + bending*180/math.Pi
	}
	return attenuation
}

func rainByHand() float64 {
	x := math.Log10(fGHz)
	g := func(a, b, c float64) float64 { return a * math.Exp(-math.Pow((x-b)/c, 2)) }
	kH := math.Pow(10, g(-5.33980, -0.10008, 1.13098)+g(-0.35351, 1.26970, 0.45400)+g(-0.23789, 0.86036, 0.15354)+g(-0.94158, 0.64552, 0.16817)-0.18961*x+0.71147)
	kV := math.Pow(10, g(-3.80595, 0.56934, 0.81061)+g(-3.44965, -0.22911, 0.51059)+g(-0.39902, 0.73042, 0.11899)+g(0.50167, 1.07319, 0.27195)-0.16398*x+0.63297)
	aH := g(-0.14318, 1.82442, -0.55187) + g(0.29591, 0.77564, 0.19822) + g(0.32177, 0.63773, 0.13164) + g(-5.37610, -0.96230, 1.47828) + g(16.1721, -3.29980, 3.43990) + 0.67849*x - 1.95537
	aV := g(-0.07771, 2.33840, -0.76284) + g(0.56727, 0.95545, 0.54039) + g(-0.20238, 1.14520, 0.26809) + g(-48.2991, 0.791669, 0.116226) + g(48.5833, 0.791459, 0.116479) - 0.053739*x + 0.83433
	k := (kH + kV) / 2 // circular: cos(2 x 45°) is 0
	alpha := (kH*aH + kV*aV) / (2 * k)
	s, c := math.Sin(rad(elevation)), math.Cos(rad(elevation))
	h := rainKm - stationKm
	lg := h / s * c
	gr := k * math.Pow(rate001, alpha)
	r := 1 / (1 + 0.78*math.Sqrt(lg*gr/fGHz) - 0.38*(1-math.Exp(-2*lg)))
	lr := h / s
	if math.Atan(h/(lg*r)) > rad(elevation) {
		lr = lg * r / c
	}
	v := 1 / (1 + math.Sqrt(s)*(31*(1-math.Exp(-elevation/(1+36-latitude)))*math.Sqrt(lr*gr)/(fGHz*fGHz)-0.45))
	a001 := gr * lr * v
	beta := -0.005*(latitude-36) + 1.8 - 4.25*s // under 25° and 36°
	return a001 * math.Pow(p/0.01, -(0.655+0.033*math.Log(p)-0.045*math.Log(a001)-beta*(1-p)*s))
}

func cloudByHand() float64 {
	const tK = 273.75
	theta := 300 / tK
	e0 := 77.66 + 103.3*(theta-1)
	e1, e2 := 0.0671*e0, 3.52
	fp := 20.20 - 146*(theta-1) + 316*(theta-1)*(theta-1)
	fs := 39.8 * fp
	im := fGHz*(e0-e1)/(fp*(1+math.Pow(fGHz/fp, 2))) + fGHz*(e1-e2)/(fs*(1+math.Pow(fGHz/fs, 2)))
	re := (e0-e1)/(1+math.Pow(fGHz/fp, 2)) + (e1-e2)/(1+math.Pow(fGHz/fs, 2)) + e2
	eta := (2 + re) / im
	kl := 0.819 * fGHz / (im * (1 + eta*eta))
	kl *= 0.1522*math.Exp(-math.Pow(fGHz+23.9589, 2)/3.2991e3) + 11.51*math.Exp(-math.Pow(fGHz-219.2096, 2)/2.7595e6) - 10.4912
	return kl * liquid5 / math.Sin(rad(elevation))
}

func scintillationByHand() float64 {
	s := math.Sin(rad(elevation))
	l := 2 * 1000 / (math.Sqrt(s*s+2.35e-4) + s)
	x := 1.22 * efficiency * diameterM * diameterM * fGHz / l
	g := math.Sqrt(3.86*math.Pow(x*x+1, 11.0/12)*math.Sin(11.0/6*math.Atan(1/x)) - 7.08*math.Pow(x, 5.0/6))
	sigma := (3.6e-3 + 1e-4*wet) * math.Pow(fGHz, 7.0/12) * g / math.Pow(s, 1.2)
	lp := math.Log10(p)
	return (-0.061*lp*lp*lp + 0.072*lp*lp - 1.71*lp + 3.0) * sigma
}

func TestOnePathByHand(t *testing.T) {
	rate, rainHeight, wetN := propagation.RainRate(rate001), unit.Length(rainKm)*unit.Kilometre, wet
	cloud, err := propagation.NewCurve("cloud", "kg/m2", propagation.Exceeded{P: 5 * propagation.Percent, Value: liquid5})
	if err != nil {
		t.Fatal(err)
	}
	path, err := propagation.NewPath(propagation.PathSpec{
		Frequency: fGHz * unit.Gigahertz, Exceedance: p * propagation.Percent, Tilt: 45 * unit.Degree,
		Aperture: &propagation.Aperture{Diameter: diameterM, Efficiency: efficiency},
		Climate: propagation.Climate{Latitude: latitude * unit.Degree, Height: stationKm * unit.Kilometre, Season: propagation.Summer,
			Rate001: &rate, RainHeight: &rainHeight, CloudWater: cloud, WetRefractivity: &wetN},
	})
	if err != nil {
		t.Fatal(err)
	}
	got, err := path.At(elevation * unit.Degree)
	if err != nil {
		t.Fatal(err)
	}
	sky, err := path.Sky(elevation * unit.Degree)
	if err != nil {
		t.Fatal(err)
	}
	for _, el := range []float64{2, 7, 90} { // gas again where the ray bends much, and where it does not
		s, err := path.At(unit.Angle(el) * unit.Degree)
		if err != nil {
			t.Fatal(err)
		}
		if want := gasByHand(t, el); math.Abs(float64(s.Gas)-want) > 0.01 {
			t.Errorf("gas at %g deg: got %.5f dB, by hand %.5f dB", el, s.Gas, want)
		}
	}
	gas, cl, rain, sc := gasByHand(t, elevation), cloudByHand(), rainByHand(), scintillationByHand()
	total := gas + math.Sqrt((rain+cl)*(rain+cl)+sc*sc)
	surface, _, _, _ := summerAir(stationKm)
	galaxy := 290 * math.Pow(10, (52-46)/10.0) * math.Pow(26250/100.0, -2.75)
	passed := math.Pow(10, -(gas+cl+rain)/10)
	noise := (37.34+0.81*surface)*(1-passed) + (2.7+galaxy)*passed
	for _, c := range []struct {
		what           string
		got, want, tol float64
	}{
		{"gas, dB", float64(got.Gas), gas, 0.01}, {"cloud, dB", float64(got.Cloud), cl, 0.01}, {"rain, dB", float64(got.Rain), rain, 0.01},
		{"scintillation, dB", float64(got.Scintillation), sc, 0.01}, {"total, dB", float64(got.Total), total, 0.01},
		{"combination, dB", float64(got.Combination), gas + cl + rain + sc - total, 0.01}, {"sky, K", sky.Weather.Kelvins(), noise, 0.1},
	} {
		t.Logf("%s: %.5f, by hand %.5f", c.what, c.got, c.want)
		if d := math.Abs(c.got - c.want); !(d <= c.tol) {
			t.Errorf("%s: got %.5f, by hand %.5f, difference %.2g over %g", c.what, c.got, c.want, d, c.tol)
		}
	}
}
