package elements

// entry is one keyword with its value, in any of the four notations.
type entry struct {
	key, value, unit string // unit: as given, without brackets; empty when not given
	line, column     int    // of the value
}

// record is one OMM: its entries in the order of the text.
type record struct {
	line    int
	entries []entry
}

func (r *record) add(e entry) { r.entries = append(r.entries, e) }

// completeness says which keywords a notation must carry.
type completeness int

const (
	// fullMessage is an OMM as the standard has it: KVN and XML.
	fullMessage completeness = iota
	// bareKeywords is a row or flat object: in use without header, and often without
	// the keywords that have an only possible value for SGP4 elements.
	bareKeywords
)
