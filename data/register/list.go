package register

import (
	"cmp"
	"context"
	"fmt"
	"slices"
)

// ThroughUpTo is the number of listed entries up to which List reads their
// compound files and values through; that many take about a tenth of a second.
const ThroughUpTo = 1000

// Query selects entries. The zero Query selects all that no other corrects.
type Query struct {
	Batch     string // pattern: * stands for anything, ? for one character, \ before either for itself; "": every batch
	Compound  string // the compound's whole name; "": every compound
	From, To  string // first and last date of the test, both included, 2026-03-31; "": open
	Corrected bool   // with the entries that were corrected
	Limit     int    // the newest so many; 0: all
	Thorough  bool   // read files and values through even of more than ThroughUpTo entries
}

// List returns the selected sound entries in ascending order of their numbers,
// and the damaged ones, these without regard to all of the query: what a damaged
// row says of itself cannot be believed.
func (r *Register) List(ctx context.Context, q Query) ([]Summary, []Damage, error) {
	if err := q.check(); err != nil {
		return nil, nil, err
	}
	heads, damaged, err := r.heads(ctx)
	if err != nil {
		return nil, nil, err
	}
	heads = slices.DeleteFunc(heads, func(h *head) bool { return !q.selects(h) })
	if q.Limit > 0 && len(heads) > q.Limit {
		heads = heads[len(heads)-q.Limit:]
	}
	out := make([]Summary, 0, len(heads))
	for _, h := range heads {
		wrong := h.decode()
		if wrong == "" && (q.Thorough || len(heads) <= ThroughUpTo) {
			if wrong, err = r.through(ctx, h); err != nil {
				return nil, nil, err
			}
		}
		if wrong != "" {
			damaged = append(damaged, Damage{h.ID, h.Batch, wrong})
			continue
		}
		out = append(out, h.Summary)
	}
	slices.SortStableFunc(damaged, func(a, b Damage) int { return cmp.Compare(a.ID, b.ID) })
	return out, damaged, nil
}

// Check reads the whole register through, and asks a SQLite file about its own
// structure as well. It returns what is damaged, nothing for a sound register.
func (r *Register) Check(ctx context.Context) ([]Damage, error) {
	_, damaged, err := r.List(ctx, Query{Corrected: true, Thorough: true})
	if err != nil {
		return nil, err
	}
	lines, err := r.kind.integrity(ctx, r.db)
	if err != nil && !r.kind.judge(err).damaged {
		return nil, r.fault("checking the database", err)
	}
	if err != nil {
		lines = append(lines, err.Error())
	}
	for _, line := range lines {
		damaged = append(damaged, Damage{What: "the database's structure: " + line})
	}
	return damaged, nil
}

func (q Query) check() error {
	for _, d := range []struct{ path, date string }{{"from", q.From}, {"to", q.To}} {
		if d.date != "" && !isDate(d.date) {
			return notDate(d.path, d.date)
		}
	}
	if q.Limit < 0 {
		panic(fmt.Sprintf("register: limit %d", q.Limit))
	}
	return nil
}

func (q Query) selects(h *head) bool {
	return (q.Corrected || h.CorrectedBy == 0) &&
		(q.Compound == "" || q.Compound == h.Compound) &&
		(q.From == "" || q.From <= h.Tested) && // dates of one form sort as text
		(q.To == "" || h.Tested <= q.To) &&
		(q.Batch == "" || matches(q.Batch, h.Batch))
}
