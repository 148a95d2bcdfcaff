package register

import (
	"context"
	"fmt"
	"slices"

	"phaselag/data/place"
)

// Get returns the entry of a number with its file and values, all checked. An
// entry that is not there is [ErrNotFound], a damaged one [ErrDamaged].
func (r *Register) Get(ctx context.Context, id int64) (*Entry, error) {
	what := fmt.Sprintf("entry %d", id)
	g, err := r.some(ctx, "reading "+what,
		"SELECT "+headColumns+" FROM register_entry WHERE id = ? OR corrects = ? AND corrects <> 0 ORDER BY id", id, id)
	if err != nil {
		return nil, err
	}
	for _, h := range g.sound {
		if h.ID == id {
			return r.entry(ctx, h)
		}
	}
	for _, d := range g.damaged {
		if d.ID == id {
			return nil, r.refusal(what+": "+d.What, restore, ErrDamaged)
		}
	}
	hint := "the register is empty"
	if last := r.numbers(ctx, "SELECT coalesce(max(id), 0) FROM register_entry"); len(last) > 0 && last[0] > 0 {
		hint = fmt.Sprintf("the last entry is %d", last[0])
	}
	return nil, r.refusal(what, hint, ErrNotFound)
}

// GetBatch returns the entry that counts for a batch: the one that no other
// corrects.
func (r *Register) GetBatch(ctx context.Context, batch string) (*Entry, error) {
	what := "batch " + quoted(batch)
	g, err := r.some(ctx, "reading "+what,
		`SELECT `+headColumns+` FROM register_entry e WHERE batch = ?
		AND NOT EXISTS (SELECT 1 FROM register_entry c WHERE c.corrects = e.id AND c.corrects <> 0) ORDER BY id`, batch)
	if err != nil {
		return nil, err
	}
	for _, h := range slices.Backward(g.sound) {
		if h.Batch == batch && h.CorrectedBy == 0 {
			return r.entry(ctx, h)
		}
	}
	for _, d := range g.damaged {
		if d.Batch == batch {
			return nil, r.refusal(fmt.Sprintf("entry %d, %s: %s", d.ID, what, d.What), restore, ErrDamaged)
		}
	}
	return nil, r.refusal(what, r.near(ctx, batch), ErrNotFound)
}

// some gathers the rows that a query finds, or all rows where the way to them is
// damaged.
func (r *Register) some(ctx context.Context, doing, q string, args ...any) (*gathering, error) {
	g := &gathering{seen: map[int64]*head{}}
	err := r.gather(ctx, g, q, args...)
	switch {
	case err != nil && r.kind.judge(err).damaged:
		g.sound, g.damaged, err = r.heads(ctx)
		return g, err
	case err != nil:
		return nil, r.fault(doing, err)
	}
	g.link()
	return g, nil
}

// near says which batch may have been meant.
func (r *Register) near(ctx context.Context, batch string) string {
	heads, damaged, err := r.heads(ctx)
	if err != nil || len(heads)+len(damaged) == 0 {
		return "the register is empty"
	}
	names := make([]string, len(heads))
	for i, h := range heads {
		names[i] = h.Batch
		if h.Batch == batch { // and corrected, or it would have been found
			return fmt.Sprintf("entry %d had this name and was corrected by entry %d", h.ID, h.CorrectedBy)
		}
	}
	if name := place.Nearest(batch, names); name != "" {
		return "did you mean " + quoted(name) + "?"
	}
	if len(damaged) > 0 {
		return "list the batches; some entries are damaged, and it may be one of them"
	}
	return "list the batches for their names"
}

// entry reads the rest of an entry.
func (r *Register) entry(ctx context.Context, h *head) (*Entry, error) {
	file, wrong, err := r.file(ctx, h)
	if err != nil {
		return nil, err
	}
	var values []Value
	if wrong == "" {
		wrong = h.decode()
	}
	if wrong == "" {
		if values, wrong, err = r.values(ctx, h); err != nil {
			return nil, err
		}
	}
	if wrong != "" {
		return nil, r.refusal(fmt.Sprintf("entry %d, batch %s: %s", h.ID, quoted(h.Batch), wrong), restore, ErrDamaged)
	}
	return &Entry{
		ID: h.ID, Batch: h.Batch, Compound: h.Compound, Tested: h.Tested, Added: h.Added, Who: h.Who,
		Corrects: h.Corrects, CorrectedBy: h.CorrectedBy, Why: h.Why, File: file, SHA256: h.SHA256,
		Inputs: h.Inputs, Values: values,
	}, nil
}
