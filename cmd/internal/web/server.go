package web

import (
	"context"
	"errors"
	"fmt"
	"net"
	"net/http"
	"time"
)

// maxBody is the longest question, in bytes.
const maxBody = 4 << 10

// limits of a server.
type limits struct {
	connections int           // at a time
	listeners   int           // pages that listen at a time
	questions   int           // answered at a time
	patience    time.Duration // of a question for its turn and its answer
	slowest     time.Duration // a client may take to ask, and to take an answer
	beat        time.Duration // between two states
	look        time.Duration // between two looks for changed files
}

func usualLimits() limits {
	return limits{
		connections: 512, listeners: 256, questions: 2,
		patience: 2 * time.Second, slowest: 10 * time.Second, beat: time.Second, look: 200 * time.Millisecond,
	}
}

// Config is what a server is made of.
type Config struct {
	Source Source
	First  Model // the scenario as Source has loaded it just now
	Clock  Clock
	Style  string // the style sheet of the pages
	Host   string // that it listens on, without the port
	Token  string // empty: none is asked for
	Land   string // the coastline as a path over longitude and minus latitude in degrees; empty: none was brought

	// Keep writes a file that is not there yet into the folder of the scenario. The error
	// wraps fs.ErrExist where the name is taken.
	Keep func(name string, body []byte) error
}

// Server serves the live page.
type Server struct {
	config    Config
	limits    limits
	saveKey   string
	keeper    keeper
	hub       hub
	questions chan struct{}
	closing   chan struct{}
}

// New prepares a server.
func New(c Config) *Server { return newServer(c, usualLimits()) }

func newServer(c Config, l limits) *Server {
	return &Server{
		config: c, limits: l, saveKey: NewToken(), keeper: keeper{source: c.Source, model: c.First, generation: 1},
		hub: hub{most: l.listeners, listeners: map[chan []byte]struct{}{}}, questions: make(chan struct{}, l.questions), closing: make(chan struct{}),
	}
}

// Handler returns the guarded routes for a port.
func (s *Server) Handler(port string) http.Handler {
	mux := http.NewServeMux()
	mux.HandleFunc("GET /{$}", s.page)
	mux.HandleFunc("GET /foot", s.getFoot)
	mux.HandleFunc("GET /api/state", s.getState)
	mux.HandleFunc("GET /api/contacts", s.getContacts)
	mux.HandleFunc("GET /api/contacts/{id}", s.getDetail)
	mux.HandleFunc("POST /api/what-if", s.whatIf)
	mux.HandleFunc("GET /api/scenario", s.getScenario)
	mux.HandleFunc("POST /api/scenarios", s.saveScenario)
	mux.HandleFunc("GET /api/csv/contacts", s.getContactsCSV)
	mux.HandleFunc("GET /api/csv/contacts/{id}", s.getDetailCSV)
	mux.HandleFunc("GET /api/csv/contacts/{id}/lines", s.getLinesCSV)
	mux.HandleFunc("GET /api/csv/map", s.getCraftCSV)
	mux.HandleFunc("GET /api/schema", getSchema)
	mux.HandleFunc("GET /events", s.events)
	g := &guard{hosts: hostsOf(s.config.Host, port), token: s.config.Token}
	return g.wrap(toldInJSON(mux))
}

// Serve answers on l until ctx ends, and closes it. It serves once.
func (s *Server) Serve(ctx context.Context, l net.Listener) error {
	host, port, err := net.SplitHostPort(l.Addr().String())
	if err != nil {
		return err
	}
	if s.config.Token == "" && !(Loopback(host) && Loopback(s.config.Host)) {
		l.Close()
		return fmt.Errorf("%s can be reached by others, and no token is asked for", l.Addr())
	}
	ctx, stop := context.WithCancel(ctx)
	defer stop()
	go s.keeper.watch(ctx, s.limits.look)
	go s.beat(ctx, s.limits.beat)
	h := &http.Server{
		Handler: s.Handler(port), ReadHeaderTimeout: s.limits.slowest, ReadTimeout: s.limits.slowest, WriteTimeout: s.limits.slowest,
		IdleTimeout: time.Minute, MaxHeaderBytes: 16 << 10,
	}
	closed := make(chan struct{})
	context.AfterFunc(ctx, func() {
		close(s.closing)
		h.Close()
		close(closed)
	})
	err = h.Serve(&limitListener{Listener: l, places: make(chan struct{}, s.limits.connections)})
	stop()
	<-closed
	if errors.Is(err, http.ErrServerClosed) {
		return nil
	}
	return err
}
