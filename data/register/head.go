package register

import (
	"cmp"
	"context"
	"database/sql"
	"encoding/json"
	"fmt"
	"slices"

	"phaselag/data/place"
)

// head is an entry's row.
type head struct {
	Summary          // Inputs after decode
	inputs    string // the JSON text that is stored
	valuesSum string
	sum       string // of the row, as stored
}

const headColumns = "id, batch, compound, tested, added, who, corrects, why, sha256, size, inputs, value_count, values_sha256, row_sha256"

// headOf makes the row of a checked entry.
func headOf(e *Entry) *head {
	h := &head{Summary: Summary{
		ID: e.ID, Batch: e.Batch, Compound: e.Compound, Tested: e.Tested, Added: e.Added, Who: e.Who,
		Corrects: e.Corrects, Why: e.Why, SHA256: e.SHA256, Size: int64(len(e.File)), Inputs: e.Inputs, Values: len(e.Values),
	}}
	inputs := e.Inputs
	if inputs == nil {
		inputs = []Input{}
	}
	text, err := json.Marshal(inputs)
	if err != nil {
		panic("register: " + err.Error()) // two strings always marshal
	}
	h.inputs, h.valuesSum = string(text), valuesSum(e.Values)
	h.sum = h.rowSum()
	return h
}

// readHead reads the row under rows, and says what is wrong with it. A damaged
// row may hold anything, so the columns are taken as they come.
func readHead(rows *sql.Rows) (h *head, wrong string, err error) {
	var cells [14]any
	var into [14]any
	for i := range cells {
		into[i] = &cells[i]
	}
	if err := rows.Scan(into[:]...); err != nil {
		return nil, "", err
	}
	h = &head{}
	sound := true
	text := func(i int, to *string) {
		switch v := cells[i].(type) {
		case string:
			*to = v
		case []byte:
			*to = string(v)
		default:
			sound = false
		}
	}
	whole := func(i int, to *int64) {
		v, ok := cells[i].(int64)
		*to, sound = v, sound && ok
	}
	var count int64
	whole(0, &h.ID)
	for i, to := range []*string{&h.Batch, &h.Compound, &h.Tested, &h.Added, &h.Who} {
		text(1+i, to)
	}
	whole(6, &h.Corrects)
	text(7, &h.Why)
	text(8, &h.SHA256)
	whole(9, &h.Size)
	text(10, &h.inputs)
	whole(11, &count)
	text(12, &h.valuesSum)
	text(13, &h.sum)
	h.Values = int(count)
	if !sound || h.rowSum() != h.sum {
		return h, "the row does not match its SHA-256", nil
	}
	return h, "", nil
}

// decode reads the list of inputs, which takes as long as all the rest of a row
// and is left until the row is wanted.
func (h *head) decode() (wrong string) {
	if h.inputs == "[]" {
		return ""
	}
	if err := json.Unmarshal([]byte(h.inputs), &h.Inputs); err != nil {
		return "the list of its inputs is unreadable"
	}
	return ""
}

// heads reads all rows in order of their numbers: the sound ones with
// CorrectedBy filled in, and the damaged or missing ones. Rows are never changed
// nor removed, so what other queries find later fits to them.
func (r *Register) heads(ctx context.Context) ([]*head, []Damage, error) {
	g := gathering{seen: map[int64]*head{}}
	err := r.gather(ctx, &g, "SELECT "+headColumns+" FROM register_entry ORDER BY id")
	if err != nil {
		if !r.kind.judge(err).damaged {
			return nil, nil, r.fault("reading the register", err)
		}
		if err := r.salvage(ctx, &g, err); err != nil {
			return nil, nil, err
		}
	}
	if err := r.lost(ctx, &g); err != nil {
		return nil, nil, err
	}
	slices.SortFunc(g.sound, func(a, b *head) int { return cmp.Compare(a.ID, b.ID) })
	slices.SortStableFunc(g.damaged, func(a, b Damage) int { return cmp.Compare(a.ID, b.ID) })
	g.link()
	return g.sound, g.damaged, nil
}

// gathering is what heads has found so far.
type gathering struct {
	sound   []*head
	damaged []Damage
	seen    map[int64]*head // nil: damaged
}

func (g *gathering) harm(id int64, batch, what string) {
	g.damaged = append(g.damaged, Damage{id, batch, what})
	g.seen[id] = nil
}

// link tells corrected entries by which.
func (g *gathering) link() {
	for _, h := range g.sound {
		if old := g.seen[h.Corrects]; old != nil {
			old.CorrectedBy = h.ID
		}
	}
}

func (r *Register) gather(ctx context.Context, g *gathering, q string, args ...any) error {
	rows, err := r.rows(ctx, q, args...)
	if err != nil {
		return err
	}
	defer rows.Close()
	for rows.Next() {
		h, wrong, err := readHead(rows)
		if err != nil {
			return err
		}
		if _, twice := g.seen[h.ID]; twice {
			continue
		}
		if wrong != "" {
			g.harm(h.ID, legible(h.Batch), wrong)
			continue
		}
		g.sound = append(g.sound, h)
		g.seen[h.ID] = h
	}
	return rows.Err()
}

// legible is a text of a damaged row as far as it can be shown.
func legible(s string) string {
	if what, _ := oneLine(s, false); what != "" {
		return ""
	}
	return s
}

// fail is the error for a register of which nothing can be read.
func (r *Register) fail(what string, err error) error {
	v := r.kind.judge(err)
	return &place.Error{File: r.where, What: what + ": " + v.what, Err: fmt.Errorf("%w (%w)", ErrDamaged, err),
		Hint: "nothing of it is readable; " + lostAll}
}
