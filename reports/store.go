package reports

import (
	"crypto/sha256"
	"encoding/hex"
	"errors"
	"fmt"
	"os"
	"path/filepath"
	"sort"
	"strings"

	"phaselag/fitting"
	"phaselag/models"
)

// The directory of a result is whole or old. All files are written beside
// their places under names that end in ".part", and synced; then they take
// their places, and the new result.json, which lists the SHA-256 of all others,
// comes last. A run that is killed before the first of them leaves the old
// result; one that is killed between them leaves files that no longer match the
// list of the old result.json, which ReadResultDir names. The next run sweeps
// what was left.

const (
	resultName = "result.json"
	partSuffix = ".part"
)

// file is one output.
type file struct {
	name  string // slash-separated, relative to the directory
	bytes []byte
}

// CheckTarget tells whether WriteResult may write into dir: it does not exist,
// is empty, or holds a result or the leftovers of one.
func CheckTarget(dir string) error {
	entries, err := os.ReadDir(dir)
	switch {
	case errors.Is(err, os.ErrNotExist):
		return nil
	case err != nil:
		return err
	}
	for _, e := range entries {
		if e.Name() == resultName || e.Name() == resultName+partSuffix {
			return nil
		}
	}
	if len(entries) > 0 {
		return fmt.Errorf("%s is not empty and holds no %s: nothing is written there", dir, resultName)
	}
	return nil
}

// WriteResult writes a result with its compound, datasheets, figures and
// tables into dir, whole or not at all.
func WriteResult(dir string, r *fitting.Result) error {
	if err := CheckTarget(dir); err != nil {
		return err
	}
	files, err := outputs(r)
	if err != nil {
		return err
	}
	signed := *r
	signed.Files = []models.InputFile{}
	for _, f := range files {
		signed.Files = append(signed.Files, inputFile(f))
	}
	b, err := signed.JSON()
	if err != nil {
		return err
	}
	return place(dir, files, file{resultName, b})
}

func inputFile(f file) models.InputFile {
	return models.InputFile{File: f.name, SHA256: hash(f.bytes)}
}

func hash(b []byte) string {
	s := sha256.Sum256(b)
	return hex.EncodeToString(s[:])
}

func place(dir string, files []file, last file) error {
	for _, step := range steps(dir, files, last) {
		if err := step(); err != nil {
			return err
		}
	}
	return nil
}

// steps are what place does, one change of the disk each, so that a test can
// stop between any two of them.
func steps(dir string, files []file, last file) []func() error {
	target := func(name string) string { return filepath.Join(dir, filepath.FromSlash(name)) }
	var list []func() error
	// The first thing in a new directory marks it as a result's.
	for _, f := range append([]file{last}, files...) {
		list = append(list, func() error { return writePart(target(f.name)+partSuffix, f.bytes) })
	}
	keep := map[string]bool{}
	for _, f := range append(append([]file{}, files...), last) {
		keep[f.name] = true
		list = append(list, func() error { return os.Rename(target(f.name)+partSuffix, target(f.name)) })
	}
	return append(list, func() error {
		syncDir(dir)
		return sweep(dir, keep)
	})
}

func writePart(path string, b []byte) error {
	if err := os.MkdirAll(filepath.Dir(path), 0o755); err != nil {
		return err
	}
	f, err := os.Create(path)
	if err != nil {
		return err
	}
	if _, err = f.Write(b); err == nil {
		err = f.Sync()
	}
	return errors.Join(err, f.Close())
}

// syncDir makes the renames durable where the system can; it is no fault where
// it cannot.
func syncDir(dir string) {
	if d, err := os.Open(dir); err == nil {
		_ = d.Sync()
		_ = d.Close()
	}
}

// sweep removes the leftovers of killed runs and the figures and tables of an
// older result that the new one no longer has; other people's files stay.
func sweep(dir string, keep map[string]bool) error {
	var errs []error
	for _, sub := range []string{".", "figures", "tables"} {
		entries, err := os.ReadDir(filepath.Join(dir, sub))
		if err != nil {
			continue
		}
		for _, e := range entries {
			name := e.Name()
			rel := strings.TrimPrefix(sub+"/"+name, "./")
			old := sub != "." && !keep[rel] && (strings.HasSuffix(name, ".svg") || strings.HasSuffix(name, ".csv"))
			gone := sub == "." && !keep[rel] && isOutput(name)
			if e.IsDir() || !(strings.HasSuffix(name, partSuffix) || old || gone) {
				continue
			}
			errs = append(errs, os.Remove(filepath.Join(dir, sub, name)))
		}
	}
	return errors.Join(errs...)
}

// isOutput knows the names of files that not every result has.
func isOutput(name string) bool { return name == "compound.yaml" || name == "compound.json" }

// ReadResultDir reads the result of a directory and checks that every file
// beside it is the one that was written with it.
func ReadResultDir(dir string) (*fitting.Result, error) {
	b, err := os.ReadFile(filepath.Join(dir, resultName))
	if err != nil {
		if errors.Is(err, os.ErrNotExist) {
			return nil, fmt.Errorf("%s holds no %s: it is no result, or the run that wrote it was interrupted; characterize again", dir, resultName)
		}
		return nil, err
	}
	r, err := fitting.ReadResult(b)
	if err != nil {
		return nil, fmt.Errorf("%s: %w", filepath.Join(dir, resultName), err)
	}
	return r, verify(dir, r)
}

func verify(dir string, r *fitting.Result) error {
	var wrong []string
	for _, f := range r.Files {
		b, err := os.ReadFile(filepath.Join(dir, filepath.FromSlash(f.File)))
		switch {
		case errors.Is(err, os.ErrNotExist):
			wrong = append(wrong, f.File+" is missing")
		case err != nil:
			return err
		case hash(b) != f.SHA256:
			wrong = append(wrong, f.File+" is not the file that was written with the result")
		}
	}
	sort.Strings(wrong)
	if len(wrong) > 0 {
		return fmt.Errorf("%s: %s", dir, strings.Join(wrong, "; "))
	}
	return nil
}
