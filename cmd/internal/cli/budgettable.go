package cli

import (
	"bufio"
	"fmt"
	"math"
	"strings"

	"slantwise/downlink"
)

// writeBudgetTable writes one budget as on paper, or several a line each.
func writeBudgetTable(env *Env, r *budgetResult) error {
	head := bufio.NewWriter(env.Out)
	r.writeHead(head)
	if err := head.Flush(); err != nil {
		return err
	}
	width := env.outWidth()
	var err error
	if r.pass == nil && len(r.samples) == 1 {
		err = r.writePaper(env, width, r.samples[0])
	} else {
		err = r.writeLines(env, width)
	}
	if err != nil {
		return err
	}
	return r.writeNotes(env)
}

func (r *budgetResult) writeHead(w *bufio.Writer) {
	line := func(format string, args ...any) { fmt.Fprintln(w, printable(fmt.Sprintf(format, args...))) }
	from, to := r.spacecraft.Name, r.station.Site.Name
	if r.uplink != nil {
		from, to = to, from
	}
	line("%s to %s: %s at %g MHz, antenna %s", from, to, r.transmitter.Name, r.transmitter.Frequency.Megahertz(), r.antenna.Name)
	if m := r.link.Mode(); m != nil {
		line("mode %s: %s, coding %s, %s of information", m.Name, m.Modulation, m.Coding, rateText(float64(m.InformationRate)))
	}
	if r.flown != nil {
		line("%s", r.flown)
	}
	for _, l := range r.pathHead() {
		line("%s", l)
	}
	if p := r.pass; p != nil {
		line("pass from %s to %s, culmination %.2f deg at %s", utc(p.AOS), utc(p.LOS), p.MaxElevation.Degrees(), utc(p.Culmination))
		if r.surety != nil {
			for _, l := range r.surety.lines() {
				line("%s", l)
			}
		}
		r.writeVolume(line)
	}
	fmt.Fprintln(w)
}

func (r *budgetResult) writeVolume(line func(string, ...any)) {
	for _, c := range r.sunInBeam {
		line("the Sun in the beam from %s to %s", utc(c.From), utc(c.To))
	}
	closes := "closes"
	if r.uplink != nil {
		closes = "commanding works"
	}
	for _, c := range r.volume.Closes {
		line("%s from %s to %s", closes, utc(c.From), utc(c.To))
	}
	if m := r.link.Mode(); m != nil {
		if len(r.volume.Closes) == 0 {
			line("%s at no time of the pass", closes)
		}
		line("volume %s in mode %s, %s at the achievable rate", bytesText(r.volume.ModeBytes), m.Name, bytesText(r.volume.AchievableBytes))
		if v := r.clearVolume; v != nil {
			line("under a clear sky %s and %s", bytesText(v.ModeBytes), bytesText(v.AchievableBytes))
		}
	}
}

// writePaper writes terms with the sum so far, then noise, then results.
func (r *budgetResult) writePaper(env *Env, width int, b *downlink.Budget) error {
	if _, err := fmt.Fprintf(env.Out, "%s\n\n", r.placeText(b)); err != nil {
		return err
	}
	var rows [][]string
	sum := 0.0
	for _, t := range b.Terms {
		v := float64(t.Sign) * t.Value
		sum += v
		rows = append(rows, []string{t.Name, signed(v), t.Unit, fixed(sum, 2), t.Source})
	}
	if err := writeTable(env.Out, width, []column{textColumn("term"), numberColumn("value"), textColumn("unit"), numberColumn("sum dBm"), textColumn("from")}, rows); err != nil {
		return err
	}
	rows = nil
	for _, p := range b.NoiseParts {
		rows = append(rows, []string{p.Name, fixed(p.Temperature.Kelvins(), 3), "K", p.Source})
	}
	rows = append(rows, []string{"system noise", fixed(b.SystemNoise.Kelvins(), 3), "K", "sum, at the input of the " + r.front()})
	if _, err := fmt.Fprintln(env.Out); err != nil {
		return err
	}
	if err := writeTable(env.Out, width, []column{textColumn("noise"), numberColumn("value"), textColumn("unit"), textColumn("from")}, rows); err != nil {
		return err
	}
	if _, err := fmt.Fprintln(env.Out); err != nil {
		return err
	}
	return writeTable(env.Out, width, []column{textColumn("result"), numberColumn("value"), textColumn("unit"), textColumn("from")}, r.results(b))
}

