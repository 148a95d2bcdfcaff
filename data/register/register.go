package register

import (
	"context"
	"database/sql"
	"strings"
)

// Register is an open register. Its methods may be called from several
// goroutines at once.
type Register struct {
	db    *sql.DB
	kind  kind
	where string // for messages, without a password
}

// kind is what SQLite and PostgreSQL do differently.
type kind interface {
	// query writes the placeholders ? of a statement in the database's own way.
	query(string) string
	// lock keeps other writers out until the transaction ends.
	lock(context.Context, *sql.Tx) error
	// schema is the folder of the schema's steps.
	schema() string
	// version of the schema, 0 where there is none yet.
	version(context.Context, *sql.Tx) (int, error)
	// setVersion notes a step that was taken.
	setVersion(context.Context, *sql.Tx, int) error
	// foreign names a table that makes this the database of something else,
	// where version is 0; "" for none.
	foreign(context.Context, *sql.Tx) (string, error)
	// integrity asks the database to look through its own structure, and
	// returns what it complains of.
	integrity(context.Context, *sql.DB) ([]string, error)
	// judge says what an error of the driver means, for the person at the bench.
	judge(error) verdict
}

// verdict is what an error of a database means.
type verdict struct {
	what, hint string // "": nothing better than the error's own text
	damaged    bool   // the database's own structure is damaged
	unreached  bool   // the connection was lost: nobody knows what came through
}

// Open opens the register at where, a file's path or a URL postgres://…
// (postgresql://…), and brings an older schema up to date. A file that does not
// exist is made, with an empty register in it; its folder must exist. A register
// that a newer program made is refused with [ErrNewer].
func Open(where string) (*Register, error) {
	ctx := context.Background()
	var r *Register
	var err error
	if strings.HasPrefix(where, "postgres://") || strings.HasPrefix(where, "postgresql://") {
		r, err = openPostgres(where)
	} else {
		r, err = openSQLite(ctx, where)
	}
	if err != nil {
		return nil, err
	}
	if err := r.migrate(ctx); err != nil {
		r.db.Close()
		return nil, err
	}
	return r, nil
}

// Close ends the use of the register.
func (r *Register) Close() error {
	if err := r.db.Close(); err != nil {
		return r.fault("closing the register", err)
	}
	return nil
}

// rows runs a query whose placeholders are ?.
func (r *Register) rows(ctx context.Context, q string, args ...any) (*sql.Rows, error) {
	return r.db.QueryContext(ctx, r.kind.query(q), args...)
}
