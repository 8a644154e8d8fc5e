package oem

import (
	"fmt"
	"strings"

	"slantwise/orbit"
)

// covariance is one lower triangle as it stands in the file, km and km/s.
type covariance struct {
	line  int // of its epoch; 0: none is open
	at    instantAt
	frame string
	rows  int
	c     [6][6]float64
}

func (b *builder) openCovariances(line int) {
	if b.where != inData {
		b.fault(line, "COVARIANCE_START", "", "stands outside a segment's data", "")
		return
	}
	b.where, b.pending = inCovariances, covariance{}
}

// closeCovariances ends the block, if one is open.
func (b *builder) closeCovariances() {
	if b.where == inCovariances {
		b.endCovariance()
		b.where = inData
	}
}

// endCovariance keeps the triangle that was read.
func (b *builder) endCovariance() {
	if c := b.pending; c.line > 0 {
		if c.rows != 6 {
			b.fault(c.line, "covariance", "", fmt.Sprintf("it has %d of 6 rows", c.rows), "")
		} else {
			b.covs = append(b.covs, c)
		}
	}
	b.pending = covariance{}
}

// covarianceKey takes a keyword of a covariance.
func (b *builder) covarianceKey(line int, key, value string) {
	switch key {
	case "EPOCH":
		frame := b.pending.frame
		b.endCovariance()
		t, problem := instant(value)
		if problem == "" {
			t, problem = b.meta.scale.utcOf(t, b.earth.UT1MinusUTC)
		}
		if problem != "" {
			b.fault(line, "EPOCH", short(value), problem, "")
		}
		// A frame once given holds for those that follow.
		b.pending = covariance{line: line, at: instantAt{t, line}, frame: frame}
	case "COV_REF_FRAME":
		b.pending.frame = strings.ToUpper(value)
	default:
		b.warn(line, "the keyword %q is not one of a covariance and is passed over", short(key))
	}
}

// covarianceRow takes a row of the lower triangle.
func (b *builder) covarianceRow(line int, s string) {
	c := &b.pending
	if c.line == 0 {
		b.fault(line, "covariance", short(s), "no EPOCH stands before it", "")
		return
	}
	fields := strings.Fields(s)
	if c.rows == 6 || len(fields) != c.rows+1 {
		b.fault(line, "covariance", short(s), fmt.Sprintf("row %d of a lower triangle has %d numbers; this one has %d", c.rows+1, c.rows+1, len(fields)), "")
		c.rows = min(c.rows+1, 6)
		return
	}
	for j, f := range fields {
		v, ok := number(f)
		if !ok {
			b.fault(line, "covariance", short(f), "is not a finite number", "write it in decimals")
		}
		c.c[c.rows][j] = v
	}
	c.rows++
}

// covariances turns those of a segment onto the axes of the orbit.
func (b *builder) covariances(s *orbit.TrajectorySegment) []orbit.CovarianceAt {
	if len(b.covs) == 0 {
		return nil
	}
	turner, err := orbit.NewTurner(b.earth)
	if err != nil {
		b.fault(b.covs[0].line, "covariance", "", err.Error(), "")
		return nil
	}
	tr := &orbit.Trajectory{Segments: []orbit.TrajectorySegment{*s}}
	var out []orbit.CovarianceAt
	for i := range b.covs {
		c := &b.covs[i]
		at := c.at.Time
		if at.Before(s.From) || at.After(s.To) {
			b.warn(c.line, "the covariance of %s lies outside the usable span and is passed over", stamp(at))
			continue
		}
		position, velocity, err := tr.StateAt(at, b.earth)
		if err != nil {
			b.fault(c.line, "covariance", "", err.Error(), "")
			continue
		}
		turn, problem := b.turnToOrbit(c, s.Frame, turner, position, velocity)
		if problem != "" {
			b.fault(c.line, "COV_REF_FRAME", short(c.frame), problem, "")
			continue
		}
		cov := turned(&c.c, &turn)
		if err := cov.Validate(); err != nil {
			b.fault(c.line, "covariance", "", err.Error(), "")
			continue
		}
		out = append(out, orbit.CovarianceAt{Time: at, Covariance: cov})
	}
	return out
}

type matrix6 [6][6]float64

// turnToOrbit returns the matrix from the covariance's axes to radial, along and across
// with inertial velocities; position and velocity in TEME.
func (b *builder) turnToOrbit(c *covariance, own orbit.Frame, turner *orbit.Turner, position, velocity orbit.Vec3) (m matrix6, problem string) {
	radial := position.Unit()
	across := position.Cross(velocity).Unit()
	along := across.Cross(radial)
	axes := [3]orbit.Vec3{radial, along, across}
	var from [3]orbit.Vec3 // the covariance's axes in TEME
	var spin orbit.Vec3    // of them, in TEME, rad/s
	switch c.frame {
	case "RTN", "RSW", "RIC":
		from = axes
	case "TNW":
		t := velocity.Unit()
		from = [3]orbit.Vec3{t, across.Cross(t), across}
	default:
		f := own
		if c.frame != "" {
			var ok bool
			if f, ok = ParseFrame(c.frame); !ok {
				return m, "is not a frame of covariances that is read: RTN, TNW, " + FrameNames
			}
		}
		at := c.at.Time
		for i, e := range [3]orbit.Vec3{{X: 1}, {Y: 1}, {Z: 1}} {
			// A velocity of zero in a rotating frame turns with it: the turn of the unit
			// vector is its position alone.
			from[i], _ = turner.Between(f, orbit.TEME, e, orbit.Vec3{}, at)
		}
		if f.Rotates() {
			spin = orbit.Vec3{Z: earthRate}
		}
	}
	for i := range 3 {
		for j := range 3 {
			a := axes[i].Dot(from[j])
			m[i][j], m[i+3][j+3] = a, a
			m[i+3][j] = axes[i].Dot(spin.Cross(from[j]))
		}
	}
	return m, ""
}

// earthRate is the rotation of the Earth in rad/s (AIAA 2006-6753).
const earthRate = 7.29211514670698e-5

// turned returns M C Mᵀ in m and m/s.
func turned(c *[6][6]float64, m *matrix6) (out orbit.Covariance) {
	at := func(i, j int) float64 {
		if j > i {
			i, j = j, i
		}
		return c[i][j] * 1e6
	}
	var half matrix6
	for i := range 6 {
		for j := range 6 {
			for k := range 6 {
				half[i][j] += m[i][k] * at(k, j)
			}
		}
	}
	for i := range 6 {
		for j := range 6 {
			for k := range 6 {
				out[i][j] += half[i][k] * m[j][k]
			}
		}
	}
	return out
}
