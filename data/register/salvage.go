package register

import "context"

// salvage reads row by row where the table cannot be read as a whole. The
// numbers come from the other tables, each as far as it can be read, and from
// the rows that were read before the damage.
func (r *Register) salvage(ctx context.Context, g *gathering, first error) error {
	ids := r.numbers(ctx, "SELECT entry FROM register_file ORDER BY entry")
	ids = append(ids, r.numbers(ctx, "SELECT entry FROM register_file ORDER BY entry DESC")...)
	ids = append(ids, r.numbers(ctx, "SELECT entry FROM register_value WHERE position = 0 ORDER BY entry")...)
	ids = append(ids, r.numbers(ctx, "SELECT entry FROM register_value WHERE position = 0 ORDER BY entry DESC")...)
	if len(ids) == 0 && len(g.sound) == 0 {
		return r.fail("reading the register", first)
	}
	for _, id := range ids {
		if err := r.one(ctx, g, id); err != nil {
			return err
		}
	}
	return nil
}

// one reads the row of one entry, unless that was done, and takes damage and
// absence down.
func (r *Register) one(ctx context.Context, g *gathering, id int64) error {
	if _, done := g.seen[id]; done {
		return nil
	}
	err := r.gather(ctx, g, "SELECT "+headColumns+" FROM register_entry WHERE id = ?", id)
	switch {
	case err != nil && !r.kind.judge(err).damaged:
		return r.fault("reading the register", err)
	case err != nil:
		g.harm(id, "", "its row lies in a damaged part of the database")
	}
	if _, found := g.seen[id]; !found {
		g.harm(id, "", "its row is missing")
	}
	return nil
}

// numbers returns what a query for numbers gives before it fails.
func (r *Register) numbers(ctx context.Context, q string, args ...any) []int64 {
	rows, err := r.rows(ctx, q, args...)
	if err != nil {
		return nil
	}
	defer rows.Close()
	var out []int64
	for rows.Next() {
		var cell any
		if rows.Scan(&cell) != nil {
			break
		}
		if id, ok := cell.(int64); ok {
			out = append(out, id)
		}
	}
	return out
}

// lost names the entries that have no row: gaps in the numbers, and the first
// thousand files beyond the last row. Each is asked for once more, since it may
// have been added a moment ago.
func (r *Register) lost(ctx context.Context, g *gathering) error {
	last := int64(0)
	for _, h := range g.sound {
		last = max(last, h.ID) // sound, so its number can be believed
	}
	for id := int64(1); id < last; id++ {
		if err := r.one(ctx, g, id); err != nil {
			return err
		}
	}
	for _, id := range r.numbers(ctx, "SELECT entry FROM register_file WHERE entry > ? ORDER BY entry LIMIT 1000", last) {
		if err := r.one(ctx, g, id); err != nil {
			return err
		}
	}
	return ctx.Err()
}
