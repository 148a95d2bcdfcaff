package register

import (
	"bytes"
	"context"
	"errors"
	"fmt"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"phaselag/data/place"
)

// filled is a register with corrections in it.
func filled(t *testing.T, r *Register) {
	t.Helper()
	for i := range 5 {
		add(t, r, example(fmt.Sprintf("B-%d", i+1)))
	}
	fix := example("B-2")
	fix.Corrects, fix.Why = 2, "wrong thickness:\n2 mm, not 3 mm"
	fix.Values[0].Value = -1.0 / 3
	add(t, r, fix)
	bare := example("B-6")
	bare.Inputs, bare.Values, bare.File = nil, nil, []byte{0, 1, 255}
	add(t, r, bare)
}

// tree is a folder's files, one after the other.
func tree(t *testing.T, folder string) string {
	t.Helper()
	var b bytes.Buffer
	err := filepath.WalkDir(folder, func(name string, d os.DirEntry, err error) error {
		if err != nil || d.IsDir() {
			return err
		}
		text, err := os.ReadFile(name)
		short, _ := filepath.Rel(folder, name)
		fmt.Fprintf(&b, "%s %q\n", short, text)
		return err
	})
	if err != nil {
		t.Fatal(err)
	}
	return b.String()
}

func export(t *testing.T, r *Register) string {
	t.Helper()
	folder := filepath.Join(t.TempDir(), "out")
	_, damaged, err := r.Export(context.Background(), folder)
	if err != nil {
		t.Fatal(err)
	}
	none(t, damaged)
	return folder
}

func TestExportAndImport(t *testing.T) {
	onBoth(t, func(t *testing.T, r *Register, _ string) {
		ctx := context.Background()
		filled(t, r)
		folder := export(t, r)
		if again := export(t, r); tree(t, again) != tree(t, folder) {
			t.Error("two exports of one register differ")
		}
		// Into a new file: the same entries bit for bit, and the same export.
		copied := open(t, filepath.Join(t.TempDir(), "copy"))
		got, err := copied.Import(ctx, folder)
		if err != nil || got.Added != 7 || got.Skipped != 0 || len(got.Damaged) != 0 {
			t.Fatalf("%+v, %v", got, err)
		}
		for id := int64(1); id <= 7; id++ {
			a, err1 := r.Get(ctx, id)
			b, err2 := copied.Get(ctx, id)
			if err1 != nil || err2 != nil {
				t.Fatal(err1, err2)
			}
			if d := same(a, b); d != "" {
				t.Error(d)
			}
		}
		if back := export(t, copied); tree(t, back) != tree(t, folder) {
			t.Error("the export of the copy differs")
		}
		// Into itself: everything is there.
		got, err = r.Import(ctx, folder)
		if err != nil || got.Added != 0 || got.Skipped != 7 || len(got.Damaged) != 0 {
			t.Errorf("%+v, %v", got, err)
		}
		// Into another register: nothing, not even what would fit.
		other := open(t, filepath.Join(t.TempDir(), "other"))
		add(t, other, example("X"))
		add(t, other, example("B-5"))
		_, err = other.Import(ctx, folder)
		if !errors.Is(err, ErrOther) || !strings.Contains(err.Error(), "and 3 more") || place.Hint(err) == "" {
			t.Error(err)
		}
		if all, _, err := other.List(ctx, Query{}); err != nil || len(all) != 2 {
			t.Error(all, err)
		}
	})
}

