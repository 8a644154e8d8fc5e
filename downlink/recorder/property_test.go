package recorder_test

import (
	"math"
	"slices"
	"testing"

	"pgregory.net/rapid"

	"slantwise/downlink/recorder"
)

// drawPlan draws a plan whose events all lie on whole seconds.
func drawPlan(t *rapid.T) recorder.Plan {
	whole := func(low, high int, name string) float64 { return float64(rapid.IntRange(low, high).Draw(t, name)) }
	p := recorder.Plan{Start: monday, Length: whole(50, 250, "length"), Capacity: whole(200, 20000, "capacity")}
	p.WhenFull = recorder.FullRule(rapid.IntRange(0, 1).Draw(t, "full"))
	p.Housekeeping = rapid.SampledFrom([]float64{0, 0.1}).Draw(t, "housekeeping")
	for i := range rapid.IntRange(1, 3).Draw(t, "classes") {
		c := recorder.Class{Name: string(rune('a' + i)), OnBoard: whole(0, 60, "on board"), OnBoardAge: whole(0, 100, "age")}
		for range rapid.IntRange(0, 2).Draw(t, "made") {
			from := whole(-10, int(p.Length)-1, "from")
			c.Made = append(c.Made, recorder.Made{From: from, To: from + whole(1, 200, "lasting"), BytesPerSecond: whole(1, 50, "rate")})
		}
		p.Classes = append(p.Classes, c)
	}
	uplink, at := false, 0.0
	for range rapid.IntRange(0, 4).Draw(t, "contacts") {
		from := at + whole(0, 60, "gap")
		to := from + whole(2, 60, "contact")
		if to > p.Length {
			break
		}
		middle := from + whole(1, int(to-from)-1, "step")
		c := recorder.Contact{Station: rapid.SampledFrom([]string{"Skerry", "Fell"}).Draw(t, "station"), From: from, To: to, Uplink: rapid.Bool().Draw(t, "uplink")}
		for _, s := range [][2]float64{{from, middle}, {middle, to}} {
			c.Steps = append(c.Steps, recorder.Step{From: s[0], To: s[1], BytesPerSecond: whole(0, 300, "speed"), Loss: rapid.SampledFrom([]float64{0, 0.05, 0.5}).Draw(t, "loss")})
		}
		uplink = uplink || c.Uplink
		p.Contacts = append(p.Contacts, c)
		at = to
	}
	if uplink {
		p.Acknowledge = recorder.Acknowledge{Every: whole(3, 20, "every"), Delay: whole(0, 5, "delay")}
		p.WithoutUplink = recorder.WithoutUplink(rapid.IntRange(0, 1).Draw(t, "without"))
	}
	if rapid.Bool().Draw(t, "line") {
		p.Lines = []recorder.Line{{Station: "Skerry", BytesPerSecond: whole(5, 300, "line rate")}}
	}
	return p
}

// TestNothingIsLostFromSight: what was on board and what was made is received, lost or
// on board, for each class; the recorder never holds more than it can; ages are not
// negative and in order; days add up to what was received.
func TestNothingIsLostFromSight(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		p := drawPlan(t)
		r, err := recorder.Simulate(&p)
		if err != nil {
			t.Skip(err) // more on board than the capacity, an uplink that never comes
		}
		received := 0.0
		for _, c := range r.Classes {
			in, out := c.OnBoardStart+c.Made, c.Received+c.LostFull+c.LostOnTheWay+c.OnBoardEnd
			if math.Abs(in-out) > 1e-6*(1+in) {
				t.Fatalf("class %s: %.9g B in, %.9g B out: %+v", c.Name, in, out, c)
			}
			for _, v := range []float64{c.Received, c.LostFull, c.LostOnTheWay, c.OnBoardEnd} {
				if v < -1e-6 {
					t.Fatalf("class %s: a negative volume: %+v", c.Name, c)
				}
			}
			received += c.Received
		}
		for _, c := range r.Course {
			if c.Stored > p.Capacity+0.01 || c.Unsent > c.Stored+1e-6 {
				t.Fatalf("at %g s: %.6f B stored of %g B, %.6f B unsent", c.Seconds, c.Stored, p.Capacity, c.Unsent)
			}
		}
		days := 0.0
		for _, d := range r.Days {
			days += d.Bytes
		}
		if math.Abs(days-received) > 1e-6*(1+received) {
			t.Fatalf("the days add up to %.9g B, received are %.9g B", days, received)
		}
		if a, u := r.Latency.AtStation, r.Latency.AtUser; received > 0 {
			if a.Median < -1e-6 || a.P95 < a.Median || a.Worst < a.P95-1e-6 || u.Median < a.Median-1e-6 || u.Worst < a.Worst-1e-6 {
				t.Fatalf("ages out of order: %+v", r.Latency)
			}
		}
	})
}

