package web

import (
	"context"
	"errors"
	"net"
	"net/http"
	"time"
)

// Limits of the server.
const (
	maxConnections = 512
	maxListeners   = 256                    // pages that listen at a time
	maxBody        = 4 << 10                // bytes of a question
	maxQuestions   = 2                      // answered at a time
	patience       = 2 * time.Second        // of a question for its turn and its answer
	slowest        = 10 * time.Second       // a client may take to take an answer
	beatEvery      = time.Second            // between two states
	lookEvery      = 500 * time.Millisecond // for changed files
)

// Config is what a server is made of.
type Config struct {
	Source Source
	First  Model  // the scenario as Source has loaded it just now
	Stamp  string // of Source before that
	Clock  Clock
	Style  string // the style sheet of the pages
	Host   string // that it listens on, without the port
	Token  string // empty: none is asked for
}

// Server serves the live page.
type Server struct {
	config    Config
	keeper    keeper
	hub       hub
	questions chan struct{}
	closing   chan struct{}
}

// New prepares a server.
func New(c Config) *Server {
	return &Server{
		config: c, keeper: keeper{source: c.Source, model: c.First, stamp: c.Stamp, generation: 1},
		hub: hub{listeners: map[chan []byte]struct{}{}}, questions: make(chan struct{}, maxQuestions), closing: make(chan struct{}),
	}
}

// Handler returns the guarded routes for a port.
func (s *Server) Handler(port string) http.Handler {
	mux := http.NewServeMux()
	mux.HandleFunc("GET /{$}", s.page)
	mux.HandleFunc("GET /api/state", s.getState)
	mux.HandleFunc("GET /api/contacts", s.getContacts)
	mux.HandleFunc("GET /api/contacts/{id}", s.getDetail)
	mux.HandleFunc("POST /api/what-if", s.whatIf)
	mux.HandleFunc("GET /api/schema", getSchema)
	mux.HandleFunc("GET /events", s.events)
	g := &guard{hosts: hostsOf(s.config.Host, port), token: s.config.Token}
	return g.wrap(mux)
}

// Serve answers on l until ctx ends, and closes it. It serves once.
func (s *Server) Serve(ctx context.Context, l net.Listener) error {
	_, port, err := net.SplitHostPort(l.Addr().String())
	if err != nil {
		return err
	}
	ctx, stop := context.WithCancel(ctx)
	defer stop()
	go s.keeper.watch(ctx, lookEvery)
	go s.beat(ctx, beatEvery)
	h := &http.Server{
		Handler: s.Handler(port), ReadHeaderTimeout: slowest, ReadTimeout: slowest, WriteTimeout: slowest,
		IdleTimeout: time.Minute, MaxHeaderBytes: 16 << 10,
	}
	closed := make(chan struct{})
	context.AfterFunc(ctx, func() {
		close(s.closing)
		h.Close()
		close(closed)
	})
	err = h.Serve(&limitListener{Listener: l, places: make(chan struct{}, maxConnections)})
	stop()
	<-closed
	if errors.Is(err, http.ErrServerClosed) {
		return nil
	}
	return err
}
