package register

import (
	"context"
	"math/rand/v2"
	"testing"
	"time"
)

// Two processes that add at once lose nothing, also where both begin with a
// register that is not there yet.
func TestTwoProcesses(t *testing.T) {
	const each = 40
	onBoth(t, func(t *testing.T, r *Register, where string) {
		if _, lite := r.kind.(sqliteKind); lite {
			where += "-new"
		}
		children := []*child{start(t, where, "one", each), start(t, where, "two", each)}
		for _, c := range children {
			for c.read(t) {
			}
			if err := c.command.Wait(); err != nil {
				t.Fatal(err)
			}
			if len(c.batches) != each {
				t.Errorf("%s confirmed %d, want %d", c.name, len(c.batches), each)
			}
		}
		r = open(t, where)
		for _, c := range children {
			confirmed(t, r, c.batches)
		}
		if all, _, err := r.List(context.Background(), Query{}); err != nil || len(all) != 2*each {
			t.Errorf("%d entries, want %d, %v", len(all), 2*each, err)
		}
	})
}

// Nothing that was confirmed is lost when the writing process is killed at any
// moment.
func TestKilledInTheMiddle(t *testing.T) {
	onBoth(t, func(t *testing.T, r *Register, where string) {
		rng := rand.New(rand.NewPCG(1, 2))
		batches := map[int64]string{}
		lives := 0
		for name := 'A'; len(batches) < 200; name++ {
			c := start(t, where, string(name), 200)
			for range 1 + rng.IntN(40) {
				if !c.read(t) {
					t.Fatal("the writer ended by itself")
				}
			}
			// Anywhere in one of the next writes.
			time.Sleep(time.Duration(rng.IntN(3000)) * time.Microsecond)
			if err := c.command.Process.Kill(); err != nil {
				t.Fatal(err)
			}
			for c.read(t) { // what it had confirmed by then
			}
			c.command.Wait()
			for id, batch := range c.batches {
				batches[id] = batch
			}
			lives++
		}
		confirmed(t, r, batches)
		all, damaged, err := r.List(context.Background(), Query{})
		if err != nil {
			t.Fatal(err)
		}
		none(t, damaged)
		t.Logf("%d confirmed, %d there, %d times killed", len(batches), len(all), lives)
	})
}

func confirmed(t *testing.T, r *Register, batches map[int64]string) {
	t.Helper()
	for id, batch := range batches {
		e, err := r.Get(context.Background(), id)
		if err != nil {
			t.Error(err)
			continue
		}
		if d := same(e, settledAs(t, example(batch), id)); d != "" {
			t.Error(d)
		}
	}
}
