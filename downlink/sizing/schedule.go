package sizing

import (
	"encoding/binary"
	"math"

	"slantwise/downlink/rateplan"
	"slantwise/downlink/recorder"
)

// schedule is a plan of a track as the study needs it.
type schedule struct {
	steps    []scheduleStep // one after another
	received []recorder.Step
}

type scheduleStep struct {
	from, to float64 // seconds of the track
	mode     int     // less than 0: silent
	need     float64 // dBHz
	rate     float64 // bit/s, net
}

// schedules keeps the plans of turns by what they hang on: the same modes close at the same
// samples with many diameters and powers.
type schedules struct {
	known map[string]*schedule
	key   []byte
}

// mostSchedules bounds what is kept: some hundred megabytes.
const mostSchedules = 1_000_000

func newSchedules() *schedules { return &schedules{known: map[string]*schedule{}} }

// schedule plans a track, or finds its plan. turn is the number of its turn, whose instants
// are always the same; 0 for a track with instants of its own.
func (s *Study) schedule(turn int, t *rateplan.Track) (*schedule, error) {
	k := s.shared
	keep := false
	if turn > 0 {
		k.key = binary.LittleEndian.AppendUint32(k.key[:0], uint32(turn))
		key, ok, err := s.spec.Rates.Pattern(t, k.key)
		if err != nil {
			return nil, err
		}
		if ok {
			k.key = key
			if known := k.known[string(key)]; known != nil {
				return known, nil
			}
			keep = len(k.known) < mostSchedules
		}
	}
	plan, modes, err := s.spec.Rates.Plan(*t)
	if err != nil {
		return nil, err
	}
	out := s.scheduleOf(t, &plan, modes)
	if keep {
		k.known[string(k.key)] = out
	}
	return out, nil
}

func (s *Study) scheduleOf(t *rateplan.Track, plan *rateplan.Plan, modes []rateplan.Mode) *schedule {
	out := &schedule{steps: make([]scheduleStep, len(plan.Steps))}
	for i := range plan.Steps {
		p := &plan.Steps[i]
		step := scheduleStep{from: p.From.Sub(t.Start).Seconds(), to: p.To.Sub(t.Start).Seconds(), mode: p.Mode}
		if p.Mode >= 0 {
			step.need, step.rate = modes[p.Mode].NeedDBHz, modes[p.Mode].NetRate.BitsPerSecond()
		}
		out.steps[i] = step
	}
	if s.asksLatency() {
		for _, r := range plan.Receptions(*t) {
			out.received = append(out.received, recorder.Step{From: r.From, To: r.To, BytesPerSecond: plan.Steps[r.Step].NetRate.BitsPerSecond() / 8})
		}
	}
	return out
}

// asksLatency tells that contacts are sent through the recorder.
func (s *Study) asksLatency() bool { return s.spec.Latency != nil && !math.IsNaN(s.spec.Needs.Latency) }
