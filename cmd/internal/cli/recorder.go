package cli

import (
	"fmt"
	"time"

	"github.com/spf13/cobra"

	"slantwise/cmd/internal/scenario"
	"slantwise/downlink"
	"slantwise/downlink/recorder"
)

type recorderOptions struct {
	spacecraft, transmitter, mode string
	stations                      []string
	what                          string
	format                        format
}

// What the command may write.
var recorderSheets = []string{"data", "contacts", "volumes", "filling"}

func newRecorder(env *Env) *cobra.Command {
	var o recorderOptions
	cmd := &cobra.Command{
		Use:   "recorder",
		Short: "On-board recorder through the window: what arrives, how old, what is lost",
		Long: `Follow the data of a spacecraft's recorder through the window: all passes over the
stations, each with the modes of its rate plan (the command rates shows it), after the
lock-on time, within the licences. Passes that overlap are taken in the order of AOS,
each from the end of the one before.

  --show data      made, received, lost, on board, and the age at delivery, a kind of data a row
  --show contacts  what each contact offered and brought, and the backlog after it
  --show volumes   bytes a day and a week for each station
  --show filling   the recorder at every change`,
		Example: `  slantwise recorder --spacecraft "Wagtail 1" --transmitter X-band
  slantwise recorder --spacecraft "Wagtail 1" --transmitter X-band --show contacts --format csv`,
		Args: noArgs,
		RunE: func(*cobra.Command, []string) error { return runRecorder(env, &o) },
	}
	fs := cmd.Flags()
	fs.StringVar(&o.spacecraft, "spacecraft", "", "`NAME` of the spacecraft")
	fs.StringVar(&o.transmitter, "transmitter", "", "`NAME` of the transmitter")
	fs.StringVar(&o.mode, "mode", "", "`NAME` of the only mode that may be sent (left out: all)")
	fs.StringArrayVar(&o.stations, "station", nil, "`NAME` of a station (again for more; left out: all)")
	fs.StringVar(&o.what, "show", "data", "`WHAT` to write: data, contacts, volumes or filling")
	addFormat(cmd, &o.format)
	return cmd
}

func runRecorder(env *Env, o *recorderOptions) error {
	show, err := pick("show", o.what, recorderSheets, func(s *string) string { return *s })
	if err != nil {
		return inputErrorf("--show: %q is not allowed; it must be %s", o.what, quotedList(recorderSheets))
	}
	s, err := env.load(needOrbits)
	if err != nil {
		return err
	}
	craft, err := pick("spacecraft", o.spacecraft, s.Spacecraft, spacecraftName)
	if err != nil {
		return err
	}
	if craft.Recorder == nil {
		return inputErrorf("spacecraft %s: the scenario gives it no recorder; add the key recorder to it", craft.Name)
	}
	tx, err := pick("transmitter", o.transmitter, craft.Transmitters, transmitterName)
	if err != nil {
		return err
	}
	stations, err := pickMany("station", o.stations, s.Stations, stationName)
	if err != nil {
		return err
	}
	plan, notes, err := recorderPlan(s, craft, tx, stations, o.mode)
	if err != nil {
		return err
	}
	result, err := recorder.Simulate(plan)
	if err != nil {
		return &InputError{Err: fmt.Errorf("spacecraft %s, recorder: %w", craft.Name, err)}
	}
	out := map[string]func(*recorder.Plan, *recorder.Result) *sheet{
		"data": dataSheet, "contacts": contactSheet, "volumes": volumeSheet, "filling": fillingSheet,
	}[*show](plan, result)
	out.notes = notes
	return out.write(env, o.format)
}

// recorderPlan puts together what is made on board and the contacts that carry it.
func recorderPlan(s *scenario.Scenario, c *scenario.Spacecraft, tx *downlink.Transmitter, stations []scenario.Station, mode string) (*recorder.Plan, []string, error) {
	r := c.Recorder
	p := &recorder.Plan{
		Start: s.Window.Start, Length: s.Window.Length().Seconds(), Capacity: r.Capacity, WhenFull: r.WhenFull,
		Housekeeping: r.Housekeeping, Acknowledge: r.Acknowledge, WithoutUplink: r.WithoutUplink, Copies: r.Copies,
	}
	nodes, err := ascendingNodes(s, c)
	if err != nil {
		return nil, nil, err
	}
	for i := range r.Data {
		p.Classes = append(p.Classes, r.Data[i].Class(nodes, p.Length))
	}
	for i := range stations {
		if rate := stations[i].Line.BitsPerSecond(); rate > 0 {
			p.Lines = append(p.Lines, recorder.Line{Station: stations[i].Site.Name, BytesPerSecond: rate / 8})
		}
	}
	contacts, notes, err := recorderContacts(s, c, tx, stations, mode)
	p.Contacts = contacts
	return p, notes, err
}

