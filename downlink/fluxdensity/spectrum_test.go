package fluxdensity_test

import (
	"math"
	"math/cmplx"
	"math/rand/v2"
	"strings"
	"testing"
	"time"

	"slantwise/downlink"
	"slantwise/downlink/fluxdensity"
	"slantwise/downlink/modem"
	"slantwise/orbit"
	"slantwise/orbit/unit"
	"slantwise/station"
)

func share(t *testing.T, modulation string, shaping float64) float64 {
	t.Helper()
	m := &modem.Resolved{Mode: modem.Mode{Modulation: modulation}, Symbols: 1e6, Shaping: shaping, ShapingGiven: shaping > 0}
	e := fluxdensity.FromTransmitter(&downlink.Transmitter{Frequency: 8200 * unit.Megahertz}, m)
	return e.Spectrum.Share(4000) * 1e6 / 4000 // peak density times the symbol rate, over the power
}

// TestLinearPeak draws QPSK symbols, shapes them with rectangular pulses, and takes
// the density at the carrier from the spectrum of the samples.
func TestLinearPeak(t *testing.T) {
	r := rand.New(rand.NewPCG(1, 2))
	next := func() []float64 {
		p := math.Pi / 2 * float64(r.IntN(4))
		return []float64{p, p, p, p, p, p, p, p}
	}
	near(t, "qpsk", share(t, "qpsk", 0), densityAtCarrier(next), 0.05)
}

// TestMinimumShiftPeaks simulates MSK and GMSK. Of MSK the spectrum is known, which is
// integrated besides: its whole power is 1.
func TestMinimumShiftPeaks(t *testing.T) {
	power := 0.0
	for f := -400.0; f < 400; f += 1e-3 {
		x := math.Cos(2*math.Pi*f) / (1 - 16*f*f)
		if math.Abs(math.Abs(f)-0.25) < 1e-6 {
			x = math.Pi / 4
		}
		power += 16 / (math.Pi * math.Pi) * x * x * 1e-3
	}
	near(t, "power of the MSK spectrum", power, 1, 1e-3)
	msk := densityAtCarrier(shifted(0))
	near(t, "msk", share(t, "msk", 0), msk, 0.08)
	for _, bt := range []float64{0.25, 0.3, 0.5} {
		if d := densityAtCarrier(shifted(bt)); d > share(t, "gmsk", 0) || d < msk {
			t.Errorf("GMSK of %g: simulated %.3f, between MSK %.3f and the bound %.3f", bt, d, msk, share(t, "gmsk", 0))
		}
	}
}

const perSymbol = 8

// shifted returns a source of the phases of minimum-shift keying, eight samples a
// bit, with Gaussian shaping of a bandwidth-time product (0: none).
func shifted(bt float64) func() []float64 {
	r := rand.New(rand.NewPCG(9, uint64(bt*100)))
	var pulse [9][perSymbol]float64 // share of a bit in the phase of the bits around it
	for i := range pulse {
		for k := range perSymbol {
			x := float64(i-4) + (float64(k)+0.5)/perSymbol - 0.5
			pulse[i][k] = gaussianPulse(x, bt) / perSymbol
		}
	}
	var bits [9]float64
	phase := 0.0
	return func() []float64 {
		copy(bits[:], bits[1:])
		bits[8] = float64(2*r.IntN(2) - 1)
		out := make([]float64, perSymbol)
		for k := range out {
			for i := range bits {
				phase += math.Pi / 2 * bits[8-i] * pulse[i][k]
			}
			out[k] = phase
		}
		return out
	}
}

func gaussianPulse(x, bt float64) float64 {
	if bt == 0 {
		if math.Abs(x) < 0.5 {
			return 1
		}
		return 0
	}
	s := math.Sqrt(math.Ln2) / (2 * math.Pi * bt) * math.Sqrt2
	return (math.Erf((x+0.5)/s) - math.Erf((x-0.5)/s)) / 2
}

// densityAtCarrier averages the power of windowed stretches at zero frequency, times
// the symbol rate and over the whole power.
func densityAtCarrier(next func() []float64) float64 {
	const stretches, symbols = 4000, 64
	sum := 0.0
	for range stretches {
		x, weight := complex128(0), 0.0
		for i := range symbols {
			for k, p := range next() {
				w := math.Sin(math.Pi * (float64(i*perSymbol+k) + 0.5) / (symbols * perSymbol))
				x += cmplx.Rect(w, p)
				weight += w * w
			}
		}
		sum += real(x)*real(x)/weight + imag(x)*imag(x)/weight
	}
	return sum / stretches / perSymbol
}

func TestSpectrumShare(t *testing.T) {
	for _, c := range []struct {
		name string
		s    fluxdensity.Spectrum
		want float64
	}{
		{"unknown: all power", fluxdensity.Spectrum{}, 1},
		{"slower than the reference: all power", fluxdensity.Spectrum{Kind: fluxdensity.LinearSpectrum, SymbolRate: 1200}, 1},
		{"a thousand times faster", fluxdensity.Spectrum{Kind: fluxdensity.LinearSpectrum, SymbolRate: 4e6}, 1e-3},
		{"stated", fluxdensity.Spectrum{Kind: fluxdensity.StatedSpectrum, PeakPerHz: -60}, 4e-3},
	} {
		near(t, c.name, c.s.Share(4000), c.want, 1e-15)
	}
	if got := share(t, "2fsk", 0) * 4000 / 1e6; got != 1 {
		t.Errorf("the spectrum of 2fsk is not modelled: got a share of %g, want all", got)
	}
}

