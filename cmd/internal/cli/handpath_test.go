package cli

import (
	"encoding/csv"
	"encoding/json"
	"math"
	"os"
	"path/filepath"
	"strconv"
	"testing"
)

// The path of the budget by hand, from the printed formulas.
const (
	handGHz, handElevation, handPercent = 20.2, 35.0, 0.1
	handRate, handRainKm, handLiquid    = 32.0, 2.6 + 0.36, 0.5 // P.839-4 on the isotherm; liquid water at 5 %
	handWet, handDiameter, handEta      = 52.0, 2.4, 0.62
)

func rad(deg float64) float64 { return deg * math.Pi / 180 }

type handPath struct{ gas, cloud, rain, scintillation float64 }

func newHandPath(t *testing.T) *handPath {
	return &handPath{handGas(t), handCloud(), handRain(), handScintillation()}
}

// total is P.618-14 equation (65).
func (p *handPath) total() float64 { return p.gas + math.Hypot(p.rain+p.cloud, p.scintillation) }

// discrimination is P.618-14 §4.1 for 9 to 36 GHz, circular, 0.1 %.
func (p *handPath) discrimination() float64 {
	cf := 26*math.Log10(handGHz) + 4.1
	ca := 22.6 * math.Log10(p.rain)
	rain := cf - ca - 40*math.Log10(math.Cos(rad(handElevation))) + 0.0053*5*5
	return rain - rain*(0.3+0.1*math.Log10(handPercent))/2
}

// handAir is P.835-6 Annex 1 §1: T in K, dry pressure and vapour pressure in hPa.
func handAir(h float64) (t, dry, e float64) {
	g := 6356.766 * h / (6356.766 + h) // geopotential
	var p float64
	switch {
	case g <= 11:
		t = 288.15 - 6.5*g
		p = 1013.25 * math.Pow(288.15/t, -34.1632/6.5)
	case g <= 20:
		t = 216.65
		p = 226.3226 * math.Exp(-34.1632*(g-11)/216.65)
	case g <= 32:
		t = 216.65 + (g - 20)
		p = 54.74980 * math.Pow(216.65/t, 34.1632)
	default:
		t = 228.65 + 2.8*(g-32)
		p = 8.680422 * math.Pow(228.65/t, 34.1632/2.8)
	}
	e = 7.5 * math.Exp(-h/2) * t / 216.7
	return t, p - e, e
}

// handGamma is P.676-13 Annex 1 equations (1) to (9), in dB/km.
func handGamma(oxygen, vapour [][]float64, tK, dry, e float64) float64 {
	const f = handGHz
	theta := 300 / tK
	var n float64
	for _, l := range oxygen {
		s := l[1] * 1e-7 * dry * math.Pow(theta, 3) * math.Exp(l[2]*(1-theta))
		w := l[3] * 1e-4 * (dry*math.Pow(theta, 0.8-l[4]) + 1.1*e*theta)
		w = math.Sqrt(w*w + 2.25e-6)
		d := (l[5] + l[6]*theta) * 1e-4 * (dry + e) * math.Pow(theta, 0.8)
		below, above := l[0]-f, l[0]+f
		n += s * f / l[0] * ((w-d*below)/(below*below+w*w) + (w-d*above)/(above*above+w*w))
	}
	d := 5.6e-4 * (dry + e) * math.Pow(theta, 0.8)
	n += f * dry * theta * theta * (6.14e-5/(d*(1+f*f/(d*d))) + 1.4e-12*dry*math.Pow(theta, 1.5)/(1+1.9e-5*math.Pow(f, 1.5)))
	for _, l := range vapour {
		s := l[1] * 0.1 * e * math.Pow(theta, 3.5) * math.Exp(l[2]*(1-theta))
		w := l[3] * 1e-4 * (dry*math.Pow(theta, l[4]) + l[5]*e*math.Pow(theta, l[6]))
		w = 0.535*w + math.Sqrt(0.217*w*w+2.1316e-12*l[0]*l[0]/theta)
		below, above := l[0]-f, l[0]+f
		n += s * f / l[0] * (w/(below*below+w*w) + w/(above*above+w*w))
	}
	return 0.1820 * f * n
}

// handGas integrates in plain steps along the ray, n r cos(el) = const, whose apparent
// elevation is the geometric one raised by the bending.
func handGas(t *testing.T) float64 {
	oxygen, vapour := handLines(t, "oxygen.csv"), handLines(t, "vapour.csv")
	index := func(h float64) float64 {
		tK, dry, e := handAir(h)
		return 1 + 1e-6*(77.6*dry/tK+72*e/tK+3.75e5*e/(tK*tK))
	}
	const step, top = 0.02, 47.0
	apparent, attenuation := handElevation, 0.0
	for range 4 {
		constant := index(0) * 6371 * math.Cos(rad(apparent))
		attenuation = 0
		var bending float64
		for h := step / 2; h < top; h += step {
			el := math.Acos(constant / (index(h) * (6371 + h)))
			tK, dry, e := handAir(h)
			attenuation += handGamma(oxygen, vapour, tK, dry, e) * step / math.Sin(el)
			bending += (index(h-step/2) - index(h+step/2)) / math.Tan(el)
		}
		apparent = handElevation + bending*180/math.Pi
	}
	return attenuation
}

