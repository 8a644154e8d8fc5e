package cli

import (
	"bufio"
	"context"
	"net"
	"net/http"
	"net/http/cookiejar"
	"net/url"
	"strings"
	"testing"
)

// otherAddress returns an address of this machine beyond the loopback.
func otherAddress(t *testing.T) string {
	t.Helper()
	all, err := net.InterfaceAddrs()
	if err != nil {
		t.Fatal(err)
	}
	for _, a := range all {
		if n, ok := a.(*net.IPNet); ok && n.IP.To4() != nil && n.IP.IsGlobalUnicast() {
			return n.IP.String()
		}
	}
	t.Skip("this machine has no address beyond the loopback")
	return ""
}

// TestServeBeyondTheLoopback serves on such an address: everything but the address that
// was printed is refused, and the token does not stay in the address.
func TestServeBeyondTheLoopback(t *testing.T) {
	host := otherAddress(t)
	named := serve(t, "--listen", net.JoinHostPort(host, "0")) // in place of the one before
	u, err := url.Parse(named)
	if err != nil || u.Hostname() != host || len(u.Query().Get("token")) < 40 {
		t.Fatalf("the command prints %q", named)
	}
	plain := "http://" + u.Host
	for _, path := range []string{"/", "/api/state", "/events", "/api/state?" + u.RawQuery, "/?token=" + strings.Repeat("a", 43)} {
		if code, _ := visit(t, plain+path); code != http.StatusUnauthorized {
			t.Errorf("%s: status %d, want 401", path, code)
		}
	}
	jar, err := cookiejar.New(nil)
	if err != nil {
		t.Fatal(err)
	}
	client := &http.Client{Jar: jar}
	r, err := client.Get(named)
	if err != nil {
		t.Fatal(err)
	}
	r.Body.Close()
	if r.StatusCode != http.StatusOK || r.Request.URL.RawQuery != "" {
		t.Errorf("status %d at %s", r.StatusCode, r.Request.URL)
	}
	ctx, stop := context.WithCancel(t.Context())
	defer stop()
	ask, err := http.NewRequestWithContext(ctx, "GET", plain+"/events", nil)
	if err != nil {
		t.Fatal(err)
	}
	if r, err = client.Do(ask); err != nil {
		t.Fatal(err)
	}
	defer r.Body.Close()
	if line, err := bufio.NewReader(r.Body).ReadString('\n'); line != "event: state\n" {
		t.Errorf("the stream begins with %q, %v", line, err)
	}
}
