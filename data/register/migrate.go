package register

import (
	"cmp"
	"context"
	"embed"
	"errors"
	"fmt"
	"io/fs"
	"path"
	"slices"
	"strconv"
	"strings"

	"phaselag/data/place"
)

//go:embed schema
var schemas embed.FS

// step is one change of the schema, from version number-1 to number.
type step struct {
	number int
	name   string
	text   string
}

// steps reads the steps of a folder, whose files are named "1-what.sql",
// "2-what.sql" and so on.
func steps(f fs.FS, folder string) ([]step, error) {
	names, err := fs.Glob(f, path.Join(folder, "*.sql"))
	if err != nil {
		return nil, err
	}
	var out []step
	for _, name := range names {
		number, _, _ := strings.Cut(path.Base(name), "-")
		n, err := strconv.Atoi(number)
		if err != nil {
			return nil, fmt.Errorf("%s: no number before the hyphen", name)
		}
		text, err := fs.ReadFile(f, name)
		if err != nil {
			return nil, err
		}
		out = append(out, step{n, name, string(text)})
	}
	slices.SortFunc(out, func(a, b step) int { return cmp.Compare(a.number, b.number) })
	for i, s := range out {
		if s.number != i+1 {
			return nil, fmt.Errorf("%s: expected step %d", s.name, i+1)
		}
	}
	return out, nil
}

// migrate takes the steps that the register has not seen.
func (r *Register) migrate(ctx context.Context) error {
	all, err := steps(schemas, r.kind.schema())
	if err != nil {
		panic("register: " + err.Error())
	}
	return r.take(ctx, all)
}

// take takes steps, each in one transaction that begins by asking again which
// version the register has, since another process may be doing the same.
func (r *Register) take(ctx context.Context, all []step) error {
	for {
		done, err := r.takeOne(ctx, all)
		if err != nil {
			err = r.fault("opening the register", err)
			var e *place.Error
			if errors.As(err, &e) && e.Hint == restore { // but here nothing can be read
				e.Hint = lostAll
			}
			return err
		}
		if done {
			return nil
		}
	}
}

func (r *Register) takeOne(ctx context.Context, all []step) (done bool, err error) {
	// Looking needs no lock; most openings find nothing to do.
	version, err := r.version(ctx)
	if err != nil {
		return false, err
	}
	if version == len(all) {
		return true, nil
	}
	if version > len(all) {
		return false, r.refusal(fmt.Sprintf("its schema is %d, this program knows %d", version, len(all)),
			"open it with the program that made it, or a later one", ErrNewer)
	}
	tx, err := r.db.BeginTx(ctx, nil)
	if err != nil {
		return false, err
	}
	defer tx.Rollback()
	if version == 0 {
		switch table, err := r.kind.foreign(ctx, tx); {
		case err != nil:
			return false, err
		case table != "":
			return false, r.refusal(fmt.Sprintf("is no register: it holds the table %q of something else", table),
				"give the register a file or a database of its own", nil)
		}
	}
	if err := r.kind.lock(ctx, tx); err != nil {
		return false, err
	}
	again, err := r.kind.version(ctx, tx)
	if err != nil || again != version {
		return false, err // another process was quicker: look again
	}
	next := all[version]
	if _, err := tx.ExecContext(ctx, next.text); err != nil {
		return false, fmt.Errorf("%s: %w", next.name, err)
	}
	if err := r.kind.setVersion(ctx, tx, next.number); err != nil {
		return false, err
	}
	return false, tx.Commit()
}

func (r *Register) version(ctx context.Context) (int, error) {
	tx, err := r.db.BeginTx(ctx, reading)
	if err != nil {
		return 0, err
	}
	defer tx.Rollback()
	return r.kind.version(ctx, tx)
}
