package web

import (
	"bufio"
	"io"
	"net/http"
	"strings"
	"testing"

	"slantwise/cmd/internal/web/schematest"
)

func schemaOf(t *testing.T) *schematest.Schema {
	t.Helper()
	s, err := schematest.New(schema)
	if err != nil {
		t.Fatal(err)
	}
	return s
}

// TestAttacks sends what another site, another name of the host and a clumsy or hostile
// client would send.
func TestAttacks(t *testing.T) {
	h := New(config()).Handler("8460")
	question := `{"contact":"a"}`
	js := []string{"Content-Type", "application/json"}
	with := func(more ...string) []string { return append(append([]string{}, js...), more...) }
	for _, row := range []struct {
		name, method, address, body string
		head                        []string
		want                        int
	}{
		{"the page", "GET", "/", "", nil, 200},
		{"by another of its names", "GET", "/api/state", "", []string{"Host", "LOCALHOST:8460"}, 200},
		{"rebound name", "GET", "/api/state", "", []string{"Host", "evil.example:8460"}, 421},
		{"another port", "GET", "/api/state", "", []string{"Host", "127.0.0.1:80"}, 421},
		{"no port", "GET", "/", "", []string{"Host", "127.0.0.1"}, 421},
		{"own origin", "POST", "/api/what-if", question, with("Origin", "http://127.0.0.1:8460"), 200},
		{"no origin", "POST", "/api/what-if", question, js, 200},
		{"other origin", "POST", "/api/what-if", question, with("Origin", "http://evil.example"), 403},
		{"origin of a sandbox", "POST", "/api/what-if", question, with("Origin", "null"), 403},
		{"origin with more behind", "POST", "/api/what-if", question, with("Origin", "http://127.0.0.1:8460.evil.example"), 403},
		{"second origin", "POST", "/api/what-if", question, with("Origin", "http://127.0.0.1:8460", "Origin", "http://evil.example"), 403},
		{"other scheme", "GET", "/api/state", "", []string{"Origin", "https://127.0.0.1:8460"}, 403},
		{"fetched by another site", "GET", "/api/state", "", []string{"Sec-Fetch-Site", "cross-site"}, 403},
		{"stream by another site", "GET", "/events", "", []string{"Sec-Fetch-Site", "same-site"}, 403},
		{"link on another site", "GET", "/", "", []string{"Sec-Fetch-Site", "cross-site", "Sec-Fetch-Mode", "navigate"}, 200},
		{"page as a script", "GET", "/", "", []string{"Sec-Fetch-Site", "cross-site", "Sec-Fetch-Mode", "no-cors"}, 403},
		{"simple form", "POST", "/api/what-if", question, []string{"Content-Type", "text/plain"}, 415},
		{"no kind", "POST", "/api/what-if", question, nil, 415},
		{"unknown key", "POST", "/api/what-if", `{"contact":"a","file":"/etc/passwd"}`, js, 400},
		{"two questions", "POST", "/api/what-if", question + question, js, 400},
		{"no JSON", "POST", "/api/what-if", "{", js, 400},
		{"out of the numbers", "POST", "/api/what-if", `{"contact":"a","dish_m":1e999}`, js, 400},
		{"too long", "POST", "/api/what-if", `{"contact":"` + strings.Repeat("a", maxBody) + `"}`, js, 413},
		{"refused", "POST", "/api/what-if", `{"contact":"a","dish_m":-1}`, js, 422},
		{"no such contact", "POST", "/api/what-if", `{"contact":"b"}`, js, 404},
		{"asked by GET", "GET", "/api/what-if", "", nil, 405},
		{"the foot alone", "GET", "/foot", "", nil, 200},
		{"a file", "GET", "/slantwise.yaml", "", nil, 404},
		{"a way up", "GET", "/api/contacts/..%2f..%2f..%2fetc%2fpasswd", "", nil, 404},
		{"a way up, plain", "GET", "/api/contacts/../../etc/passwd", "", nil, 307},
		{"a way up, twice encoded", "GET", "/api/contacts/%252e%252e%252fetc%252fpasswd", "", nil, 404},
		{"a way up, the other way", "GET", `/api/contacts/..%5c..%5cetc%5cpasswd`, "", nil, 404},
		{"a way up in CSV", "GET", "/api/csv/contacts/..%2f..%2fetc%2fpasswd/lines", "", nil, 404},
		{"a zero byte", "GET", "/api/contacts/a%00", "", nil, 404},
		{"the source", "GET", "/page/live.js", "", nil, 404},
		{"the profiler", "GET", "/debug/pprof/", "", nil, 404},
		{"by its name with a dot", "GET", "/", "", []string{"Host", "localhost.:8460"}, 421},
		{"with a name before", "GET", "/", "", []string{"Host", "evil@127.0.0.1:8460"}, 421},
		{"all addresses", "GET", "/", "", []string{"Host", "0.0.0.0:8460"}, 421},
		{"an empty origin", "GET", "/api/state", "", []string{"Origin", ""}, 403},
		{"a worker of another site", "GET", "/api/csv/map", "", []string{"Sec-Fetch-Site", "cross-site", "Sec-Fetch-Mode", "no-cors", "Sec-Fetch-Dest", "script"}, 403},
		{"download by a link on another site", "GET", "/api/scenario?contact=a", "", []string{"Sec-Fetch-Site", "cross-site", "Sec-Fetch-Mode", "navigate"}, 403},
		{"writing", "PUT", "/", "", nil, 405},
		{"tracing", "TRACE", "/", "", nil, 405},
		{"asking first", "OPTIONS", "/api/what-if", "", []string{"Origin", "http://evil.example", "Access-Control-Request-Method", "POST"}, 403},
		{"head alone", "HEAD", "/api/state", "", nil, 200},
	} {
		t.Run(row.name, func(t *testing.T) {
			got := send(h, row.method, row.address, row.body, row.head...)
			body, err := io.ReadAll(got.Body)
			if err != nil {
				t.Fatal(err)
			}
			if got.StatusCode != row.want {
				t.Errorf("status %d, want %d: %s", got.StatusCode, row.want, body)
			}
			if p := got.Header.Get("Content-Security-Policy"); !strings.HasPrefix(p, "default-src 'none'") || strings.Contains(p, "unsafe") {
				t.Errorf("policy %q", p)
			}
			if row.want >= 400 && row.method != "HEAD" {
				if err := schemaOf(t).Check("refusal", body); err != nil {
					t.Error(err)
				}
			}
			for key, want := range map[string]string{
				"X-Content-Type-Options": "nosniff", "Referrer-Policy": "no-referrer", "Cross-Origin-Resource-Policy": "same-origin",
				"Cross-Origin-Opener-Policy": "same-origin", "Cache-Control": "no-store",
			} {
				if v := got.Header.Values(key); len(v) != 1 || v[0] != want {
					t.Errorf("%s: %q, want %q", key, v, want)
				}
			}
			if p := got.Header.Get("Content-Security-Policy"); !strings.Contains(p, "frame-ancestors 'none'") || !strings.Contains(p, "base-uri 'none'") || !strings.Contains(p, "form-action 'none'") {
				t.Errorf("policy %q", p)
			}
			if kind := got.Header.Get("Content-Type"); kind == "" && row.want != 307 && got.StatusCode != http.StatusSeeOther {
				t.Error("no Content-Type")
			}
			for _, key := range []string{"Access-Control-Allow-Origin", "Set-Cookie"} {
				if v := got.Header.Get(key); v != "" {
					t.Errorf("%s: %s", key, v)
				}
			}
		})
	}
}

