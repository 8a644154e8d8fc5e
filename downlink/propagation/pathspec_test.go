package propagation

import (
	"errors"
	"math"
	"slices"
	"strings"
	"testing"

	"slantwise/orbit/unit"
)

func TestPathSaysWhatIsMissing(t *testing.T) {
	p, err := NewPath(PathSpec{Frequency: 26.25 * unit.Gigahertz, Exceedance: 1 * Percent, Climate: Climate{Latitude: 58 * unit.Degree, Height: 40 * unit.Metre}})
	if err != nil {
		t.Fatal(err)
	}
	var text strings.Builder
	for _, n := range p.Notes() {
		text.WriteString(n.Kind.String() + ": " + n.Text + "\n")
	}
	for _, want := range []string{
		"default: no atmosphere is stated: P.835-6 high latitude, mean of summer and winter stands in",
		"warning: rain is missing: neither the rain rate exceeded for 0.01 % nor monthly temperatures and rainfalls are stated",
		"warning: cloud is missing: no cloud liquid water is stated",
		"warning: scintillation is missing: the antenna's diameter is not known",
		"default: no integrated water vapour by percentage is stated",
		"a curve of equal probability, not a storm",
	} {
		if !strings.Contains(text.String(), want) {
			t.Errorf("no note %q in\n%s", want, text.String())
		}
	}
	s, err := p.At(30 * unit.Degree)
	if err != nil || s.Rain != 0 || s.Cloud != 0 || s.Scintillation != 0 || !(s.Gas > 0) || s.Total != s.Gas {
		t.Errorf("got %+v, %v, want gas alone", s, err)
	}
}

func TestPathFillsRainByItsRules(t *testing.T) {
	c := climateAt(52, 0)
	c.Rate001, c.RainHeight = nil, nil
	c.Months = &[12]Month{}
	for i := range c.Months {
		c.Months[i] = Month{Temperature: 284, Rainfall: 60}
	}
	p, err := NewPath(PathSpec{Frequency: 26.25 * unit.Gigahertz, Exceedance: 0.1 * Percent, Climate: c, Aperture: dish(2)})
	if err != nil {
		t.Fatal(err)
	}
	s, err := p.At(30 * unit.Degree)
	if err != nil || !(s.Rain > 1) {
		t.Errorf("got %v dB of rain, %v", s.Rain, err)
	}
	found := 0
	for _, n := range p.Notes() {
		if strings.Contains(n.Text, "by P.837-7 Annex 1 from the months") || strings.Contains(n.Text, "no rain height is stated: 2.825 km") {
			found++
		}
	}
	if found != 2 {
		t.Errorf("the rules for rain rate and rain height are not both told: %v", p.Notes())
	}
}

func TestPathRefuses(t *testing.T) {
	good := PathSpec{Frequency: 8.2 * unit.Gigahertz, Exceedance: 1 * Percent, Climate: climateAt(50, 0), Aperture: dish(3)}
	for name, change := range map[string]func(s *PathSpec){
		"frequency 0":           func(s *PathSpec) { s.Frequency = 0 },
		"frequency NaN":         func(s *PathSpec) { s.Frequency = unit.Frequency(math.NaN()) },
		"percentage 0":          func(s *PathSpec) { s.Exceedance = 0 },
		"percentage over 50":    func(s *PathSpec) { s.Exceedance = 60 * Percent },
		"latitude 91":           func(s *PathSpec) { s.Climate.Latitude = 91 * unit.Degree },
		"station in the sky":    func(s *PathSpec) { s.Climate.Height = 20 * unit.Kilometre },
		"satellite in the air":  func(s *PathSpec) { s.SatelliteHeight = 50 * unit.Kilometre },
		"no diameter":           func(s *PathSpec) { s.Aperture = &Aperture{Efficiency: 0.6} },
		"efficiency in percent": func(s *PathSpec) { s.Aperture = &Aperture{3, 60} },
	} {
		s := good
		change(&s)
		var re *unit.RangeError
		if _, err := NewPath(s); !errors.As(err, &re) {
			t.Errorf("%s: got %v, want a *RangeError", name, err)
		}
	}
	s := good
	s.Editions = Editions{P618: 12, P676: 13, P840: 9}
	if _, err := NewPath(s); err == nil {
		t.Error("edition P.618-12: no error")
	}
	// 0.5 % needs gas and cloud at 5 %, which this climate knows only at 1 %.
	s = good
	var err error
	if s.Climate.CloudWater, err = NewCurve("cloud", "kg/m2", Exceeded{1 * Percent, 1}); err != nil {
		t.Fatal(err)
	}
	if _, err := NewPath(s); err == nil || !strings.Contains(err.Error(), "give the value at this percentage too") {
		t.Errorf("cloud known at 1 %% only: got %v", err)
	}
	p, err := NewPath(good)
	if err != nil {
		t.Fatal(err)
	}
	var blocked *BlockedRayError
	if _, err := p.At(-2 * unit.Degree); !errors.As(err, &blocked) || blocked.Least != p.Lowest() {
		t.Errorf("under the horizon: got %v, want a *BlockedRayError from %.3f deg", err, p.Lowest().Degrees())
	}
	var re *unit.RangeError
	for _, el := range []unit.Angle{91 * unit.Degree, unit.Angle(math.NaN())} {
		if _, err := p.At(el); !errors.As(err, &re) {
			t.Errorf("elevation %v: got %v, want a *RangeError", el.Degrees(), err)
		}
	}
}

func TestEditionsByName(t *testing.T) {
	e, err := Newest.With("P.618-13")
	if err == nil {
		e, err = e.With("676-12")
	}
	if want := (Editions{13, 12, 9}); err != nil || e != want {
		t.Errorf("got %v, %v, want %v", e, err, want)
	}
	if _, err := Newest.With("618-12"); err == nil || !strings.Contains(err.Error(), "give one of 618-14, 618-13, ") {
		t.Errorf("618-12: got %v", err)
	}
}

// The current edition of a Recommendation that has one is no fault; two editions of one
// are.
func TestEditionsNamed(t *testing.T) {
	e, err := EditionsNamed([]string{"838-3", "676-12", "P.676-12", "837-7"})
	if want := (Editions{14, 12, 9}); err != nil || e != want {
		t.Errorf("got %v, %v, want %v", e, err, want)
	}
	for _, bad := range [][]string{{"676-12", "676-13"}, {"838-2"}, {""}} {
		if _, err := EditionsNamed(bad); err == nil {
			t.Errorf("%q: no error", bad)
		}
	}
	if got := EditionsWithoutPart([]string{"618-13", "840-8", "838-3"}, "cloud"); len(got) != 1 || got[0] != "618-13" {
		t.Errorf("without part in cloud: %q", got)
	}
	known := BatchModels()
	for _, models := range editionModels {
		for _, m := range models {
			if !slices.Contains(known, m) {
				t.Errorf("%q is no model of a batch", m)
			}
		}
	}
}

// Cross-polarisation of a path is the method's own at its rain.
func TestPathCrossPolar(t *testing.T) {
	p, err := NewPath(kaPath())
	if err != nil {
		t.Fatal(err)
	}
	s, err := p.At(30 * unit.Degree)
	if err != nil {
		t.Fatal(err)
	}
	got, _, err := p.CrossPolar(30 * unit.Degree)
	if err != nil {
		t.Fatal(err)
	}
	want, _, err := CrossPolarDiscrimination(26.25*unit.Gigahertz, 30*unit.Degree, 45*unit.Degree, 1*Percent, s.Rain)
	if err != nil || got != want {
		t.Errorf("got %v dB, want %v dB, %v", got, want, err)
	}
}
