package reports

import (
	"bytes"
	"encoding/csv"
	"encoding/json"
	"math"
	"strings"
	"testing"
)

func skyPass() *Pass {
	s := basicShape()
	s.sky = true
	return fixturePass(s)
}

// The head says what the numbers are, what is missing and when the Sun is in the beam,
// before any number of the link.
func TestHeadSaysWhatThePathIs(t *testing.T) {
	files := rendered(t, goldenReport(), Options{}, stubScript)
	page := string(files["passes/wagtail-1-skerry-point-20260310t104231z.html"])
	facts := strings.Index(page, `<dl class="facts">`)
	for _, want := range []string{"Missing from every number here: cloud.", "exceeded 1 % of an average year", "Sun in the beam: <b><span class=\"nobreak\">10:42:51 to 10:42:55</span> UTC</b>; Moon in the beam: never"} {
		if i := strings.Index(page, want); i < 0 || i > facts {
			t.Errorf("%q stands at byte %d, the facts at %d", want, i, facts)
		}
	}
	index := string(files["index.html"])
	for _, want := range []string{"Missing from the numbers: Skerry Point: cloud.", "the least margin under them is what counts", "Sun in the beam for 4 s", "<small>clear sky "} {
		if !strings.Contains(index, want) {
			t.Errorf("the index lacks %q", want)
		}
	}
}

// The path's columns stand behind all earlier ones, and its parts add to the total and
// the noise.
func TestSkyColumns(t *testing.T) {
	p := skyPass()
	rows, err := csv.NewReader(bytes.NewReader(samplesCSV(p))).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	plain, _, _ := bytes.Cut(samplesCSV(fixturePass(basicShape())), []byte("\n"))
	head := strings.Join(rows[0], ",")
	const want = ",path_attenuation_db,noise_antenna_k,noise_weather_above_the_clear_sky_k,noise_low_noise_amplifier_k,noise_moon_k,sun_off_beam_deg,moon_off_beam_deg," +
		"clear_sky_received_power_dbm,clear_sky_system_noise_k,clear_sky_margin_db,clear_sky_achievable_rate_bps,clear_sky_achievable_bytes,clear_sky_mode_bytes"
	if head != string(plain)+want {
		t.Errorf("the columns are %s", head)
	}
	fig := pathFigure(p)
	for i := range p.Profile.Seconds {
		sum := 0.0
		for _, s := range fig.series[1:] {
			sum += s.values[i] / s.divisor
		}
		if math.Abs(sum-fig.series[0].values[i]) > 1e-12 {
			t.Fatalf("sample %d: the parts of the drawing add to %v, the total is %v", i, sum, fig.series[0].values[i])
		}
	}
}

// A drawing keeps what is small to the table, and tells every line from every other by
// dash or symbol.
func TestManyLinesDifferWithoutColour(t *testing.T) {
	p := skyPass()
	fr := newFrame(p)
	for _, fig := range []timeFigure{pathFigure(p), noiseFigure(p, fr)} {
		seen := map[string]string{}
		for _, s := range fig.series {
			if s.tableOnly {
				continue
			}
			look := s.dash + s.symbol
			if other, is := seen[look]; is {
				t.Errorf("%s: %s looks like %s", fig.id, s.name, other)
			}
			seen[look] = s.name
		}
		table := string(fig.table(p, thinned(p, tableRows)))
		for _, s := range fig.series {
			if !strings.Contains(table, s.name) {
				t.Errorf("%s: the table lacks %s", fig.id, s.name)
			}
		}
	}
	fig := noiseFigure(p, fr)
	if last := fig.series[len(fig.series)-1]; last.name != "Moon" || !last.tableOnly {
		t.Errorf("%s, which is nowhere above 0 K, is drawn: %+v", last.name, last.tableOnly)
	}
	if len(fig.marks) != 1 || fig.marks[0].Label != "Sun" || math.Abs(fig.marks[0].To-fig.marks[0].From-4) > 1e-9 {
		t.Errorf("the marks are %+v, want the Sun for 4 s", fig.marks)
	}
}

// Noise that the Sun lifts is drawn on a logarithmic scale; other noise is not.
func TestNoiseScale(t *testing.T) {
	p := skyPass()
	if fig := noiseFigure(p, newFrame(p)); fig.logFrom != 0 {
		t.Errorf("noise from %v to %v K is on a logarithmic scale", leastOf(p.Profile.SystemNoiseK), maxOf(p.Profile.SystemNoiseK))
	}
	p.Profile.SystemNoiseK[22] = 3000
	if fig := noiseFigure(p, newFrame(p)); fig.logFrom != 1 || !strings.Contains(fig.caption, "logarithmic") {
		t.Errorf("noise up to 3000 K is on a linear scale: %s", fig.caption)
	}
}

func TestHeadOfTheSkyInJSON(t *testing.T) {
	js, err := passJSON(skyPass())
	if err != nil {
		t.Fatal(err)
	}
	var got struct {
		Radio struct {
			Path struct {
				ClearSky        bool     `json:"clear_sky"`
				ExceededPercent float64  `json:"exceeded_percent"`
				Missing         []string `json:"missing"`
			}
			SunInBeam  []intervalJSON `json:"sun_in_beam"`
			MoonInBeam []intervalJSON `json:"moon_in_beam"`
			ClearSky   *struct {
				Least float64 `json:"least_margin_db"`
			} `json:"clear_sky"`
		}
	}
	if err := json.Unmarshal(js, &got); err != nil {
		t.Fatal(err)
	}
	r := got.Radio
	if r.Path.ClearSky || r.Path.ExceededPercent != 1 || len(r.Path.Missing) != 1 || len(r.SunInBeam) != 1 || r.MoonInBeam == nil || r.ClearSky == nil {
		t.Errorf("the head of the sky is %+v", r)
	}
	if p := skyPass(); math.Abs(r.ClearSky.Least-p.Radio.ClearLeast.Value) > 5e-4 { // three decimals are written
		t.Errorf("the least margin under a clear sky is %v, want %v", r.ClearSky.Least, p.Radio.ClearLeast.Value)
	}
}

func TestSkyOfAnotherLengthIsRefused(t *testing.T) {
	for name, spoil := range map[string]func(*Radio){
		"a part of the path":      func(r *Radio) { r.PathParts[1].Values = r.PathParts[1].Values[1:] },
		"a part of the noise":     func(r *Radio) { r.NoiseParts[0].Values = nil },
		"the total":               func(r *Radio) { r.PathTotalDB = nil },
		"the clear sky's margins": func(r *Radio) { r.ClearSky.MarginDB = r.ClearSky.MarginDB[1:] },
	} {
		p := skyPass()
		spoil(p.Radio)
		if err := checkPass(p); err == nil {
			t.Errorf("%s of another length is taken", name)
		}
	}
}