// An export that was cut short, changed or damaged.
func TestImportOfDamage(t *testing.T) {
	ctx := context.Background()
	r := open(t, filepath.Join(t.TempDir(), "r"))
	filled(t, r)
	write := func(name, text string) func(*testing.T, string) {
		return func(t *testing.T, folder string) {
			if err := os.WriteFile(filepath.Join(folder, name), []byte(text), 0o666); err != nil {
				t.Fatal(err)
			}
		}
	}
	change := func(old, new string) func(*testing.T, string) {
		return func(t *testing.T, folder string) {
			name := filepath.Join(folder, "00000003", entryName)
			text, err := os.ReadFile(name)
			if err != nil || !bytes.Contains(text, []byte(old)) {
				t.Fatal(err)
			}
			write("00000003/"+entryName, strings.Replace(string(text), old, new, 1))(t, folder)
		}
	}
	for name, harm := range map[string]func(*testing.T, string){
		"compound changed":   write("00000003/compound.yaml", "x"),
		"compound empty":     write("00000003/compound.yaml", ""),
		"entry cut short":    write("00000003/entry.json", `{"id": 3,`),
		"entry not UTF-8":    write("00000003/entry.json", "\xff"),
		"entry of an array":  write("00000003/entry.json", "[]"),
		"entry null":         write("00000003/entry.json", "null"),
		"value changed":      change("1.25", "1.26"),
		"value not stated":   change("1.25", "null"),
		"batch changed":      change("B-3", "B-7"),
		"sum removed":        change("entry_sha256", "x"),
		"number changed":     change(`"id": 3`, `"id": 4`),
		"newer format":       change(`entry": 1`, `entry": 2`),
		"a text for a value": change("1.25", `"1.25"`),
		"something behind":   change("\n}\n", "\n}\n{}"),
		"folder gone": func(t *testing.T, folder string) {
			if err := os.RemoveAll(filepath.Join(folder, "00000003")); err != nil {
				t.Fatal(err)
			}
		},
		"file gone": func(t *testing.T, folder string) {
			if err := os.Remove(filepath.Join(folder, "00000003", compoundName)); err != nil {
				t.Fatal(err)
			}
		},
		"folder of another": func(t *testing.T, folder string) {
			if err := os.Rename(filepath.Join(folder, "00000003"), filepath.Join(folder, "00000009")); err != nil {
				t.Fatal(err)
			}
		},
	} {
		t.Run(name, func(t *testing.T) {
			folder := export(t, r)
			harm(t, folder)
			fresh := open(t, filepath.Join(t.TempDir(), "fresh"))
			got, err := fresh.Import(ctx, folder)
			if err != nil || got.Added != 6 || len(got.Damaged) != 1 {
				t.Fatalf("%+v, %v", got, err)
			}
			t.Log(got.Damaged[0].What)
			// The gap is named, and a sound export fills it.
			_, damaged, err := fresh.List(ctx, Query{})
			if err != nil || len(damaged) != 1 || damaged[0].ID != 3 {
				t.Fatal(damaged, err)
			}
			got, err = fresh.Import(ctx, export(t, r))
			if err != nil || got.Added != 1 || got.Skipped != 6 {
				t.Fatalf("%+v, %v", got, err)
			}
			if tree(t, export(t, fresh)) != tree(t, export(t, r)) {
				t.Error("the mended register differs")
			}
		})
	}
	t.Run("cut short", func(t *testing.T) {
		folder := export(t, r)
		if err := os.Remove(filepath.Join(folder, indexName)); err != nil {
			t.Fatal(err)
		}
		_, err := r.Import(ctx, folder)
		if err == nil || place.Hint(err) == "" {
			t.Error(err)
		}
	})
	t.Run("newer", func(t *testing.T) {
		folder := export(t, r)
		write(indexName, `{"phaselag_register": 2, "entries": 7}`)(t, folder)
		if _, err := r.Import(ctx, folder); !errors.Is(err, ErrNewer) {
			t.Error(err)
		}
	})
	t.Run("no folder", func(t *testing.T) {
		if _, err := r.Import(ctx, filepath.Join(t.TempDir(), "none")); err == nil {
			t.Error("no error")
		}
	})
	t.Run("not empty", func(t *testing.T) {
		if _, _, err := r.Export(ctx, export(t, r)); err == nil || place.Hint(err) == "" {
			t.Error(err)
		}
	})
}

// FuzzPlain: the reader of an entry never panics, and what it takes is written
// and read again as the same.
func FuzzPlain(f *testing.F) {
	e, err := checked(example("B-1"))
	if err != nil {
		f.Fatal(err)
	}
	e.ID = 1
	f.Add(plainOf(e), e.File)
	f.Add([]byte(`{"phaselag_register_entry": 1, "id": 1}`), []byte("x"))
	f.Add([]byte(`{"values": [{"value": 1e999}]}`), []byte{})
	f.Fuzz(func(t *testing.T, text, compound []byte) {
		e, err := readPlain("entry.json", text, compound)
		if err != nil {
			if e != nil {
				t.Fatal("an entry beside an error")
			}
			return
		}
		again, err := readPlain("entry.json", plainOf(e), e.File)
		if err != nil {
			t.Fatal(err)
		}
		if d := same(e, again); d != "" {
			t.Fatal(d)
		}
	})
}
