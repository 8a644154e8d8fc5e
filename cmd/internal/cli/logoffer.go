package cli

import (
	"fmt"
	"math"
	"strconv"
	"strings"
	"time"
	"unicode"

	"slantwise/cmd/internal/scenario"
	"slantwise/downlink"
	"slantwise/downlink/measured"
	"slantwise/orbit/unit"
	"slantwise/station"
)

// offer is a value that a fit offers the scenario.
type offer struct {
	place, key, value, had string
	caution                string
	apply                  func(to *offered) // nil: it changes no margin and no byte
}

// offered are the parts of a link that offers change; copies, so that the scenario stays.
type offered struct {
	tx      downlink.Transmitter
	antenna station.Antenna
	site    station.Site
}

// offers lists what stands out of the fits of a link, beyond their 95 % intervals.
func (f *groupFit) offers() []offer {
	var out []offer
	tx := "spacecraft " + f.spacecraft.Name + ", transmitter " + f.transmitter.Name
	dish := "station " + f.station.Site.Name + ", antenna " + f.antenna.Name
	if f.frequency != nil {
		out = append(out, f.oscillatorOffer(tx))
		for _, p := range f.frequency.Parameters {
			if p.Unit == "s" && math.Abs(p.Value) > p.Span {
				out = append(out, f.latenessOffer(p.Value))
			}
		}
	}
	if f.level != nil {
		p := f.level.Parameters[0]
		if math.Abs(p.Value) > p.Span {
			o := f.levelOffer(tx, p.Value)
			if f.noise == nil && f.levelOf != measured.PowerDBm {
				o.caution = fmt.Sprintf("%s of %s: from %s alone, so that the receiving system's noise may be it in place of what is sent", o.key, tx, f.levelOf)
			}
			out = append(out, o)
		}
		for _, p := range f.level.Parameters {
			if p.Unit == "deg2" && p.Value > p.Span {
				out = append(out, f.aimOffer(dish, p.Value))
			}
		}
	}
	if f.noise != nil {
		for _, p := range f.noise.Parameters {
			if p.Unit == "K" && math.Abs(p.Value) > p.Span {
				if o, ok := f.noiseOffer(dish, p.Value); ok {
					out = append(out, o)
				}
			}
		}
	}
	return out
}

// oscillatorOffer states the transmitter's offset, with its drift where a log of hours tells one.
func (f *groupFit) oscillatorOffer(place string) offer {
	at := f.frequency.Middle
	had := f.transmitter.Oscillator.OffsetAt(at).Hertz()
	now := fixed(had+f.frequency.Parameters[0].Value, 1)
	o := offer{place: place, key: "oscillator", value: fmt.Sprintf("{measured: [{at_utc: %s, offset_hz: %s}]}", utc(at), now), had: fixed(had, 1) + " Hz then"}
	for _, p := range f.frequency.Parameters {
		if p.Unit == measured.HertzPerDay && math.Abs(p.Value) > p.Span {
			before := f.transmitter.Oscillator.OffsetAt(at.Add(24*time.Hour)).Hertz() - had
			o.value = fmt.Sprintf("{offset_hz: %s, drift_hz_per_day: %s, at_utc: %s}", now, fixed(before+p.Value, 2), utc(at))
		}
	}
	return o
}

// latenessOffer adds to how late the spacecraft flies along its orbit; the passes move with it.
func (f *groupFit) latenessOffer(s float64) offer {
	had := f.spacecraft.Shift.Late.Seconds()
	return offer{place: "spacecraft " + f.spacecraft.Name, key: "time_offset_s", value: fixed(had+s, 3), had: fixed(had, 3)}
}

// levelOffer moves what is sent; a level that is lower goes into a loss with a name.
func (f *groupFit) levelOffer(place string, db float64) offer {
	t := f.transmitter
	if t.EIRP != nil {
		return offer{place: place, key: "eirp_dbw", value: fixed(t.EIRP.DBW()+db, 2), had: fixed(t.EIRP.DBW(), 2), apply: func(to *offered) {
			more := t.EIRP.Plus(unit.DB(db))
			to.tx.EIRP = &more
		}}
	}
	if db > 0 {
		return offer{place: place, key: "power_dbw", value: fixed(t.Power.DBW()+db, 2), had: fixed(t.Power.DBW(), 2), apply: func(to *offered) { to.tx.Power = t.Power.Plus(unit.DB(db)) }}
	}
	var had []string
	for _, l := range t.ExtraLosses {
		had = append(had, fmt.Sprintf("{name: %s, loss_db: %g}", plainOrQuoted(l.Name), float64(l.Loss)))
	}
	return offer{place: place, key: "extra_losses", value: "[" + strings.Join(append(had, fmt.Sprintf("{name: as measured, loss_db: %s}", fixed(-db, 2))), ", ") + "]", had: "[" + strings.Join(had, ", ") + "]",
		apply: func(to *offered) {
			to.tx.ExtraLosses = append(append([]downlink.Loss(nil), t.ExtraLosses...), downlink.Loss{Name: "as measured", Loss: unit.DB(-db)})
		}}
}

// aimOffer adds an azimuth error, as it tells across the sky, to the pointing error.
func (f *groupFit) aimOffer(place string, deg2 float64) offer {
	sum, n := 0.0, 0
	for i := range f.points {
		if el := f.points[i].ElevationDeg; el > 0 {
			c := math.Cos(el * math.Pi / 180)
			sum, n = sum+c*c, n+1
		}
	}
	had := f.antenna.PointingRMS.Degrees()
	rms := math.Sqrt(had*had + deg2*sum/float64(max(n, 1)))
	return offer{place: place, key: "pointing_error_deg", value: fixed(rms, 3), had: fixed(had, 3), apply: func(to *offered) { to.antenna.PointingRMS = unit.Angle(rms) * unit.Degree }}
}

