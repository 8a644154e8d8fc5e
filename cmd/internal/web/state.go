package web

import (
	"context"
	"html/template"
	"math"
	"strconv"
	"time"
)

// Model answers for one reading of the scenario. It is safe for use by many goroutines.
type Model interface {
	At(t time.Time) (*State, error)                           // what is at an instant
	Contacts() []Contact                                      // of the whole window, by AOS
	Detail(ctx context.Context, id string) (*Detail, error)   // nil without an error: no such contact
	WhatIf(ctx context.Context, q *Question) (*Answer, error) // nil without an error: no such contact
	Scenario(ctx context.Context, w *Wish) (*File, error)     // nil without an error: no such contact
	Foot() template.HTML                                      // what the numbers stand on, for the page
}

// Number is a number that may not exist: NaN and infinities are null in JSON.
type Number float64

// MarshalJSON writes the number with the digits that it needs, or null.
func (n Number) MarshalJSON() ([]byte, error) {
	if v := float64(n); !math.IsNaN(v) && !math.IsInf(v, 0) {
		return strconv.AppendFloat(nil, v, 'f', 4, 64), nil
	}
	return []byte("null"), nil
}

// State is what is at an instant. The lists are never nil.
type State struct {
	Scenario   string    `json:"scenario"`
	WindowFrom time.Time `json:"window_start_utc"`
	WindowTo   time.Time `json:"window_end_utc"`
	Spacecraft []Craft   `json:"spacecraft"`
	Stations   []Place   `json:"stations"`
	Next       []Contact `json:"next"` // under way and to come
	Signals    []Signal  `json:"signals"`
	CanSave    bool      `json:"can_save"` // there is a folder to write a scenario into

	SunLatitudeDeg  Number `json:"sun_latitude_deg"` // of the point under the Sun, geodetic
	SunLongitudeDeg Number `json:"sun_longitude_deg"`
}

// Craft is a spacecraft over the Earth; the figures are null where it has no state.
type Craft struct {
	Name         string    `json:"name"`
	LatitudeDeg  Number    `json:"latitude_deg"` // of the point under it, geodetic
	LongitudeDeg Number    `json:"longitude_deg"`
	RadiusKm     Number    `json:"radius_km"` // from the Earth's centre
	Light        string    `json:"light"`     // empty where it has no state
	Epoch        time.Time `json:"element_epoch_utc"`
	AgeDays      Number    `json:"element_age_days"`
}

// Place is a station, geodetic.
type Place struct {
	Name         string `json:"name"`
	LatitudeDeg  Number `json:"latitude_deg"`
	LongitudeDeg Number `json:"longitude_deg"`
}

// Contact is a pass of a spacecraft over a station by one link.
type Contact struct {
	ID               string    `json:"id"`
	Spacecraft       string    `json:"spacecraft"`
	Station          string    `json:"station"`
	Transmitter      string    `json:"transmitter"` // empty: geometry alone
	Antenna          string    `json:"antenna"`
	AOS              time.Time `json:"aos_utc"`
	Culmination      time.Time `json:"culmination_utc"`
	LOS              time.Time `json:"los_utc"`
	AOSAzimuthDeg    Number    `json:"aos_azimuth_deg"`
	MaxElevationDeg  Number    `json:"max_elevation_deg"`
	LOSAzimuthDeg    Number    `json:"los_azimuth_deg"`
	MinimumRangeKm   Number    `json:"min_range_km"`
	MinimumElevation Number    `json:"minimum_elevation_deg"` // of the station
}

