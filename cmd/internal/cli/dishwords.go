package cli

import (
	"fmt"
	"strings"

	"slantwise/downlink/sizing"
)

// limits tells where more dish stops helping.
func (d *dishStudy) limits(a *sizing.Answer) []string {
	var out []string
	if l := a.Limit; l.Saturated > 0 {
		out = append(out, fmt.Sprintf("%s brings 99 %% of the most bytes of the range.", metres(l.Saturated.Metres())))
	}
	if l := a.Limit; l.Peak > 0 {
		out = append(out, fmt.Sprintf("Beyond %s more dish is no more gain: %s.", metres(l.Peak.Metres()), takersText(l.By)))
	}
	return append(out, d.mountText(a)...)
}

// mountText tells what the mounts do not follow, and from which diameter on that is more
// than a greater dish brings.
func (d *dishStudy) mountText(a *sizing.Answer) []string {
	with, of := d.study.Moved()
	if with == 0 {
		return nil
	}
	lost := func(o *sizing.Outcome) string {
		share := 0.0
		if all := o.BytesPerDay + o.MountLostBytesPerDay; all > 0 {
			share = 100 * o.MountLostBytesPerDay / all
		}
		return fmt.Sprintf("%s a day (%.2f %%, %.0f s a day)", bytesText(o.MountLostBytesPerDay), share, o.NotFollowedSPerDay)
	}
	if a.Now.NotFollowedSPerDay == 0 && (a.Then == nil || a.Then.NotFollowedSPerDay == 0) && a.Limit.Turning == 0 {
		if a.Then == nil {
			return []string{"The mounts follow all of every pass with your dishes."}
		}
		return []string{"The mounts follow all of every pass, with your dishes and with the least that meets all."}
	}
	text := "What the mounts do not follow, by slewing and the keyhole, takes " + lost(a.Now) + " with your dishes"
	if with < of {
		text = fmt.Sprintf("What the mounts of %d of %d sites do not follow, by slewing and the keyhole, takes %s with your dishes", with, of, lost(a.Now))
	}
	if a.Then != nil {
		text += " and " + lost(a.Then) + " with the least that meets all"
	}
	if l := a.Limit.Turning; l > 0 {
		return []string{text + ".", fmt.Sprintf("Beyond %s slewing and the keyhole take more than a larger dish brings.", metres(l.Metres()))}
	}
	return []string{text + fmt.Sprintf("; up to %s that is less than a larger dish brings.", metres(d.sizing.Range.High.Metres()))}
}

// takersText names all that takes more than a greater aperture gives.
func takersText(by []sizing.Taker) string {
	var names, alone []string
	for _, t := range by {
		name := t.Loss + " error"
		if len(by) > 1 {
			names = append(names, fmt.Sprintf("%s (%.0f %%)", name, 100*t.Share))
		} else {
			names = append(names, name)
		}
		if t.Alone > 0 {
			alone = append(alone, fmt.Sprintf("by the %s alone %s", name, metres(t.Alone.Metres())))
		}
	}
	if len(by) == 1 {
		return "the " + names[0] + " takes more than the aperture gives"
	}
	return fmt.Sprintf("the %s take more than the aperture gives (%s)", strings.Join(names, " and the "), strings.Join(alone, ", "))
}
