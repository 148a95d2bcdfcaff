package register

import (
	"context"
	"database/sql"
	"errors"
	"math"
)

// file reads the compound file of an entry and says what is wrong with it.
func (r *Register) file(ctx context.Context, h *head) (bytes []byte, wrong string, err error) {
	rows, err := r.rows(ctx, "SELECT bytes FROM register_file WHERE entry = ?", h.ID)
	if err == nil {
		defer rows.Close()
		var raw sql.RawBytes
		found := rows.Next()
		if found {
			err = rows.Scan(&raw)
		}
		bytes = append([]byte(nil), raw...)
		err = errors.Join(err, rows.Err())
		if err == nil && !found {
			return nil, "the compound file is missing", nil
		}
	}
	switch {
	case err != nil && r.kind.judge(err).damaged:
		return nil, "the compound file lies in a damaged part of the database", nil
	case err != nil:
		return nil, "", r.fault("reading a compound file", err)
	case int64(len(bytes)) != h.Size || hashOf(bytes) != h.SHA256:
		return nil, "the compound file does not match its SHA-256", nil
	}
	return bytes, "", nil
}

// values reads the values of an entry and says what is wrong with them.
func (r *Register) values(ctx context.Context, h *head) (out []Value, wrong string, err error) {
	rows, err := r.rows(ctx, "SELECT "+valueColumns+" FROM register_value WHERE entry = ? ORDER BY position", h.ID)
	if err == nil {
		defer rows.Close()
		for rows.Next() {
			v, err := readValue(rows)
			if err != nil {
				return nil, "", r.fault("reading values", err)
			}
			if !v.sound {
				return nil, "its values do not match their SHA-256", nil
			}
			out = append(out, v.Value)
		}
		err = rows.Err()
	}
	switch {
	case err != nil && r.kind.judge(err).damaged:
		return nil, "its values lie in a damaged part of the database", nil
	case err != nil:
		return nil, "", r.fault("reading values", err)
	case len(out) != h.Values || valuesSum(out) != h.valuesSum:
		return nil, "its values do not match their SHA-256", nil
	}
	return out, "", nil
}

// storedValue is a row of register_value.
type storedValue struct {
	entry int64
	Value
	sound bool // it matches its mark
}

// readValue reads the row under rows. A damaged row may hold anything, so the
// columns are taken as they come.
func readValue(rows *sql.Rows) (v storedValue, err error) {
	var c [8]any
	if err := rows.Scan(&c[0], &c[1], &c[2], &c[3], &c[4], &c[5], &c[6], &c[7]); err != nil {
		return v, err
	}
	entry, ok1 := c[0].(int64)
	position, ok2 := c[1].(int64)
	name, ok3 := c[2].(string)
	condition, ok4 := c[3].(string)
	value, ok5 := measured(c[4])
	u95, ok6 := measured(c[5])
	unit, ok7 := c[6].(string)
	kept, ok8 := c[7].(int64)
	v = storedValue{entry, Value{name, condition, value, u95, unit}, false}
	v.sound = ok1 && ok2 && ok3 && ok4 && ok5 && ok6 && ok7 && ok8 && mark(entry, int(position), &v.Value) == kept
	return v, nil
}

// measured is a number from the database, NaN for NULL.
func measured(cell any) (float64, bool) {
	switch x := cell.(type) {
	case nil:
		return math.NaN(), true
	case float64:
		return x, true
	}
	return 0, false
}

// through reads the file and the values of an entry to their ends.
func (r *Register) through(ctx context.Context, h *head) (wrong string, err error) {
	if _, wrong, err = r.file(ctx, h); wrong != "" || err != nil {
		return wrong, err
	}
	_, wrong, err = r.values(ctx, h)
	return wrong, err
}
