package data

import (
	"crypto/sha256"
	"encoding/hex"
	"errors"
	"fmt"
	"io"
	"io/fs"
	"os"
	"path"
	"path/filepath"
	"slices"
	"strings"

	"phaselag/data/place"
)

// maxFile bounds an input file.
const maxFile = 64 << 20

// source reads files, from the file system or from an fs.FS, and remembers
// them, so that tests that share a file read and hash it once.
type source struct {
	fsys fs.FS // nil: the operating system's
	dir  string
	seen map[string][]byte
	list []Input
}

// resolve gives the path of a file that is named relative to the campaign file.
func (s *source) resolve(name string) string {
	if s.fsys != nil {
		return path.Join(s.dir, filepath.ToSlash(name))
	}
	if filepath.IsAbs(name) {
		return name
	}
	return filepath.Join(s.dir, filepath.FromSlash(name))
}

// read gives a file's content. It stands in the campaign's list of inputs as
// written.
func (s *source) read(name, written string) ([]byte, error) {
	if b, ok := s.seen[name]; ok {
		return b, nil
	}
	b, err := s.load(name)
	if err != nil {
		return nil, err
	}
	if s.seen == nil {
		s.seen = map[string][]byte{}
	}
	s.seen[name] = b
	sum := sha256.Sum256(b)
	s.list = append(s.list, Input{File: written, SHA256: hex.EncodeToString(sum[:])})
	return b, nil
}

// stream opens a file of any size for one pass; use does the reading. The whole
// file is hashed, also where use stops early.
func (s *source) stream(name, written string, use func(io.Reader) error) error {
	f, err := s.regular(name)
	if err != nil {
		return err
	}
	defer f.Close()
	hash := sha256.New()
	if err := use(io.TeeReader(f, hash)); err != nil {
		return err
	}
	if _, err := io.Copy(hash, f); err != nil {
		return fileFault(name, err)
	}
	input := Input{File: written, SHA256: hex.EncodeToString(hash.Sum(nil))}
	if !slices.Contains(s.list, input) {
		s.list = append(s.list, input)
	}
	return nil
}

// regular opens a regular file.
func (s *source) regular(name string) (fs.File, error) {
	f, err := s.open(name)
	if err != nil {
		return nil, fileFault(name, err)
	}
	info, err := f.Stat()
	switch {
	case err != nil:
		err = fileFault(name, err)
	case info.IsDir():
		err = &place.Error{File: name, What: "is a directory, not a file", Hint: "name the campaign file or the tables in it"}
	case !info.Mode().IsRegular():
		err = &place.Error{File: name, What: "is not a regular file"}
	default:
		return f, nil
	}
	f.Close()
	return nil, err
}

func (s *source) load(name string) ([]byte, error) {
	f, err := s.regular(name)
	if err != nil {
		return nil, err
	}
	defer f.Close()
	b, err := io.ReadAll(io.LimitReader(f, maxFile+1))
	if err != nil {
		return nil, fileFault(name, err)
	}
	if len(b) > maxFile {
		return nil, &place.Error{File: name, What: fmt.Sprintf("larger than %d MB", maxFile>>20)}
	}
	return b, nil
}

func (s *source) open(name string) (fs.File, error) {
	if s.fsys != nil {
		return s.fsys.Open(name)
	}
	// Opening a pipe would wait for its other end.
	if info, err := os.Stat(name); err == nil && !info.IsDir() && !info.Mode().IsRegular() {
		return nil, errors.New("is not a regular file")
	}
	return os.Open(name)
}

// fileFault keeps the operating system's words, without its repeated path.
func fileFault(name string, err error) error {
	e := &place.Error{File: name, Err: err}
	var pe *fs.PathError
	if errors.As(err, &pe) {
		e.Err = pe.Err
	}
	if errors.Is(err, fs.ErrNotExist) {
		e.What, e.Err = "no such file", nil
		e.Hint = "files of a campaign are named relative to the campaign file"
	}
	return e
}

// stem is a file's name without folder and extension.
func stem(name string) string {
	base := path.Base(filepath.ToSlash(name))
	if s := strings.TrimSuffix(base, path.Ext(base)); s != "" {
		return s
	}
	return base
}
