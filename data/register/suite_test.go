package register

import (
	"context"
	"fmt"
	"math"
	"os"
	"path/filepath"
	"testing"
)

// onBoth runs a test on an empty SQLite register and on an empty PostgreSQL one.
// Open opens the same register again, as another program would.
func onBoth(t *testing.T, test func(t *testing.T, r *Register, where string)) {
	t.Helper()
	t.Run("sqlite", func(t *testing.T) {
		where := filepath.Join(t.TempDir(), "it's 100 % a #register?.db")
		test(t, open(t, where), where)
	})
	t.Run("postgres", func(t *testing.T) {
		where := database(t)
		test(t, open(t, where), where)
	})
}

func open(t *testing.T, where string) *Register {
	t.Helper()
	r, err := Open(where)
	if err != nil {
		t.Fatal(err)
	}
	t.Cleanup(func() { r.Close() })
	return r
}

// example is an invented entry.
func example(batch string) *Entry {
	return &Entry{
		Batch: batch, Compound: "NR 55 invented", Tested: "2026-03-31", Added: "2026-04-01T08:30:00Z", Who: "A. Tester",
		File:   []byte("phaselag_compound: 1\ncompound: {batch: " + batch + "}\n"),
		Inputs: []Input{{"sweep.csv", hashOf([]byte("sweep"))}, {"plan \"b\".yaml", hashOf([]byte("plan"))}},
		Values: []Value{
			{"storage modulus", "23 °C, 10 Hz, 1 %", 1.25, 0.02, "MPa"},
			{"loss factor", "23 °C, 10 Hz, 1 %", 0.1, 0.003, ""},
			{"loss factor", "−20 °C, 10 Hz, 1 %", math.NaN(), math.NaN(), ""},
		},
	}
}

func add(t *testing.T, r *Register, e *Entry) int64 {
	t.Helper()
	id, err := r.Add(context.Background(), e)
	if err != nil {
		t.Fatal(err)
	}
	return id
}

// same says in what two entries differ; NaN equals NaN.
func same(a, b *Entry) string {
	x, y := *a, *b
	if string(x.File) != string(y.File) {
		return "the files differ"
	}
	x.File, y.File = nil, nil
	// %v writes the shortest digits that give the same number.
	if p, q := fmt.Sprintf("%#v", x), fmt.Sprintf("%#v", y); p != q {
		return p + "\nand\n" + q
	}
	return ""
}

// settledAs is e as the register gives it back.
func settledAs(t *testing.T, e *Entry, id int64) *Entry {
	t.Helper()
	c, err := checked(e)
	if err != nil {
		t.Fatal(err)
	}
	c.ID = id
	return c
}

func none(t *testing.T, damaged []Damage) {
	t.Helper()
	if len(damaged) > 0 {
		t.Errorf("damage in a sound register: %v", damaged)
	}
}

func TestMain(m *testing.M) {
	if os.Getenv(writerWhere) != "" {
		writer()
		return
	}
	code := m.Run()
	stopServer()
	os.Exit(code)
}
