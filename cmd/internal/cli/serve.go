package cli

import (
	"context"
	"fmt"
	"math"
	"net"
	"time"

	"github.com/spf13/cobra"

	"slantwise/cmd/internal/scenario"
	"slantwise/cmd/internal/web"
	"slantwise/reports"
)

// serveOptions is what the command line says.
type serveOptions struct {
	listen string
	clock  time.Time // zero: the clock on the wall
	speed  float64
	stop   time.Duration // 0: never
}

// defaultListen is the loopback: nobody else can ask.
const defaultListen = "127.0.0.1:8460"

// mostSpeed is an hour in a second.
const mostSpeed = 3600

func newServe(env *Env) *cobra.Command {
	var o serveOptions
	cmd := &cobra.Command{
		Use:   "serve",
		Short: "Serve the live page of the scenario on this machine",
		Long: `Serve one page for the browser: the next contacts counting down, where the spacecraft
stand over the Earth and in the sky, the signal to expect now, charts of a contact with
the present instant in them, and what a change of dish, power, mode, least elevation,
pointing error or weather would bring, which can be kept: as a link, as a file for the
browser to store, or written as a new scenario beside the one that is served. The same
values come as JSON: /api/state, /api/contacts, /api/contacts/ID and, posted,
/api/what-if; /api/schema describes them, and /api/csv has those of the charts.

The scenario and all files that it is read from, in whatever folder, are read again when
they change. While they are wrong the page goes on with the last good ones and shows
the faults.

--clock and --speed rehearse: the page begins at that instant and runs so many times as
fast as the clock on the wall, 0 standing still. The embedded demo begins at the start
of its window unless --clock says otherwise.

The page is served to this machine alone. With --listen it may be another address of
the machine; a token is then made, stands in the address that is printed, and must come with each
request. There is no encryption: keep to a network that you trust. No request has a file
read, and nothing is written but the scenario that someone asks for on the page, into
the scenario's folder and never over another file. Standard output gives the address to open; an interrupt
ends the command.`,
		Example: `  slantwise serve --listen 127.0.0.1:0 --stop-after 200ms
  slantwise serve --listen 127.0.0.1:0 --clock 2026-09-15T00:50:00Z --speed 60 --stop-after 200ms   # a rehearsal`,
		Args: noArgs,
		RunE: func(cmd *cobra.Command, _ []string) error { return runServe(cmd.Context(), env, &o) },
	}
	fs := cmd.Flags()
	fs.StringVar(&o.listen, "listen", defaultListen, "`ADDRESS:PORT` to listen on, port 0 for any that is free; beyond the loopback a token is asked for")
	addTime(fs, &o.clock, "clock", "begin at this instant in place of now")
	fs.Float64Var(&o.speed, "speed", 1, "run so many `TIMES` as fast as the clock on the wall, 0 to 3600")
	addDuration(fs, &o.stop, "stop-after", 0, "end after this time")
	return cmd
}

// host checks the options and returns the host to listen on.
func (o *serveOptions) host() (string, error) {
	if !(o.speed >= 0 && o.speed <= mostSpeed) || math.IsNaN(o.speed) {
		return "", inputErrorf("--speed: %g is not allowed; it must be 0 to %d", o.speed, mostSpeed)
	}
	host, _, err := net.SplitHostPort(o.listen)
	if err != nil {
		return "", inputErrorf("--listen: %q is not an address with a port; give one as %s", o.listen, defaultListen)
	}
	ip := net.ParseIP(host)
	if host != "localhost" && (ip == nil || ip.IsUnspecified()) {
		return "", inputErrorf("--listen: %q is not one address of this machine; give one in digits, so that the page can tell by which name it is asked", host)
	}
	return host, nil
}

func runServe(ctx context.Context, env *Env, o *serveOptions) error {
	host, err := o.host()
	if err != nil {
		return err
	}
	var files watchedFiles
	env.opened = files.opened
	// To write a changed scenario it is read again, and that is not watched.
	request := scenario.Request{Path: env.Scenario, Flags: env.overrides, Need: needOrbits}
	files.restart()
	s, err := env.load(needOrbits)
	if err != nil {
		return err
	}
	model, err := newLiveModel(ctx, request, s)
	if err != nil {
		return err
	}
	source := web.Source{
		Changed: files.changed,
		Load: func(ctx context.Context) (web.Model, error) {
			files.restart()
			s, err := env.open(needOrbits)
			if err != nil {
				return nil, err
			}
			return newLiveModel(ctx, request, s)
		},
	}
	c := web.Config{
		Source: source, First: model, Style: reports.StyleSheet(), Land: reports.LandPath(), Host: host, Keep: keepIn(env.Scenario),
		Clock: web.Clock{Wall: env.Now, Began: env.Now(), Start: o.clock, Speed: o.speed},
	}
	env.startClock(s, &c.Clock)
	listener, err := net.Listen("tcp", o.listen)
	if err != nil {
		return inputErrorf("--listen %s: %w; another program may hold the port: give another, or 0 for any that is free", o.listen, err)
	}
	address := "http://" + listener.Addr().String() + "/"
	if !web.Loopback(host) {
		c.Token = web.NewToken()
		address += "?token=" + c.Token
		env.note("warning: %s can be reached by others; whoever has the token sees the scenario, and nothing is encrypted", listener.Addr())
	}
	if _, err := fmt.Fprintln(env.Out, address); err != nil {
		listener.Close()
		return err
	}
	if o.stop > 0 {
		var end context.CancelFunc
		ctx, end = context.WithTimeout(ctx, o.stop)
		defer end()
	}
	return web.New(c).Serve(ctx, listener)
}

// startClock settles where the page begins and says so.
func (e *Env) startClock(s *scenario.Scenario, c *web.Clock) {
	if c.Start.IsZero() {
		c.Start = c.Began
		if s.Demo {
			c.Start = s.Window.Start
		}
	}
	e.note("the page begins at %s and runs %g times as fast as the clock", utc(c.Start), c.Speed)
	if c.Start.Before(s.Window.Start) || !c.Start.Before(s.Window.End) {
		e.note("warning: that is outside the window, %s to %s; move the window, or begin with --clock inside it", utc(s.Window.Start), utc(s.Window.End))
	}
}
