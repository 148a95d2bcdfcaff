package register

import (
	"context"
	"database/sql"
	"database/sql/driver"
	"errors"
	"io"
	"net"
	"net/url"
	"strconv"
	"strings"
	"time"

	"github.com/jackc/pgx/v5"
	"github.com/jackc/pgx/v5/pgconn"
	"github.com/jackc/pgx/v5/stdlib"

	"phaselag/data/place"
)

// gate is the number of the advisory lock that keeps two programs from making
// the tables at once.
const gate = 0x706c7267

type postgresKind struct{}

func openPostgres(where string) (*Register, error) {
	shown := "postgres://…"
	if u, err := url.Parse(where); err == nil {
		u.RawQuery = "" // it may hold a password too
		shown = u.Redacted()
	}
	config, err := pgx.ParseConfig(where)
	if err != nil {
		// The error of the parser repeats the URL, without its password.
		return nil, &place.Error{File: shown, What: "cannot read the URL of the register", Hint: "write postgres://user@host:5432/database", Err: err}
	}
	if config.ConnectTimeout == 0 {
		config.ConnectTimeout = 10 * time.Second // the URL says nothing
	}
	db := stdlib.OpenDB(*config)
	db.SetMaxOpenConns(8)
	return &Register{db: db, kind: postgresKind{}, where: shown}, nil
}

func (postgresKind) query(q string) string {
	var b strings.Builder
	for n := 1; ; n++ {
		before, after, found := strings.Cut(q, "?")
		b.WriteString(before)
		if !found {
			return b.String()
		}
		b.WriteString("$" + strconv.Itoa(n))
		q = after
	}
}

func (postgresKind) lock(ctx context.Context, tx *sql.Tx) error {
	_, err := tx.ExecContext(ctx, "SELECT pg_advisory_xact_lock($1)", int64(gate))
	return err
}

func (postgresKind) schema() string { return "schema/postgres" }

const versionTable = "register_version"

func (postgresKind) version(ctx context.Context, tx *sql.Tx) (n int, err error) {
	var there bool
	if err := tx.QueryRowContext(ctx, "SELECT to_regclass($1) IS NOT NULL", versionTable).Scan(&there); err != nil || !there {
		return 0, err
	}
	err = tx.QueryRowContext(ctx, "SELECT coalesce(max(version), 0) FROM "+versionTable).Scan(&n)
	return n, err
}

func (postgresKind) setVersion(ctx context.Context, tx *sql.Tx, n int) error {
	if _, err := tx.ExecContext(ctx, "CREATE TABLE IF NOT EXISTS "+versionTable+" (version bigint PRIMARY KEY)"); err != nil {
		return err
	}
	_, err := tx.ExecContext(ctx, "INSERT INTO "+versionTable+" VALUES ($1)", n)
	return err
}

// foreign: a database may hold other tables beside the register's.
func (postgresKind) foreign(context.Context, *sql.Tx) (string, error) { return "", nil }

// integrity is the server's own business.
func (postgresKind) integrity(context.Context, *sql.DB) ([]string, error) { return nil, nil }

func (postgresKind) judge(err error) verdict {
	var connect *pgconn.ConnectError
	if errors.As(err, &connect) {
		return verdict{what: "cannot reach the database", hint: "is the server running, and are host, user, password and database right?", unreached: true}
	}
	var e *pgconn.PgError
	var network net.Error
	switch {
	case errors.As(err, &e):
	case errors.As(err, &network), errors.Is(err, io.EOF), errors.Is(err, io.ErrUnexpectedEOF), errors.Is(err, driver.ErrBadConn):
		return verdict{what: "the connection to the database was lost", hint: "look whether the server runs, then try again", unreached: true}
	default:
		return verdict{}
	}
	// Classes of PostgreSQL's error codes, appendix A of its manual.
	switch class := e.Code[:2]; {
	case e.Code == "XX001" || e.Code == "XX002":
		return verdict{what: "its structure does not hold together", hint: restore, damaged: true}
	case class == "08" || class == "57":
		return verdict{what: "the server ended the connection", hint: "look whether the server runs, then try again", unreached: true}
	case class == "53":
		return verdict{what: "the server has run out of room", hint: "nothing was written; make room and try again"}
	case class == "42" && e.Code == "42501":
		return verdict{what: "the user has no right to do this", hint: "the register's user needs rights on its tables, and once the right to make them"}
	}
	return verdict{}
}
