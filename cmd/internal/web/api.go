package web

import (
	"context"
	_ "embed"
	"encoding/json"
	"errors"
	"fmt"
	"io"
	"mime"
	"net/http"
	"time"
)

//go:embed page/schema.json
var schema []byte

// told is a state with the clock and the faults.
type told struct {
	Now        time.Time `json:"now_utc"`
	Speed      float64   `json:"speed"`
	Generation int       `json:"generation"` // rises with each reading of the scenario
	Fault      string    `json:"fault"`      // of the files as they are now; empty: none
	*State
}

// state returns the state of this instant as JSON in one line.
func (s *Server) state() ([]byte, error) {
	m, generation, fault := s.keeper.now()
	now := s.config.Clock.Now()
	st, err := m.At(now)
	if err != nil {
		return nil, err
	}
	return json.Marshal(told{Now: now, Speed: s.config.Clock.Speed, Generation: generation, Fault: fault, State: st})
}

func (s *Server) getState(w http.ResponseWriter, _ *http.Request) {
	b, err := s.state()
	if err != nil {
		fail(w, err)
		return
	}
	w.Header().Set("Content-Type", "application/json")
	w.Write(b) // a client that has gone gets nothing
}

func (s *Server) getContacts(w http.ResponseWriter, _ *http.Request) {
	m, _, _ := s.keeper.now()
	reply(w, http.StatusOK, m.Contacts())
}

func (s *Server) getDetail(w http.ResponseWriter, r *http.Request) {
	if !s.turn(w, r) {
		return
	}
	defer func() { <-s.questions }()
	m, _, _ := s.keeper.now()
	ctx, stop := context.WithTimeout(r.Context(), s.limits.patience)
	defer stop()
	d, err := m.Detail(ctx, r.PathValue("id"))
	switch {
	case err != nil:
		fail(w, err)
	case d == nil:
		refuse(w, http.StatusNotFound, noContact)
	default:
		reply(w, http.StatusOK, d)
	}
}

const noContact = "there is no such contact; /api/contacts lists them, and they change with the scenario"

func (s *Server) whatIf(w http.ResponseWriter, r *http.Request) {
	if kind, _, err := mime.ParseMediaType(r.Header.Get("Content-Type")); err != nil || kind != "application/json" {
		refuse(w, http.StatusUnsupportedMediaType, "the question must be application/json")
		return
	}
	d := json.NewDecoder(http.MaxBytesReader(w, r.Body, maxBody))
	d.DisallowUnknownFields()
	var q Question
	err := d.Decode(&q)
	if err == nil {
		if _, more := d.Token(); more != io.EOF {
			err = errors.New("something follows the question")
		}
	}
	if err != nil {
		if errors.As(err, new(*http.MaxBytesError)) {
			refuse(w, http.StatusRequestEntityTooLarge, fmt.Sprintf("the question is longer than %d bytes", maxBody))
			return
		}
		refuse(w, http.StatusBadRequest, "the question cannot be read: "+err.Error())
		return
	}
	if !s.turn(w, r) {
		return
	}
	defer func() { <-s.questions }()
	ctx, stop := context.WithTimeout(r.Context(), s.limits.patience)
	defer stop()
	m, _, _ := s.keeper.now()
	a, err := m.WhatIf(ctx, &q)
	var refused *RefusedError
	switch {
	case errors.As(err, &refused):
		refuse(w, http.StatusUnprocessableEntity, refused.Text)
	case err != nil:
		fail(w, err)
	case a == nil:
		refuse(w, http.StatusNotFound, noContact)
	default:
		reply(w, http.StatusOK, a)
	}
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

func getSchema(w http.ResponseWriter, _ *http.Request) {
	w.Header().Set("Content-Type", "application/schema+json")
	w.Write(schema) // a client that has gone gets nothing
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
	if errors.Is(err, context.DeadlineExceeded) {
		w.Header().Set("Retry-After", "2")
		refuse(w, http.StatusServiceUnavailable, "the answer takes too long and was given up; ask again in a moment")
		return
	}
	refuse(w, http.StatusInternalServerError, err.Error())
}
