package register

import (
	"crypto/sha256"
	"encoding/hex"
	"fmt"
	"math"
	"strings"
	"time"
	"unicode"
	"unicode/utf8"

	"phaselag/data/place"
)

const (
	longest     = 500      // bytes of a one-line text: PostgreSQL indexes less than 2704 bytes a row
	longestWhy  = 10_000   // bytes of a reason
	largestFile = 64 << 20 // bytes of a compound file
	mostValues  = 100_000  // of an entry
	mostInputs  = 10_000   // of an entry
)

// checked returns a copy of e in the one form that is stored (SHA256 filled in,
// no negative zeros, one NaN), or all that is wrong with e.
func checked(e *Entry) (*Entry, error) {
	if e == nil {
		panic("register: nil entry")
	}
	var l place.List
	bad := func(path, what, hint string) { l.Add(&place.Error{Path: path, What: what, Hint: hint}) }
	text := func(path, s string, obligatory bool) {
		what, hint := oneLine(s, obligatory)
		if what != "" {
			bad(path, what, hint)
		}
	}
	text("batch", e.Batch, true)
	text("compound", e.Compound, true)
	text("who", e.Who, true)
	if !isDate(e.Tested) {
		l.Add(notDate("tested", e.Tested))
	}
	if _, err := time.Parse(time.RFC3339, e.Added); err != nil || len(e.Added) > longest {
		bad("added", fmt.Sprintf("%.60q is no time", e.Added), "write it as in 2026-03-31T14:05:00Z")
	}
	switch {
	case e.Corrects < 0:
		bad("corrects", fmt.Sprintf("%d is no entry", e.Corrects), "give the number of the entry that is corrected, or 0")
	case e.Corrects > 0 && strings.TrimSpace(e.Why) == "":
		bad("why", "a correction without a reason", "say why the entry is corrected")
	}
	if what := plain(e.Why, longestWhy, "\n\t"); what != "" {
		bad("why", what, "")
	}
	switch {
	case len(e.File) == 0:
		bad("file", "the compound file is empty", "")
	case len(e.File) > largestFile:
		bad("file", fmt.Sprintf("the compound file has %d bytes, more than %d", len(e.File), largestFile), "")
	}
	sum := hashOf(e.File)
	if len(e.File) > 0 && e.SHA256 != "" && !strings.EqualFold(e.SHA256, sum) {
		bad("sha256", "the compound file does not match its SHA-256", "it was changed on the way; read it again")
	}
	c := *e
	c.SHA256, c.CorrectedBy = sum, 0
	c.Inputs = checkedInputs(e.Inputs, bad, text)
	c.Values = checkedValues(e.Values, bad, text)
	if err := l.Err(); err != nil {
		return nil, err
	}
	return &c, nil
}

func checkedInputs(inputs []Input, bad func(path, what, hint string), text func(path, s string, obligatory bool)) []Input {
	if len(inputs) > mostInputs {
		bad("inputs", fmt.Sprintf("%d files, more than %d", len(inputs), mostInputs), "")
		return nil
	}
	var out []Input
	for i, in := range inputs {
		text(fmt.Sprintf("inputs[%d].file", i), in.File, true)
		if b, err := hex.DecodeString(in.SHA256); err != nil || len(b) != sha256.Size {
			bad(fmt.Sprintf("inputs[%d].sha256", i), fmt.Sprintf("%.80q is no SHA-256", in.SHA256), "it has 64 hexadecimal digits")
		}
		out = append(out, Input{in.File, strings.ToLower(in.SHA256)})
	}
	return out
}

func checkedValues(values []Value, bad func(path, what, hint string), text func(path, s string, obligatory bool)) []Value {
	if len(values) > mostValues {
		bad("values", fmt.Sprintf("%d values, more than %d", len(values), mostValues), "")
		return nil
	}
	var out []Value
	seen := make(map[[2]string]int, len(values))
	for i, v := range values {
		path := fmt.Sprintf("values[%d].", i)
		text(path+"name", v.Name, true)
		text(path+"condition", v.Condition, false)
		text(path+"unit", v.Unit, false)
		if math.IsInf(v.Value, 0) {
			bad(path+"value", "is infinite", "leave it out, or give NaN for what was not measured")
		}
		if v.U95 < 0 || math.IsInf(v.U95, 0) {
			bad(path+"u95", fmt.Sprintf("%g is no half width of an interval", v.U95), "give NaN where none is known")
		}
		key := [2]string{v.Name, v.Condition}
		if k, twice := seen[key]; twice {
			bad(path+"name", fmt.Sprintf("%q at %q is value %d already", v.Name, v.Condition, k), "one value for each name and condition")
		}
		seen[key] = i
		v.Value, v.U95 = settled(v.Value), settled(v.U95)
		out = append(out, v)
	}
	return out
}

// settled takes away what a database does not keep: the sign of zero and the
// bits of a NaN.
func settled(x float64) float64 {
	switch {
	case math.IsNaN(x):
		return math.NaN()
	case x == 0:
		return 0
	}
	return x
}

func isDate(s string) bool {
	_, err := time.Parse(time.DateOnly, s)
	return err == nil
}

func notDate(path, s string) error {
	return &place.Error{Path: path, What: fmt.Sprintf("%.40q is no date", s), Hint: "write year, month and day as in 2026-03-31"}
}

// oneLine says what is wrong with a text of one line, "" for nothing.
func oneLine(s string, obligatory bool) (what, hint string) {
	if what := plain(s, longest, ""); what != "" {
		return what, ""
	}
	switch {
	case s == "" && obligatory:
		return "is missing", ""
	case strings.TrimSpace(s) != s:
		return fmt.Sprintf("%q begins or ends with a blank", s), "leave the blank away; it would make a second name of the same look"
	}
	return "", ""
}

// plain says what is wrong with a text of at most so many bytes, in which only
// the given control characters are allowed.
func plain(s string, most int, allowed string) string {
	if len(s) > most {
		return fmt.Sprintf("has %d bytes, more than %d", len(s), most)
	}
	if !utf8.ValidString(s) {
		return fmt.Sprintf("%q is not UTF-8", s)
	}
	for _, c := range s {
		if unicode.IsControl(c) && !strings.ContainsRune(allowed, c) {
			return fmt.Sprintf("%q holds the control character U+%04X", s, c)
		}
	}
	return ""
}
