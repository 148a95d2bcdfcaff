package html

import (
	"bytes"
	_ "embed" // style and template
	"encoding/base64"
	"fmt"
	"html/template"
	"io"
	"strings"

	"phaselag/reports/figure"
)

//go:embed style.css
var style string

//go:embed page.tmpl
var page string

var pageTemplate = template.Must(template.New("page").Funcs(template.FuncMap{
	"rich":  rich,
	"plain": func(s string) string { return clean(figure.Plain(s)) },
}).Parse(page))

// Write writes d as one HTML file. An error comes from a figure or from w;
// with an error of a figure nothing is written.
func Write(w io.Writer, d figure.Document) error {
	b, err := Bytes(d)
	if err != nil {
		return err
	}
	_, err = w.Write(b)
	return err
}

// Bytes returns d as one HTML file.
func Bytes(d figure.Document) ([]byte, error) { return render(d, nil) }

func render(d figure.Document, live *Live) ([]byte, error) {
	m := &maker{}
	data := struct {
		Doc      figure.Document
		Style    template.CSS
		Lead     []block
		Sections []section
		Running  string
		Logo     template.URL
		Policy   string // of the script; "" for none
		Live     template.HTML
	}{Doc: d, Style: template.CSS(style), Running: d.Running}
	if live != nil {
		data.Style += template.CSS(live.Style)
		data.Policy, data.Live = live.policy(), live.elements()
	}
	if d.Logo != nil {
		data.Logo = template.URL("data:image/png;base64," + base64.StdEncoding.EncodeToString(d.Logo))
	}
	if data.Running == "" {
		data.Running = d.Title
	}
	data.Lead = m.blocks(d.Lead)
	for i, s := range d.Sections {
		data.Sections = append(data.Sections, m.section(s, fmt.Sprintf("s%d", i+1), 0))
	}
	if m.err != nil {
		return nil, m.err
	}
	var out bytes.Buffer
	if err := pageTemplate.Execute(&out, data); err != nil {
		return nil, fmt.Errorf("html: %w", err)
	}
	return append(bytes.TrimSpace(out.Bytes()), '\n'), nil
}

// rich turns _{…} and ^{…} into elements and escapes everything else; control
// characters, which no page may hold, become blanks.
func rich(s string) template.HTML {
	var b strings.Builder
	for _, p := range figure.Pieces(s) {
		text := template.HTMLEscapeString(clean(p.Text))
		switch p.Level {
		case figure.Sub:
			text = "<sub>" + text + "</sub>"
		case figure.Super:
			text = "<sup>" + text + "</sup>"
		default:
			text = strings.ReplaceAll(text, "\n", "<br>")
		}
		b.WriteString(text)
	}
	return template.HTML(b.String())
}

func clean(s string) string {
	return strings.Map(func(r rune) rune {
		if r < ' ' && r != '\n' || r >= 0x7F && r < 0xA0 {
			return ' '
		}
		return r
	}, strings.ToValidUTF8(s, "\uFFFD"))
}