// TestAgainstSmallSteps compares with a plain simulation that moves small portions in
// steps of 1/64 s, each with its own time of making.
func TestAgainstSmallSteps(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		p := drawPlan(t)
		p.Lines = nil
		r, err := recorder.Simulate(&p)
		if err != nil {
			t.Skip(err)
		}
		o := slowly(&p)
		// Each full or empty moment, of which there are tens, may be a step off.
		const step, rate, moments = 1.0 / 64, 300.0, 20
		tol := step * rate * moments
		for i, c := range r.Classes {
			if d := math.Abs(c.Received - o.received[i]); d > tol {
				t.Fatalf("class %s: received %.2f B, in small steps %.2f B", c.Name, c.Received, o.received[i])
			}
			if d := math.Abs(c.LostFull - o.lost[i]); d > tol {
				t.Fatalf("class %s: lost %.2f B, in small steps %.2f B", c.Name, c.LostFull, o.lost[i])
			}
		}
		if total := sumOf(o.received); total > 2000 {
			// Data may have two ages far apart, half of it each: then any age between them is
			// the median, and a byte moves it from one to the other. So the share that is
			// younger is compared, over 2 s either way and within the tolerance in bytes.
			m, slack := r.Latency.AtStation.Median, tol*float64(len(r.Classes))/total
			if low, high := o.younger(m-2), o.younger(m+2); low > 0.5+slack || high < 0.5-slack {
				t.Fatalf("median age %.3f s: in small steps %.4f of the data are younger by 2 s, %.4f at most 2 s older; slack %.4f", m, low, high, slack)
			}
		}
	})
}

// cell is a portion of data.
type cell struct{ made, bytes float64 }

type waiting struct {
	class         int
	c             cell
	failed, since float64
}

type aged struct{ age, bytes float64 }

type oracle struct {
	received, lost []float64
	ages           []aged
}

func sumOf(v []float64) (s float64) {
	for _, x := range v {
		s += x
	}
	return s
}

// slowly runs a plan in steps of 1/64 s: acknowledge, send and make, lose what has no
// room.
func slowly(p *recorder.Plan) *oracle {
	const dt = 1.0 / 64
	n := len(p.Classes)
	o := &oracle{received: make([]float64, n), lost: make([]float64, n)}
	queues := make([][]cell, n)
	for i, c := range p.Classes {
		if c.OnBoard > 0 {
			queues[i] = append(queues[i], cell{-c.OnBoardAge, c.OnBoard})
		}
	}
	var held []waiting
	stored := func() float64 {
		s := 0.0
		for _, q := range queues {
			for _, c := range q {
				s += c.bytes
			}
		}
		for _, w := range held {
			s += w.c.bytes
		}
		return s
	}
	for k := range int(p.Length * 64) {
		now := float64(k) * dt
		var on *recorder.Contact
		var step *recorder.Step
		for i := range p.Contacts {
			c := &p.Contacts[i]
			if c.Uplink && now >= c.From && now <= c.To && (math.Mod(now-c.From, p.Acknowledge.Every) == 0 || now == c.To) {
				var still []waiting
				for _, w := range held {
					switch {
					case w.since > now-p.Acknowledge.Delay+1e-9:
						still = append(still, w)
					case w.failed > 0:
						queues[w.class] = append(queues[w.class], cell{w.c.made, w.failed})
					}
				}
				held = still
				for i := range queues {
					slices.SortStableFunc(queues[i], func(a, b cell) int {
						switch {
						case a.made < b.made:
							return -1
						case a.made > b.made:
							return 1
						}
						return 0
					})
				}
			}
			if now >= c.From && now < c.To {
				on = c
				for j := range c.Steps {
					if now >= c.Steps[j].From && now < c.Steps[j].To {
						step = &c.Steps[j]
					}
				}
			}
		}
		deletes := on != nil && !on.Uplink && p.WithoutUplink == recorder.DeleteWhenSent
		send := func() {
			if step == nil {
				return
			}
			left := step.BytesPerSecond * (1 - p.Housekeeping) * dt
			for i := range queues {
				for left > 0 && len(queues[i]) > 0 {
					c := &queues[i][0]
					b := min(left, c.bytes)
					left -= b
					c.bytes -= b
					failed := b * step.Loss
					o.received[i] += b - failed
					o.ages = append(o.ages, aged{now - c.made, b - failed})
					if !deletes {
						held = append(held, waiting{i, cell{c.made, b}, failed, now + dt})
					}
					if c.bytes <= 0 {
						queues[i] = queues[i][1:]
					}
				}
			}
		}
		produce := func() {
			for i, c := range p.Classes {
				for _, m := range c.Made {
					if now >= m.From && now < m.To {
						queues[i] = append(queues[i], cell{now, m.BytesPerSecond * dt})
					}
				}
			}
		}
		// What is deleted when sent needs no room to go straight through.
		if deletes {
			produce()
			send()
		} else {
			send()
			produce()
		}
		over := stored() - p.Capacity // too much: the last class loses
		for i := n - 1; i >= 0 && over > 0; i-- {
			for over > 0 && len(queues[i]) > 0 {
				at := 0
				if p.WhenFull == recorder.LoseNew {
					at = len(queues[i]) - 1
					if queues[i][at].made != now {
						break // what is on board stays
					}
				}
				c := &queues[i][at]
				b := min(over, c.bytes)
				over -= b
				o.lost[i] += b
				c.bytes -= b
				if c.bytes <= 0 {
					queues[i] = slices.Delete(queues[i], at, at+1)
				}
			}
		}
	}
	return o
}

// younger is the share of the data received at most this old.
func (o *oracle) younger(age float64) float64 {
	total, below := 0.0, 0.0
	for _, x := range o.ages {
		total += x.bytes
		if x.age <= age {
			below += x.bytes
		}
	}
	return below / total
}