// placeText says when and where a budget holds.
func (r *budgetResult) placeText(b *downlink.Budget) string {
	var parts []string
	add := func(name string, v float64, decimals int, u string) {
		if s := fixed(v, decimals); s != "" {
			parts = append(parts, name+" "+s+" "+u)
		}
	}
	if !b.Time.IsZero() {
		parts = append(parts, utc(b.Time))
	}
	add("elevation", b.Elevation.Degrees(), 3, "deg")
	add("azimuth", b.Azimuth.Degrees(), 3, "deg")
	add("range", b.Range.Kilometres(), 3, "km")
	add("off boresight", b.OffBoresight.Degrees(), 3, "deg")
	if off := b.BodyOffZ.Degrees(); off != b.OffBoresight.Degrees() { // otherwise it is said already
		add("around boresight", b.AroundBoresight.Degrees(), 3, "deg")
		add("off body z", off, 3, "deg")
		add("around body z", b.BodyAroundZ.Degrees(), 3, "deg")
	}
	add("Sun off the beam", b.Sun.Degrees(), 2, "deg")
	add("Moon off the beam", b.Moon.Degrees(), 2, "deg")
	return strings.Join(parts, ", ")
}

// results lists what follows from the terms and the noise; rows whose number does
// not exist are left out.
func (r *budgetResult) results(b *downlink.Budget) [][]string {
	t := r.transmitter
	var rows [][]string
	add := func(name string, v float64, decimals int, u, from string) {
		if s := fixed(v, decimals); s != "" {
			rows = append(rows, []string{name, s, u, from})
		}
	}
	add("received power", b.ReceivedPowerDBm, 2, "dBm", "sum of the terms, at the input of the "+r.front())
	add("power flux density", b.PowerFluxDensity, 2, "dB(W/m²)", "whole carrier in free space at the "+r.farEnd())
	add("G/T", float64(b.GOverT), 2, "dB/K", "gain less "+r.frontLoss()+" loss over the system noise")
	add("C/N0", float64(b.CN0), 2, "dBHz", "received power over Boltzmann's constant and the system noise")
	add("C/I, other polarisation", float64(b.CI), 2, "dB", "discrimination not exceeded for the path's percentage, of an equal carrier")
	add("data rate", ifAny(float64(b.DataRate)), 0, "bit/s", "information bits")
	add("Eb/N0", float64(b.EbN0), 2, "dB", "C/N0 over the data rate")
	if r.link.Mode() != nil {
		add("implementation loss", float64(t.ImplementationLoss), 2, "dB", "scenario")
		add("required Eb/N0", float64(b.RequiredEbN0), 2, "dB", r.link.Mode().RequiredSource)
	}
	add("margin", float64(b.Margin), 2, "dB", "Eb/N0 less implementation loss and required Eb/N0")
	add("required margin", float64(t.RequiredMargin), 2, "dB", "scenario")
	add("margin over required", float64(b.MarginOver), 2, "dB", "margin less required margin")
	add("achievable rate", float64(b.AchievableRate), 0, "bit/s", limitText(b.AchievableLimit))
	add("orbit's error along the track", b.OrbitAlong.Degrees(), 4, "deg", "direction, one standard deviation")
	add("orbit's error of the direction", b.OrbitTotal.Degrees(), 4, "deg", "both axes together, root mean square")
	add("Doppler by the orbit's error", b.DopplerSpread.Hertz(), 1, "Hz", "one standard deviation")
	add("pointing error kept to", b.SureError.Degrees(), 4, "deg", fmt.Sprintf("orbit and antenna, with probability %g", downlink.SureProbability))
	return rows
}

