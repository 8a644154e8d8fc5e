package station

import "slantwise/orbit/unit"

// errorWithoutBeam is the error that counts as followed where no beamwidth is known.
const errorWithoutBeam = 0.1 * unit.Degree

// FollowingError returns the half-power beamwidth at a frequency, 0 where it is not known,
// and the error on the sky up to which a pass counts as followed: the mount's own, else
// a tenth of the beam (12 (1/10)² = 0.12 dB), else 0.1°.
func (a *Antenna) FollowingError(f unit.Frequency) (beam, tolerance unit.Angle) {
	beam, known := a.BeamwidthAt(f)
	if !known {
		beam = 0
	}
	switch {
	case a.Mount != nil && a.Mount.Tolerance > 0:
		return beam, a.Mount.Tolerance
	case known:
		return beam, beam / 10
	}
	return beam, errorWithoutBeam
}

// MountFor returns the mount of an antenna of the same kind but another diameter: with the
// rates of ForDiameter, and where a following error is stated, with that error narrowed
// as the beam of a greater dish is. beyond is that of ForDiameter; nil without a mount.
func (a *Antenna) MountFor(d unit.Length) (m *Mount, beyond bool) {
	if a.Mount == nil {
		return nil, false
	}
	of, beyond := a.Mount.ForDiameter(d)
	if a.Diameter > 0 && d > a.Diameter {
		of.Tolerance = unit.Angle(of.Tolerance.Radians() * a.Diameter.Metres() / d.Metres())
	}
	return &of, beyond
}