// ascendingNodes lists the orbits' beginnings, in seconds of the window, with the one
// before it.
func ascendingNodes(s *scenario.Scenario, c *scenario.Spacecraft) ([]float64, error) {
	byOrbit := false
	for _, d := range c.Recorder.Data {
		byOrbit = byOrbit || d.BytesPerOrbit > 0
	}
	if !byOrbit {
		return nil, nil
	}
	facts, err := c.Elements.Facts()
	if err != nil {
		return nil, &InputError{Err: fmt.Errorf("spacecraft %s: %w", c.Name, err)}
	}
	var out []float64
	at := s.Window.Start.Add(-facts.Period * 11 / 10)
	for {
		node, err := c.Elements.NextAscendingNode(at)
		if err != nil {
			return nil, &InputError{Err: fmt.Errorf("spacecraft %s: data made by orbit: %w", c.Name, err)}
		}
		if !node.Before(s.Window.End) {
			return out, nil
		}
		out = append(out, node.Sub(s.Window.Start).Seconds())
		at = node.Add(time.Minute) // well past the node, well before the next
	}
}

func dataSheet(_ *recorder.Plan, r *recorder.Result) *sheet {
	out := &sheet{name: "data", columns: []sheetColumn{
		wordsAs("data", "data"), numbersAs("on_board_start_bytes", "at first B", 0), numbersAs("made_bytes", "made B", 0), numbersAs("received_bytes", "received B", 0),
		numbersAs("lost_full_bytes", "lost full B", 0), numbersAs("lost_on_the_way_bytes", "lost on the way B", 0), numbersAs("on_board_end_bytes", "on board B", 0),
		numbersAs("age_at_station_median_s", "median s", 1), numbersAs("age_at_station_p95_s", "95 % s", 1), numbersAs("age_at_station_worst_s", "worst s", 1),
		numbersAs("age_at_user_median_s", "user median s", 1), numbersAs("age_at_user_p95_s", "user 95 % s", 1), numbersAs("age_at_user_worst_s", "user worst s", 1),
	}}
	add := func(c recorder.ClassResult) {
		a, u := c.Latency.AtStation, c.Latency.AtUser
		out.rows = append(out.rows, []any{c.Name, c.OnBoardStart, c.Made, c.Received, c.LostFull, c.LostOnTheWay, c.OnBoardEnd,
			a.Median, a.P95, a.Worst, u.Median, u.P95, u.Worst})
	}
	all := recorder.ClassResult{Name: "all", Latency: r.Latency}
	for _, c := range r.Classes {
		add(c)
		all.OnBoardStart += c.OnBoardStart
		all.Made += c.Made
		all.Received += c.Received
		all.LostFull += c.LostFull
		all.LostOnTheWay += c.LostOnTheWay
		all.OnBoardEnd += c.OnBoardEnd
	}
	add(all)
	return out
}

func contactSheet(p *recorder.Plan, r *recorder.Result) *sheet {
	out := &sheet{name: "contacts", columns: []sheetColumn{
		wordsAs("station", "station"), wordsAs("from_utc", "from UTC"), wordsAs("to_utc", "to UTC"), numbersAs("offered_bytes", "offered B", 0), numbersAs("sent_bytes", "sent B", 0),
		numbersAs("received_bytes", "received B", 0), numbersAs("housekeeping_bytes", "housekeeping B", 0), numbersAs("backlog_bytes", "backlog B", 0),
	}}
	for _, c := range r.Contacts {
		out.rows = append(out.rows, []any{c.Station, utc(after(p.Start, c.From)), utc(after(p.Start, c.To)), c.Offered, c.Sent, c.Received, c.Housekeeping, c.Backlog})
	}
	return out
}

func volumeSheet(_ *recorder.Plan, r *recorder.Result) *sheet {
	out := &sheet{name: "volumes", columns: []sheetColumn{
		wordsAs("span", "span"), wordsAs("from_utc", "from UTC"), wordsAs("station", "station"), numbersAs("received_bytes", "received B", 0),
	}}
	for _, s := range []struct {
		name string
		of   []recorder.Volume
	}{{"day", r.Days}, {"week", r.Weeks}} {
		for _, v := range s.of {
			out.rows = append(out.rows, []any{s.name, utc(v.From), v.Station, v.Bytes})
		}
	}
	return out
}

func fillingSheet(p *recorder.Plan, r *recorder.Result) *sheet {
	out := &sheet{name: "filling", columns: []sheetColumn{wordsAs("utc", "UTC"), numbersAs("stored_bytes", "stored B", 0), numbersAs("unsent_bytes", "unsent B", 0)}}
	for _, c := range r.Course {
		out.rows = append(out.rows, []any{utc(after(p.Start, c.Seconds)), c.Stored, c.Unsent})
	}
	return out
}
