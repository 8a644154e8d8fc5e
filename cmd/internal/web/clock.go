package web

import "time"

// Clock tells the time of the page, which may start anywhere and run at any speed.
type Clock struct {
	Wall  func() time.Time // the clock on the wall
	Began time.Time        // on the wall
	Start time.Time        // of the page at Began
	Speed float64          // of the page over the wall, 0 (it stands) or greater
}

// Now returns the time of the page, in UTC.
func (c *Clock) Now() time.Time {
	return c.Start.Add(time.Duration(float64(c.Wall().Sub(c.Began)) * c.Speed)).UTC()
}
