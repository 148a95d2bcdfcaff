package register

import (
	"context"
	"errors"
	"fmt"
	"math"
	"path/filepath"
	"strings"
	"testing"
	"unicode"
	"unicode/utf8"

	"pgregory.net/rapid"

	"phaselag/data/place"
)

// line draws free text that a register takes: quotes, placeholders, statements,
// any script, up to the longest.
func line(most int) *rapid.Generator[string] {
	plain := rapid.StringOfN(rapid.Rune(), 1, most, most)
	sharp := rapid.StringOfN(rapid.SampledFrom([]rune(`'"?$1\%_;-*[]{}é中🙂 `)), 1, most, most)
	return rapid.OneOf(plain, sharp, rapid.SampledFrom([]string{
		"'; DROP TABLE register_entry; --", `O'Brien "soft"`, "NULL", "0", "1e3", "-0", "true", "\u202eright to left", "é", "e\u0301",
		strings.Repeat("ü", longest/2), strings.Repeat("x", longest),
	})).Filter(func(s string) bool { what, _ := oneLine(s, true); return what == "" })
}

func drawn(t *rapid.T, batch string) *Entry {
	number := rapid.OneOf(rapid.Float64(), rapid.SampledFrom([]float64{math.NaN(), 0, math.Copysign(0, -1), 1, 5e-324, math.MaxFloat64, 1 << 53}))
	e := &Entry{
		Batch: batch, Compound: line(60).Draw(t, "compound"), Who: line(20).Draw(t, "who"), Tested: "2024-02-29", Added: "2026-04-01T08:30:00+02:00",
		Why:  rapid.SampledFrom([]string{"", "a\nb\tc", "'\"?$1"}).Draw(t, "why"),
		File: rapid.SliceOfN(rapid.Byte(), 1, 200).Draw(t, "file"),
	}
	for range rapid.IntRange(0, 3).Draw(t, "inputs") {
		e.Inputs = append(e.Inputs, Input{line(40).Draw(t, "input"), strings.Repeat("aF", 32)})
	}
	for i := range rapid.IntRange(0, 4).Draw(t, "values") {
		e.Values = append(e.Values, Value{fmt.Sprint(i, line(490).Draw(t, "name")), line(longest).Draw(t, "condition"),
			number.Draw(t, "value"), math.Abs(number.Draw(t, "u95")), line(5).Draw(t, "unit")})
	}
	return e
}

// What is added comes back bit for bit, is found under its name, is listed, and
// goes through plain files.
func TestAnyText(t *testing.T) {
	onBoth(t, func(t *testing.T, r *Register, _ string) {
		ctx := context.Background()
		added := map[string]*Entry{}
		rapid.Check(t, func(t *rapid.T) {
			batch := line(longest).Draw(t, "batch")
			e := drawn(t, batch)
			if _, err := checked(e); err != nil {
				t.Skip(err) // a number before the name made it too long
			}
			before := added[batch]
			if before != nil {
				if _, err := r.Add(ctx, e); !errors.Is(err, ErrDuplicate) {
					t.Fatalf("twice: %v", err)
				}
				e.Corrects, e.Why = before.ID, "again"
			}
			id, err := r.Add(ctx, e)
			if err != nil {
				t.Fatal(err)
			}
			want, err := checked(e)
			if err != nil {
				t.Fatal(err)
			}
			want.ID = id
			added[batch] = want
			got, err := r.GetBatch(ctx, batch)
			if err != nil {
				t.Fatal(err)
			}
			if d := same(got, want); d != "" {
				t.Fatal(d)
			}
			again, err := readPlain("entry.json", plainOf(want), want.File)
			if err != nil {
				t.Fatal(err)
			}
			if d := same(again, want); d != "" {
				t.Fatal(d)
			}
			for _, v := range want.Values {
				points, _, err := r.Values(ctx, v.Name, v.Condition, want.Compound)
				if err != nil || len(points) == 0 {
					t.Fatal(points, err)
				}
			}
		})
		all, damaged, err := r.List(ctx, Query{})
		if err != nil || len(all) != len(added) {
			t.Errorf("%d listed, %d added, %v", len(all), len(added), err)
		}
		none(t, damaged)
	})
}

