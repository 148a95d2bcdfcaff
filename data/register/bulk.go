package register

import (
	"context"
	"fmt"
	"iter"
)

// standing is what bulk needs to know of the entries that are there.
type standing struct {
	sums      map[int64]string   // of the rows, by number
	corrector map[int64]int64    // the entry that corrects an entry
	batches   map[string][]int64 // the entries of a batch, without those of this import
	orphans   map[int64]bool     // files without a row
	common    map[int64]bool     // entries of the import that are here by now
}

// bulk adds checked entries that have numbers, all in one transaction or, where
// any of them does not fit to what is there, none.
func (r *Register) bulk(ctx context.Context, entries iter.Seq[*Entry]) (*Imported, error) {
	const doing = "importing"
	tx, err := r.writing(ctx)
	if err != nil {
		return nil, r.fault(doing, err)
	}
	defer tx.Rollback()
	s, err := tx.standing(ctx)
	if err != nil {
		return nil, r.fault(doing, err)
	}
	out := &Imported{}
	var refused []string
	for e := range entries {
		sum := headOf(e).sum
		if s.sums[e.ID] == sum {
			s.common[e.ID] = true
			out.Skipped++
			continue
		}
		if why := s.refuses(e); why != "" {
			refused = append(refused, fmt.Sprintf("entry %d, batch %q: %s", e.ID, e.Batch, why))
			continue
		}
		if err := tx.insert(ctx, e); err != nil {
			return nil, r.fault(fmt.Sprintf("importing entry %d", e.ID), err)
		}
		s.sums[e.ID] = sum
		s.common[e.ID] = true
		if e.Corrects != 0 {
			s.corrector[e.Corrects] = e.ID
		}
		out.Added++
	}
	if n := len(refused); n > 0 {
		what := "nothing is imported: " + refused[0]
		if n > 1 {
			what += fmt.Sprintf(" (and %d more like it)", n-1)
		}
		return nil, r.refusal(what, "import it into a register of its own", ErrOther)
	}
	if err := tx.Commit(); err != nil {
		return nil, r.fault(doing, err)
	}
	return out, nil
}

func (tx *writing) standing(ctx context.Context) (*standing, error) {
	s := &standing{sums: map[int64]string{}, corrector: map[int64]int64{}, batches: map[string][]int64{}, orphans: map[int64]bool{}, common: map[int64]bool{}}
	rows, err := tx.QueryContext(ctx, "SELECT id, batch, corrects, row_sha256 FROM register_entry ORDER BY id")
	if err != nil {
		return nil, err
	}
	defer rows.Close()
	for rows.Next() {
		var id, corrects int64
		var batch, sum string
		if err := rows.Scan(&id, &batch, &corrects, &sum); err != nil {
			return nil, err
		}
		s.sums[id] = sum
		s.batches[batch] = append(s.batches[batch], id)
		if corrects != 0 {
			s.corrector[corrects] = id
		}
	}
	if err := rows.Err(); err != nil {
		return nil, err
	}
	files, err := tx.QueryContext(ctx, "SELECT entry FROM register_file WHERE entry NOT IN (SELECT id FROM register_entry)")
	if err != nil {
		return nil, err
	}
	defer files.Close()
	for files.Next() {
		var id int64
		if err := files.Scan(&id); err != nil {
			return nil, err
		}
		s.orphans[id] = true
	}
	return s, files.Err()
}

// refuses says why an entry does not fit to what is there, "" if it does. A batch
// may not come to have two entries that count; within an export that cannot
// happen unless a correction in it was lost, and then the rest is worth more than
// the rule.
func (s *standing) refuses(e *Entry) string {
	if _, taken := s.sums[e.ID]; taken {
		return "its number belongs to another entry here"
	}
	if s.orphans[e.ID] {
		return "the row of this number is lost here, but its file is not; import into a new register"
	}
	if _, there := s.sums[e.Corrects]; there && !s.common[e.Corrects] {
		return fmt.Sprintf("it corrects entry %d, which is another one here or damaged in the export", e.Corrects)
	}
	if by := s.corrector[e.Corrects]; e.Corrects != 0 && by != 0 {
		return fmt.Sprintf("it corrects entry %d, which entry %d here corrects already", e.Corrects, by)
	}
	if s.corrector[e.ID] != 0 {
		return ""
	}
	for _, id := range s.batches[e.Batch] {
		if id != e.Corrects && s.corrector[id] == 0 {
			return fmt.Sprintf("its batch is entry %d here", id)
		}
	}
	return ""
}
