package reports

import (
	"context"
	"time"

	"slantwise/downlink"
	"slantwise/orbit"
	"slantwise/orbit/unit"
	"slantwise/station"
	"slantwise/station/pass"
)

// Report is what a whole report is made from.
type Report struct {
	Title    string    // what the report is about, as the scenario's name
	From, To time.Time // the window that was searched
	Horizon  station.ElevationKind
	Notes    []Note // of the index
	Basis    Basis  // of all passes

	// Keys names the passes in the order of the index. Load returns pass i in full;
	// workers call it at the same time, each i once, and drop the pass when its page
	// is written, so that thousands of passes need not be held at once.
	Keys []Key
	Load func(ctx context.Context, i int) (*Pass, error)
}

// Key is what a page's file name is made from.
type Key struct {
	Spacecraft, Station string
	Link                string // transmitter, antenna; empty where a pass has one page alone
	AOS                 time.Time
}

// Pass is one pass of one spacecraft over one station, with the radio link on it
// where there is one.
type Pass struct {
	Spacecraft string
	Site       *station.Site
	Horizon    []Direction // the least elevation that sees the sky, azimuth rising; empty: a bare horizon
	Elements   Elements
	Pass       pass.Pass
	Ground     *Ground // nil: no map
	Surety     *Surety // nil: the position is taken as exact

	// Profile holds the samples, from AOS to LOS. Without a radio only the columns of
	// geometry are filled and the others are nil.
	Profile  *downlink.Profile
	Radio    *Radio // nil without a transmitter or antenna
	Uplinks  []Uplink
	LinkSets []LinkSet
	Notes    []Note // of the page: all that hold for this pass

	Measured []Measured // what was logged during the pass; empty: nothing
}

// Direction is a point of the sky.
type Direction struct{ AzimuthDeg, ElevationDeg float64 }

// Elements tells which orbit a pass was computed from.
type Elements struct {
	// InPlace says what stands in place of an element set, as "ephemeris of ..."; empty for
	// an element set. Then there is no catalogue number, and of an ephemeris no epoch.
	InPlace       string
	NoEpoch       bool
	Name          string
	CatalogNumber int
	Epoch         time.Time
	Age           time.Duration // at AOS, negative when the epoch lies after it
	Source        orbit.Source
}

// Radio is the link of a pass.
type Radio struct {
	Transmitter, Antenna, Mode string
	Frequency                  unit.Frequency
	ModeText                   string       // modulation and coding in words; may be empty
	Modes                      []ModeResult // of all modes that were looked at, the chosen one among them

	Least, Greatest Moment // of Profile.MarginDB; NaN and no time without a margin

	// Volume so far at each sample, in bytes; the last is the pass's.
	AchievableBytes, ModeBytes []float64

	AOS, Culmination, LeastMargin downlink.Budget // LeastMargin counts only where there is a least margin

	// Sights tell how the transmit antenna sees the station at the pass's instants; empty
	// where its attitude tells no direction.
	Sights []Sight

	Path PathInfo

	// ClearSky is the same pass under a clear sky: power, noise, margin, rate and volume
	// beside those of Profile, which are exceeded for a percentage of the year. Nil where
	// Profile is that of a clear sky.
	ClearSky *downlink.Profile
	// Volume so far under the clear sky at each sample, in bytes; nil without ClearSky.
	ClearAchievableBytes, ClearModeBytes []float64
	ClearLeast, ClearGreatest            Moment // of ClearSky.MarginDB, as Least and Greatest

	// Contributors to attenuation and noise along the pass, to be drawn over each other:
	// each a column of Profile. Profile.SunDeg, MoonDeg, SunInBeam and MoonInBeam belong to
	// them. Nil without a path.
	PathParts, NoiseParts []Contributor
	PathTotalDB           []float64 // the sum of PathParts, what is given back taken off

	Plan *Plan // which mode is sent when; nil: none was made

	Mount *Mount // nil: nothing is said of the antenna's mount
}

// PathInfo says what the numbers of the path are.
type PathInfo struct {
	ClearSky        bool
	ExceededPercent float64  // of an average year; without meaning for a clear sky
	Missing         []string // parts that the scenario does not state, as "rain"
	MissingText     string   // a sentence about them with what to do; empty: nothing is missing
}

// Contributor is one of the quantities that add to a whole along a pass.
type Contributor struct {
	Name   string
	Values []float64 // by sample: dB, or K at the input of the first amplifier
	Sign   int       // -1 for what is given back
}

// ModeResult is what a mode brings in a pass, held from AOS to LOS.
type ModeResult struct {
	Name, Text                      string
	Rate                            unit.BitRate
	Closed                          time.Duration // how long its margin is at least what is required
	Bytes                           float64
	LeastMarginDB, GreatestMarginDB float64
	Chosen                          bool
}

// Moment is a value and when it is reached.
type Moment struct {
	Value float64
	Time  time.Time
}

// NoteKind sorts the notes of a report.
type NoteKind int

// Kinds of notes.
const (
	Warning    NoteKind = iota // something that may make the answer wrong
	Assumption                 // what was taken as given or simplified
	Default                    // a key that was left out, and what was taken for it
)

// Note is a sentence that belongs to an answer.
type Note struct {
	Kind   NoteKind
	About  string // what it is about, as "station Skerry Point"; may be empty
	Text   string
	Source string // where it comes from: a standard, a key of the scenario; may be empty
}
