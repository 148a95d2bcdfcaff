package register

import (
	"bytes"
	"context"
	"errors"
	"fmt"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"

	"phaselag/data/place"
)

// unguarded takes the triggers away, as damage does not ask them.
func unguarded(t *testing.T, r *Register, statements ...string) {
	t.Helper()
	if _, lite := r.kind.(sqliteKind); lite {
		for _, table := range []string{"entry", "file", "value"} {
			for _, on := range []string{"update", "delete"} {
				statements = append([]string{"DROP TRIGGER register_" + table + "_" + on}, statements...)
			}
		}
		statements = append([]string{"PRAGMA foreign_keys = 0"}, statements...)
	} else {
		statements = append([]string{"SET session_replication_role = replica"}, statements...)
	}
	c, err := r.db.Conn(context.Background())
	if err != nil {
		t.Fatal(err)
	}
	defer c.Close()
	for _, s := range statements {
		if _, err := c.ExecContext(context.Background(), s); err != nil {
			t.Fatal(s, err)
		}
	}
}

func TestDamagedEntries(t *testing.T) {
	onBoth(t, func(t *testing.T, r *Register, _ string) {
		ctx := context.Background()
		for i := range 9 {
			add(t, r, example(fmt.Sprintf("B-%d", i+1)))
		}
		blob := "X'00'"
		if _, lite := r.kind.(sqliteKind); !lite {
			blob = `'\x00'`
		}
		unguarded(t, r,
			"UPDATE register_entry SET tested = '2026-03-30' WHERE id = 2",
			"UPDATE register_file SET bytes = "+blob+" WHERE entry = 3",
			"UPDATE register_value SET value = 1.26 WHERE entry = 4 AND position = 0",
			"DELETE FROM register_value WHERE entry = 5 AND position = 2",
			"DELETE FROM register_file WHERE entry = 6",
			"DELETE FROM register_entry WHERE id = 7",
			"DELETE FROM register_entry WHERE id = 9",
		)
		want := []string{
			"2 B-2 the row does not match its SHA-256",
			"3 B-3 the compound file does not match its SHA-256",
			"4 B-4 its values do not match their SHA-256",
			"5 B-5 its values do not match their SHA-256",
			"6 B-6 the compound file is missing",
			"7  its row is missing",
			"9  its row is missing",
		}
		told := func(damaged []Damage) (out []string) {
			for _, d := range damaged {
				out = append(out, fmt.Sprintf("%d %s %s", d.ID, d.Batch, d.What))
			}
			return out
		}
		all, damaged, err := r.List(ctx, Query{})
		if err != nil {
			t.Fatal(err)
		}
		if got := told(damaged); !slices.Equal(got, want) {
			t.Errorf("damaged:\n%s\nwant\n%s", strings.Join(got, "\n"), strings.Join(want, "\n"))
		}
		if len(all) != 2 || all[0].ID != 1 || all[1].ID != 8 {
			t.Errorf("sound: %v", all)
		}
		for id := int64(2); id <= 6; id++ {
			if e, err := r.Get(ctx, id); !errors.Is(err, ErrDamaged) || e != nil || place.Hint(err) == "" {
				t.Errorf("entry %d: %v, %v", id, e, err)
			}
		}
		if _, err := r.GetBatch(ctx, "B-2"); !errors.Is(err, ErrDamaged) {
			t.Error(err)
		}
		if _, err := r.Get(ctx, 7); !errors.Is(err, ErrNotFound) {
			t.Error(err)
		}
		points, damaged, err := r.Values(ctx, "storage modulus", "23 °C, 10 Hz, 1 %", "")
		if err != nil || len(points) != 5 { // 1, 3, 5, 6 and 8
			t.Error(points, err)
		}
		if got := told(damaged); len(got) != 4 || got[1] != "4 B-4 a value does not match its sum" {
			t.Error(got)
		}
		// The sound ones go into a new register, which gives them back.
		folder := filepath.Join(t.TempDir(), "out")
		n, damaged, err := r.Export(ctx, folder)
		if err != nil || n != 2 || len(damaged) != 7 {
			t.Error(n, damaged, err)
		}
		fresh := open(t, filepath.Join(t.TempDir(), "fresh"))
		if got, err := fresh.Import(ctx, folder); err != nil || got.Added != 2 {
			t.Error(got, err)
		}
		// A new entry does not take a lost one's number.
		if id := add(t, r, example("B-10")); id != 10 {
			t.Errorf("entry %d, want 10", id)
		}
	})
}

