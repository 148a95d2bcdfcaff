package waveform

import "fmt"

// Analyse fits one record of one frequency and amplitude, with all its samples in
// memory. A nil settings works. It panics if the slices differ in length; whatever
// else is wrong with the record is an error that wraps ErrTooFew, ErrTime,
// ErrTooSlow, ErrTooShort, ErrNoMotion, ErrNoForce or ErrFit, with a zero Result.
func Analyse(record Record, settings *Settings) (Result, error) {
	n := len(record.Time)
	if len(record.Force) != n || len(record.Displacement) != n {
		panic(fmt.Sprintf("waveform: %d times, %d forces and %d displacements", n, len(record.Force), len(record.Displacement)))
	}
	set, err := settings.filled()
	if err != nil {
		return Result{}, err
	}
	s := newSegment(&set, 0)
	for i, t := range record.Time {
		s.add(t, record.Force[i], record.Displacement[i])
	}
	return s.finish()
}
