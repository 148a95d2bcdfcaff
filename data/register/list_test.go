package register

import (
	"context"
	"fmt"
	"math"
	"strings"
	"testing"

	"errors"

	"phaselag/data/place"
)

func TestList(t *testing.T) {
	onBoth(t, func(t *testing.T, r *Register, _ string) {
		ctx := context.Background()
		if all, damaged, err := r.List(ctx, Query{}); err != nil || all == nil || len(all)+len(damaged) != 0 {
			t.Errorf("an empty register: %v, %v, %v", all, damaged, err)
		}
		for i, c := range []string{"NR 55", "NR 55", "SBR 60", "NR 55"} {
			e := example(fmt.Sprintf("B-%d", i+1))
			e.Compound, e.Tested = c, fmt.Sprintf("2026-0%d-15", 4-i)
			add(t, r, e)
		}
		fix := example("B-2")
		fix.Compound, fix.Tested, fix.Corrects, fix.Why = "NR 55", "2026-03-15", 2, "label"
		add(t, r, fix)
		for _, c := range []struct {
			q    Query
			want string
		}{
			{Query{}, "1 3 4 5"},
			{Query{Corrected: true}, "1 2 3 4 5"},
			{Query{Compound: "NR 55"}, "1 4 5"},
			{Query{Compound: "nr 55"}, ""},
			{Query{From: "2026-03-15"}, "1 5"},
			{Query{To: "2026-03-14"}, "3 4"},
			{Query{From: "2026-02-15", To: "2026-03-15"}, "3 5"},
			{Query{Batch: "B-[12]"}, ""},
			{Query{Batch: "B-2"}, "5"},
			{Query{Batch: "*-?", Limit: 2}, "4 5"},
			{Query{Limit: 9, Thorough: true}, "1 3 4 5"},
		} {
			all, damaged, err := r.List(ctx, c.q)
			if err != nil {
				t.Fatal(err)
			}
			none(t, damaged)
			var got []string
			for _, s := range all {
				got = append(got, fmt.Sprint(s.ID))
			}
			if strings.Join(got, " ") != c.want {
				t.Errorf("%+v gives %v, want %s", c.q, got, c.want)
			}
		}
		all, _, err := r.List(ctx, Query{Batch: "B-2"})
		if err != nil {
			t.Fatal(err)
		}
		want := Summary{ID: 5, Batch: "B-2", Compound: "NR 55", Tested: "2026-03-15", Added: fix.Added, Who: fix.Who, Corrects: 2,
			Why: "label", SHA256: hashOf(fix.File), Size: int64(len(fix.File)), Inputs: fix.Inputs, Values: 3}
		if got := fmt.Sprintf("%+v", all[0]); got != fmt.Sprintf("%+v", want) {
			t.Errorf("got %s\nwant %+v", got, want)
		}
		if _, _, err := r.List(ctx, Query{From: "15.3.2026"}); err == nil || place.Hint(err) == "" {
			t.Error(err)
		}
		stopped, stop := context.WithCancel(ctx)
		stop()
		if _, _, err := r.List(stopped, Query{}); !errors.Is(err, context.Canceled) {
			t.Error(err)
		}
	})
}

func TestValues(t *testing.T) {
	onBoth(t, func(t *testing.T, r *Register, _ string) {
		ctx := context.Background()
		warm := "23 °C, 10 Hz, 1 %"
		if _, _, err := r.Values(ctx, "loss factor", warm, ""); !errors.Is(err, ErrNotFound) || place.Hint(err) != "no entry has values" {
			t.Errorf("%v, hint %q", err, place.Hint(err))
		}
		for i, date := range []string{"2026-03-03", "2026-03-01", "2026-03-02", "2026-03-01"} {
			e := example(fmt.Sprintf("B-%d", i+1))
			e.Tested = date
			e.Values[0].Value = float64(i)
			if i == 2 {
				e.Compound = "other"
			}
			add(t, r, e)
		}
		fix := example("B-2")
		fix.Tested, fix.Corrects, fix.Why, fix.Values[0].Value = "2026-03-01", 2, "x", math.NaN()
		add(t, r, fix)
		for compound, want := range map[string]string{
			"":                "4=3 5=NaN 3=2 1=0",
			"NR 55 invented":  "4=3 5=NaN 1=0",
			"other":           "3=2",
			"nothing of that": "",
		} {
			points, damaged, err := r.Values(ctx, "storage modulus", warm, compound)
			if err != nil {
				t.Fatal(err)
			}
			none(t, damaged)
			var got []string
			for _, p := range points {
				got = append(got, fmt.Sprintf("%d=%g", p.Entry, p.Value))
			}
			if strings.Join(got, " ") != want {
				t.Errorf("%q: got %v, want %s", compound, got, want)
			}
		}
		for _, c := range []struct{ name, condition, hint string }{
			{"storage modulos", warm, `did you mean "storage modulus"?`},
			{"storage modulus", "", `it is there at: "23 °C, 10 Hz, 1 %"`},
			{"hardness", warm, `there is: "loss factor", "storage modulus"`},
		} {
			_, _, err := r.Values(ctx, c.name, c.condition, "")
			if !errors.Is(err, ErrNotFound) || place.Hint(err) != c.hint {
				t.Errorf("%v, hint %q, want %q", err, place.Hint(err), c.hint)
			}
		}
		all, err := r.Quantities(ctx)
		if err != nil || len(all) != 3 || all[2] != (Quantity{"storage modulus", warm}) {
			t.Error(all, err)
		}
	})
}
