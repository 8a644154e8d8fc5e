package web

import (
	"crypto/rand"
	"crypto/subtle"
	"encoding/base64"
	"net"
	"net/http"
	"slices"
	"strings"
)

// guard lets through what comes from the page itself, or from the machine's own tools.
type guard struct {
	hosts []string // with the port, as a Host header may have them
	token string   // empty: none is asked for
}

// NewToken returns a token of 256 random bits.
func NewToken() string {
	b := make([]byte, 32)
	rand.Read(b) // never fails
	return base64.RawURLEncoding.EncodeToString(b)
}

// Loopback tells whether a host is this machine alone.
func Loopback(host string) bool {
	ip := net.ParseIP(host)
	return host == "localhost" || ip != nil && ip.IsLoopback()
}

// hostsOf lists the Host headers of an address.
func hostsOf(host, port string) []string {
	out := []string{net.JoinHostPort(host, port)}
	if Loopback(host) {
		out = append(out, "localhost:"+port, "127.0.0.1:"+port, "[::1]:"+port)
	}
	return out
}

// tokenCookie is the cookie that holds the token.
const tokenCookie = "slantwise_token"

// wrap puts the guard before a handler.
func (g *guard) wrap(next http.Handler) http.Handler {
	return http.HandlerFunc(func(w http.ResponseWriter, r *http.Request) {
		h := w.Header()
		h.Set("X-Content-Type-Options", "nosniff")
		h.Set("Referrer-Policy", "no-referrer")
		h.Set("Cross-Origin-Resource-Policy", "same-origin")
		h.Set("Cross-Origin-Opener-Policy", "same-origin")
		h.Set("Cache-Control", "no-store")
		h.Set("Content-Security-Policy", "default-src 'none'; frame-ancestors 'none'; base-uri 'none'; form-action 'none'")
		if !slices.Contains(g.hosts, strings.ToLower(r.Host)) {
			refuse(w, http.StatusMisdirectedRequest, "this page does not go by that host name; use the address that the program named")
			return
		}
		if !g.own(r) {
			refuse(w, http.StatusForbidden, "the request comes from another site")
			return
		}
		if g.token == "" || g.known(r) {
			next.ServeHTTP(w, r)
			return
		}
		if given := r.URL.Query().Get("token"); r.Method == http.MethodGet && r.URL.Path == "/" && g.equal(given) {
			http.SetCookie(w, &http.Cookie{Name: tokenCookie, Value: g.token, Path: "/", HttpOnly: true, SameSite: http.SameSiteStrictMode})
			http.Redirect(w, r, "/", http.StatusSeeOther)
			return
		}
		refuse(w, http.StatusUnauthorized, "a token is needed; open the address that the program named, or send it as Authorization: Bearer")
	})
}

// own tells whether a request is not sent by a page of another site.
func (g *guard) own(r *http.Request) bool {
	if site := r.Header.Get("Sec-Fetch-Site"); site != "" && site != "same-origin" && site != "none" {
		// A link on another page may open the page itself and nothing else.
		if r.Method != http.MethodGet || r.URL.Path != "/" || r.Header.Get("Sec-Fetch-Mode") != "navigate" {
			return false
		}
	}
	for _, origin := range r.Header.Values("Origin") {
		host, plain := strings.CutPrefix(strings.ToLower(origin), "http://")
		if !plain || !slices.Contains(g.hosts, host) {
			return false
		}
	}
	return true
}

// known tells whether a request carries the token.
func (g *guard) known(r *http.Request) bool {
	if given, ok := strings.CutPrefix(r.Header.Get("Authorization"), "Bearer "); ok {
		return g.equal(given)
	}
	c, err := r.Cookie(tokenCookie)
	return err == nil && g.equal(c.Value)
}

func (g *guard) equal(given string) bool {
	return subtle.ConstantTimeCompare([]byte(given), []byte(g.token)) == 1
}
