package scenario

import (
	"errors"
	"fmt"
	"io/fs"

	"slantwise/orbit/unit"
	"slantwise/station"
)

// mask reads the horizon mask, nil where there is none.
func (o object) mask() *station.Mask {
	which, given := o.exclusive("horizon_mask", "horizon_mask_file")
	if !given {
		o.useless("without a horizon mask", "horizon_mask_kind")
		return nil
	}
	kind := elevationKind(o, "horizon_mask_kind", "the mask is taken in")
	if which == "horizon_mask_file" {
		return o.maskFile(kind)
	}
	rows, ok := o.pairs("horizon_mask", "[azimuth in deg, elevation in deg]",
		span{low: 0, high: 360, highOpen: true, unit: "deg", next: "azimuth is clockwise from north; the mask closes by itself"},
		span{low: -10, high: 90, highOpen: true, unit: "deg"})
	if !ok {
		return nil
	}
	points := make([]station.MaskPoint, len(rows))
	for i, row := range rows {
		points[i] = station.MaskPoint{Azimuth: unit.Angle(row[0]) * unit.Degree, Elevation: unit.Angle(row[1]) * unit.Degree}
		if i > 0 && !(row[0] > rows[i-1][0]) {
			at := o.get("horizon_mask").Items[i]
			o.fault(at, fmt.Sprintf("horizon_mask[%d]", i), "azimuth %g deg does not rise over %g deg", "sort the points by azimuth, each azimuth once", row[0], rows[i-1][0])
			return nil
		}
	}
	m, err := station.NewMask(points, kind)
	o.addAll(o.get("horizon_mask"), "horizon_mask", err)
	return m
}

func (o object) maskFile(kind station.ElevationKind) *station.Mask {
	name, ok := o.text("horizon_mask_file")
	if !ok {
		return nil
	}
	f := o.file("horizon_mask_file", name)
	if f == nil {
		return nil
	}
	defer f.Close()
	m, err := station.ReadMaskCSV(f, kind)
	if err != nil {
		o.fault(o.get("horizon_mask_file"), "horizon_mask_file", "%s: %v", "", name, err)
	}
	return m
}

// file opens a file that a key names; nil with a fault where it cannot be read.
func (o object) file(key, name string) fs.File {
	f, err := o.r.src.open(name)
	if err == nil {
		return f
	}
	var pe *fs.PathError
	if errors.As(err, &pe) {
		err = pe.Err
	}
	o.fault(o.get(key), key, "%s cannot be read: %v", "names are relative to the scenario file", quote(name), err)
	return nil
}
