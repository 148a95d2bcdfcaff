package register

import (
	"context"
	"errors"
	"fmt"

	"phaselag/data/place"
)

// What a register refuses, for errors.Is. The messages say more, and
// [place.Hint] what would be right instead.
var (
	ErrDuplicate = errors.New("a batch is registered once")
	ErrCorrected = errors.New("an entry is corrected once")
	ErrNotFound  = errors.New("not in the register")
	ErrDamaged   = errors.New("it is damaged")
	ErrOther     = errors.New("the export is of another register")
	ErrNewer     = errors.New("it was made by a newer program")
)

// Hints for a damaged register.
const (
	restore = "the sound entries can still be read: export them and import them into a new register, " +
		"then import a backup's export to fill the gaps"
	lostAll = "restore it from a backup, or import an export into a new register"
)

// fault puts an error of the database into words. what says what was being done.
func (r *Register) fault(what string, err error) error {
	if err == nil {
		return nil
	}
	var known *place.Error
	if errors.As(err, &known) {
		if known.File != "" {
			return err
		}
		return place.At(err, r.where, 0, 0, "")
	}
	if errors.Is(err, context.Canceled) || errors.Is(err, context.DeadlineExceeded) {
		return &place.Error{File: r.where, What: what, Err: err}
	}
	v := r.kind.judge(err)
	if v.what != "" {
		what += ": " + v.what
	}
	if v.damaged {
		err = fmt.Errorf("%w (%w)", ErrDamaged, err)
	}
	return &place.Error{File: r.where, What: what, Hint: v.hint, Err: err}
}

// refusal is an error about what the register holds.
func (r *Register) refusal(what, hint string, err error) error {
	return &place.Error{File: r.where, What: what, Hint: hint, Err: err}
}
