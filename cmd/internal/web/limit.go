package web

import (
	"net"
	"sync"
)

// limitListener takes so many connections at a time and closes those beyond at once,
// so that none waits unheard.
type limitListener struct {
	net.Listener
	places chan struct{}
}

// Accept returns the next connection that has a place.
func (l *limitListener) Accept() (net.Conn, error) {
	for {
		c, err := l.Listener.Accept()
		if err != nil {
			return nil, err
		}
		select {
		case l.places <- struct{}{}:
			return &placedConn{Conn: c, leave: sync.OnceFunc(func() { <-l.places })}, nil
		default:
			c.Close()
		}
	}
}

type placedConn struct {
	net.Conn
	leave func()
}

// Close gives the place back.
func (c *placedConn) Close() error {
	defer c.leave()
	return c.Conn.Close()
}
