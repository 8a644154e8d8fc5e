package cli

import (
	"encoding/json"
	"fmt"
	"slices"

	"slantwise/cmd/internal/scenario"
)

// logFitAnswer is what the command shows: the fits, and what they offer the scenario.
type logFitAnswer struct{ fits, offers *sheet }

func newLogFitAnswer() *logFitAnswer {
	return &logFitAnswer{fits: newFitSheet(), offers: &sheet{name: "offers", columns: []sheetColumn{wordsAs("place", "offered for"), wordsAs("key", "key"), wordsAs("value", "value"), wordsAs("had", "as it is"),
		numbersAs("margin_before_db", "margin dB", 2), numbersAs("margin_after_db", "then dB", 2), numbersAs("bytes_before", "B", 0), numbersAs("bytes_after", "then B", 0),
		wordsAs("spacecraft", "spacecraft"), wordsAs("station", "station")}, rows: [][]any{}}}
}

// offer fills in the offers of each link with what they change, one by one and together.
func (a *logFitAnswer) offer(s *scenario.Scenario, fitted []*groupFit, skylines []*skylineFit) error {
	for _, f := range fitted {
		list := f.offers()
		for _, h := range skylines {
			if h.err == nil && slices.Contains(h.groups, f) {
				o, err := h.offer()
				if err != nil {
					return err
				}
				list = append(list, o)
			}
		}
		if err := a.offerOf(s, f, list); err != nil {
			return &InputError{Err: err}
		}
	}
	if len(a.offers.rows) > 0 {
		a.offers.notes = append(a.offers.notes, "margin: over the required one, the middle of the log's samples under a clear sky; bytes: of the window's passes over the station by the scenario's rate rules, licences apart")
	}
	return nil
}

func (a *logFitAnswer) offerOf(s *scenario.Scenario, f *groupFit, list []offer) error {
	row := func(o *offer, before, after effect) {
		a.offers.rows = append(a.offers.rows, []any{o.place, o.key, o.value, o.had, before.marginDB, after.marginDB, before.bytes, after.bytes, f.spacecraft.Name, f.station.Site.Name})
	}
	nothing := effect{none, none}
	var moving []offer
	var before effect
	for i := range list {
		o := &list[i]
		if o.caution != "" {
			a.offers.notes = append(a.offers.notes, o.caution)
		}
		if o.apply == nil {
			row(o, nothing, nothing)
			continue
		}
		var err error
		if len(moving) == 0 {
			if before, err = f.effectOf(s, nil); err != nil {
				return err
			}
		}
		moving = append(moving, *o)
		after, err := f.effectOf(s, moving[len(moving)-1:])
		if err != nil {
			return err
		}
		row(o, before, after)
	}
	if len(moving) < 2 {
		return nil
	}
	after, err := f.effectOf(s, moving)
	if err != nil {
		return err
	}
	row(&offer{place: "all of these", key: fmt.Sprintf("%d keys", len(moving))}, before, after)
	return nil
}

// write writes the fits, then the offers where there are any.
func (a *logFitAnswer) write(env *Env, f format, offers bool) error {
	switch {
	case f == formatJSON:
		return writeJSON(env.Out, a)
	case f == formatCSV && offers:
		return a.offers.write(env, f)
	case f == formatCSV || len(a.offers.rows) == 0:
		return a.fits.write(env, f)
	}
	if err := a.fits.write(env, f); err != nil {
		return err
	}
	if _, err := fmt.Fprintln(env.Out); err != nil {
		return err
	}
	return a.offers.write(env, f)
}

// MarshalJSON writes {"fits": [rows], "offers": [rows], "notes": [texts]}.
func (a *logFitAnswer) MarshalJSON() ([]byte, error) {
	var out struct {
		Fits   json.RawMessage `json:"fits"`
		Offers json.RawMessage `json:"offers"`
		Notes  []string        `json:"notes"`
	}
	for _, s := range []struct {
		from *sheet
		into *json.RawMessage
	}{{a.fits, &out.Fits}, {a.offers, &out.Offers}} {
		text, err := s.from.MarshalJSON()
		if err != nil {
			return nil, err
		}
		var parts map[string]json.RawMessage
		if err := json.Unmarshal(text, &parts); err != nil {
			return nil, err
		}
		*s.into = parts[s.from.name]
		out.Notes = append(out.Notes, s.from.notes...)
	}
	return json.Marshal(out)
}

// middleOf is the median, none of nothing.
func middleOf(v []float64) float64 {
	if len(v) == 0 {
		return none
	}
	v = slices.Sorted(slices.Values(v))
	return v[len(v)/2]
}
