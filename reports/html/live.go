package html

import (
	"crypto/sha256"
	"encoding/base64"
	"html/template"

	"phaselag/reports/figure"
)

// Live is a part of a page that works by script. It stands between the contents and
// the first section; the page must say everything without it, too.
type Live struct {
	Markup []byte // of the section; from a template of the program, not from a file of a user
	Style  string // CSS
	Script string // JavaScript; it must not hold "</script"
	Data   []byte // JSON with <, > and & escaped, for the script, in the element "live-data"
}

// BytesLive returns d as one HTML file with a part that works by script; without one
// where live is nil. The page's policy lets this very script run and no other, and
// fetches nothing.
func BytesLive(d figure.Document, live *Live) ([]byte, error) { return render(d, live) }

// elements is the section with its data and its script.
func (l *Live) elements() template.HTML {
	return template.HTML(string(l.Markup) + `<script type="application/json" id="live-data">` + string(l.Data) + "</script>\n<script>" + l.Script + "</script>\n")
}

// policy is the source list for the script (Content Security Policy Level 3, 2.3.1).
func (l *Live) policy() string {
	sum := sha256.Sum256([]byte(l.Script))
	return "'sha256-" + base64.StdEncoding.EncodeToString(sum[:]) + "'"
}
