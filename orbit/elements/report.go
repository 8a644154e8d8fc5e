package elements

// report collects what a parser has to say about one text.
type report struct {
	file     string
	faults   Faults
	warnings []Warning
}

func (r *report) fault(f Fault) {
	f.File = r.file
	r.faults.Total++
	if len(r.faults.List) < maxFaults {
		r.faults.List = append(r.faults.List, &f)
	}
}

func (r *report) warn(line int, text string) {
	r.warnings = append(r.warnings, Warning{File: r.file, Line: line, Text: text})
}

func (r *report) err() error {
	if r.faults.Total == 0 {
		return nil
	}
	return &r.faults
}
