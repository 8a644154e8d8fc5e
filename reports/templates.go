package reports

import (
	"embed"
	"encoding/base64"
	"html/template"
	"math"
	"strings"
	"sync"
)

//go:embed pages/*.html
var templateFiles embed.FS

// pageTemplates parses the templates once, when a page is first made: other commands
// start without them.
var pageTemplates = sync.OnceValue(func() *template.Template {
	return template.Must(template.ParseFS(templateFiles, "pages/*.html"))
})

// pageView is what every page has.
type pageView struct {
	Title   string
	Root    string // the way to the folder of index.html, "" or "../"
	Policy  string
	Style   template.HTML
	Scripts template.HTML
	Data    template.HTML
	Public  string // the address that the chart script comes from; empty when it is with the page
	OneFile bool
	Static  bool // no script at all
	Foot    *basisView
}

// page fills in what every page has; root is the way to the index.
func (w *writer) page(root, title string) pageView {
	if w.options.Static {
		return w.stillPage(root, title)
	}
	v := pageView{Title: title, Root: root, OneFile: w.options.OneFile}
	var scripts strings.Builder
	var sources []string
	switch {
	case w.chart.code == "":
		v.Public = publicScript
		scripts.WriteString(`<script src="` + publicScript + `" integrity="` + publicHash + `" crossorigin="anonymous"></script>`)
		sources = append(sources, publicOrigin)
	case w.options.OneFile:
		scripts.WriteString("<script>" + w.inlineChart + "</script>")
		sources = append(sources, w.chartHash)
	default:
		scripts.WriteString(`<script src="` + root + chartFile + `"></script>`)
	}
	if w.options.OneFile {
		v.Style = template.HTML("<style>" + styleSheet + "</style>")
		scripts.WriteString("\n<script>" + pageScript + "</script>")
		sources = append(sources, w.pageHash)
	} else {
		v.Style = template.HTML(`<link rel="stylesheet" href="` + root + styleFile + `">`)
		scripts.WriteString("\n" + `<script src="` + root + scriptFile + `"></script>`)
		sources = append(sources, "'self'")
	}
	v.Scripts = template.HTML(scripts.String())
	v.Policy = policy(sources)
	return v
}

// stillPage is page without any script.
func (w *writer) stillPage(root, title string) pageView {
	if w.options.OneFile {
		return plainPage(title)
	}
	return pageView{Title: title, Root: root, Static: true, Policy: policy([]string{"'none'"}),
		Style: template.HTML(`<link rel="stylesheet" href="` + root + styleFile + `">`)}
}

// plainPage is what a page without any script has, everything inside it.
func plainPage(title string) pageView {
	return pageView{Title: title, OneFile: true, Static: true, Style: template.HTML("<style>" + styleSheet + "</style>"), Policy: policy([]string{"'none'"})}
}

// policy lets a page run its own scripts and ask for nothing else. Styles may be
// inline, since the charts place their parts with them.
func policy(scripts []string) string {
	return "default-src 'none'; script-src " + strings.Join(scripts, " ") +
		"; style-src 'self' 'unsafe-inline'; img-src data:; base-uri 'none'; form-action 'none'"
}

// inlineSafe makes a script fit to stand inside a page: the only thing that could
// end the element early is its own end tag.
func inlineSafe(code string) string {
	return strings.NewReplacer("</script", `<\/script`, "<!--", `<\!--`).Replace(code)
}

// dataElement holds JSON in the page; the JSON escapes markup itself.
func dataElement(data []byte) template.HTML {
	return template.HTML(`<script type="application/json" id="drawings">` + string(data) + `</script>`)
}

// dataAddress returns an address that holds the content itself.
func dataAddress(kind string, content []byte) template.URL {
	return template.URL("data:" + kind + ";charset=utf-8;base64," + base64.StdEncoding.EncodeToString(content))
}

// leastOf returns the least value that exists, NaN for none.
func leastOf(values []float64) float64 {
	best := math.NaN()
	for _, v := range values {
		if finite(v) && !(v >= best) {
			best = v
		}
	}
	return best
}

// greatestOf returns the greatest value that exists, NaN for none.
func greatestOf(values []float64) float64 {
	best := math.NaN()
	for _, v := range values {
		if finite(v) && !(v <= best) {
			best = v
		}
	}
	return best
}