func TestNonces(t *testing.T) {
	h := New(config()).Handler("8460")
	seen := map[string]bool{}
	for range 3 {
		got := send(h, "GET", "/", "")
		b, _ := io.ReadAll(got.Body)
		_, rest, _ := strings.Cut(got.Header.Get("Content-Security-Policy"), "script-src 'nonce-")
		nonce, _, _ := strings.Cut(rest, "'")
		if len(nonce) < 20 || seen[nonce] {
			t.Fatalf("nonce %q; it must be long and new each time", nonce)
		}
		seen[nonce] = true
		page := string(b)
		for _, bare := range []string{"<script>", "<style>", " onclick=", " style=", "https://"} {
			if strings.Contains(page, bare) {
				t.Errorf("the page holds %q", bare)
			}
		}
		if n := strings.Count(page, `nonce="`+nonce+`"`); n != 2 {
			t.Errorf("%d elements carry the nonce, want 2", n)
		}
	}
}

func TestToken(t *testing.T) {
	c := config()
	c.Host, c.Token = "192.0.2.7", NewToken()
	if c.Token == NewToken() || len(c.Token) < 40 {
		t.Fatalf("token %q", c.Token)
	}
	h := New(c).Handler("8460")
	host := []string{"Host", "192.0.2.7:8460"}
	for _, row := range []struct {
		name, address string
		head          []string
		want          int
	}{
		{"none", "/", nil, 401},
		{"none, data", "/api/state", nil, 401},
		{"wrong", "/?token=x", nil, 401},
		{"in the address of the page", "/?token=" + c.Token, nil, 303},
		{"in the address of data", "/api/state?token=" + c.Token, nil, 401},
		{"cookie", "/api/state", []string{"Cookie", tokenCookie + "=" + c.Token}, 200},
		{"wrong cookie", "/api/state", []string{"Cookie", tokenCookie + "=" + c.Token[1:]}, 401},
		{"bearer", "/api/state", []string{"Authorization", "Bearer " + c.Token}, 200},
		{"empty bearer", "/api/state", []string{"Authorization", "Bearer "}, 401},
		{"by the loopback's name", "/api/state", []string{"Host", "127.0.0.1:8460", "Authorization", "Bearer " + c.Token}, 421},
	} {
		t.Run(row.name, func(t *testing.T) {
			got := send(h, "GET", row.address, "", append(append([]string{}, host...), row.head...)...)
			if got.StatusCode != row.want {
				t.Errorf("status %d, want %d", got.StatusCode, row.want)
			}
			if cookie := got.Header.Get("Set-Cookie"); row.want == 303 && (!strings.Contains(cookie, "HttpOnly") || !strings.Contains(cookie, "SameSite=Strict")) {
				t.Errorf("cookie %q", cookie)
			}
		})
	}
}

