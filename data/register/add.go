package register

import (
	"context"
	"database/sql"
	"errors"
	"fmt"
	"math"
	"strings"
)

// Add writes e as a new entry and returns its number; e stays as it is, and its
// ID does not matter. When Add returns without an error the entry is safe.
//
// A batch that has an entry already is refused with [ErrDuplicate], unless e
// corrects that entry; an entry that was corrected before with [ErrCorrected]:
// the newest one is the one to correct. A correction may change everything, the
// name of the batch too.
func (r *Register) Add(ctx context.Context, e *Entry) (int64, error) {
	c, err := checked(e)
	if err != nil {
		return 0, err
	}
	tx, err := r.writing(ctx)
	if err != nil {
		return 0, r.fault("adding batch "+quoted(c.Batch), err)
	}
	defer tx.Rollback()
	if err := tx.mayAdd(ctx, c); err != nil {
		return 0, err
	}
	if c.ID, err = tx.next(ctx); err == nil {
		err = tx.insert(ctx, c)
	}
	if err != nil {
		return 0, r.fault("adding batch "+quoted(c.Batch), err)
	}
	if err := tx.Commit(); err != nil {
		if r.kind.judge(err).unreached || ctx.Err() != nil {
			return 0, r.refusal(fmt.Sprintf("adding batch %s was cut off at the very end", quoted(c.Batch)),
				"it may be there or not: list the batch, and add it again if it is not", err)
		}
		return 0, r.fault("adding batch "+quoted(c.Batch), err)
	}
	return c.ID, nil
}

// writing is a transaction that no other writer can enter.
type writing struct {
	*sql.Tx
	r        *Register
	prepared map[string]*sql.Stmt // an import says the same thing many times
}

// do runs a statement whose placeholders are ?.
func (tx *writing) do(ctx context.Context, q string, args ...any) error {
	s := tx.prepared[q]
	if s == nil {
		var err error
		if s, err = tx.PrepareContext(ctx, tx.r.kind.query(q)); err != nil {
			return err
		}
		tx.prepared[q] = s // closed with the transaction
	}
	_, err := s.ExecContext(ctx, args...)
	return err
}

func (r *Register) writing(ctx context.Context) (*writing, error) {
	tx, err := r.db.BeginTx(ctx, nil)
	if err != nil {
		return nil, err
	}
	if err := r.kind.lock(ctx, tx); err != nil {
		tx.Rollback()
		return nil, err
	}
	return &writing{tx, r, map[string]*sql.Stmt{}}, nil
}

// number asks for one number; 0 where there is none.
func (tx *writing) number(ctx context.Context, q string, args ...any) (n int64, err error) {
	err = tx.QueryRowContext(ctx, tx.r.kind.query(q), args...).Scan(&n)
	if errors.Is(err, sql.ErrNoRows) {
		return 0, nil
	}
	return n, err
}

// live finds the entry that counts for a batch, other than the given one.
func (tx *writing) live(ctx context.Context, batch string, but int64) (int64, error) {
	return tx.number(ctx, `SELECT e.id FROM register_entry e WHERE e.batch = ? AND e.id <> ?
		AND NOT EXISTS (SELECT 1 FROM register_entry c WHERE c.corrects = e.id AND c.corrects <> 0) ORDER BY e.id DESC LIMIT 1`, batch, but)
}

// corrector finds the entry that corrects another.
func (tx *writing) corrector(ctx context.Context, id int64) (int64, error) {
	return tx.number(ctx, "SELECT id FROM register_entry WHERE corrects = ? AND corrects <> 0", id)
}

// mayAdd holds e against what is there.
func (tx *writing) mayAdd(ctx context.Context, e *Entry) error {
	doing := "adding batch " + quoted(e.Batch)
	if e.Corrects != 0 {
		id, err := tx.number(ctx, "SELECT id FROM register_entry WHERE id = ?", e.Corrects)
		if err != nil {
			return tx.r.fault(doing, err)
		}
		if id == 0 {
			return tx.r.refusal(fmt.Sprintf("%s: it corrects entry %d", doing, e.Corrects), "list the batches for the number of the entry", ErrNotFound)
		}
		by, err := tx.corrector(ctx, e.Corrects)
		if err != nil {
			return tx.r.fault(doing, err)
		}
		if by != 0 {
			return tx.r.refusal(fmt.Sprintf("%s: entry %d is corrected by entry %d already", doing, e.Corrects, by),
				fmt.Sprintf("correct the newer one: follow the corrections from entry %d", by), ErrCorrected)
		}
	}
	id, err := tx.live(ctx, e.Batch, e.Corrects)
	if err != nil {
		return tx.r.fault(doing, err)
	}
	if id != 0 {
		return tx.r.refusal(fmt.Sprintf("batch %s is entry %d already", quoted(e.Batch), id),
			fmt.Sprintf("a correction names it: it corrects %d, with the reason", id), ErrDuplicate)
	}
	return nil
}

// next is the number of the next entry. It is also beyond the files, so that an
// entry whose row was lost is not taken for a new one.
func (tx *writing) next(ctx context.Context) (int64, error) {
	a, err := tx.number(ctx, "SELECT coalesce(max(id), 0) FROM register_entry")
	if err != nil {
		return 0, err
	}
	b, err := tx.number(ctx, "SELECT coalesce(max(entry), 0) FROM register_file")
	return max(a, b) + 1, err
}

// valuesAtOnce is how many values one statement writes; their 8 columns stay far
// below the placeholders that SQLite (32 766) and PostgreSQL (65 535) take.
const valuesAtOnce = 64

// insert writes a checked entry with its number.
func (tx *writing) insert(ctx context.Context, e *Entry) error {
	h := headOf(e)
	err := tx.do(ctx, "INSERT INTO register_entry ("+headColumns+") VALUES (?"+strings.Repeat(", ?", 13)+")",
		h.ID, h.Batch, h.Compound, h.Tested, h.Added, h.Who, h.Corrects, h.Why, h.SHA256, h.Size, h.inputs, int64(h.Values), h.valuesSum, h.sum)
	if err != nil {
		return err
	}
	if err := tx.do(ctx, "INSERT INTO register_file (entry, bytes) VALUES (?, ?)", h.ID, e.File); err != nil {
		return err
	}
	for from := 0; from < len(e.Values); from += valuesAtOnce {
		some := e.Values[from:min(from+valuesAtOnce, len(e.Values))]
		args := make([]any, 0, 8*len(some))
		for i := range some {
			v := &some[i]
			args = append(args, h.ID, int64(from+i), v.Name, v.Condition, stored(v.Value), stored(v.U95), v.Unit, mark(h.ID, from+i, v))
		}
		rows := strings.Repeat(", (?, ?, ?, ?, ?, ?, ?, ?)", len(some))[2:]
		if err := tx.do(ctx, "INSERT INTO register_value ("+valueColumns+") VALUES "+rows, args...); err != nil {
			return err
		}
	}
	return nil
}

const valueColumns = "entry, position, name, condition, value, u95, unit, mark"

// stored is a number for the database, NULL for NaN, which SQLite does not keep.
func stored(x float64) any {
	if math.IsNaN(x) {
		return nil
	}
	return x
}

func quoted(s string) string { return fmt.Sprintf("%q", s) }
