package register

import (
	"cmp"
	"context"
	"fmt"
	"slices"
	"strings"

	"phaselag/data/place"
)

// Point is one batch's value in a trend.
type Point struct {
	Entry    int64
	Batch    string
	Compound string
	Tested   string // date, 2026-03-31
	Value    float64
	U95      float64 // NaN: not stated
	Unit     string
}

// Quantity is something that a trend can be drawn of.
type Quantity struct {
	Name, Condition string
}

// Values returns the values of a name at a condition ("" is a condition too) in
// the order of testing, and of entry where dates are equal; compound "" takes
// every compound. Entries that were corrected are left out, and so are damaged
// ones, which are named. A value that was not measured is there as NaN.
//
// A name or condition that no entry has is [ErrNotFound].
func (r *Register) Values(ctx context.Context, name, condition, compound string) ([]Point, []Damage, error) {
	heads, damaged, err := r.heads(ctx)
	if err != nil {
		return nil, nil, err
	}
	by := make(map[int64]*head, len(heads))
	for _, h := range heads {
		by[h.ID] = h
	}
	found, err := r.found(ctx, name, condition)
	if err != nil {
		if !r.kind.judge(err).damaged {
			return nil, nil, r.fault("reading values", err)
		}
		var more []Damage
		if found, more, err = r.foundSlowly(ctx, heads, name, condition); err != nil {
			return nil, nil, err
		}
		damaged = append(damaged, more...)
	}
	if len(found) == 0 && len(damaged) == 0 {
		return nil, nil, r.unknown(ctx, name, condition)
	}
	out := make([]Point, 0, len(found))
	for _, v := range found {
		h := by[v.entry]
		switch {
		case h == nil, h.CorrectedBy != 0, compound != "" && h.Compound != compound:
		case !v.sound:
			damaged = append(damaged, Damage{h.ID, h.Batch, "a value does not match its sum"})
		default:
			out = append(out, Point{h.ID, h.Batch, h.Compound, h.Tested, v.Value.Value, v.U95, v.Unit})
		}
	}
	slices.SortFunc(out, func(a, b Point) int {
		return cmp.Or(cmp.Compare(a.Tested, b.Tested), cmp.Compare(a.Entry, b.Entry))
	})
	slices.SortStableFunc(damaged, func(a, b Damage) int { return cmp.Compare(a.ID, b.ID) })
	return out, damaged, nil
}

// found reads the rows of a quantity.
func (r *Register) found(ctx context.Context, name, condition string) ([]storedValue, error) {
	rows, err := r.rows(ctx, "SELECT "+valueColumns+" FROM register_value WHERE name = ? AND condition = ?", name, condition)
	if err != nil {
		return nil, err
	}
	defer rows.Close()
	var out []storedValue
	for rows.Next() {
		v, err := readValue(rows)
		if err != nil {
			return nil, err
		}
		out = append(out, v)
	}
	return out, rows.Err()
}

// foundSlowly reads the values entry by entry, where a part of the database is
// damaged.
func (r *Register) foundSlowly(ctx context.Context, heads []*head, name, condition string) ([]storedValue, []Damage, error) {
	var out []storedValue
	var damaged []Damage
	for _, h := range heads {
		values, wrong, err := r.values(ctx, h)
		if err != nil {
			return nil, nil, err
		}
		if wrong != "" {
			damaged = append(damaged, Damage{h.ID, h.Batch, wrong})
		}
		for _, v := range values {
			if v.Name == name && v.Condition == condition {
				out = append(out, storedValue{h.ID, v, true})
			}
		}
	}
	return out, damaged, nil
}

// Quantities returns the names and conditions that values have, sorted.
func (r *Register) Quantities(ctx context.Context) ([]Quantity, error) {
	rows, err := r.rows(ctx, "SELECT DISTINCT name, condition FROM register_value")
	if err != nil {
		return nil, r.fault("reading the names of values", err)
	}
	defer rows.Close()
	out := []Quantity{}
	for rows.Next() {
		var q Quantity
		if err := rows.Scan(&q.Name, &q.Condition); err != nil {
			return nil, r.fault("reading the names of values", err)
		}
		out = append(out, q)
	}
	if err := rows.Err(); err != nil {
		return nil, r.fault("reading the names of values", err)
	}
	// In Go, since a database sorts text as its locale has it.
	slices.SortFunc(out, func(a, b Quantity) int {
		return cmp.Or(strings.Compare(a.Name, b.Name), strings.Compare(a.Condition, b.Condition))
	})
	return out, nil
}

// unknown is the error for a quantity that no entry has.
func (r *Register) unknown(ctx context.Context, name, condition string) error {
	all, err := r.Quantities(ctx)
	if err != nil {
		return err
	}
	var names, conditions []string
	for _, q := range all {
		if !slices.Contains(names, q.Name) {
			names = append(names, q.Name)
		}
		if q.Name == name {
			conditions = append(conditions, q.Condition)
		}
	}
	what, hint := fmt.Sprintf("values of %q at %q", name, condition), ""
	switch near := place.Nearest(name, names); {
	case len(all) == 0:
		hint = "no entry has values"
	case len(conditions) > 0:
		hint = "it is there at: " + few(conditions)
	case near != "":
		hint = "did you mean " + quoted(near) + "?"
	default:
		hint = "there is: " + few(names)
	}
	return r.refusal(what, hint, ErrNotFound)
}

// few lists the first of many.
func few(all []string) string {
	const most = 8
	var b strings.Builder
	for i, s := range all {
		if i == most {
			fmt.Fprintf(&b, ", and %d more", len(all)-most)
			break
		}
		if i > 0 {
			b.WriteString(", ")
		}
		b.WriteString(quoted(s))
	}
	return b.String()
}
