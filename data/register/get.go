package register

import (
	"context"
	"fmt"

	"phaselag/data/place"
)

// Get returns the entry of a number with its file and values, all checked. An
// entry that is not there is [ErrNotFound], a damaged one [ErrDamaged].
func (r *Register) Get(ctx context.Context, id int64) (*Entry, error) {
	what := fmt.Sprintf("entry %d", id)
	g := gathering{seen: map[int64]*head{}}
	err := r.gather(ctx, &g, "SELECT "+headColumns+" FROM register_entry WHERE id = ? OR corrects = ? AND corrects <> 0 ORDER BY id", id, id)
	if err != nil {
		return nil, r.fault("reading "+what, err)
	}
	h, there := g.seen[id]
	if !there {
		last := r.numbers(ctx, "SELECT coalesce(max(id), 0) FROM register_entry")
		hint := "the register is empty"
		if len(last) > 0 && last[0] > 0 {
			hint = fmt.Sprintf("the last entry is %d", last[0])
		}
		return nil, r.refusal(what, hint, ErrNotFound)
	}
	if h == nil {
		for _, d := range g.damaged {
			if d.ID == id {
				return nil, r.refusal(what+": "+d.What, restore, ErrDamaged)
			}
		}
	}
	for _, other := range g.sound {
		if other.Corrects == id {
			h.CorrectedBy = other.ID
		}
	}
	return r.entry(ctx, h)
}

// GetBatch returns the entry that counts for a batch: the one that no other
// corrects.
func (r *Register) GetBatch(ctx context.Context, batch string) (*Entry, error) {
	g := gathering{seen: map[int64]*head{}}
	err := r.gather(ctx, &g, `SELECT `+headColumns+` FROM register_entry e WHERE batch = ?
		AND NOT EXISTS (SELECT 1 FROM register_entry c WHERE c.corrects = e.id AND c.corrects <> 0) ORDER BY id`, batch)
	if err != nil {
		return nil, r.fault("reading batch "+quoted(batch), err)
	}
	if n := len(g.sound); n > 0 {
		return r.entry(ctx, g.sound[n-1])
	}
	if len(g.damaged) > 0 {
		d := g.damaged[0]
		return nil, r.refusal(fmt.Sprintf("entry %d, batch %s: %s", d.ID, quoted(batch), d.What), restore, ErrDamaged)
	}
	return nil, r.refusal("batch "+quoted(batch), r.near(ctx, batch), ErrNotFound)
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
