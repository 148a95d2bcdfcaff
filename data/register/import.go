package register

import (
	"context"
	"errors"
	"fmt"
	"io"
	"io/fs"
	"iter"
	"os"
	"path"
	"path/filepath"
	"strconv"

	"phaselag/data/place"
)

// Imported says what became of the entries of an export.
type Imported struct {
	Added   int      // new here
	Skipped int      // here already, with the same SHA-256
	Damaged []Damage // unreadable, changed or missing in the export
}

// Import takes the entries of an export over, with their numbers. An empty
// register becomes the exported one bit for bit; in the register that the export
// came from gaps are filled. Entries that are here already, by their SHA-256,
// are skipped, and nothing here is replaced. Damaged entries of the export are
// left out and named.
//
// Nothing at all is imported, and the error is [ErrOther], where a sound entry
// of the export has the number of another one here: a register takes nothing
// back, so two registers must not be mixed by mistake.
func (r *Register) Import(ctx context.Context, folder string) (*Imported, error) {
	root, err := os.OpenRoot(folder) // a link that leads out of the folder is not followed
	if err != nil {
		return nil, &place.Error{File: folder, What: "cannot import", Hint: "name the folder of an export", Err: err}
	}
	defer root.Close()
	x := &exported{fs: root.FS(), folder: filepath.ToSlash(folder)}
	index, err := x.index()
	if err != nil {
		return nil, err
	}
	out, err := r.bulk(ctx, x.entries())
	if err == nil {
		err = x.err
	}
	if err != nil {
		return nil, err
	}
	out.Damaged = x.damaged
	if n := index.Entries - x.folders; n > 0 {
		out.Damaged = append(out.Damaged, Damage{What: fmt.Sprintf("%d of %d entries are missing in the export", n, index.Entries)})
	}
	return out, nil
}

// exported is an export that is being read.
type exported struct {
	fs      fs.FS
	folder  string // for messages
	folders int    // entries that have a folder
	damaged []Damage
	err     error // why the reading ended early
}

func (x *exported) index() (plainIndex, error) {
	var index plainIndex
	text, err := x.read(indexName, largestIndex)
	if errors.Is(err, fs.ErrNotExist) {
		return index, &place.Error{File: x.folder, What: "is no complete export of a register", Hint: "it has no " + indexName + "; export again", Err: err}
	}
	if err != nil {
		return index, err
	}
	return readIndex(path.Join(x.folder, indexName), text)
}

// entries reads the sound entries in the order of their numbers.
func (x *exported) entries() iter.Seq[*Entry] {
	return func(yield func(*Entry) bool) {
		all, err := fs.ReadDir(x.fs, ".") // sorted by name
		if err != nil {
			x.err = &place.Error{File: x.folder, What: "cannot import", Err: err}
			return
		}
		for _, d := range all {
			id, err := strconv.ParseInt(d.Name(), 10, 64)
			if err != nil || !d.IsDir() {
				continue // something that was put beside
			}
			x.folders++
			e, err := x.entry(d.Name())
			if err != nil {
				x.damaged = append(x.damaged, Damage{ID: id, What: err.Error()})
				continue
			}
			if !yield(e) {
				return
			}
		}
	}
}

func (x *exported) entry(folder string) (*Entry, error) {
	text, err := x.read(path.Join(folder, entryName), largestEntry)
	if err != nil {
		return nil, err
	}
	compound, err := x.read(path.Join(folder, compoundName), largestFile)
	if err != nil {
		return nil, err
	}
	name := path.Join(x.folder, folder, entryName)
	e, err := readPlain(name, text, compound)
	if err != nil {
		return nil, err
	}
	if folderOf(e.ID) != folder {
		return nil, &place.Error{File: name, Path: "id", What: fmt.Sprintf("entry %d stands in the folder of another", e.ID), Err: ErrDamaged}
	}
	return e, nil
}

// read reads a file of at most so many bytes.
func (x *exported) read(name string, most int64) ([]byte, error) {
	fault := func(err error) error { return &place.Error{File: path.Join(x.folder, name), Err: err} }
	f, err := x.fs.Open(name)
	if errors.Is(err, fs.ErrNotExist) {
		return nil, &place.Error{File: path.Join(x.folder, name), What: "is missing", Err: err}
	}
	if err != nil {
		return nil, fault(err)
	}
	defer f.Close()
	info, err := f.Stat()
	if err != nil {
		return nil, fault(err)
	}
	if !info.Mode().IsRegular() {
		return nil, fault(errors.New("is no plain file"))
	}
	b, err := io.ReadAll(io.LimitReader(f, most+1))
	if err != nil {
		return nil, fault(err)
	}
	if int64(len(b)) > most {
		return nil, fault(fmt.Errorf("has more than %d bytes", most))
	}
	return b, nil
}
