package place

import (
	"errors"
	"fmt"
	"testing"
)

func TestErrorText(t *testing.T) {
	cause := errors.New("no such thing")
	for _, c := range []struct {
		err  Error
		want string
	}{
		{Error{File: "a.yaml", Line: 3, Column: 7, Path: "tests[0].kind", What: "unknown kind"}, "a.yaml:3:7: tests[0].kind: unknown kind"},
		{Error{File: "a.csv", Line: 3, What: "too short"}, "a.csv:3: too short"},
		{Error{File: "a.csv", Err: cause}, "a.csv: no such thing"},
		{Error{File: "a.xlsx", Sheet: "S1", Cell: "B7", What: "not a number"}, "a.xlsx[S1!B7]: not a number"},
		{Error{What: "cannot read", Err: cause}, "cannot read: no such thing"},
		{Error{}, "unknown fault"},
	} {
		if got := c.err.Error(); got != c.want {
			t.Errorf("got %q, want %q", got, c.want)
		}
	}
	if !errors.Is(&Error{Err: cause}, cause) {
		t.Error("the cause is lost")
	}
}

func TestHint(t *testing.T) {
	inner := &Error{What: "wrong", Hint: "write 1"}
	for _, err := range []error{inner, fmt.Errorf("outer: %w", inner), &Error{File: "f", Err: inner}, List{errors.New("a"), inner}, At(fmt.Errorf("x: %w", inner), "f", 1, 1, "p")} {
		if got := Hint(err); got != "write 1" {
			t.Errorf("Hint(%v) = %q", err, got)
		}
	}
	if Hint(nil) != "" || Hint(errors.New("a")) != "" {
		t.Error("a hint from nothing")
	}
}

func TestAt(t *testing.T) {
	if At(nil, "f", 1, 1, "") != nil {
		t.Error("nil got a place")
	}
	err := At(&Error{What: "wrong"}, "f", 2, 3, "a.b")
	if got, want := err.Error(), "f:2:3: a.b: wrong"; got != want {
		t.Errorf("got %q, want %q", got, want)
	}
	if got := At(err, "g", 9, 9, "c").Error(); got != err.Error() {
		t.Errorf("a known place was replaced: %q", got)
	}
}

func TestList(t *testing.T) {
	var l List
	l.Add(nil)
	if l.Err() != nil {
		t.Error("an empty list is an error")
	}
	one := errors.New("one")
	l.Add(one)
	if l.Err() != one {
		t.Error("a list of one is not its fault")
	}
	l.Add(List{errors.New("two"), errors.New("three")})
	if got, want := l.Err().Error(), "one\ntwo\nthree"; got != want {
		t.Errorf("got %q, want %q", got, want)
	}
	if n := len(All(fmt.Errorf("in: %w", l.Err()))); n != 3 {
		t.Errorf("All gave %d faults, want 3", n)
	}
	if All(nil) != nil || len(All(one)) != 1 {
		t.Error("All of nil or of one fault")
	}
}

func TestNearest(t *testing.T) {
	keys := []string{"temperature", "frequency", "strain", "strain_source", "kind"}
	for word, want := range map[string]string{
		"temprature": "temperature", "Frequency": "frequency", "strian": "strain",
		"strain source": "strain_source", "knid": "kind", "colour": "", "": "", "x": "",
	} {
		if got := Nearest(word, keys); got != want {
			t.Errorf("Nearest(%q) = %q, want %q", word, got, want)
		}
	}
}
