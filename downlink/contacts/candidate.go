package contacts

// Candidate is a window in which an antenna can serve a spacecraft.
type Candidate struct {
	Name       string // unique; stays the same from plan to plan
	Request    int    // -1: an own pass
	Spacecraft int
	Antenna    int
	Window     Span // a contact lies in it
	Least      Ms   // least length of a contact, greater than 0
	Greatest   Ms   // greatest length of a contact; 0: the window's
	SetUp      Ms
	TearDown   Ms

	PerSecond float64 // of a request: value of a second
	Links     []Link  // of a pass: what comes down by time; of a request they tell bytes alone
	Uplink    bool    // it can load commands
	Downlink  bool    // it needs commands loaded where the spacecraft has Command
	Course    []Aim   // where the antenna looks, for Slew; between samples straight
}

// Link is one transmitter of a contact.
type Link struct {
	Transmitter string
	PerByte     float64 // value of a byte where the spacecraft has no Recorder
	Volume      []Point // bytes so far by time, neither falling; straight between points, even before and after
}

// Point is a volume at an instant.
type Point struct {
	At    Ms
	Bytes float64 // since the start of the window
}

// Aim is a direction at an instant. Azimuths do not jump at north: they go on beyond
// 360 or below 0.
type Aim struct {
	At                       Ms
	AzimuthDeg, ElevationDeg float64
}

// LongestContact returns how long a contact in the candidate can be.
func (c *Candidate) LongestContact() Ms {
	if c.Greatest > 0 {
		return min(c.Greatest, c.Window.Length())
	}
	return c.Window.Length()
}

// Bytes returns what a link brings down in a span.
func (l *Link) Bytes(s Span) float64 { return l.at(s.To) - l.at(s.From) }

// at returns the bytes so far at an instant.
func (l *Link) at(t Ms) float64 {
	v := l.Volume
	if len(v) == 0 || t <= v[0].At {
		if len(v) == 0 {
			return 0
		}
		return v[0].Bytes
	}
	lo, hi := 0, len(v)-1
	if t >= v[hi].At {
		return v[hi].Bytes
	}
	for hi-lo > 1 {
		if mid := (lo + hi) / 2; v[mid].At <= t {
			lo = mid
		} else {
			hi = mid
		}
	}
	share := float64(t-v[lo].At) / float64(v[hi].At-v[lo].At)
	return v[lo].Bytes + float64(share*(v[hi].Bytes-v[lo].Bytes))
}

// Bytes returns what all links of a candidate bring down in a span.
func (c *Candidate) Bytes(s Span) float64 {
	sum := 0.0
	for i := range c.Links {
		sum += c.Links[i].Bytes(s)
	}
	return sum
}