// Signal is what is expected of a contact under way.
type Signal struct {
	ID               string   `json:"id"`
	Mode             string   `json:"mode"`
	AzimuthDeg       Number   `json:"azimuth_deg"`
	ElevationDeg     Number   `json:"elevation_deg"`
	RangeKm          Number   `json:"range_km"`
	RangeRateKmS     Number   `json:"range_rate_km_s"`
	DopplerHz        Number   `json:"doppler_hz"`
	ReceivedPowerDBm Number   `json:"received_power_dbm"`
	CN0DBHz          Number   `json:"c_n0_dbhz"`
	EbN0DB           Number   `json:"eb_n0_db"`
	MarginDB         Number   `json:"margin_db"`
	MarginOverDB     Number   `json:"margin_over_required_db"`
	Notes            []string `json:"notes"`
}

// Detail is a contact along its time, one column a quantity.
type Detail struct {
	Contact
	Mode             string   `json:"mode"`
	RequiredMarginDB Number   `json:"required_margin_db"`
	Bytes            Number   `json:"bytes"`
	Modes            []string `json:"modes"`
	Seconds          []Number `json:"seconds"` // after AOS
	AzimuthDeg       []Number `json:"azimuth_deg"`
	ElevationDeg     []Number `json:"elevation_deg"`
	RangeKm          []Number `json:"range_km"`
	DopplerHz        []Number `json:"doppler_hz"`
	MarginDB         []Number `json:"margin_db"`
	ReceivedPowerDBm []Number `json:"received_power_dbm"`
	LatitudeDeg      []Number `json:"latitude_deg"` // of the point under the spacecraft, geodetic
	LongitudeDeg     []Number `json:"longitude_deg"`
	Circle           Outline  `json:"circle"`  // where the spacecraft stands, at its height of the culmination, when it is seen at the least elevation
	Before           Outline  `json:"before"`  // the track that leads to AOS
	After            Outline  `json:"after"`   // the track that leads on from LOS
	Horizon          Rim      `json:"horizon"` // the least elevation that sees the sky, all around
	Sky              []Body   `json:"sky"`     // Sun and Moon at the culmination
	DishM            Number   `json:"dish_m"`  // as the scenario has it
	PowerW           Number   `json:"power_w"`
	PointingErrorDeg Number   `json:"pointing_error_deg"`
	ExceededPercent  Number   `json:"exceeded_percent"`
}

// Outline is a line on the ground, geodetic.
type Outline struct {
	LatitudeDeg  []Number `json:"latitude_deg"`
	LongitudeDeg []Number `json:"longitude_deg"`
}

// Rim is a line in the sky.
type Rim struct {
	AzimuthDeg   []Number `json:"azimuth_deg"`
	ElevationDeg []Number `json:"elevation_deg"`
}

// Body is the Sun or the Moon in the sky.
type Body struct {
	Name         string `json:"name"`
	AzimuthDeg   Number `json:"azimuth_deg"`
	ElevationDeg Number `json:"elevation_deg"`
}

// Question changes a contact; nil and empty keep what the scenario has.
type Question struct {
	Contact           string   `json:"contact"`
	Mode              string   `json:"mode,omitempty"`
	DishM             *float64 `json:"dish_m,omitempty"`
	PowerW            *float64 `json:"power_w,omitempty"`
	LeastElevationDeg *float64 `json:"least_elevation_deg,omitempty"`
	PointingErrorDeg  *float64 `json:"pointing_error_deg,omitempty"`
	ExceededPercent   *float64 `json:"exceeded_percent,omitempty"`
}

// Answer holds the contact as it is and as it would be.
type Answer struct {
	Contact string  `json:"contact"`
	Before  Outcome `json:"before"`
	After   Outcome `json:"after"`
}

// Outcome is what a contact brings.
type Outcome struct {
	Mode             string `json:"mode"`
	Usable           bool   `json:"used"` // false: it never stands at the least elevation
	Seconds          Number `json:"seconds"`
	LeastMarginDB    Number `json:"least_margin_db"`
	GreatestMarginDB Number `json:"greatest_margin_db"`
	Bytes            Number `json:"bytes"`
}

// RefusedError says that a question cannot be answered as it stands.
type RefusedError struct{ Text string }

// Error returns the text.
func (e *RefusedError) Error() string { return e.Text }
