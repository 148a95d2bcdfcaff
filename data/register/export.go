package register

import (
	"context"
	"errors"
	"os"
	"path/filepath"

	"phaselag/data/place"
)

// Export writes all sound entries as plain files into a folder that is empty or
// not there yet, and returns how many; the damaged ones are named and left out.
// The same register gives the same bytes.
func (r *Register) Export(ctx context.Context, folder string) (int, []Damage, error) {
	fault := func(err error) error {
		return &place.Error{File: folder, What: "cannot export the register", Err: err}
	}
	if err := os.MkdirAll(folder, 0o777); err != nil {
		return 0, nil, fault(err)
	}
	there, err := os.ReadDir(folder)
	if err != nil {
		return 0, nil, fault(err)
	}
	if len(there) > 0 {
		return 0, nil, &place.Error{File: folder, What: "the folder for the export is not empty", Hint: "name a new folder"}
	}
	heads, damaged, err := r.heads(ctx)
	if err != nil {
		return 0, nil, err
	}
	index := plainIndex{Format: plainFormat}
	for _, h := range heads {
		e, err := r.entry(ctx, h)
		if errors.Is(err, ErrDamaged) {
			damaged = append(damaged, Damage{h.ID, h.Batch, whatOf(err)})
			continue
		}
		if err != nil {
			return 0, nil, err
		}
		one := filepath.Join(folder, folderOf(e.ID))
		if err := os.Mkdir(one, 0o777); err != nil {
			return 0, nil, fault(err)
		}
		if err := os.WriteFile(filepath.Join(one, compoundName), e.File, 0o666); err != nil {
			return 0, nil, fault(err)
		}
		if err := os.WriteFile(filepath.Join(one, entryName), plainOf(e), 0o666); err != nil {
			return 0, nil, fault(err)
		}
		index.Entries++
	}
	if err := os.WriteFile(filepath.Join(folder, indexName), pretty(index), 0o666); err != nil {
		return 0, nil, fault(err)
	}
	return index.Entries, damaged, nil
}

// whatOf is what an error says without the place, which a Damage has already.
func whatOf(err error) string {
	var e *place.Error
	if errors.As(err, &e) && e.What != "" {
		return e.What
	}
	return err.Error()
}