// closed makes a register of n batches and returns its path and its bytes.
func closed(t *testing.T, n int) (string, []byte) {
	t.Helper()
	where := filepath.Join(t.TempDir(), "r")
	r, err := Open(where)
	if err != nil {
		t.Fatal(err)
	}
	for i := range n {
		add(t, r, example(fmt.Sprintf("B-%d", i+1)))
	}
	if err := r.Close(); err != nil {
		t.Fatal(err)
	}
	b, err := os.ReadFile(where)
	if err != nil {
		t.Fatal(err)
	}
	return where, b
}

// A destroyed file gives a clear error with a hint.
func TestDestroyedFile(t *testing.T) {
	where, sound := closed(t, 20)
	for name, harmed := range map[string][]byte{
		"empty":               {},
		"text":                []byte("not a register at all\n"),
		"beginning destroyed": append(bytes.Repeat([]byte{0xff}, 100), sound[100:]...),
		"cut short":           sound[:5000],
		"cut in half":         sound[:len(sound)/2],
		"zeros":               make([]byte, len(sound)),
	} {
		t.Run(name, func(t *testing.T) {
			if err := os.WriteFile(where, harmed, 0o666); err != nil {
				t.Fatal(err)
			}
			r, err := Open(where)
			if err == nil {
				_, _, err = r.List(context.Background(), Query{})
				r.Close()
			}
			var e *place.Error
			if !errors.As(err, &e) || e.File != where || place.Hint(err) == "" {
				t.Fatalf("%v, hint %q", err, place.Hint(err))
			}
			t.Logf("%v\n  hint: %s", strings.ReplaceAll(err.Error(), where, "r"), place.Hint(err))
		})
	}
}

// Whatever page of the file is destroyed: no panic, nothing false, and what is
// not given is named or the error is clear.
func TestDestroyedPages(t *testing.T) {
	const n = 60
	where, sound := closed(t, n)
	const page = 4096
	ctx := context.Background()
	errorsAt, most := 0, 0
	for at := page; at < len(sound); at += page {
		for _, fill := range []byte{0x00, 0xa5} {
			harmed := bytes.Clone(sound)
			copy(harmed[at:at+page], bytes.Repeat([]byte{fill}, page))
			if err := os.WriteFile(where, harmed, 0o666); err != nil {
				t.Fatal(err)
			}
			r, err := Open(where)
			if err != nil {
				errorsAt++
				if place.Hint(err) == "" {
					t.Errorf("page %d: no hint: %v", at/page, err)
				}
				continue
			}
			all, damaged, err := r.List(ctx, Query{})
			switch {
			case err != nil:
				errorsAt++
				if !errors.Is(err, ErrDamaged) || place.Hint(err) == "" {
					t.Errorf("page %d: %v", at/page, err)
				}
			case len(all)+len(damaged) < n:
				t.Errorf("page %d: %d sound, %d damaged of %d", at/page, len(all), len(damaged), n)
			default:
				most = max(most, len(damaged))
			}
			for _, s := range all {
				e, err := r.Get(ctx, s.ID)
				if err != nil {
					t.Errorf("page %d: entry %d is listed as sound: %v", at/page, s.ID, err)
				} else if d := same(e, settledAs(t, example(fmt.Sprintf("B-%d", s.ID)), s.ID)); d != "" {
					t.Errorf("page %d: %s", at/page, d)
				}
			}
			points, _, err := r.Values(ctx, "storage modulus", "23 °C, 10 Hz, 1 %", "")
			if err != nil && !errors.Is(err, ErrDamaged) && !errors.Is(err, ErrNotFound) {
				t.Errorf("page %d: %v", at/page, err)
			}
			for _, p := range points {
				if p.Value != 1.25 || p.Batch != fmt.Sprintf("B-%d", p.Entry) {
					t.Errorf("page %d: a false point %v", at/page, p)
				}
			}
			if whole, err := r.Check(ctx); err == nil && len(whole) == 0 && !bytes.Equal(harmed, sound) && fill != 0 {
				t.Errorf("page %d: destroyed, and the check finds nothing", at/page)
			}
			r.Close()
		}
	}
	t.Logf("%d pages; %d of twice as many kinds of damage leave nothing readable; otherwise at most %d of %d entries are lost", len(sound)/page, errorsAt, most, n)
}
