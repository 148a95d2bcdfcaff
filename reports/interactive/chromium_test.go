package interactive_test

import (
	"bytes"
	"encoding/json"
	"fmt"
	"html"
	"net/http"
	"net/http/httptest"
	"os/exec"
	"regexp"
	"strings"
	"sync"
	"testing"
	"time"
)

// The scripts run in headless Chromium. A test serves a page of its own that puts what
// it finds into <pre id="out"> as JSON, and reads the page's elements back once it has
// loaded. A page under test stands in a frame of that page, unchanged.

// site serves pages by path and notes what was asked for.
type site struct {
	pages map[string]string
	mu    sync.Mutex
	asked []string
}

func (s *site) ServeHTTP(w http.ResponseWriter, r *http.Request) {
	s.mu.Lock()
	s.asked = append(s.asked, r.URL.Path)
	s.mu.Unlock()
	page, ok := s.pages[r.URL.Path]
	if !ok {
		http.NotFound(w, r)
		return
	}
	w.Header().Set("Content-Type", "text/html; charset=utf-8")
	fmt.Fprint(w, page)
}

// chromium is the command of the browser; the test is skipped without one.
func chromium(t *testing.T) string {
	t.Helper()
	for _, name := range []string{"chromium", "chromium-browser", "google-chrome"} {
		if path, err := exec.LookPath(name); err == nil {
			return path
		}
	}
	t.Skip("no Chromium on this machine: the scripts are not run")
	return ""
}

// browse runs the browser once on an address.
func browse(t *testing.T, address string, flags ...string) []byte {
	t.Helper()
	args := []string{"--headless=new", "--no-sandbox", "--disable-gpu", "--disable-background-networking", "--disable-dev-shm-usage", "--no-first-run", "--user-data-dir=" + t.TempDir()}
	cmd := exec.Command(chromium(t), append(append(args, flags...), address)...)
	var out, log bytes.Buffer
	cmd.Stdout, cmd.Stderr = &out, &log
	if err := cmd.Start(); err != nil {
		t.Fatal(err)
	}
	timer := time.AfterFunc(60*time.Second, func() { _ = cmd.Process.Kill() })
	defer timer.Stop()
	if err := cmd.Wait(); err != nil {
		t.Fatalf("chromium: %v\n%s", err, log.String())
	}
	return out.Bytes()
}

var output = regexp.MustCompile(`(?s)<pre id="out">(.*?)</pre>`)

// run serves s, loads "/" and decodes what the page wrote.
func run(t *testing.T, s *site, into any, flags ...string) {
	t.Helper()
	chromium(t)
	server := httptest.NewServer(s)
	defer server.Close()
	dom := browse(t, server.URL+"/", append([]string{"--dump-dom"}, flags...)...)
	m := output.FindSubmatch(dom)
	if m == nil {
		t.Fatalf("the page wrote nothing:\n%.2000s", dom)
	}
	text := html.UnescapeString(string(m[1]))
	if err := json.Unmarshal([]byte(text), into); err != nil {
		t.Fatalf("%v in %.2000s", err, text)
	}
}

// page is a page of a test: out(value) writes its findings.
func page(scripts ...string) string {
	return `<!DOCTYPE html><meta charset="utf-8"><link rel="icon" href="data:,"><pre id="out"></pre><script>
function out(v) { document.getElementById("out").textContent = JSON.stringify(v, (k, x) => typeof x === "number" && !Number.isFinite(x) ? String(x) : x); }
function tried(f) { try { out(f()); } catch (e) { out({ error: String(e && e.stack || e) }); } }
</script><script>` + strings.Join(scripts, "</script><script>") + "</script>"
}

func asJSON(t *testing.T, v any) string {
	t.Helper()
	b, err := json.Marshal(v) // escapes <, > and &
	if err != nil {
		t.Fatal(err)
	}
	return string(b)
}
