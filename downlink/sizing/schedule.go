package sizing

import (
	"encoding/binary"
	"hash/fnv"
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
// samples with many diameters and powers. It holds no pointers by the plan, which the collector
// would have to follow.
type schedules struct {
	known    map[[2]uint64]kept
	steps    []scheduleStep
	received []recorder.Step
	key      []byte
}

// kept says where a schedule is: half-open spans of the lists.
type kept struct{ step, steps, receipt, receipts uint32 }

// mostSchedules bounds what is kept: some hundred megabytes.
const mostSchedules = 1_500_000

func newSchedules() *schedules { return &schedules{known: map[[2]uint64]kept{}} }

func (k *schedules) at(x kept) schedule {
	return schedule{k.steps[x.step:x.steps:x.steps], k.received[x.receipt:x.receipts:x.receipts]}
}

func (k *schedules) keep(sum [2]uint64, s *schedule) {
	x := kept{step: uint32(len(k.steps)), receipt: uint32(len(k.received))}
	k.steps, k.received = append(k.steps, s.steps...), append(k.received, s.received...)
	x.steps, x.receipts = uint32(len(k.steps)), uint32(len(k.received))
	k.known[sum] = x
}

// sumOf is the 128 bit FNV-1a sum of a key: that two of a million keys share one has a
// probability of 1e-27.
func sumOf(key []byte) [2]uint64 {
	h := fnv.New128a()
	h.Write(key)
	var b [16]byte
	h.Sum(b[:0])
	return [2]uint64{binary.LittleEndian.Uint64(b[:8]), binary.LittleEndian.Uint64(b[8:])}
}

// schedule plans a track, or finds its plan. turn is the number of its turn, whose instants
// are always the same; 0 for a track with instants of its own.
func (s *Study) schedule(turn int, t *rateplan.Track) (schedule, error) {
	k := s.shared
	keep := false
	var sum [2]uint64
	if turn > 0 {
		k.key = binary.LittleEndian.AppendUint32(k.key[:0], uint32(turn))
		key, ok, err := s.spec.Rates.Pattern(t, k.key)
		if err != nil {
			return schedule{}, err
		}
		if ok {
			k.key, sum = key, sumOf(key)
			if x, found := k.known[sum]; found {
				return k.at(x), nil
			}
			keep = len(k.known) < mostSchedules
		}
	}
	plan, modes, err := s.spec.Rates.Plan(*t)
	if err != nil {
		return schedule{}, err
	}
	out := s.scheduleOf(t, &plan, modes)
	if keep {
		k.keep(sum, &out)
	}
	return out, nil
}

func (s *Study) scheduleOf(t *rateplan.Track, plan *rateplan.Plan, modes []rateplan.Mode) schedule {
	out := schedule{steps: make([]scheduleStep, len(plan.Steps))}
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
