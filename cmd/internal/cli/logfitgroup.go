package cli

import (
	"context"
	"errors"
	"fmt"
	"slices"
	"strconv"

	"slantwise/cmd/internal/logbook"
	"slantwise/cmd/internal/scenario"
	"slantwise/downlink/measured"
)

// groups are the logs that are fitted, one for each link, under a clear sky.
func (o *logFitOptions) groups(ctx context.Context, env *Env, s *scenario.Scenario) ([]*overLog, error) {
	if len(o.entries) > 0 {
		return o.fromBook(ctx, env, s)
	}
	l, _, err := o.in.readLog(env, s)
	if err != nil {
		return nil, err
	}
	g, err := overSamples(env, s, o.in.who, l)
	return []*overLog{g}, err
}

// fromBook gathers entries of the logbook by link.
func (o *logFitOptions) fromBook(ctx context.Context, env *Env, s *scenario.Scenario) ([]*overLog, error) {
	chosen, err := o.chosen(ctx)
	if err != nil {
		return nil, err
	}
	readings := map[linkNames][]measured.Reading{}
	numbers := map[linkNames][]int64{}
	var order []linkNames
	for i := range chosen {
		e := &chosen[i]
		who := linkNames{spacecraft: e.Spacecraft, station: e.Station, transmitter: e.Transmitter, antenna: e.Antenna, mode: e.Mode}
		for _, given := range []struct{ flag, kept *string }{{&o.in.who.spacecraft, &who.spacecraft}, {&o.in.who.station, &who.station}} {
			if *given.flag != "" && *given.flag != *given.kept {
				return nil, inputErrorf("--entry: pass %d is of %s over %s; leave --spacecraft and --station out, or name other passes", e.ID, e.Spacecraft, e.Station)
			}
		}
		for _, given := range []struct{ flag, kept *string }{{&o.in.who.transmitter, &who.transmitter}, {&o.in.who.antenna, &who.antenna}, {&o.in.who.mode, &who.mode}} {
			if *given.flag != "" {
				*given.kept = *given.flag
			}
		}
		if numbers[who] == nil {
			order = append(order, who)
		}
		numbers[who] = append(numbers[who], e.ID)
		for _, v := range e.Values {
			readings[who] = append(readings[who], measured.Reading{At: v.At, Quantity: v.Quantity, Value: v.Measured})
		}
	}
	var out []*overLog
	for _, who := range order {
		l, err := measured.Gather(fmt.Sprintf("%s, passes %v", o.book, numbers[who]), readings[who])
		if err != nil {
			return nil, &InputError{Err: err}
		}
		g, err := overSamples(env, s, who, l)
		if err != nil {
			return nil, fmt.Errorf("passes %v of %s: %w", numbers[who], printable(o.book), err)
		}
		out = append(out, g)
	}
	return out, nil
}

// chosen reads the entries that are named.
func (o *logFitOptions) chosen(ctx context.Context) ([]logbook.Entry, error) {
	b, err := logbook.Open(ctx, o.book, false)
	if err != nil {
		return nil, &InputError{Err: err}
	}
	defer b.Close()
	list, err := b.List(ctx)
	if err != nil {
		return nil, &InputError{Err: err}
	}
	wanted := map[int64]bool{}
	for _, text := range o.entries {
		if text == "all" {
			for i := range list {
				wanted[list[i].ID] = true
			}
			continue
		}
		n, err := strconv.ParseInt(text, 10, 64)
		if err != nil || !slices.ContainsFunc(list, func(e logbook.Entry) bool { return e.ID == n }) {
			return nil, inputErrorf("--entry: there is no pass %q in %s, which holds %d; give a number that log show lists, or all", text, o.book, len(list))
		}
		wanted[n] = true
	}
	var out []logbook.Entry
	for i := range list {
		if e := &list[i]; wanted[e.ID] {
			if err := errors.Join(b.Fill(ctx, e), e.Check()); err != nil {
				return nil, &InputError{Err: err}
			}
			out = append(out, *e)
		}
	}
	if len(out) == 0 {
		return nil, inputErrorf("--entry: %s holds no pass yet; add one with log add", o.book)
	}
	return out, nil
}