// Any text at all is either taken as it is or refused in words, never with a
// message of the database.
func TestHostileText(t *testing.T) {
	r := open(t, filepath.Join(t.TempDir(), "r"))
	rapid.Check(t, func(t *rapid.T) {
		e := example(rapid.OneOf(rapid.String(), rapid.Map(rapid.SliceOf(rapid.Byte()), func(b []byte) string { return string(b) })).Draw(t, "batch"))
		id, err := r.Add(context.Background(), e)
		if errors.Is(err, ErrDuplicate) {
			return
		}
		bad := e.Batch == "" || len(e.Batch) > longest || !utf8.ValidString(e.Batch) || strings.TrimSpace(e.Batch) != e.Batch || strings.ContainsFunc(e.Batch, unicode.IsControl)
		if bad != (err != nil) {
			t.Fatalf("%q: %v", e.Batch, err)
		}
		var known *place.Error
		if err != nil && (!errors.As(err, &known) || known.Path != "batch") {
			t.Fatal(err)
		}
		if err == nil {
			if got, err := r.Get(context.Background(), id); err != nil || got.Batch != e.Batch {
				t.Fatal(got, err)
			}
		}
	})
}

func TestRefusedEntries(t *testing.T) {
	r := open(t, filepath.Join(t.TempDir(), "r"))
	for want, spoil := range map[string]func(*Entry){
		"batch: is missing":                                                       func(e *Entry) { e.Batch = "" },
		"compound: is missing":                                                    func(e *Entry) { e.Compound = "" },
		"who: is missing":                                                         func(e *Entry) { e.Who = "" },
		`tested: "" is no date`:                                                   func(e *Entry) { e.Tested = "" },
		`tested: "2025-02-29" is no date`:                                         func(e *Entry) { e.Tested = "2025-02-29" },
		`tested: "2025-2-1" is no date`:                                           func(e *Entry) { e.Tested = "2025-2-1" },
		`added: "2026-04-01" is no time`:                                          func(e *Entry) { e.Added = "2026-04-01" },
		"why: a correction without a reason":                                      func(e *Entry) { e.Corrects = 1 },
		"corrects: -1 is no entry":                                                func(e *Entry) { e.Corrects = -1 },
		"file: the compound file is empty":                                        func(e *Entry) { e.File = nil },
		"sha256: the compound file does not match its SHA-256":                    func(e *Entry) { e.SHA256 = strings.Repeat("0", 64) },
		`batch: "B\x001" holds the control character U+0000`:                      func(e *Entry) { e.Batch = "B\x001" },
		`batch: "B\n1" holds the control character U+000A`:                        func(e *Entry) { e.Batch = "B\n1" },
		`batch: "B\xff" is not UTF-8`:                                             func(e *Entry) { e.Batch = "B\xff" },
		`batch: "B " begins or ends with a blank`:                                 func(e *Entry) { e.Batch = "B " },
		"batch: has 501 bytes, more than 500":                                     func(e *Entry) { e.Batch = strings.Repeat("x", 501) },
		`why: "a\x00" holds the control character U+0000`:                         func(e *Entry) { e.Why = "a\x00" },
		`inputs[1].sha256: "ab" is no SHA-256`:                                    func(e *Entry) { e.Inputs[1].SHA256 = "ab" },
		"inputs[0].file: is missing":                                              func(e *Entry) { e.Inputs[0].File = "" },
		"values[1].value: is infinite":                                            func(e *Entry) { e.Values[1].Value = math.Inf(-1) },
		"values[1].u95: -1 is no half width of an interval":                       func(e *Entry) { e.Values[1].U95 = -1 },
		"values[0].name: is missing":                                              func(e *Entry) { e.Values[0].Name = "" },
		`values[2].name: "loss factor" at "23 °C, 10 Hz, 1 %" is value 1 already`: func(e *Entry) { e.Values[2] = e.Values[1] },
		`values[0].unit: "M\tPa" holds the control character U+0009`:              func(e *Entry) { e.Values[0].Unit = "M\tPa" },
		"batch: is missing\nwho: is missing":                                      func(e *Entry) { e.Batch, e.Who = "", "" },
	} {
		e := example("B")
		spoil(e)
		if id, err := r.Add(context.Background(), e); err == nil || err.Error() != want || id != 0 {
			t.Errorf("got %q, want %q", err, want)
		}
	}
	if all, _, err := r.List(context.Background(), Query{}); err != nil || len(all) != 0 {
		t.Error(all, err)
	}
}
