package reports

import (
	"bytes"
	"io/fs"
	"os"
	"path/filepath"
	"runtime"
	"strings"
	"testing"

	"phaselag/data"
	"phaselag/data/demo"
	"phaselag/fitting"
)

// demoResult characterizes a simulated campaign.
func demoResult(t *testing.T, seed uint64) *fitting.Result {
	t.Helper()
	c, err := data.OpenFS(demo.Campaign(demo.HM60(), demo.HM60Plan(), seed), "campaign.yaml")
	if err != nil {
		t.Fatal(err)
	}
	r, err := fitting.Characterize(c, &fitting.Settings{Replicates: 19})
	if err != nil {
		t.Fatal(err)
	}
	return r
}

func tree(t *testing.T, dir string) map[string][]byte {
	t.Helper()
	out := map[string][]byte{}
	err := filepath.WalkDir(dir, func(path string, d fs.DirEntry, err error) error {
		if err != nil || d.IsDir() {
			return err
		}
		b, err := os.ReadFile(path)
		rel, _ := filepath.Rel(dir, path)
		out[filepath.ToSlash(rel)] = b
		return err
	})
	if err != nil {
		t.Fatal(err)
	}
	return out
}

func sameTree(t *testing.T, what string, a, b map[string][]byte) {
	t.Helper()
	for name, x := range a {
		if y, ok := b[name]; !ok || !bytes.Equal(x, y) {
			t.Errorf("%s: %s differs", what, name)
		}
	}
	if len(a) != len(b) {
		t.Errorf("%s: %d files, %d files", what, len(a), len(b))
	}
}

// TestSameBytes: two runs, any number of processors, and reading back and
// writing again give the same bytes.
func TestSameBytes(t *testing.T) {
	one, two, again := t.TempDir(), t.TempDir(), t.TempDir()
	if err := WriteResult(one, demoResult(t, 1)); err != nil {
		t.Fatal(err)
	}
	old := runtime.GOMAXPROCS(1)
	err := WriteResult(two, demoResult(t, 1))
	runtime.GOMAXPROCS(old)
	if err != nil {
		t.Fatal(err)
	}
	first := tree(t, one)
	sameTree(t, "second run on one processor", first, tree(t, two))
	r, err := ReadResultDir(one)
	if err != nil {
		t.Fatal(err)
	}
	if err := WriteResult(again, r); err != nil {
		t.Fatal(err)
	}
	sameTree(t, "read back and written again", first, tree(t, again))
	for _, name := range []string{"result.json", "compound.yaml", "compound.json", "datasheet.pdf", "datasheet.html", "figures/master-curve.svg", "tables/points.csv", "tables/shift-factors.csv", "tables/findings.csv"} {
		if len(first[name]) == 0 {
			t.Errorf("%s is missing or empty", name)
		}
	}
	for name, b := range first {
		for _, word := range []string{one, "/tmp/"} {
			if bytes.Contains(b, []byte(word)) {
				t.Errorf("%s holds the path %q", name, word)
			}
		}
	}
}

// TestInterrupted stops the writing of a new result over an old one after every
// single change of the disk: what is found then is the old result, the new one,
// or an error that names a file.
func TestInterrupted(t *testing.T) {
	oldFiles := []file{{"compound.yaml", []byte("old")}, {"tables/a.csv", []byte("old a")}, {"tables/gone.csv", []byte("x")}}
	newFiles := []file{{"compound.yaml", []byte("new")}, {"tables/a.csv", []byte("new a")}, {"figures/b.svg", []byte("b")}}
	resultOf := func(files []file, name string) file {
		r := &fitting.Result{Format: 1, Version: name}
		for _, f := range files {
			r.Files = append(r.Files, inputFile(f))
		}
		b, err := r.JSON()
		if err != nil {
			t.Fatal(err)
		}
		return file{resultName, b}
	}
	n := len(steps("", newFiles, file{}))
	states := map[string]int{}
	for k := 0; k <= n; k++ {
		dir := t.TempDir()
		if err := place(dir, oldFiles, resultOf(oldFiles, "old")); err != nil {
			t.Fatal(err)
		}
		for _, step := range steps(dir, newFiles, resultOf(newFiles, "new"))[:k] {
			if err := step(); err != nil {
				t.Fatal(err)
			}
		}
		r, err := ReadResultDir(dir)
		switch {
		case err == nil:
			states[r.Version]++
			if r.Version == "new" && k < n-1 {
				t.Errorf("after %d of %d steps the new result is there", k, n)
			}
		case strings.Contains(err.Error(), "compound.yaml") || strings.Contains(err.Error(), "tables/a.csv"):
			states["named"]++
		default:
			t.Errorf("after %d steps: %v", k, err)
		}
		// The next run mends everything.
		if err := CheckTarget(dir); err != nil {
			t.Errorf("after %d steps: %v", k, err)
		}
		if err := place(dir, newFiles, resultOf(newFiles, "new")); err != nil {
			t.Fatal(err)
		}
		if r, err := ReadResultDir(dir); err != nil || r.Version != "new" {
			t.Errorf("after %d steps and another run: %v", k, err)
		}
		for name := range tree(t, dir) {
			if strings.HasSuffix(name, partSuffix) || name == "tables/gone.csv" {
				t.Errorf("after %d steps and another run %s is left", k, name)
			}
		}
	}
	if states["old"] == 0 || states["new"] == 0 || states["named"] == 0 {
		t.Errorf("states seen: %v", states)
	}
}

func TestForeignDirectory(t *testing.T) {
	dir := t.TempDir()
	if err := CheckTarget(filepath.Join(dir, "new")); err != nil {
		t.Errorf("a directory that is not there: %v", err)
	}
	if err := CheckTarget(dir); err != nil {
		t.Errorf("an empty directory: %v", err)
	}
	if err := os.WriteFile(filepath.Join(dir, "thesis.doc"), []byte("x"), 0o644); err != nil {
		t.Fatal(err)
	}
	if err := CheckTarget(dir); err == nil {
		t.Error("a directory with somebody's file was accepted")
	}
	if err := WriteResult(dir, &fitting.Result{Format: 1}); err == nil {
		t.Error("a result was written over somebody's files")
	}
	if len(tree(t, dir)) != 1 {
		t.Error("something was written")
	}
}
