package register

import (
	"context"
	"errors"
	"fmt"
	"sync"
	"testing"

	"phaselag/data/place"
)

func TestAddAndGet(t *testing.T) {
	onBoth(t, func(t *testing.T, r *Register, where string) {
		ctx := context.Background()
		for i := range 3 {
			e := example(fmt.Sprintf("B-%d", i+1))
			if id := add(t, r, e); id != int64(i+1) {
				t.Fatalf("entry %d, want %d", id, i+1)
			}
			if e.ID != 0 || e.SHA256 != "" {
				t.Error("Add changed the caller's entry")
			}
		}
		second := open(t, where) // as another program sees it
		got, err := second.Get(ctx, 2)
		if err != nil {
			t.Fatal(err)
		}
		if d := same(got, settledAs(t, example("B-2"), 2)); d != "" {
			t.Error(d)
		}
		if got, err = second.GetBatch(ctx, "B-3"); err != nil || got.ID != 3 {
			t.Errorf("got %v, %v", got, err)
		}
		if _, err = second.Get(ctx, 4); !errors.Is(err, ErrNotFound) || place.Hint(err) != "the last entry is 3" {
			t.Errorf("%v, hint %q", err, place.Hint(err))
		}
		if _, err = second.GetBatch(ctx, "b3"); !errors.Is(err, ErrNotFound) || place.Hint(err) != `did you mean "B-3"?` {
			t.Errorf("%v, hint %q", err, place.Hint(err))
		}
	})
}

func TestCorrections(t *testing.T) {
	onBoth(t, func(t *testing.T, r *Register, _ string) {
		ctx := context.Background()
		add(t, r, example("B-1"))
		add(t, r, example("B-2"))
		if _, err := r.Add(ctx, example("B-1")); !errors.Is(err, ErrDuplicate) || place.Hint(err) != "a correction names it: it corrects 1, with the reason" {
			t.Errorf("a batch twice: %v, hint %q", err, place.Hint(err))
		}
		fix := example("B-1")
		fix.Corrects, fix.Why = 1, "wrong thickness"
		if id := add(t, r, fix); id != 3 {
			t.Fatalf("entry %d, want 3", id)
		}
		if _, err := r.Add(ctx, fix); !errors.Is(err, ErrCorrected) {
			t.Errorf("an entry corrected twice: %v", err)
		}
		if _, err := r.Add(ctx, example("B-1")); !errors.Is(err, ErrDuplicate) {
			t.Errorf("a corrected batch again: %v", err)
		}
		// The batch's name was wrong: entry 2 becomes B-4, and B-2 is free again.
		rename := example("B-4")
		rename.Corrects, rename.Why = 2, "label misread"
		add(t, r, rename)
		if _, err := r.GetBatch(ctx, "B-2"); !errors.Is(err, ErrNotFound) || place.Hint(err) != "entry 2 had this name and was corrected by entry 4" {
			t.Errorf("%v, hint %q", err, place.Hint(err))
		}
		add(t, r, example("B-2"))
		clash := example("B-1")
		clash.Corrects, clash.Why = 5, "label misread"
		if _, err := r.Add(ctx, clash); !errors.Is(err, ErrDuplicate) {
			t.Errorf("a correction that takes another batch's name: %v", err)
		}
		nobody := example("B-9")
		nobody.Corrects, nobody.Why = 9, "x"
		if _, err := r.Add(ctx, nobody); !errors.Is(err, ErrNotFound) {
			t.Errorf("a correction of nothing: %v", err)
		}
		all, damaged, err := r.List(ctx, Query{Corrected: true})
		if err != nil {
			t.Fatal(err)
		}
		none(t, damaged)
		var got []string
		for _, s := range all {
			got = append(got, fmt.Sprintf("%d %s %d %d", s.ID, s.Batch, s.Corrects, s.CorrectedBy))
		}
		want := []string{"1 B-1 0 3", "2 B-2 0 4", "3 B-1 1 0", "4 B-4 2 0", "5 B-2 0 0"}
		if fmt.Sprint(got) != fmt.Sprint(want) {
			t.Errorf("got %v, want %v", got, want)
		}
		if e, err := r.Get(ctx, 1); err != nil || e.CorrectedBy != 3 {
			t.Errorf("entry 1: %+v, %v", e, err)
		}
		if e, err := r.GetBatch(ctx, "B-1"); err != nil || e.ID != 3 || e.Why != "wrong thickness" {
			t.Errorf("B-1: %+v, %v", e, err)
		}
	})
}

// The database itself refuses what the program never does.
func TestNothingIsChanged(t *testing.T) {
	onBoth(t, func(t *testing.T, r *Register, where string) {
		add(t, r, example("B-1"))
		fix := example("B-1")
		fix.Corrects, fix.Why = 1, "x"
		add(t, r, fix)
		statements := []string{
			"UPDATE register_entry SET batch = 'x'", "DELETE FROM register_entry WHERE id = 1",
			"UPDATE register_file SET bytes = bytes", "DELETE FROM register_file",
			"UPDATE register_value SET value = 1", "DELETE FROM register_value",
		}
		if _, lite := r.kind.(sqliteKind); lite {
			statements = append(statements,
				"REPLACE INTO register_entry SELECT * FROM register_entry WHERE id = 1",
				"REPLACE INTO register_entry SELECT 3, batch, compound, tested, added, who, corrects, why, sha256, size, inputs, value_count, values_sha256, row_sha256 FROM register_entry WHERE id = 2",
				"REPLACE INTO register_file SELECT * FROM register_file",
				"REPLACE INTO register_value SELECT * FROM register_value")
		} else {
			statements = append(statements, "TRUNCATE register_entry CASCADE",
				"INSERT INTO register_file SELECT * FROM register_file ON CONFLICT (entry) DO UPDATE SET bytes = ''")
		}
		for _, s := range statements {
			if _, err := r.db.Exec(s); err == nil {
				t.Errorf("the database allows: %s", s)
			}
		}
		if damaged, err := r.Check(context.Background()); err != nil || len(damaged) > 0 {
			t.Error(damaged, err)
		}
	})
}

// Several writers at once, in one process.
func TestAddAtOnce(t *testing.T) {
	onBoth(t, func(t *testing.T, r *Register, where string) {
		const workers, each = 4, 10
		var wait sync.WaitGroup
		for w := range workers {
			wait.Go(func() {
				for i := range each {
					if _, err := r.Add(context.Background(), example(fmt.Sprintf("W%d-%d", w, i))); err != nil {
						t.Error(err)
					}
				}
			})
		}
		wait.Wait()
		all, damaged, err := r.List(context.Background(), Query{})
		if err != nil || len(all) != workers*each {
			t.Errorf("%d entries, want %d, %v", len(all), workers*each, err)
		}
		none(t, damaged)
	})
}
