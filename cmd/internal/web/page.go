package web

import (
	"bytes"
	"crypto/rand"
	_ "embed"
	"html/template"
	"io"
	"net/http"
)

//go:embed page/live.html
var pageText string

//go:embed page/live.js
var pageScript string

//go:embed page/drawing.js
var drawingScript string

//go:embed page/live.css
var pageStyle string

var pageTemplate = template.Must(template.New("live").Parse(pageText))

// page writes the page, its script and style inside under a nonce of its own.
func (s *Server) page(w http.ResponseWriter, _ *http.Request) {
	nonce := rand.Text()
	model, _, _ := s.keeper.now()
	var b bytes.Buffer
	err := pageTemplate.Execute(&b, struct {
		Nonce   string
		Style   template.CSS
		Script  template.JS
		SaveKey string
		Land    string
		Foot    template.HTML
	}{nonce, template.CSS(s.config.Style + pageStyle), template.JS(drawingScript + pageScript), s.saveKey, s.config.Land, model.Foot()})
	if err != nil {
		fail(w, err)
		return
	}
	h := w.Header()
	h.Set("Content-Security-Policy", "default-src 'none'; script-src 'nonce-"+nonce+"'; style-src 'nonce-"+nonce+
		"'; connect-src 'self'; img-src data:; base-uri 'none'; form-action 'none'; frame-ancestors 'none'")
	h.Set("Content-Type", "text/html; charset=utf-8")
	w.Write(b.Bytes()) // a client that has gone gets nothing
}

// getFoot gives what the numbers stand on by itself, for a page that was opened before
// the files changed.
func (s *Server) getFoot(w http.ResponseWriter, _ *http.Request) {
	m, _, _ := s.keeper.now()
	w.Header().Set("Content-Type", "text/html; charset=utf-8")
	io.WriteString(w, string(m.Foot())) // a client that has gone gets nothing
}
