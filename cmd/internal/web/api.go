package web

import (
	"context"
	_ "embed"
	"encoding/json"
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
	s.detail(w, r, func(d *Detail) { reply(w, http.StatusOK, d) })
}

const noContact = "there is no such contact; /api/contacts lists them, and they change with the scenario"

func (s *Server) whatIf(w http.ResponseWriter, r *http.Request) {
	var q Question
	if !decode(w, r, &q) || !s.turn(w, r) {
		return
	}
	defer func() { <-s.questions }()
	ctx, stop := context.WithTimeout(r.Context(), s.limits.patience)
	defer stop()
	m, _, _ := s.keeper.now()
	a, err := m.WhatIf(ctx, &q)
	switch {
	case err != nil:
		fail(w, err)
	case a == nil:
		refuse(w, http.StatusNotFound, noContact)
	default:
		reply(w, http.StatusOK, a)
	}
}

func getSchema(w http.ResponseWriter, _ *http.Request) {
	w.Header().Set("Content-Type", "application/schema+json")
	w.Write(schema) // a client that has gone gets nothing
}
