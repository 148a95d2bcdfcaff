package place

import (
	"errors"
	"strconv"
	"strings"
)

// Error is a fault in a file, or in a word of the command line, with its place.
// It reads
//
//	file:line:column: path: what
//
// in which every part that is not known is left out. A workbook's place is
// file, sheet and cell in brackets instead of line and column.
type Error struct {
	File   string // as the user wrote it; "" for a word of the command line
	Line   int    // from 1; 0: not known
	Column int    // in characters from 1; 0: not known
	Sheet  string // of a workbook, else ""
	Cell   string // of a workbook, for example "B7", else ""
	Path   string // of a key, for example "tests[2].columns.frequency", else ""
	What   string // what is wrong; "": the text of Err
	Hint   string // what would be right, "" for nothing to say
	Err    error  // the cause, may be nil
}

// Error says where and what; the hint is not part of it, see [Hint].
func (e *Error) Error() string {
	var b strings.Builder
	if e.File != "" {
		b.WriteString(e.File)
		if e.Line > 0 {
			b.WriteString(":" + strconv.Itoa(e.Line))
			if e.Column > 0 {
				b.WriteString(":" + strconv.Itoa(e.Column))
			}
		}
		switch {
		case e.Sheet != "" && e.Cell != "":
			b.WriteString("[" + e.Sheet + "!" + e.Cell + "]")
		case e.Sheet != "":
			b.WriteString("[" + e.Sheet + "]")
		}
		b.WriteString(": ")
	}
	if e.Path != "" {
		b.WriteString(e.Path + ": ")
	}
	b.WriteString(e.what())
	return b.String()
}

func (e *Error) what() string {
	switch {
	case e.What != "" && e.Err != nil:
		return e.What + ": " + e.Err.Error()
	case e.What != "":
		return e.What
	case e.Err != nil:
		return e.Err.Error()
	}
	return "unknown fault"
}

// Unwrap returns the cause.
func (e *Error) Unwrap() error { return e.Err }

// Hint returns what would be right instead: the first hint found in err or in
// what it wraps, "" if there is none.
func Hint(err error) string {
	if err == nil {
		return ""
	}
	if e, ok := err.(*Error); ok && e.Hint != "" {
		return e.Hint
	}
	switch w := err.(type) {
	case interface{ Unwrap() error }:
		return Hint(w.Unwrap())
	case interface{ Unwrap() []error }:
		for _, inner := range w.Unwrap() {
			if h := Hint(inner); h != "" {
				return h
			}
		}
	}
	return ""
}

// At gives err a place in a file. An *Error that knows its file already stays
// what it is; one that does not gets the file, line, column and path that it
// lacks; any other error becomes the cause of a new *Error.
func At(err error, file string, line, column int, path string) error {
	if err == nil {
		return nil
	}
	var e *Error
	if direct, ok := err.(*Error); ok {
		if direct.File != "" {
			return err
		}
		c := *direct
		e = &c
	} else {
		e = &Error{Err: err, Hint: Hint(err)}
		var known *Error
		if errors.As(err, &known) && known.File != "" {
			return err
		}
	}
	e.File = file
	if e.Line == 0 {
		e.Line, e.Column = line, column
	}
	if e.Path == "" {
		e.Path = path
	}
	return e
}
