package downlink

// NoteKind tells what a note is about.
type NoteKind int

// Kinds of note.
const (
	Assumption NoteKind = iota // how a figure is meant, what a model takes for granted
	Default                    // a value that the input left out
	Warning                    // something that may make the answer wrong
)

// String returns "assumption", "default" or "warning".
func (k NoteKind) String() string { return [...]string{"assumption", "default", "warning"}[k] }

// Note is a sentence that belongs to every budget of a link and stands in every
// report of it.
type Note struct {
	Kind NoteKind
	Text string
}