// TestWire sends what no client of good will sends, and looks at what comes back first.
func TestWire(t *testing.T) {
	address := startServer(t, newServer(config(), hasty()))
	host := "Host: " + address + "\r\n"
	for _, row := range []struct {
		name, text string
		want       int
	}{
		{"plain", "GET /api/state HTTP/1.1\r\n" + host + "\r\n", 200},
		{"no host", "GET /api/state HTTP/1.1\r\n\r\n", 400},
		{"no host, old", "GET /api/state HTTP/1.0\r\n\r\n", 421},
		{"two hosts", "GET /api/state HTTP/1.1\r\n" + host + "Host: evil.example\r\n\r\n", 400},
		{"a host in the line", "GET http://evil.example/api/state HTTP/1.1\r\n" + host + "\r\n", 421},
		{"a proxy's request", "CONNECT evil.example:80 HTTP/1.1\r\nHost: evil.example:80\r\n\r\n", 421},
		{"a way up", "GET /../../etc/passwd HTTP/1.1\r\n" + host + "\r\n", 307},
		{"two lengths", "POST /api/what-if HTTP/1.1\r\n" + host + "Content-Type: application/json\r\nContent-Length: 2\r\nContent-Length: 3\r\n\r\n{}", 400},
		{"length and pieces", "POST /api/what-if HTTP/1.1\r\n" + host + "Content-Type: application/json\r\nContent-Length: 3\r\nTransfer-Encoding: chunked\r\n\r\n0\r\n\r\n", 400},
		{"unknown coding", "POST /api/what-if HTTP/1.1\r\n" + host + "Transfer-Encoding: gzip, chunked\r\n\r\n0\r\n\r\n", 501},
		{"endless pieces", "POST /api/what-if HTTP/1.1\r\n" + host + "Content-Type: application/json\r\nTransfer-Encoding: chunked\r\n\r\n2000\r\n\"" + strings.Repeat("a", 0x1fff) + "\r\n", 413},
		{"a long header", "GET / HTTP/1.1\r\n" + host + "X-Long: " + strings.Repeat("a", 64<<10) + "\r\n\r\n", 431},
		{"a header in two lines", "GET /api/state HTTP/1.1\r\n" + host + "Origin: http://\r\n evil.example\r\n\r\n", 403},
		{"a space before the colon", "GET /api/state HTTP/1.1\r\n" + host + "Origin : http://evil.example\r\n\r\n", 400},
		{"no HTTP", "\x16\x03\x01\x02\x00\x01\x00\x01\xfc\x03\x03\r\n\r\n", 400},
		{"the next version's greeting", "PRI * HTTP/2.0\r\n\r\nSM\r\n\r\n", 421},
	} {
		t.Run(row.name, func(t *testing.T) {
			c := dialServer(t, address)
			if _, err := io.WriteString(c, row.text); err != nil {
				t.Log("the server has ended it before all was sent:", err)
			}
			r, err := http.ReadResponse(bufio.NewReader(c), nil)
			if err != nil {
				t.Fatal(err)
			}
			defer r.Body.Close()
			if r.StatusCode != row.want {
				t.Errorf("status %d, want %d", r.StatusCode, row.want)
			}
		})
	}
}
