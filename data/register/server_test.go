//go:build unix

package register

import (
	"bytes"
	"database/sql"
	"fmt"
	"io"
	"net/url"
	"os"
	"os/exec"
	"os/user"
	"path/filepath"
	"slices"
	"strconv"
	"sync"
	"syscall"
	"testing"
	"time"
)

// server is a PostgreSQL server of the tests' own, in a temporary folder and
// reached by a Unix socket in it. It is started by the first test that needs it.
type server struct {
	once   sync.Once
	folder string
	absent string // why there is none
	err    error
	hold   io.Closer // the server ends when this is closed, also by the end of the process
	ended  chan struct{}
	n      int
}

var postgres server

// database makes an empty database and returns its URL, or skips the test.
func database(t *testing.T) string {
	t.Helper()
	postgres.once.Do(postgres.start)
	if postgres.absent != "" {
		t.Skip(postgres.absent)
	}
	if postgres.err != nil {
		t.Fatal(postgres.err)
	}
	postgres.n++
	name := fmt.Sprintf("test%d", postgres.n)
	db, err := sql.Open("pgx", postgres.url("postgres"))
	if err != nil {
		t.Fatal(err)
	}
	defer db.Close()
	if _, err := db.Exec("CREATE DATABASE " + name); err != nil {
		t.Fatal(err)
	}
	return postgres.url(name)
}

func (s *server) url(database string) string {
	return "postgres://postgres@/" + database + "?host=" + url.QueryEscape(s.folder)
}

// program finds a program of PostgreSQL where Debian puts it, or in PATH.
func program(name string) string {
	found, _ := filepath.Glob("/usr/lib/postgresql/*/bin/" + name)
	if len(found) > 0 {
		return slices.Max(found)
	}
	path, _ := exec.LookPath(name)
	return path
}

func (s *server) start() {
	initdb, postmaster := program("initdb"), program("postgres")
	if initdb == "" || postmaster == "" {
		s.absent = "no PostgreSQL here (initdb and postgres in /usr/lib/postgresql/*/bin or PATH)"
		return
	}
	attributes := &syscall.SysProcAttr{}
	// A short name, since a socket's path may have about 100 characters.
	s.folder, s.err = os.MkdirTemp("", "register")
	if s.err != nil {
		return
	}
	if os.Geteuid() == 0 { // PostgreSQL refuses to run as root
		u, err := user.Lookup("postgres")
		if err != nil {
			s.absent = "PostgreSQL does not run as root, and there is no user postgres"
			return
		}
		uid, _ := strconv.Atoi(u.Uid)
		gid, _ := strconv.Atoi(u.Gid)
		attributes.Credential = &syscall.Credential{Uid: uint32(uid), Gid: uint32(gid)}
		if s.err = os.Chown(s.folder, uid, gid); s.err != nil {
			return
		}
	}
	data := filepath.Join(s.folder, "data")
	c := exec.Command(initdb, "-D", data, "-U", "postgres", "-A", "trust", "-E", "UTF8", "--locale=C", "--no-sync")
	c.SysProcAttr, c.Dir = attributes, s.folder
	if out, err := c.CombinedOutput(); err != nil {
		s.err = fmt.Errorf("initdb: %w\n%s", err, out)
		return
	}
	// The shell waits on its input, which ends when this process does, and then
	// ends the server. Killed clients are tested, not killed servers: no fsync.
	c = exec.Command("/bin/sh", "-c", `"$@" </dev/null & read _; kill -INT $!; wait $!; rm -rf data`, "sh",
		postmaster, "-D", data, "-k", s.folder, "-c", "listen_addresses=", "-c", "fsync=off", "-c", "shared_buffers=16MB")
	c.SysProcAttr, c.Dir = attributes, s.folder
	var log bytes.Buffer
	c.Stdout, c.Stderr = &log, &log
	if s.hold, s.err = c.StdinPipe(); s.err != nil {
		return
	}
	if s.err = c.Start(); s.err != nil {
		return
	}
	s.ended = make(chan struct{})
	go func() { c.Wait(); close(s.ended) }()
	db, err := sql.Open("pgx", s.url("postgres"))
	if err != nil {
		s.err = err
		return
	}
	defer db.Close()
	for range 300 {
		if s.err = db.Ping(); s.err == nil {
			return
		}
		time.Sleep(50 * time.Millisecond)
	}
	s.err = fmt.Errorf("the server did not start: %w", s.err)
}

func (s *server) stop() {
	if s.hold != nil {
		s.hold.Close()
		<-s.ended
	}
	if s.folder != "" {
		os.RemoveAll(s.folder)
	}
}

func stopServer() { postgres.stop() }
