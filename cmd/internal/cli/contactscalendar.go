package cli

import (
	"errors"
	"fmt"
	"io"
	"io/fs"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"time"

	"slantwise/cmd/internal/atomicfile"
	"slantwise/cmd/internal/planfiles"
	"slantwise/downlink/contacts"
)

// events makes an event of every contact, its links together.
func (a *planAnswer) events() []planfiles.Event {
	var out []planfiles.Event
	last := -1
	for i := range a.rows {
		r := &a.rows[i]
		if r.PlanContact == last {
			e := &out[len(out)-1]
			e.Description += "\n" + linkText(r)
			continue
		}
		last = r.PlanContact
		e := planfiles.Event{
			Start: r.Start, End: r.End, Stamp: a.p.At(a.p.Now), Summary: r.Spacecraft + " over " + r.Station,
			Of: planfiles.EventOf{Request: r.Request, Spacecraft: r.Spacecraft, Station: r.Station, Antenna: r.Antenna},
			Description: fmt.Sprintf("contact %s to %s\nset-up from %s, tear-down to %s\nstart and end of this event are whole seconds around the contact\n%s",
				utc(r.Start), utc(r.End), utc(r.SetUpStart), utc(r.TearDownEnd), linkText(r)),
		}
		if r.Request != "" {
			e.Summary = r.Request + ": " + e.Summary
		}
		out = append(out, e)
	}
	return out
}

func linkText(r *contacts.Row) string {
	if !r.HasVolume {
		return "value " + fixed(r.Value, 0)
	}
	return fmt.Sprintf("%s: %s MB", r.Transmitter, fixed(r.VolumeBytes/1e6, 3))
}

// writeCalendar writes events into a calendar. Where the file is there already, its events
// keep their UIDs, and dropped ones follow as cancelled.
func writeCalendar(file string, events []planfiles.Event, stamp time.Time) error {
	earlier, err := earlierEvents(file)
	if err != nil {
		return err
	}
	revised := planfiles.Revise(earlier, events, stamp)
	return atomicfile.Write(file, 0o644, func(w io.Writer) error { return planfiles.WriteCalendar(w, revised) })
}

func earlierEvents(file string) ([]planfiles.Event, error) {
	f, err := os.Open(file)
	if errors.Is(err, fs.ErrNotExist) {
		return nil, nil
	}
	if err != nil {
		return nil, inputErrorf("%s: %v", file, plainFileError(err))
	}
	defer f.Close()
	events, err := planfiles.ReadCalendar(file, f)
	if err != nil {
		return nil, &InputError{Err: err}
	}
	return events, nil
}

// writeCalendars writes a calendar for each station and spacecraft. Those of an earlier
// export that have no contact any more are revised, too.
func writeCalendars(dir string, events []planfiles.Event, stamp time.Time) error {
	if err := os.MkdirAll(dir, 0o755); err != nil {
		return inputErrorf("%s: %v", dir, plainFileError(err))
	}
	of := map[string][]planfiles.Event{}
	for _, e := range events {
		name := fileName(e.Of.Station, e.Of.Spacecraft) + ".ics"
		of[name] = append(of[name], e)
	}
	there, err := filepath.Glob(filepath.Join(escapeGlob(dir), "*.ics"))
	if err != nil {
		return err
	}
	for _, file := range there {
		if name := filepath.Base(file); of[name] == nil {
			if old, err := earlierEvents(file); err == nil && len(old) > 0 {
				of[name] = []planfiles.Event{}
			}
		}
	}
	names := make([]string, 0, len(of))
	for name := range of {
		names = append(names, name)
	}
	slices.Sort(names)
	for _, name := range names {
		if err := writeCalendar(filepath.Join(dir, name), of[name], stamp); err != nil {
			return err
		}
	}
	return nil
}

func escapeGlob(s string) string {
	return strings.NewReplacer(`\`, `\\`, "*", `\*`, "?", `\?`, "[", `\[`).Replace(s)
}

// fileName makes a file name of words: what a file system may refuse becomes a hyphen.
func fileName(words ...string) string {
	clean := func(r rune) rune {
		switch {
		case r >= 'a' && r <= 'z', r >= 'A' && r <= 'Z', r >= '0' && r <= '9', r > 0x7f:
			return r
		}
		return '-'
	}
	parts := make([]string, len(words))
	for i, w := range words {
		parts[i] = strings.Map(clean, w)
	}
	return strings.Join(parts, "_")
}
