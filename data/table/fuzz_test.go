package table

import (
	"bytes"
	"errors"
	"io"
	"os"
	"path/filepath"
	"testing"
)

// corpus seeds a fuzz target with the files that are written for reading tests.
func corpus(f *testing.F) {
	names, err := filepath.Glob("../testdata/corpus/*")
	if err != nil || len(names) == 0 {
		f.Fatal("no corpus", err)
	}
	for _, name := range names {
		b, err := os.ReadFile(name)
		if err != nil {
			f.Fatal(err)
		}
		f.Add(b)
	}
}

// FuzzRead: no input makes the reader of tables panic or hang; what it accepts has
// cells that can be asked for.
func FuzzRead(f *testing.F) {
	corpus(f)
	f.Fuzz(func(t *testing.T, content []byte) {
		if len(content) > 1<<16 {
			return
		}
		tables, err := ReadAll("a", content, Settings{})
		if err != nil {
			return
		}
		for _, tab := range tables {
			for _, r := range tab.Rows {
				for c := range tab.Columns {
					_, _ = tab.Plain(r, c)
					if tab.Columns[c].HasUnit {
						_, _ = tab.Value(r, c)
					}
				}
			}
		}
	})
}

// FuzzStream: the same of the reader of signals, which must agree with the reader of
// tables in the number of rows where both accept a short text.
func FuzzStream(f *testing.F) {
	corpus(f)
	f.Fuzz(func(t *testing.T, content []byte) {
		if len(content) > 1<<16 {
			return
		}
		s, err := NewStream("a", bytes.NewReader(content), Settings{})
		if err != nil {
			return
		}
		columns := []int{0, len(s.Table.Columns) - 1}
		values, texts := make([]float64, 2), make([]string, 1)
		for range 1 << 17 {
			if _, err = s.Next(columns, values, []int{0}, texts); err != nil {
				break
			}
		}
		if err == nil {
			t.Fatal("the stream does not end")
		}
		_ = errors.Is(err, io.EOF)
	})
}
