package downlink

import (
	"errors"
	"fmt"
	"math"

	"slantwise/orbit/unit"
)

// PatternKind is the form of a transmit antenna's pattern.
type PatternKind int

// Forms of pattern.
const (
	Isotropic   PatternKind = iota // PeakGain in every direction
	CosinePower                    // PeakGain times cosⁿ of the off-boresight angle, BackLobe beyond 90°
	GainTable                      // linear in dB between the points of Table
	GainGrid                       // bilinear in dB between the nodes of Grid, in two angles
)

// Pattern is the power gain of a transmit antenna against the angle off its
// boresight, the same all around it but for a grid.
type Pattern struct {
	Kind     PatternKind
	PeakGain unit.DB        // dBi, of Isotropic and CosinePower
	Exponent float64        // n of CosinePower, 0 or greater
	BackLobe *unit.DB       // dBi, of CosinePower beyond 90°; nil: nothing is radiated there
	Table    []PatternPoint // of GainTable; angles rise from 0
	Grid     *PatternGrid   // of GainGrid
}

// PatternPoint is a point of a measured pattern.
type PatternPoint struct {
	OffBoresight unit.Angle // [0°, 180°]
	Gain         unit.DB    // dBi
}

// String returns the form as the scenario writes it.
func (k PatternKind) String() string {
	return [...]string{"isotropic", "cosine_power", "table", "table of two angles"}[k]
}

// GainAt returns the gain in dBi at an angle off boresight in [0, π]. Where a pattern
// radiates nothing (a cosine power beyond 90° without back lobe) or a table does not
// reach, the error is a *unit.RangeError. A grid has a gain on its boresight alone here.
func (p *Pattern) GainAt(off unit.Angle) (unit.DB, error) {
	return p.GainToward(off, unit.Angle(math.NaN()))
}

// GainToward is GainAt in a direction with its angle around the boresight, in [0, 2π];
// NaN where that is not known, which only a grid minds.
func (p *Pattern) GainToward(off, around unit.Angle) (unit.DB, error) {
	g, ok := p.gainToward(off.Radians(), around.Radians())
	if ok {
		return g, nil
	}
	last := unit.Angle(0)
	switch p.Kind {
	case GainTable:
		last = p.Table[len(p.Table)-1].OffBoresight
	case GainGrid:
		last = p.Grid.Off[len(p.Grid.Off)-1]
		if off <= last {
			return 0, errors.New("the pattern's gain depends on the angle around the boresight, which is not known")
		}
	}
	e := &unit.RangeError{Quantity: "off-boresight angle", Value: off.Degrees(), Unit: "deg"}
	switch {
	case p.Kind == CosinePower:
		e.Allowed, e.Next = "less than 90 deg", "beyond it this pattern radiates nothing; give its back lobe"
	default:
		e.Allowed = fmt.Sprintf("0 to %g deg, where the pattern's table ends", asGiven(last))
		e.Next = "give the table up to the angle"
	}
	return 0, e
}

// gainToward is GainToward for the inner loop; ok is false where there is none.
func (p *Pattern) gainToward(off, around float64) (g unit.DB, ok bool) {
	if p.Kind == GainGrid {
		return p.Grid.at(off, around)
	}
	return p.gain(off)
}

// gain is the gain of a pattern that is the same all around its boresight.
func (p *Pattern) gain(off float64) (g unit.DB, ok bool) {
	switch p.Kind {
	case Isotropic:
		return p.PeakGain, true
	case CosinePower:
		switch {
		case off < math.Pi/2:
			return p.PeakGain + unit.DB(10*p.Exponent*math.Log10(math.Cos(off))), true
		case off >= math.Pi/2 && p.BackLobe != nil:
			return *p.BackLobe, true
		}
		return 0, false // not a number, too
	}
	return p.interpolate(off)
}

func (p *Pattern) interpolate(off float64) (unit.DB, bool) {
	if !(off >= 0) {
		return 0, false
	}
	last := p.Table[len(p.Table)-1]
	if off >= last.OffBoresight.Radians() {
		// A table up to 180 deg must not miss π by a rounding.
		return last.Gain, off-last.OffBoresight.Radians() < 1e-9
	}
	i := 1
	for p.Table[i].OffBoresight.Radians() <= off {
		i++
	}
	a, b := p.Table[i-1], p.Table[i]
	w := (off - a.OffBoresight.Radians()) / (b.OffBoresight - a.OffBoresight).Radians()
	return unit.DB(float64(a.Gain)*(1-w) + float64(b.Gain)*w), true
}

// WholeSphere tells whether the pattern is known in every direction.
func (p *Pattern) WholeSphere() bool {
	switch p.Kind {
	case CosinePower:
		return p.BackLobe != nil
	case GainTable:
		return p.Table[len(p.Table)-1].OffBoresight >= 180*unit.Degree-1e-9
	case GainGrid:
		return p.Grid.Off[len(p.Grid.Off)-1] >= 180*unit.Degree-angleSlack
	}
	return true
}

// Validate returns every fault of the pattern.
func (p *Pattern) Validate() error {
	if p.Kind == GainGrid {
		if p.Grid == nil {
			return errors.New("the pattern has no table of two angles")
		}
		return nil // NewPatternGrid has checked it
	}
	var faults []error
	gain := func(what string, g unit.DB) {
		if !(g >= -200 && g <= 100) {
			faults = append(faults, &unit.RangeError{Quantity: what, Value: float64(g), Unit: "dBi", Allowed: "-200 to 100 dBi"})
		}
	}
	if p.Kind != GainTable {
		gain("peak gain", p.PeakGain)
	}
	if p.Kind == CosinePower && !(p.Exponent >= 0 && p.Exponent <= 1000) {
		faults = append(faults, &unit.RangeError{Quantity: "exponent", Value: p.Exponent, Allowed: "0 to 1000"})
	}
	if p.BackLobe != nil {
		gain("back lobe", *p.BackLobe)
	}
	if p.Kind != GainTable {
		return errors.Join(faults...)
	}
	if len(p.Table) < 2 {
		faults = append(faults, errors.New("the pattern's table needs two points at least, the first at 0 deg"))
	}
	for i, q := range p.Table {
		gain(fmt.Sprintf("point %d of the pattern", i+1), q.Gain)
		off := q.OffBoresight.Degrees()
		switch {
		case i == 0 && off != 0:
			faults = append(faults, fmt.Errorf("the pattern's table begins at %g deg; begin it at 0 deg", off))
		case !(off >= 0 && off <= 180+1e-9):
			faults = append(faults, &unit.RangeError{Quantity: fmt.Sprintf("point %d of the pattern", i+1), Value: off, Unit: "deg", Allowed: "0 to 180 deg"})
		case i > 0 && !(q.OffBoresight > p.Table[i-1].OffBoresight):
			faults = append(faults, fmt.Errorf("point %d of the pattern: %g deg does not rise over %g deg; sort the points by angle, each once", i+1, off, p.Table[i-1].OffBoresight.Degrees()))
		}
	}
	return errors.Join(faults...)
}
