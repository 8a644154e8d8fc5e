package reports

import (
	"context"
	"fmt"
	"runtime"
	"sync"

	"golang.org/x/sync/errgroup"
)

// Names of what stands in a report folder.
const (
	indexFile     = "index.html"
	indexCSVFile  = "passes.csv"
	indexJSONFile = "passes.json"
	passFolder    = "passes"
	chartFile     = "chart.js"
	licenceFile   = "chart-licence.txt"
	scriptFile    = "page.js"
	styleFile     = "page.css"
	contentsFile  = "contents.txt"
	paperFile     = "passes.pdf"
)

// Options say how a report is written.
type Options struct {
	OneFile  bool                  // each page holds everything inside, to be mailed
	Static   bool                  // pages without script, their charts drawn in them
	PDF      bool                  // a PDF beside each page
	Version  string                // of the program, for the files that name it
	Workers  int                   // 0: as many as the machine runs at once
	Progress func(done, total int) // passes written; may be nil; never called by two goroutines at a time
}

// writer carries what all pages of a report share.
type writer struct {
	report  *Report
	options Options
	names   []string                                // of the pass pages, without ending
	put     func(name string, content []byte) error // must not keep content

	chart                            script
	inlineChart, chartHash, pageHash string
}

func newWriter(r *Report, o Options, chart script, put func(string, []byte) error) *writer {
	w := &writer{report: r, options: o, names: pageNames(r.Keys), put: put, chart: chart, pageHash: contentHash(pageScript)}
	if o.OneFile {
		w.inlineChart = inlineSafe(chart.code)
		w.chartHash = contentHash(w.inlineChart)
	}
	return w
}

// write renders all pages and files of the report; the order in which they come out
// is not fixed, their content is.
func (w *writer) write(ctx context.Context) error {
	rows := make([]row, len(w.names))
	workers := w.options.Workers
	if workers <= 0 {
		workers = runtime.GOMAXPROCS(0)
	}
	group, working := errgroup.WithContext(ctx)
	group.SetLimit(workers)
	var counting sync.Mutex
	done := 0
	for i := range w.names {
		group.Go(func() error {
			if err := working.Err(); err != nil {
				return err
			}
			if err := w.pass(working, i, &rows[i]); err != nil {
				return err
			}
			if w.options.Progress != nil {
				counting.Lock()
				done++
				w.options.Progress(done, len(w.names))
				counting.Unlock()
			}
			return nil
		})
	}
	if err := group.Wait(); err != nil {
		return err
	}
	return w.shared(rows)
}

// pass loads one pass and writes its page and files.
func (w *writer) pass(ctx context.Context, i int, r *row) error {
	p, err := w.report.Load(ctx, i)
	if err != nil {
		return err
	}
	if err := checkPass(p); err != nil {
		k := w.report.Keys[i]
		return fmt.Errorf("report: pass of %s over %s at %s: %w", k.Spacecraft, k.Station, utcText(k.AOS), err)
	}
	*r = newRow(w.names[i], p)
	page, err := passPage(w, i, p)
	if err != nil {
		return err
	}
	stem := passFolder + "/" + w.names[i]
	if w.options.PDF {
		sheet, err := passPaper(w, p)
		if err != nil {
			return err
		}
		if err := w.put(stem+".pdf", sheet); err != nil {
			return err
		}
	}
	if err := w.put(stem+".html", page); err != nil || w.options.OneFile {
		return err
	}
	// A report holds many times more text than any one file: its memory serves again.
	buffer := buffers.Get().(*[]byte)
	defer buffers.Put(buffer)
	*buffer = appendCSV((*buffer)[:0], p)
	if err := w.put(stem+".csv", *buffer); err != nil {
		return err
	}
	if len(p.Measured) > 0 {
		if err := w.put(stem+measuredSuffix, measuredCSV(p)); err != nil {
			return err
		}
	}
	if *buffer, err = appendPassJSON((*buffer)[:0], p); err != nil {
		return err
	}
	return w.put(stem+".json", *buffer)
}

var buffers = sync.Pool{New: func() any { return new([]byte) }}

// shared writes the index and what the pages have in common.
func (w *writer) shared(rows []row) error {
	v := newIndexView(w, rows)
	index, err := indexPage(w, v, rows)
	if err != nil {
		return err
	}
	files := map[string][]byte{indexFile: index}
	if w.options.PDF {
		if files[paperFile], err = indexPaper(w, v, rows); err != nil {
			return err
		}
	}
	summary := summarise(w.report.From, w.report.To, rows)
	if files[weekFile], err = weekPage(w, summary); err != nil {
		return err
	}
	if w.options.PDF {
		if files[weekPaperFile], err = weekPaper(w, summary); err != nil {
			return err
		}
	}
	if !w.options.OneFile {
		if files[weekCSVFile], err = summary.csv(); err != nil {
			return err
		}
		if files[weekJSONFile], err = summary.json(); err != nil {
			return err
		}
		if files[indexCSVFile], err = indexCSV(rows); err != nil {
			return err
		}
		if files[indexJSONFile], err = indexJSON(rows); err != nil {
			return err
		}
		files[styleFile] = []byte(styleSheet)
		if !w.options.Static {
			files[scriptFile] = []byte(pageScript)
		}
		if w.chart.code != "" && !w.options.Static {
			files[chartFile], files[licenceFile] = []byte(w.chart.code), []byte(w.chart.licence)
		}
	}
	for name, content := range files {
		if err := w.put(name, content); err != nil {
			return err
		}
	}
	return nil
}
