package register

import (
	"context"
	"database/sql"
	"errors"
	"fmt"
	"io/fs"
	"net/url"
	"os"
	"path/filepath"
	"runtime"
	"strings"

	"modernc.org/sqlite"
	codes "modernc.org/sqlite/lib"

	"phaselag/data/place"
)

// mine marks a SQLite file as a register ("plrg"), so that the file of another
// program is not taken for one.
const mine = 0x706c7267

// reading is a transaction that takes no lock on writing.
var reading = &sql.TxOptions{ReadOnly: true}

type sqliteKind struct{}

// openSQLite opens the file at path; a file that is not there is made.
func openSQLite(ctx context.Context, path string) (*Register, error) {
	if path == "" || strings.ContainsRune(path, 0) {
		return nil, &place.Error{What: fmt.Sprintf("%q is no path of a register", path), Hint: "name a file, or a URL postgres://…"}
	}
	info, err := os.Stat(path)
	switch {
	case errors.Is(err, fs.ErrNotExist):
		if err := makeSQLite(ctx, path); err != nil {
			return nil, err
		}
	case err != nil:
		return nil, &place.Error{File: path, What: "cannot open the register", Err: err}
	case info.IsDir():
		return nil, &place.Error{File: path, What: "is a folder, not a register", Hint: "name a file in it, or import the folder if it is an export"}
	case info.Size() == 0:
		// A register is put in place whole, so this one was emptied.
		return nil, &place.Error{File: path, What: "is empty, not a register", Hint: "restore it from a backup, or remove the empty file to begin a new register"}
	}
	return connectSQLite(path)
}

// makeSQLite makes an empty register beside path and gives it its name when it
// is complete, so that no other process ever opens half of one.
func makeSQLite(ctx context.Context, path string) error {
	fault := func(err error) error {
		return &place.Error{File: path, What: "cannot make a register here", Hint: "does its folder exist, and may you write there?", Err: err}
	}
	folder, err := os.MkdirTemp(filepath.Dir(path), ".new-register-*")
	if err != nil {
		return fault(err)
	}
	defer os.RemoveAll(folder)
	young := filepath.Join(folder, "register")
	r, err := connectSQLite(young)
	if err != nil {
		return err
	}
	r.where = path
	err = r.migrate(ctx)
	if closed := r.Close(); err == nil {
		err = closed
	}
	if err != nil {
		return err
	}
	err = os.Link(young, path)
	if err == nil || errors.Is(err, fs.ErrExist) {
		return nil // where another process was quicker, its register serves
	}
	// A file system without links: the name may be taken between the two calls.
	if _, there := os.Stat(path); there == nil {
		return nil
	}
	if err := os.Rename(young, path); err != nil {
		return fault(err)
	}
	return nil
}

// connectSQLite opens the file in write-ahead mode, with writers that wait for
// each other from the beginning of a transaction, and every commit on the disk.
func connectSQLite(path string) (*Register, error) {
	full, err := filepath.Abs(path)
	if err != nil {
		return nil, &place.Error{File: path, What: "cannot open the register", Err: err}
	}
	full = filepath.ToSlash(full)
	if !strings.HasPrefix(full, "/") {
		full = "/" + full // C:/… of Windows
	}
	settings := url.Values{
		"_pragma": {"busy_timeout(10000)", "journal_mode(wal)", "synchronous(full)", "foreign_keys(1)", "trusted_schema(0)", "temp_store(memory)", "cache_size(-65536)"},
		"_txlock": {"immediate"},
	}
	u := url.URL{Scheme: "file", Path: full, RawQuery: settings.Encode()}
	db, err := sql.Open("sqlite", u.String())
	if err != nil {
		return nil, &place.Error{File: path, What: "cannot open the register", Err: err}
	}
	db.SetMaxOpenConns(max(4, runtime.GOMAXPROCS(0)))
	return &Register{db: db, kind: sqliteKind{}, where: path}, nil
}

func (sqliteKind) query(q string) string               { return q }
func (sqliteKind) lock(context.Context, *sql.Tx) error { return nil } // it began immediate
func (sqliteKind) schema() string                      { return "schema/sqlite" }

func (sqliteKind) version(ctx context.Context, tx *sql.Tx) (n int, err error) {
	err = tx.QueryRowContext(ctx, "PRAGMA user_version").Scan(&n)
	if err != nil {
		return 0, err
	}
	var application int
	if err := tx.QueryRowContext(ctx, "PRAGMA application_id").Scan(&application); err != nil {
		return 0, err
	}
	if application != mine && (n != 0 || application != 0) {
		return 0, &place.Error{What: "is the SQLite file of another program, not a register", Hint: "give the register a file of its own"}
	}
	return n, nil
}

func (sqliteKind) setVersion(ctx context.Context, tx *sql.Tx, n int) error {
	// A PRAGMA takes no placeholders.
	_, err := tx.ExecContext(ctx, fmt.Sprintf("PRAGMA application_id = %d; PRAGMA user_version = %d", mine, n))
	return err
}

func (sqliteKind) foreign(ctx context.Context, tx *sql.Tx) (table string, err error) {
	err = tx.QueryRowContext(ctx, "SELECT name FROM sqlite_schema ORDER BY name LIMIT 1").Scan(&table)
	if errors.Is(err, sql.ErrNoRows) {
		return "", nil
	}
	return table, err
}

func (sqliteKind) integrity(ctx context.Context, db *sql.DB) ([]string, error) {
	rows, err := db.QueryContext(ctx, "PRAGMA integrity_check(20)")
	if err != nil {
		return nil, err
	}
	defer rows.Close()
	var out []string
	for rows.Next() {
		var line string
		if err := rows.Scan(&line); err != nil {
			return nil, err
		}
		if line != "ok" {
			out = append(out, line)
		}
	}
	return out, rows.Err()
}

func (sqliteKind) judge(err error) verdict {
	var e *sqlite.Error
	if !errors.As(err, &e) {
		return verdict{}
	}
	switch e.Code() & 0xff { // the low byte is the kind of error
	case codes.SQLITE_NOTADB:
		return verdict{what: "is no register, or its beginning is destroyed", hint: lostAll, damaged: true}
	case codes.SQLITE_CORRUPT:
		return verdict{what: "its structure does not hold together", hint: restore, damaged: true}
	case codes.SQLITE_BUSY, codes.SQLITE_LOCKED:
		return verdict{what: "another program has been writing for ten seconds", hint: "try again; a register on a network drive belongs into PostgreSQL"}
	case codes.SQLITE_READONLY, codes.SQLITE_PERM:
		return verdict{what: "the file cannot be written", hint: "may you write to it and to its folder?"}
	case codes.SQLITE_CANTOPEN:
		return verdict{what: "the file cannot be opened", hint: "may you read and write it and its folder?"}
	case codes.SQLITE_FULL:
		return verdict{what: "the disk is full", hint: "nothing was written; make room and try again"}
	case codes.SQLITE_IOERR:
		return verdict{what: "the disk does not read or write", hint: "nothing was confirmed; look after the disk, and copy the register away"}
	}
	return verdict{}
}
