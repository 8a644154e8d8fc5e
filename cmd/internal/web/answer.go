package web

import (
	"bytes"
	"context"
	"encoding/json"
	"errors"
	"fmt"
	"io"
	"mime"
	"net/http"
	"time"
)

// decode reads the one value of a request's body, and refuses what is not just that.
func decode(w http.ResponseWriter, r *http.Request, into any) bool {
	if kind, _, err := mime.ParseMediaType(r.Header.Get("Content-Type")); err != nil || kind != "application/json" {
		refuse(w, http.StatusUnsupportedMediaType, "the question must be application/json")
		return false
	}
	body, err := io.ReadAll(http.MaxBytesReader(w, r.Body, maxBody))
	if err == nil {
		err = exactKeys(body, into)
	}
	if err == nil {
		d := json.NewDecoder(bytes.NewReader(body))
		d.DisallowUnknownFields()
		if err = d.Decode(into); err == nil {
			if _, more := d.Token(); more != io.EOF {
				err = errors.New("something follows the question")
			}
		}
	}
	switch {
	case err == nil:
		return true
	case errors.As(err, new(*http.MaxBytesError)):
		refuse(w, http.StatusRequestEntityTooLarge, fmt.Sprintf("the question is longer than %d bytes", maxBody))
	default:
		refuse(w, http.StatusBadRequest, "the question cannot be read: "+err.Error())
	}
	return false
}

// turn waits for one of the few places where answers are worked out.
func (s *Server) turn(w http.ResponseWriter, r *http.Request) bool {
	late := time.NewTimer(s.limits.patience)
	defer late.Stop()
	select {
	case s.questions <- struct{}{}:
		return true
	case <-r.Context().Done():
	case <-late.C:
		w.Header().Set("Retry-After", "2")
		refuse(w, http.StatusTooManyRequests, "too many questions at a time; ask again in a moment")
	}
	return false
}

// reply writes v as JSON.
func reply(w http.ResponseWriter, code int, v any) {
	b, err := json.Marshal(v)
	if err != nil {
		fail(w, err)
		return
	}
	w.Header().Set("Content-Type", "application/json")
	w.WriteHeader(code)
	w.Write(b) // a client that has gone gets nothing
}

// refuse says why a request gets no answer.
func refuse(w http.ResponseWriter, code int, text string) {
	reply(w, code, struct {
		Error string `json:"error"`
	}{text})
}

// fail says that an answer could not be made.
func fail(w http.ResponseWriter, err error) {
	var refused *RefusedError
	if errors.As(err, &refused) {
		refuse(w, http.StatusUnprocessableEntity, refused.Text)
		return
	}
	if errors.Is(err, context.DeadlineExceeded) {
		w.Header().Set("Retry-After", "2")
		refuse(w, http.StatusServiceUnavailable, "the answer takes too long and was given up; ask again in a moment")
		return
	}
	refuse(w, http.StatusInternalServerError, err.Error())
}

// toldInJSON has the refusals of a router told as all others are: that there is no such
// page, or that it takes no such method.
func toldInJSON(mux *http.ServeMux) http.Handler {
	return http.HandlerFunc(func(w http.ResponseWriter, r *http.Request) {
		h, pattern := mux.Handler(r)
		if pattern != "" {
			mux.ServeHTTP(w, r)
			return
		}
		only := &statusOnly{ResponseWriter: w, code: http.StatusOK}
		h.ServeHTTP(only, r)
		text := "there is no such page; / is the page itself, /api/schema describes the rest"
		if only.code == http.StatusMethodNotAllowed {
			text = "the page takes " + w.Header().Get("Allow") + " alone"
		}
		refuse(w, only.code, text)
	})
}

// statusOnly takes the status of an answer and drops the rest.
type statusOnly struct {
	http.ResponseWriter
	code int
}

// WriteHeader keeps the status.
func (s *statusOnly) WriteHeader(code int) { s.code = code }

// Write drops the text.
func (s *statusOnly) Write(b []byte) (int, error) { return len(b), nil }