// ifAny returns NaN for 0.
func ifAny(v float64) float64 {
	if v == 0 {
		return math.NaN()
	}
	return v
}

func limitText(l downlink.RateLimit) string {
	return map[downlink.RateLimit]string{
		downlink.LimitPower:       "at the required margin; held by the power received",
		downlink.LimitBandwidth:   "held by the allotted bandwidth",
		downlink.LimitTransmitter: "held by the transmitter's highest rate",
		downlink.LimitUnusable:    "outside the antenna's main lobe",
	}[l]
}

// writeLines writes a line a sample.
func (r *budgetResult) writeLines(env *Env, width int) error {
	columns := []column{textColumn("utc")}
	for _, h := range []string{"elevation deg", "range km", "received dBm", "noise K", "C/N0 dBHz", "Eb/N0 dB", "margin dB", "over required dB", "achievable bit/s"} {
		columns = append(columns, numberColumn(h))
	}
	var rows [][]string
	for _, b := range r.samples {
		rows = append(rows, []string{utc(b.Time), fixed(b.Elevation.Degrees(), 2), fixed(b.Range.Kilometres(), 1), fixed(b.ReceivedPowerDBm, 2), fixed(b.SystemNoise.Kelvins(), 1),
			fixed(float64(b.CN0), 2), fixed(float64(b.EbN0), 2), fixed(float64(b.Margin), 2), fixed(float64(b.MarginOver), 2), fixed(float64(b.AchievableRate), 0)})
	}
	return writeTable(env.Out, width, columns, rows)
}

// writeNotes writes assumptions, defaults and warnings, and what is doubtful at the
// samples shown.
func (r *budgetResult) writeNotes(env *Env) error {
	w := bufio.NewWriter(env.Out)
	fmt.Fprintln(w)
	for _, n := range r.notes {
		fmt.Fprintf(w, "%s: %s\n", n.Kind, printable(n.Text))
	}
	if rad, ok := r.radiation(); ok {
		for _, text := range append(radiationText(&rad), radiationCaution) {
			fmt.Fprintf(w, "radiation: %s\n", strings.TrimPrefix(text, "Radiation: "))
		}
	}
	doubtful := 0
	for _, b := range r.samples {
		for _, c := range b.Cautions {
			if r.pass == nil {
				fmt.Fprintf(w, "caution: %s\n", printable(c))
			}
		}
		if len(b.Cautions) > 0 {
			doubtful++
		}
	}
	if r.pass != nil && doubtful > 0 {
		fmt.Fprintf(w, "caution: %d of %d samples are doubtful; budget --at UTC says why\n", doubtful, len(r.samples))
	}
	return w.Flush()
}

// signed returns a value with two decimals and its sign.
func signed(v float64) string {
	s := fixed(v, 2)
	if v >= 0 && s != "" {
		s = "+" + s
	}
	return s
}

// rateText writes a bit rate with a unit that keeps it short.
func rateText(bps float64) string { return scaled(bps, "bit/s") }

// bytesText writes a number of bytes likewise.
func bytesText(n float64) string { return scaled(n, "B") }

// scaled writes a number with four digits and a decimal prefix.
func scaled(v float64, u string) string {
	if math.IsNaN(v) {
		return "no " + u
	}
	for _, p := range []struct {
		from   float64
		prefix string
	}{{1e12, "T"}, {1e9, "G"}, {1e6, "M"}, {1e3, "k"}} {
		if v >= p.from {
			return fmt.Sprintf("%.4g %s%s", v/p.from, p.prefix, u)
		}
	}
	return fmt.Sprintf("%.4g %s", v, u)
}
