package cli

import (
	"context"
	"fmt"
	"maps"
	"slices"
	"time"

	"slantwise/downlink/rateplan"
	"slantwise/station"
)

// shiftChoice is a contact before its numbers: the pages of one pass over one antenna, flown.
type shiftChoice struct {
	page       *reportPage // that tells the pass
	antenna    *station.Antenna
	name       string
	start, end time.Time
	links      []shiftLink // the one that brings the most first; empty: nothing is received
	ups        []*modeOnPass
	bytes      float64
	why        string // it is not worth taking; empty: it is
	cautions   []string
}

// shiftLink is a transmitter on the pass.
type shiftLink struct {
	*modeOnPass
	planner *ratePlanner // nil without a mode
	rated   *ratedPass
}

func (c *shiftChoice) craft(j *shiftJob) *reportCraft { return &j.report.craft[c.page.Spacecraft] }

func antennaName(a *station.Antenna) string { return a.Name }

// takes tells whether a page is of an antenna that the sheet is of.
func (j *shiftJob) takes(page *reportPage) bool {
	return j.antenna == "" || page.link == nil || page.link.antenna.Name == j.antenna
}

// choose lists the contacts of the sheet by their start.
func (j *shiftJob) choose(ctx context.Context) ([]shiftChoice, error) {
	var list []shiftChoice
	var err error
	if j.planned {
		list, err = j.fromPlan()
	} else {
		list, err = j.worthTaking(ctx)
	}
	slices.SortStableFunc(list, func(a, b shiftChoice) int { return a.start.Compare(b.start) })
	return list, err
}

// worthTaking takes every pass of the hours over the antenna that brings the most of it, but for
// those that are not worth it, which the sheet counts.
func (j *shiftJob) worthTaking(ctx context.Context) ([]shiftChoice, error) {
	var list []shiftChoice
	left := map[string]int{}
	for _, pages := range j.passPages() {
		if err := ctx.Err(); err != nil {
			return nil, err
		}
		var best *shiftChoice
		for _, of := range byAntenna(pages) {
			one, err := j.weigh(of)
			if err != nil {
				return nil, err
			}
			if best == nil || best.why != "" && one.why == "" || one.why == "" && one.bytes > best.bytes {
				best = one
			}
		}
		if best.why != "" {
			left[best.why]++
			continue
		}
		list = append(list, *best)
	}
	for _, why := range slices.Sorted(maps.Keys(left)) {
		j.sheetOut.Left = append(j.sheetOut.Left, counted(left[why], "pass", "passes")+" not here: "+why)
	}
	return list, nil
}

// passPages groups the pages of the hours by their pass.
func (j *shiftJob) passPages() [][]*reportPage {
	var out [][]*reportPage
	type key struct {
		craft int
		aos   int64
	}
	at := map[key]int{}
	for i := range j.report.pages {
		page := &j.report.pages[i]
		if !page.LOS.After(j.from) || !page.AOS.Before(j.to) || !j.takes(page) {
			continue
		}
		k := key{page.Spacecraft, page.AOS.UnixMilli()}
		n, ok := at[k]
		if !ok {
			n, out = len(out), append(out, nil)
			at[k] = n
		}
		out[n] = append(out[n], page)
	}
	return out
}

// byAntenna groups the pages of a pass by the antenna that takes it.
func byAntenna(pages []*reportPage) [][]*reportPage {
	var out [][]*reportPage
	for _, p := range pages {
		i := slices.IndexFunc(out, func(of []*reportPage) bool {
			return p.link != nil && of[0].link != nil && of[0].link.antenna == p.link.antenna
		})
		if i < 0 {
			i, out = len(out), append(out, nil)
		}
		out[i] = append(out[i], p)
	}
	return out
}

// weigh flies the pages of a pass over one antenna and tells whether it is worth taking.
func (j *shiftJob) weigh(pages []*reportPage) (*shiftChoice, error) {
	page := pages[0]
	c := &shiftChoice{page: page, start: page.AOS, end: page.LOS}
	for _, p := range pages {
		if p.link == nil {
			continue
		}
		c.antenna = p.link.antenna
		l, err := j.fly(c, p)
		if untold(err) {
			c.cautions = append(c.cautions, fmt.Sprintf("%s: no budget: %v", p.link.transmitter.Name, err))
			continue
		}
		if err != nil {
			return nil, err
		}
		c.links = append(c.links, *l)
	}
	slices.SortStableFunc(c.links, func(a, b shiftLink) int {
		switch x, y := a.bytes(), b.bytes(); {
		case x > y:
			return -1
		case x < y:
			return 1
		}
		return 0
	})
	if err := j.addShiftUplinks(c); err != nil {
		return nil, err
	}
	for i := range c.links {
		c.bytes += c.links[i].bytes()
	}
	c.why = j.notWorth(c)
	return c, nil
}

func (l *shiftLink) bytes() float64 {
	if l.rated == nil {
		return 0
	}
	return l.rated.plan.Bytes
}

// fly makes the profile and the rate plan of a page.
func (j *shiftJob) fly(c *shiftChoice, page *reportPage) (*shiftLink, error) {
	craft := c.craft(j)
	best, err := page.bestMode(j.scenario, craft, sampleStep(page.Duration()))
	if err != nil {
		return nil, err
	}
	l := &shiftLink{modeOnPass: best}
	if best.link.mode == nil {
		return l, nil
	}
	if l.planner, err = j.report.rates.of(j.report, craft, page.link.transmitter); err != nil {
		c.cautions = append(c.cautions, fmt.Sprintf("No rate plan: %v.", err))
		return l, nil
	}
	l.rated, err = l.planner.plan(rateplan.FromProfile(best.profile))
	return l, err
}

// addShiftUplinks flies the uplinks that the antenna can send; without a downlink, those of any.
func (j *shiftJob) addShiftUplinks(c *shiftChoice) error {
	page := c.page
	for _, u := range j.report.uplinks[page.Spacecraft][page.Site] {
		a := u.modes[0].antenna
		if c.antenna != nil && a != c.antenna || j.antenna != "" && a.Name != j.antenna {
			continue
		}
		best, err := (&reportPage{Found: page.Found, link: &reportLink{modes: u.modes}}).bestMode(j.scenario, c.craft(j), sampleStep(page.Duration()))
		if untold(err) {
			c.cautions = append(c.cautions, fmt.Sprintf("Uplink %s: no budget: %v", u.modes[0].uplink.Name, err))
			continue
		}
		if err != nil {
			return err
		}
		c.antenna = a
		c.ups = append(c.ups, best)
	}
	return nil
}

// notWorth says why a pass is not worth taking, empty where it is.
func (j *shiftJob) notWorth(c *shiftChoice) string {
	works := slices.ContainsFunc(c.ups, func(u *modeOnPass) bool { return len(u.profile.Volume.Closes) > 0 })
	carrier := slices.ContainsFunc(c.links, func(l shiftLink) bool { return l.link.mode == nil })
	least := j.scenario.ContactPlan.Least
	switch {
	case c.antenna == nil:
		return "no antenna of the station takes the spacecraft"
	case c.end.Sub(c.start) < least:
		return fmt.Sprintf("shorter than the shortest contact, %g s", least.Seconds())
	case !(c.bytes > 0) && !carrier && !works:
		return "it brings nothing down in any mode, and commanding does not work"
	}
	return ""
}