func TestBadInput(t *testing.T) {
	nan := math.NaN()
	good := xBand(isotropic(0), downlink.AttitudeNadir)
	bad := func(change func(*fluxdensity.Emission)) []fluxdensity.Emission {
		e := good
		change(&e)
		return []fluxdensity.Emission{e}
	}
	for _, c := range []struct {
		name string
		e    []fluxdensity.Emission
		o    fluxdensity.Orbit
		want string
	}{
		{"frequency", bad(func(e *fluxdensity.Emission) { e.Centre = 0 }), circular(500), `emission "X": frequency: 0 MHz is not allowed`},
		{"power", bad(func(e *fluxdensity.Emission) { e.Power = unit.LevelDBW(nan) }), circular(500), `emission "X": power: NaN dBW is not allowed`},
		{"symbol rate", bad(func(e *fluxdensity.Emission) { e.Spectrum.SymbolRate = 0 }), circular(500), `emission "X": symbol rate: 0 baud`},
		{"width", bad(func(e *fluxdensity.Emission) { e.Width = -1 }), circular(500), `emission "X": occupied bandwidth`},
		{"stated density", bad(func(e *fluxdensity.Emission) {
			e.Spectrum = fluxdensity.Spectrum{Kind: fluxdensity.StatedSpectrum, PeakPerHz: 3}
		}), circular(500), `emission "X": peak density: 3 dB(1/Hz)`},
		{"pattern", bad(func(e *fluxdensity.Emission) { e.Pattern = table(0, 1) }), circular(500), `emission "X": the pattern's table needs two points`},
		{"none", nil, circular(500), "there is no emission"},
		{"perigee", []fluxdensity.Emission{good}, fluxdensity.Orbit{Perigee: 6e6, Apogee: 7e6}, "perigee from the Earth's centre: 6000 km"},
		{"apogee", []fluxdensity.Emission{good}, fluxdensity.Orbit{Perigee: 7e6, Apogee: 6.9e6}, "apogee from the Earth's centre: 6900 km"},
		{"elevation", []fluxdensity.Emission{good}, fluxdensity.Orbit{Perigee: 7e6, Apogee: 7e6, LeastElevation: -1}, "least elevation"},
	} {
		if _, err := fluxdensity.Worst(c.o, c.e); err == nil || !strings.HasPrefix(err.Error(), c.want) {
			t.Errorf("%s: got %v, want %s", c.name, err, c.want)
		}
	}
	at := []time.Time{time.Unix(0, 0)}
	for _, tr := range []fluxdensity.Track{{}, {Times: at}, {Times: at, Positions: []orbit.Vec3{{X: 6e6}}}, {Times: at, Positions: []orbit.Vec3{{X: nan}}}} {
		if _, err := fluxdensity.Along(tr, []fluxdensity.Emission{good}); err == nil {
			t.Errorf("track %+v was accepted", tr)
		}
	}
	held := xBand(cosine(3, 2, nil), downlink.AttitudeStation)
	if _, err := fluxdensity.Along(fluxdensity.Track{Times: at, Positions: []orbit.Vec3{{X: 7e6}}}, []fluxdensity.Emission{held}); err == nil {
		t.Error("an antenna held to no station was accepted")
	}
}

// A pass of twelve minutes at 10 s, X band: the ground and the geostationary orbit.
func BenchmarkAlong(b *testing.B) {
	site := station.Site{Latitude: 60 * unit.Degree}
	frame := site.Frame()
	track := fluxdensity.Track{Station: &frame.Origin}
	for i := range 73 {
		s, c := math.Sincos((40 + float64(i)/1.6) * math.Pi / 180)
		track.Times = append(track.Times, time.Unix(int64(10*i), 0))
		track.Positions = append(track.Positions, orbit.Vec3{X: 6.9e6 * c, Z: 6.9e6 * s})
	}
	back := unit.DB(-15)
	for _, a := range []downlink.Attitude{downlink.AttitudeNadir, downlink.AttitudeStation} {
		b.Run(a.String(), func(b *testing.B) {
			e := []fluxdensity.Emission{xBand(cosine(8, 3, &back), a)}
			b.ReportAllocs()
			for b.Loop() {
				if _, err := fluxdensity.Along(track, e); err != nil {
					b.Fatal(err)
				}
			}
		})
	}
}

func BenchmarkWorst(b *testing.B) {
	back := unit.DB(-15)
	for _, a := range []downlink.Attitude{downlink.AttitudeNadir, downlink.AttitudeStation} {
		b.Run(a.String(), func(b *testing.B) {
			e := []fluxdensity.Emission{xBand(cosine(8, 3, &back), a)}
			for b.Loop() {
				if _, err := fluxdensity.Worst(circular(500), e); err != nil {
					b.Fatal(err)
				}
			}
		})
	}
}
