package elements

import (
	"fmt"
	"strings"

	"slantwise/orbit"
)

// draft is one OMM on its way to an element set.
type draft struct {
	rec   record
	kind  completeness
	rep   *report
	given map[string]entry
	el    orbit.Elements
}

// interpret turns records into element sets, all faults of all records told.
func interpret(records []record, kind completeness, rep *report) []orbit.Elements {
	var sets []orbit.Elements
	for _, rec := range records {
		before := rep.faults.Total
		d := draft{rec: rec, kind: kind, rep: rep, given: make(map[string]entry, len(rec.entries))}
		d.collect()
		d.checkRequired()
		d.checkTheory()
		d.readTexts()
		d.readEpoch()
		d.readCounts()
		d.readNumbers()
		if rep.faults.Total == before && rep.valid(&d.el, rec.line) {
			sets = append(sets, d.el)
		}
	}
	if len(records) == 0 && rep.faults.Total == 0 {
		rep.fault(Fault{Problem: "holds no element set", Next: "give a file with at least one"})
	}
	rep.warnOfKeywords()
	return sets
}

func (d *draft) fault(e entry, problem, next string) {
	d.rep.fault(Fault{Line: e.line, Column: e.column, Field: e.key, Text: e.value, Problem: problem, Next: next})
}

func (d *draft) refuse(e entry, problem, next string) {
	d.rep.fault(Fault{Line: e.line, Column: e.column, Field: e.key, Text: e.value, Problem: problem, Next: next, Unsupported: true})
}

// collect sorts the entries by keyword; a keyword may stand once.
func (d *draft) collect() {
	d.el.Source = orbit.Source{File: d.rep.file, Line: d.rec.line}
	for _, e := range d.rec.entries {
		k, known := lookUp(e.key)
		switch {
		case !known:
			d.rep.unknown.add(e.key, e.line)
			continue
		case k.role == commentKey:
			continue
		case k.role == passedKey:
			d.rep.passed.add(e.key, e.line)
			continue
		case e.value == "":
			continue
		}
		if first, twice := d.given[e.key]; twice {
			d.fault(e, fmt.Sprintf("is given twice; line %d gives it as %q", first.line, first.value), "keep one of them")
			continue
		}
		d.given[e.key] = e
		if !k.unitFits(e.unit) {
			d.fault(e, fmt.Sprintf("the unit [%s] is not the one that an OMM has here: %s", e.unit, orNone(k.unit)), "convert the value")
		}
	}
}

func orNone(unit string) string {
	if unit == "" {
		return "none"
	}
	return "[" + unit + "]"
}

func (d *draft) checkRequired() {
	var missing []string
	for _, k := range keywords {
		if _, ok := d.given[k.name]; k.required && !ok {
			missing = append(missing, k.name)
		}
	}
	_, axis := d.given["SEMI_MAJOR_AXIS"]
	motion, both := d.given["MEAN_MOTION"]
	switch {
	case axis && both:
		d.fault(motion, "SEMI_MAJOR_AXIS is given too; only one of the two may be", "take one of them out")
	case !axis && !both:
		missing = append(missing, "MEAN_MOTION (or SEMI_MAJOR_AXIS)")
	}
	if d.kind == fullMessage {
		missing = append(missing, d.checkHeader()...)
	}
	if len(missing) > 0 {
		d.rep.fault(Fault{Line: d.rec.line, Field: "OMM", Problem: "required and not given: " + strings.Join(missing, ", "),
			Next: "fetch the message again, or add them"})
	}
}

// checkHeader returns what a full message lacks. Creation date and originator stay
// without a value in some messages in use; nothing is computed from them.
func (d *draft) checkHeader() (missing []string) {
	present := map[string]bool{}
	for _, e := range d.rec.entries {
		present[e.key] = true
	}
	for _, k := range keywords {
		_, valued := d.given[k.name]
		switch {
		case k.role == headerKey && !present[k.name], k.role == fixedKey && !valued:
			missing = append(missing, k.name)
		case k.role == headerKey && !valued:
			d.rep.warn(d.rec.line, k.name+" is required and has no value; it is not needed to compute the orbit")
		}
	}
	return missing
}

// fixedValues are the only values with which SGP4 may be used; the second spelling
// of the theory is an older one (CCSDS 502.0-B-2; from memory).
var fixedValues = map[string][]string{
	"CENTER_NAME":         {"EARTH"},
	"REF_FRAME":           {"TEME"},
	"TIME_SYSTEM":         {"UTC"},
	"MEAN_ELEMENT_THEORY": {"SGP4", "SGP/SGP4"},
}

// checkTheory refuses elements that SGP4 does not understand.
func (d *draft) checkTheory() {
	for _, k := range keywords {
		e, ok := d.given[k.name]
		switch {
		case k.role == fixedKey && !ok && d.kind == bareKeywords:
			d.rep.assumed.add(k.name+" = "+fixedValues[k.name][0], d.rec.line)
		case k.role == fixedKey && ok && !oneOf(e.value, fixedValues[k.name]):
			d.refuse(e, "is valid, but not supported here; it must be "+fixedValues[k.name][0], "fetch SGP4 elements of the object")
		case k.role == xpKey && ok:
			d.refuse(e, "belongs to SGP4-XP elements, which are valid, but not supported here", "fetch SGP4 elements of the object")
		}
	}
	if e, ok := d.given["CCSDS_OMM_VERS"]; ok && !oneOf(e.value, []string{"1.0", "2.0", "3.0"}) {
		d.refuse(e, "this version of the OMM is not known; it must be 1.0, 2.0 or 3.0", "convert the message to version 2.0")
	}
	d.checkType()
}

func oneOf(s string, allowed []string) bool {
	for _, a := range allowed {
		if strings.EqualFold(s, a) {
			return true
		}
	}
	return false
}

func (d *draft) checkType() {
	e, ok := d.given["EPHEMERIS_TYPE"]
	if !ok || e.value == "0" {
		return
	}
	switch e.value {
	case "2":
		d.rep.warn(e.line, "EPHEMERIS_TYPE 2 says SGP4 outright; it is read as type 0, the published kind")
	case "4":
		d.refuse(e, "type 4 marks SGP4-XP elements, which plain SGP4 would place wrong by kilometres", "fetch SGP4 elements (type 0) of the object")
	default:
		d.refuse(e, "only type 0 (SGP4) is read", "fetch SGP4 elements (type 0) of the object")
	}
}