// handRain is P.838-3 and P.618-14 §2.2.1.1 for a latitude over 36°.
func handRain() float64 {
	x := math.Log10(handGHz)
	g := func(a, b, c float64) float64 { return a * math.Exp(-math.Pow((x-b)/c, 2)) }
	kH := math.Pow(10, g(-5.33980, -0.10008, 1.13098)+g(-0.35351, 1.26970, 0.45400)+g(-0.23789, 0.86036, 0.15354)+g(-0.94158, 0.64552, 0.16817)-0.18961*x+0.71147)
	kV := math.Pow(10, g(-3.80595, 0.56934, 0.81061)+g(-3.44965, -0.22911, 0.51059)+g(-0.39902, 0.73042, 0.11899)+g(0.50167, 1.07319, 0.27195)-0.16398*x+0.63297)
	aH := g(-0.14318, 1.82442, -0.55187) + g(0.29591, 0.77564, 0.19822) + g(0.32177, 0.63773, 0.13164) + g(-5.37610, -0.96230, 1.47828) + g(16.1721, -3.29980, 3.43990) + 0.67849*x - 1.95537
	aV := g(-0.07771, 2.33840, -0.76284) + g(0.56727, 0.95545, 0.54039) + g(-0.20238, 1.14520, 0.26809) + g(-48.2991, 0.791669, 0.116226) + g(48.5833, 0.791459, 0.116479) - 0.053739*x + 0.83433
	k := (kH + kV) / 2 // circular: cos(2 x 45°) is 0
	alpha := (kH*aH + kV*aV) / (2 * k)
	s, c := math.Sin(rad(handElevation)), math.Cos(rad(handElevation))
	gr := k * math.Pow(handRate, alpha)
	lg := handRainKm / s * c
	r := 1 / (1 + 0.78*math.Sqrt(lg*gr/handGHz) - 0.38*(1-math.Exp(-2*lg)))
	lr := handRainKm / s
	if math.Atan(handRainKm/(lg*r)) > rad(handElevation) {
		lr = lg * r / c
	}
	v := 1 / (1 + math.Sqrt(s)*(31*(1-math.Exp(-handElevation))*math.Sqrt(lr*gr)/(handGHz*handGHz)-0.45)) // chi is 0 from 36° up
	a001 := gr * lr * v
	// beta is 0 from 36° up
	return a001 * math.Pow(handPercent/0.01, -(0.655+0.033*math.Log(handPercent)-0.045*math.Log(a001)))
}

// handCloud is P.840-9 §2 and §3.1.
func handCloud() float64 {
	const f = handGHz
	theta := 300 / 273.75
	e0 := 77.66 + 103.3*(theta-1)
	e1, e2 := 0.0671*e0, 3.52
	fp := 20.20 - 146*(theta-1) + 316*(theta-1)*(theta-1)
	fs := 39.8 * fp
	im := f*(e0-e1)/(fp*(1+f*f/(fp*fp))) + f*(e1-e2)/(fs*(1+f*f/(fs*fs)))
	re := (e0-e1)/(1+f*f/(fp*fp)) + (e1-e2)/(1+f*f/(fs*fs)) + e2
	eta := (2 + re) / im
	kl := 0.819 * f / (im * (1 + eta*eta))
	kl *= 0.1522*math.Exp(-math.Pow(f+23.9589, 2)/3.2991e3) + 11.51*math.Exp(-math.Pow(f-219.2096, 2)/2.7595e6) - 10.4912
	return kl * handLiquid / math.Sin(rad(handElevation))
}

// handScintillation is P.618-14 §2.4.1.
func handScintillation() float64 {
	s := math.Sin(rad(handElevation))
	l := 2 * 1000 / (math.Sqrt(s*s+2.35e-4) + s)
	x := 1.22 * handEta * handDiameter * handDiameter * handGHz / l
	g := math.Sqrt(3.86*math.Pow(x*x+1, 11.0/12)*math.Sin(11.0/6*math.Atan(1/x)) - 7.08*math.Pow(x, 5.0/6))
	sigma := (3.6e-3 + 1e-4*handWet) * math.Pow(handGHz, 7.0/12) * g / math.Pow(s, 1.2)
	lp := math.Log10(handPercent)
	return (-0.061*lp*lp*lp + 0.072*lp*lp - 1.71*lp + 3.0) * sigma
}

// handData copies the tables of lines into a folder of its own.
func handData(t *testing.T) string {
	t.Helper()
	dir := t.TempDir()
	for to, from := range map[string]string{"oxygen.csv": "p676_13_oxygen_lines.csv", "vapour.csv": "p676_13_water_vapour_lines.csv"} {
		text, err := os.ReadFile(filepath.Join("../../../downlink/propagation/data", from))
		if err != nil {
			t.Fatal(err)
		}
		if err := os.WriteFile(filepath.Join(dir, to), text, 0o644); err != nil {
			t.Fatal(err)
		}
	}
	return dir
}

func handLines(t *testing.T, file string) [][]float64 {
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

type handAnswer struct {
	Terms []struct {
		Name        string
		Sign, Value float64
	}
	Noise []struct {
		Name   string
		Kelvin float64 `json:"temperature_k"`
	}
	Received float64 `json:"received_power_dbm"`
	Flux     float64 `json:"power_flux_density_dbw_m2"`
	System   float64 `json:"system_noise_k"`
	CN0      float64 `json:"c_n0_dbhz"`
	EbN0     float64 `json:"eb_n0_db"`
	Margin   float64 `json:"margin_db"`
	CI       float64 `json:"c_i_other_polarization_db"`
}

// askHand asks the program for the budget.
func askHand(t *testing.T) *handAnswer {
	t.Helper()
	code, out, errOut := invoke(t, "budget", "--range-km", "1400", "--elevation-deg", "35", "--format", "json")
	if code != ExitAnswer {
		t.Fatalf("code %d, stderr %s", code, errOut)
	}
	var a struct{ Samples []handAnswer }
	if err := json.Unmarshal([]byte(out), &a); err != nil {
		t.Fatal(err)
	}
	return &a.Samples[0]
}
