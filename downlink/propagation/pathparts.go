package propagation

import "slantwise/orbit/unit"

// Parts tells which parts of the air a path takes into account.
type Parts struct{ Gas, Cloud, Rain, Scintillation bool }

// Parts returns what is in At and Sky. A part is not in it where it was left out as
// asked, where the climate does not state it, or where its Recommendation does not
// count it at the path's percentage; Notes says which.
func (p *Path) Parts() Parts {
	s, c := &p.spec, &p.spec.Climate
	return Parts{
		Gas:           !s.WithoutGas,
		Cloud:         !s.ClearSky && !s.WithoutCloud && (!c.CloudWater.Empty() || c.CloudLogNormal != nil),
		Rain:          p.model.rain != nil,
		Scintillation: p.model.scintillation != nil,
	}
}

// Medium returns the mean temperature at which the air above the site radiates.
func (p *Path) Medium() unit.Temperature { return unit.Temperature(p.medium) }

// Background returns what stands behind the air: the galaxy at its mean brightness and
// the cosmic background.
func (p *Path) Background() unit.Temperature { return unit.Temperature(p.behind) }

// Exceedance returns the share of an average year that the path was prepared for.
func (p *Path) Exceedance() Exceedance { return p.spec.Exceedance }
