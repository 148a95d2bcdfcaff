package register

import (
	"context"
	"fmt"
	"path/filepath"
	"slices"
	"testing"
	"time"
)

// many is the size that the speed is stated for: some ten years of four batches
// a working day, with forty values each and compound files of their usual size.
const (
	many    = 10_000
	eachHas = 40
)

// large makes a register of many batches through the path that Import takes.
func large(tb testing.TB, fileSize int) *Register {
	tb.Helper()
	r, err := Open(filepath.Join(tb.TempDir(), "large"))
	if err != nil {
		tb.Fatal(err)
	}
	tb.Cleanup(func() { r.Close() })
	_, err = r.bulk(context.Background(), func(yield func(*Entry) bool) {
		file := make([]byte, fileSize)
		for i := range many {
			e := example(fmt.Sprintf("B-%05d", i+1))
			e.Compound = fmt.Sprintf("invented %d", i%7)
			e.Tested = time.Date(2016, 1, 1+i%3650, 0, 0, 0, 0, time.UTC).Format(time.DateOnly)
			e.File = append(fmt.Appendf(nil, "batch %d\n", i), file...)
			e.Values = nil
			for k := range eachHas {
				e.Values = append(e.Values, Value{fmt.Sprintf("quantity %d", k%10), fmt.Sprintf("%d °C, 10 Hz", k/10), float64(i) + float64(k)/eachHas, 0.1, "MPa"})
			}
			c, err := checked(e)
			if err != nil {
				tb.Error(err)
				return
			}
			c.ID = int64(i + 1)
			if !yield(c) {
				return
			}
		}
	})
	if err != nil {
		tb.Fatal(err)
	}
	return r
}

// questions are the three that have to be answered while somebody waits; each
// checks its answer.
var questions = []struct {
	name string
	ask  func(*Register) error
}{
	{"List", func(r *Register) error {
		all, damaged, err := r.List(context.Background(), Query{})
		if len(all) != many || len(damaged) > 0 {
			return fmt.Errorf("%d entries, %v, %w", len(all), damaged, err)
		}
		return err
	}},
	{"ListSome", func(r *Register) error {
		all, damaged, err := r.List(context.Background(), Query{Batch: "B-?123*", Limit: 100})
		if len(all) != 10 || len(damaged) > 0 {
			return fmt.Errorf("%d entries, %v, %w", len(all), damaged, err)
		}
		return err
	}},
	{"Values", func(r *Register) error {
		all, damaged, err := r.Values(context.Background(), "quantity 3", "2 °C, 10 Hz", "")
		if len(all) != many || len(damaged) > 0 || !slices.IsSortedFunc(all, func(a, b Point) int { return cmpText(a.Tested, b.Tested) }) {
			return fmt.Errorf("%d points, %v, %w", len(all), damaged, err)
		}
		return err
	}},
	{"Get", func(r *Register) error {
		e, err := r.Get(context.Background(), many/2)
		if err == nil && len(e.Values) != eachHas {
			return fmt.Errorf("%d values", len(e.Values))
		}
		return err
	}},
	{"GetBatch", func(r *Register) error {
		_, err := r.GetBatch(context.Background(), "B-07777")
		return err
	}},
}

func cmpText(a, b string) int {
	switch {
	case a < b:
		return -1
	case a > b:
		return 1
	}
	return 0
}

func BenchmarkLarge(b *testing.B) {
	r := large(b, 10_000) // bytes of a compound file with its covariance
	for _, q := range questions {
		b.Run(q.name, func(b *testing.B) {
			for b.Loop() {
				if err := q.ask(r); err != nil {
					b.Fatal(err)
				}
			}
		})
	}
	b.Run("ListThorough", func(b *testing.B) {
		for b.Loop() {
			if all, _, err := r.List(context.Background(), Query{Thorough: true}); err != nil || len(all) != many {
				b.Fatal(err)
			}
		}
	})
	b.Run("Add", func(b *testing.B) {
		n := 0
		for b.Loop() {
			n++
			if _, err := r.Add(context.Background(), example(fmt.Sprint("new ", n))); err != nil {
				b.Fatal(err)
			}
		}
	})
}

// TestSpeed holds the answers of a file to the bar of 0.3 s, by the quickest of
// three, since other programs may be running.
func TestSpeed(t *testing.T) {
	if testing.Short() {
		t.Skip("makes a register of 10 000 batches")
	}
	begin := time.Now()
	r := large(t, 500)
	t.Logf("made in %v", time.Since(begin))
	for _, q := range questions {
		best := time.Hour
		for range 3 {
			begin := time.Now()
			if err := q.ask(r); err != nil {
				t.Fatal(q.name, err)
			}
			best = min(best, time.Since(begin))
		}
		t.Logf("%s: %v", q.name, best)
		if best > 300*time.Millisecond {
			t.Errorf("%s takes %v, more than 0.3 s", q.name, best)
		}
	}
}
