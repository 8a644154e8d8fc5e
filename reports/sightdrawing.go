package reports

import (
	"fmt"
	"html/template"
	"math"
	"strings"

	"slantwise/downlink"
)

// Sight is how the transmit antenna sees the station at one of a pass's instants.
type Sight struct {
	Name string // of the instant, "culmination"
	downlink.Sightline
}

// sightView is a drawing with its words.
type sightView struct {
	Name, Clock, Angle, Text string
	Drawing                  template.HTML
}

func sightViews(p *Pass) []sightView {
	if p.Radio == nil {
		return nil
	}
	var list []sightView
	for _, s := range p.Radio.Sights {
		v := sightView{Name: s.Name, Clock: utcClock(s.Time, layoutOf(p)), Angle: fixed(s.Off.Degrees(), 1) + "°", Text: sightText(&s)}
		v.Drawing = sightDrawing(&s)
		list = append(list, v)
	}
	return list
}

// axisName is what the station's angle counts from.
func (s *Sight) axisName() string {
	if s.OnAxis {
		return "spin axis"
	}
	return "boresight"
}

// sightText says in words what the drawing shows.
func sightText(s *Sight) string {
	return fmt.Sprintf("The station stands %s° off the %s and %s° off the line to the Earth’s centre; the %s %s° off that line.",
		fixed(s.Off.Degrees(), 1), s.axisName(), fixed(s.OffNadir.Degrees(), 1), s.axisName(), fixed(s.Boresight.Degrees(), 1))
}

// The drawing's size, its margin, the radius of the angle's arc and the arrow's length, in
// its own units.
const (
	sightWidth, sightHeight, sightMargin = 260.0, 190.0, 30.0
	sightArc, sightReach                 = 42.0, 74.0
)

// sightPlan is where things stand in the drawing.
type sightPlan struct{ ox, oy, sx, sy, scale float64 } // spacecraft, station; units a kilometre

// plan leaves room for the station, and for the arrow on whichever side it points to.
func (s *Sight) plan() sightPlan {
	x, y := s.StationX.Kilometres(), s.StationY.Kilometres()
	left, top := sightMargin+sightReach*max(0, -s.BoresightX), sightMargin+sightReach*max(0, -s.BoresightY)
	scale := min((sightWidth-left-sightMargin)/max(x, 1), (sightHeight-top-sightMargin)/max(y, 1))
	spare := sightWidth - left - sightMargin - max(x*scale, sightReach*s.BoresightX)
	ox, oy := left+max(0, spare)/2, top
	return sightPlan{ox, oy, ox + x*scale, oy + y*scale, scale}
}

// sightDrawing draws the plane of spacecraft, station and boresight to scale: the Earth's
// limb, a solid line to the station, a dashed one along the boresight and the angle
// between them. Nothing in it is text of the scenario.
func sightDrawing(s *Sight) template.HTML {
	l := s.plan()
	ox, oy, sx, sy := l.ox, l.oy, l.sx, l.sy
	var b strings.Builder
	put := func(format string, args ...any) { fmt.Fprintf(&b, format, args...) }
	put(`<svg class="sight" viewBox="0 0 %g %g" aria-hidden="true" focusable="false">`, sightWidth, sightHeight)
	put(`<circle class="earth" cx="%.1f" cy="%.1f" r="%.1f"/>`, ox, oy+s.EarthY.Kilometres()*l.scale, s.EarthRadius.Kilometres()*l.scale)
	put(`<line class="tosite" x1="%.1f" y1="%.1f" x2="%.1f" y2="%.1f"/>`, ox, oy, sx, sy)
	bx, by := ox+sightReach*s.BoresightX, oy+sightReach*s.BoresightY
	put(`<line class="axis" x1="%.1f" y1="%.1f" x2="%.1f" y2="%.1f"/>`, ox, oy, bx, by)
	put(`<path class="head" d="%s"/>`, arrowHead(bx, by, s.BoresightX, s.BoresightY))
	put(`<path class="arc" d="%s"/>`, sightArcPath(s, ox, oy))
	lx, ly := middleOf(s)
	put(`<text x="%.1f" y="%.1f" text-anchor="middle">%s°</text>`, ox+(sightArc+16)*lx, oy+(sightArc+16)*ly+4, fixed(s.Off.Degrees(), 1))
	put(`<rect class="craft" x="%.1f" y="%.1f" width="9" height="9"/>`, ox-4.5, oy-4.5)
	put(`<path class="site" d="M%.1f %.1fl-5 9h10z"/>`, sx, sy)
	b.WriteString("</svg>")
	return template.HTML(b.String()) // numbers alone
}

// toStation is the direction to the station, of length one.
func (s *Sight) toStation() (x, y float64) {
	n := math.Hypot(float64(s.StationX), float64(s.StationY))
	return float64(s.StationX) / n, float64(s.StationY) / n
}

// middleOf is the direction halfway between the boresight and the station.
func middleOf(s *Sight) (x, y float64) {
	u, v := s.toStation()
	x, y = u+s.BoresightX, v+s.BoresightY
	if n := math.Hypot(x, y); n > 1e-6 {
		return x / n, y / n
	}
	return -v, u // straight behind
}

// sightArcPath is the arc from the boresight to the station, the shorter way.
func sightArcPath(s *Sight, ox, oy float64) string {
	u, v := s.toStation()
	sweep := 0
	if s.BoresightX*v-s.BoresightY*u > 0 {
		sweep = 1
	}
	return fmt.Sprintf("M%.1f %.1fA%g %g 0 0 %d %.1f %.1f", ox+sightArc*s.BoresightX, oy+sightArc*s.BoresightY, sightArc, sightArc, sweep, ox+sightArc*u, oy+sightArc*v)
}

// arrowHead is a small triangle with its point ahead.
func arrowHead(x, y, dx, dy float64) string {
	return fmt.Sprintf("M%.1f %.1fL%.1f %.1fL%.1f %.1fz", x+6*dx, y+6*dy, x-4*dx-4*dy, y-4*dy+4*dx, x-4*dx+4*dy, y-4*dy-4*dx)
}

type sightJSON struct {
	Event           string `json:"event"`
	UTC             string `json:"utc"`
	From            string `json:"from"` // boresight or spin axis
	OffDeg          number `json:"station_off_deg"`
	StationNadirDeg number `json:"station_off_nadir_deg"`
	AxisNadirDeg    number `json:"axis_off_nadir_deg"`
}

func sightsJSON(r *Radio) []sightJSON {
	list := []sightJSON{}
	for _, s := range r.Sights {
		list = append(list, sightJSON{s.Name, sampleTime(s.Time, 0).Format(utcLayout), s.axisName(),
			number{s.Off.Degrees(), 3}, number{s.OffNadir.Degrees(), 3}, number{s.Boresight.Degrees(), 3}})
	}
	return list
}
