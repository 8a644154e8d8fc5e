package verify

import (
	"fmt"
	"math"

	"slantwise/downlink/contacts"
)

// antennas judges each antenna: one contact at a time from set-up to tear-down, time to
// turn to the next target, and the cable.
func (j *judge) antennas() {
	for a := range j.p.Antennas {
		list := j.order(func(i int) bool { return j.candidate(i).Antenna == a })
		if len(list) == 0 {
			continue
		}
		for k, i := range list {
			for _, h := range list[k+1:] {
				if j.plan[h].From-j.candidate(h).SetUp < j.plan[i].To+j.candidate(i).TearDown {
					j.breach(RuleAntenna, []int{i, h}, "antenna %q serves one contact at a time, from set-up to tear-down: %s and %s", j.p.Antennas[a].Name, j.tell(i), j.tell(h))
				}
			}
		}
		if s := j.p.Antennas[a].Slew; s != nil {
			j.cable(s, j.p.Antennas[a].Name, list)
		}
	}
}

// cable follows every way to lay the turns of the cable through the contacts of an
// antenna; reach holds, for the contact before, the turns with which it can be flown.
func (j *judge) cable(s *contacts.Slew, name string, list []int) {
	var reach []float64
	for k, i := range list {
		turns := j.turns(s, i)
		if len(turns) == 0 {
			j.breach(RuleCable, []int{i}, "antenna %q: its cable reaches %g to %g deg, and no way round holds all of %s", name, s.FromDeg, s.ToDeg, j.tell(i))
			return
		}
		if k == 0 {
			reach = turns
			continue
		}
		before := list[k-1]
		idle := (j.plan[i].From - j.candidate(i).SetUp - j.plan[before].To - j.candidate(before).TearDown).Seconds()
		endAz, endEl := aim(j.candidate(before), j.plan[before].To)
		az, el := aim(j.candidate(i), j.plan[i].From)
		var next []float64
		least := math.Inf(1)
		for _, turn := range turns {
			for _, was := range reach {
				need := math.Max(math.Abs(az+turn-endAz-was)/s.AzimuthDegPerS, math.Abs(el-endEl)/s.ElevationDegPerS)
				least = math.Min(least, need)
				if need <= idle+1e-9 {
					next = append(next, turn)
					break
				}
			}
		}
		if len(next) == 0 {
			j.breach(RuleSlew, []int{before, i}, "antenna %q has %g s to turn from %s to %s and needs %.1f s as its cable lies", name, idle, j.tell(before), j.tell(i), least)
			return
		}
		reach = next
	}
}

// turns returns the whole turns, in degrees, that bring all azimuths of a contact within
// the reach of the cable.
func (j *judge) turns(s *contacts.Slew, i int) []float64 {
	c, w := j.plan[i], j.candidate(i)
	low, _ := aim(w, c.From)
	high := low
	at := func(az float64) { low, high = math.Min(low, az), math.Max(high, az) }
	az, _ := aim(w, c.To)
	at(az)
	for _, x := range w.Course {
		if c.From < x.At && x.At < c.To {
			at(x.AzimuthDeg)
		}
	}
	var out []float64
	for turn := math.Ceil((s.FromDeg - low) / 360); turn*360+high <= s.ToDeg; turn++ {
		out = append(out, turn*360)
	}
	return out
}

// aim returns where the antenna looks, on straight lines between the samples; before
// the first and after the last it looks as there.
func aim(w *contacts.Candidate, t ms) (az, el float64) {
	x := w.Course
	if t <= x[0].At {
		return x[0].AzimuthDeg, x[0].ElevationDeg
	}
	for k := 1; k < len(x); k++ {
		if t <= x[k].At {
			f := float64(t-x[k-1].At) / float64(x[k].At-x[k-1].At)
			return x[k-1].AzimuthDeg + f*(x[k].AzimuthDeg-x[k-1].AzimuthDeg), x[k-1].ElevationDeg + f*(x[k].ElevationDeg-x[k-1].ElevationDeg)
		}
	}
	last := x[len(x)-1]
	return last.AzimuthDeg, last.ElevationDeg
}

// spacecraft judges how many stations each talks to at once, the time between contacts,
// and hand-overs.
func (j *judge) spacecraft() {
	for s := range j.p.Spacecraft {
		craft := &j.p.Spacecraft[s]
		list := j.order(func(i int) bool { return j.candidate(i).Spacecraft == s })
		most := max(1, craft.AtOnce)
		for k, i := range list {
			together := []int{i}
			for _, h := range list[:k] {
				if j.plan[h].To > j.plan[i].From {
					together = append(together, h)
				}
			}
			if len(together) > most {
				j.breach(RuleSpacecraft, together, "spacecraft %q talks to %d at once at most; at the begin of %s it would to %d, among them %s", craft.Name, most, j.tell(i), len(together), j.tell(together[1]))
			}
			for _, h := range list[:k] {
				j.pair(craft, h, i)
			}
		}
	}
}

// pair judges two contacts of a spacecraft, first the one that begins first.
func (j *judge) pair(craft *contacts.Spacecraft, first, second int) {
	a, b := j.plan[first], j.plan[second]
	if b.From < a.To {
		if craft.AtOnce < 2 {
			return // told already
		}
		shared := min(a.To, b.To) - b.From
		h := craft.HandOver
		if shared < h.Least || h.Greatest > 0 && shared > h.Greatest {
			allowed := fmt.Sprintf("at least %g s", h.Least.Seconds())
			if h.Greatest > 0 {
				allowed = fmt.Sprintf("%g to %g s", h.Least.Seconds(), h.Greatest.Seconds())
			}
			j.breach(RuleHandOver, []int{first, second}, "spacecraft %q hands over with an overlap of %s, and not %g s: %s and %s", craft.Name, allowed, shared.Seconds(), j.tell(first), j.tell(second))
		}
		return
	}
	need, why := craft.Between, "between contacts"
	if j.station(first) != j.station(second) && craft.Repoint > need {
		need, why = craft.Repoint, "to turn to another station"
	}
	if gap := b.From - a.To; gap < need {
		j.breach(RuleHandOver, []int{first, second}, "spacecraft %q needs %g s %s and has %g s: %s and %s", craft.Name, need.Seconds(), why, gap.Seconds(), j.tell(first), j.tell(second))
	}
}