// noiseOffer moves the noise of the receiving system; ok is false where the scenario has no
// single figure to move.
func (f *groupFit) noiseOffer(place string, addedK float64) (o offer, ok bool) {
	a := f.antenna
	if a.GOverT != nil {
		return f.betterGOverT(place, addedK)
	}
	n := a.Noise
	switch {
	case n == nil:
		return o, false
	case n.SystemTemperature != nil && n.SystemTemperature.IsConstant():
		had := n.SystemTemperature.Value(0)
		return offer{place: place, key: "noise.system_temperature_k", value: fixed(had+addedK, 0), had: fixed(had, 0), apply: func(to *offered) {
			own := *n
			own.SystemTemperature = station.Constant(had + addedK)
			to.antenna.Noise = &own
		}}, had+addedK > 0
	case len(n.Chain) > 0:
		first := n.Chain[0]
		had := 0.0
		switch {
		case first.NoiseTemperature != nil:
			had = first.NoiseTemperature.Kelvins()
		case first.NoiseFigure != nil: // against 290 K
			had = 290 * (math.Pow(10, float64(*first.NoiseFigure)/10) - 1)
		default:
			return o, false
		}
		return offer{place: place, key: fmt.Sprintf("noise.receiver_chain, %s, noise_temperature_k", first.Name), value: fixed(had+addedK, 0), had: fixed(had, 0), apply: func(to *offered) {
			own := *n
			own.Chain = append([]station.Stage(nil), n.Chain...)
			k := unit.Temperature(had + addedK)
			own.Chain[0].NoiseTemperature, own.Chain[0].NoiseFigure = &k, nil
			to.antenna.Noise = &own
		}}, had+addedK >= 0
	}
	return o, false
}

// betterGOverT moves a measured G/T by what the noise does in the middle of the samples.
func (f *groupFit) betterGOverT(place string, addedK float64) (o offer, ok bool) {
	usual := f.usualNoise()
	if !f.antenna.GOverT.IsConstant() || !(usual+addedK > 0) {
		return o, false
	}
	had := f.antenna.GOverT.Value(0)
	now := had - 10*math.Log10((usual+addedK)/usual)
	return offer{place: place, key: "g_over_t_db_k", value: fixed(now, 2), had: fixed(had, 2), apply: func(to *offered) { to.antenna.GOverT = station.Constant(now) }}, true
}

// offer of a skyline, for each link of the station.
func (h *skylineFit) offer() (offer, error) {
	m, text, kept, err := h.mask()
	if err != nil {
		return offer{}, err
	}
	site := &h.groups[0].station.Site
	had := "none"
	if site.Mask != nil {
		had = fmt.Sprintf("%d points", len(site.Mask.Points()))
	}
	if kept > 0 {
		had += fmt.Sprintf("; around %d of %d directions nothing tells more", kept, int(math.Round(360/h.seen.Step.Degrees())))
	}
	return offer{place: "station " + site.Name, key: "horizon_mask", value: text + ", horizon_mask_kind: apparent", had: had, apply: func(to *offered) { to.site.Mask = m }}, nil
}

// effect is what a link brings: the middle of the margin over the required one on the log's samples, and the
// bytes of the window's passes.
type effect struct{ marginDB, bytes float64 }

// effectOf works out what the link brings with offers taken; none for the scenario as it is.
func (f *groupFit) effectOf(s *scenario.Scenario, taken []offer) (effect, error) {
	to := offered{tx: *f.transmitter, antenna: *f.antenna, site: f.station.Site}
	for _, o := range taken {
		o.apply(&to)
	}
	c := *f.chosenLink
	st := *f.station
	st.Site, st.Antennas = to.site, []station.Antenna{to.antenna}
	c.transmitter, c.antenna, c.station = &to.tx, &to.antenna, &st
	own := *s
	own.Path.ClearSky = true
	if err := c.prepare(newSkies(&own)); err != nil {
		return effect{}, err
	}
	out := effect{bytes: none}
	var err error
	if out.marginDB, err = f.middleMargin(&c); err != nil || len(to.tx.Modes) == 0 {
		return out, err
	}
	free := *s
	free.Licences = nil // a power that stands for a measured level is not what the licence is about
	out.bytes, _, err = bytesOfWindow(&free, f.spacecraft, &to.tx, &st)
	return out, err
}

// middleMargin is the median margin over the required one on the samples.
func (f *groupFit) middleMargin(c *chosenLink) (float64, error) {
	first, last := f.points[0].At, f.points[len(f.points)-1].At
	eph, err := f.scenario.EphemerisAt(f.spacecraft, first, last)
	if err != nil {
		return none, err
	}
	var all []float64
	step := max(1, len(f.points)/mostMargins)
	for i := 0; i < len(f.points); i += step {
		if p := &f.points[i]; p.ElevationDeg > 0 {
			g, _ := c.link.GeometryOf(p.At, eph.StateAt(eph.Seconds(p.At)))
			b, err := c.link.At(g)
			if err != nil {
				return none, err
			}
			if !math.IsNaN(float64(b.MarginOver)) {
				all = append(all, float64(b.MarginOver))
			}
		}
	}
	return middleOf(all), nil
}

// mostMargins is on how many samples of a log the margin is looked at.
const mostMargins = 500

// plainOrQuoted is a name as a scenario in YAML takes it.
func plainOrQuoted(name string) string {
	if strings.IndexFunc(name, func(r rune) bool { return !unicode.IsLetter(r) && r != ' ' && r != '-' }) < 0 && name != "" && unicode.IsLetter([]rune(name)[0]) {
		return name
	}
	return strconv.Quote(name)
}
