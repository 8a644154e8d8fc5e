package propagation

import (
	"fmt"
	"slices"
	"strings"
)

// batchModel evaluates one model on the rows of a table. Columns are named as the
// published sheets name them, with the unit in the name.
type batchModel struct {
	name string
	// inputs returns the columns that the model needs, from those that the table has.
	inputs func(b *Batch) ([]string, error)
	// results are the columns that it appends.
	results []string
	// evaluate computes the results of a row.
	evaluate func(b *Batch, r *batchRow, out []float64) error
}

// batchModels lists the models in the order in which help names them.
func batchModels() []batchModel {
	return []batchModel{gasSpecificBatch, gasSlantBatch, rainCoefficientsBatch, rainSpecificBatch, rainBatch, rainRateBatch,
		rainHeightBatch, cloudBatch, scintillationBatch, totalBatch, xpdBatch, wetRefractivityBatch}
}

// BatchModels returns the names of the models that a batch takes.
func BatchModels() []string {
	var names []string
	for _, m := range batchModels() {
		names = append(names, m.name)
	}
	return names
}

// BatchOptions say how a batch is evaluated.
type BatchOptions struct {
	Model     string
	Editions  Editions // the zero value stands for Newest
	LogNormal bool     // cloud by the log-normal approximation in place of the direct method
}

// Batch evaluates one model on the rows of a table with a given header.
type Batch struct {
	model    batchModel
	editions Editions
	options  BatchOptions
	header   []string
	column   map[string]int
	needed   []string
	warnings batchWarnings
}

// NewBatch checks the options and that the header has the columns that the model
// needs; columns that it does not need pass through.
func NewBatch(o BatchOptions, header []string) (*Batch, error) {
	b := &Batch{editions: o.Editions, options: o, header: header, column: map[string]int{}}
	if b.editions == (Editions{}) {
		b.editions = Newest
	}
	if err := b.editions.check(); err != nil {
		return nil, err
	}
	i := slices.IndexFunc(batchModels(), func(m batchModel) bool { return m.name == o.Model })
	if i < 0 {
		return nil, fmt.Errorf("model %q is not known; give one of %s", o.Model, strings.Join(BatchModels(), ", "))
	}
	b.model = batchModels()[i]
	if o.LogNormal && o.Model != cloudBatch.name {
		return nil, fmt.Errorf("the log-normal approximation belongs to model %q, not to %q", cloudBatch.name, o.Model)
	}
	for i, h := range header {
		h = strings.TrimSpace(h) // as the cells; the header passes through as it is
		if _, twice := b.column[h]; twice {
			return nil, fmt.Errorf("column %q stands twice in the header", h)
		}
		if slices.Contains(b.model.results, h) {
			return nil, fmt.Errorf("column %q is in the header already, and would be appended; rename it", h)
		}
		b.column[h] = i
	}
	var err error
	if b.needed, err = b.model.inputs(b); err != nil {
		return nil, err
	}
	return b, nil
}

// Results returns the names of the columns that are appended.
func (b *Batch) Results() []string { return b.model.results }

// Warnings returns what the rows evaluated so far had beyond a stated range, each
// once with the first line and the number of lines that it concerns.
func (b *Batch) Warnings() []Note {
	var all []Note
	for _, w := range b.warnings.inOrder {
		where := fmt.Sprintf("line %d", w.line)
		if w.count > 1 {
			where += fmt.Sprintf(" and %d more", w.count-1)
		}
		all = append(all, Note{w.note.Kind, where + ": " + w.note.Text})
	}
	return all
}

// batchWarnings counts the notes of the rows.
type batchWarnings struct {
	inOrder []*countedNote
	known   map[Note]*countedNote
}

type countedNote struct {
	note        Note
	line, count int
}

func (w *batchWarnings) add(line int, all notes) {
	for _, n := range all {
		if have := w.known[n]; have != nil {
			have.count++
			continue
		}
		if w.known == nil {
			w.known = map[Note]*countedNote{}
		}
		w.known[n] = &countedNote{n, line, 1}
		w.inOrder = append(w.inOrder, w.known[n])
	}
}

// has tells whether the table has all the columns.
func (b *Batch) has(columns ...string) bool {
	for _, c := range columns {
		if _, ok := b.column[c]; !ok {
			return false
		}
	}
	return true
}

// need returns the columns, or an error that names those that are missing.
func (b *Batch) need(columns ...string) ([]string, error) {
	var missing []string
	for _, c := range columns {
		if !b.has(c) {
			missing = append(missing, c)
		}
	}
	if missing != nil {
		return nil, fmt.Errorf("model %q needs the columns %s; missing: %s", b.model.name, strings.Join(columns, ", "), strings.Join(missing, ", "))
	}
	return columns, nil
}

// fixed is the inputs function of a model whose columns do not depend on the table.
func fixed(columns ...string) func(*Batch) ([]string, error) {
	return func(b *Batch) ([]string, error) { return b.need(columns...) }
}
