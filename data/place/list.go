package place

import (
	"errors"
	"strings"
)

// List gathers several faults, so that a file can report all of them at once.
// The zero List is empty and ready to use.
type List []error

// Add appends err unless it is nil; a List is taken apart.
func (l *List) Add(err error) {
	var inner List
	switch {
	case err == nil:
	case errors.As(err, &inner):
		*l = append(*l, inner...)
	default:
		*l = append(*l, err)
	}
}

// Err returns nil for an empty List, the only fault for a List of one, and
// otherwise the List itself.
func (l List) Err() error {
	switch len(l) {
	case 0:
		return nil
	case 1:
		return l[0]
	}
	return l
}

// Error gives one line a fault.
func (l List) Error() string {
	lines := make([]string, len(l))
	for i, err := range l {
		lines[i] = err.Error()
	}
	return strings.Join(lines, "\n")
}

// Unwrap returns the faults.
func (l List) Unwrap() []error { return l }

// All takes err apart: the faults of a List in their order, else err alone,
// and nothing for nil.
func All(err error) []error {
	if err == nil {
		return nil
	}
	var l List
	if errors.As(err, &l) {
		return l
	}
	return []error{err}
}
