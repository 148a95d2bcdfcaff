package data

import (
	"bytes"
	"fmt"
	"image"
	_ "image/jpeg" // logos
	_ "image/png"
	"path"
	"path/filepath"
	"slices"
	"strings"

	"gopkg.in/yaml.v3"

	"phaselag/data/unit"
)

// Sheet is how a laboratory wants its datasheets: the settings file of datasheets.
type Sheet struct {
	Title       string // "" : by the compound
	Laboratory  string // name and address, may have several lines; "": the campaign's
	Customer    string
	Order       string
	Method      string // what the laboratory adds to the method statement
	Trace       string // traceability of force, displacement, temperature
	Signatories []Signatory
	Logo        []byte // PNG or JPEG; nil: none
	LogoFile    string // as written
	Sections    []string
	Conditions  []SheetCondition // of the property table; nil: the program's choice
	InchPound   bool
	Letter      bool // paper; else A4
}

// Signatory signs a datasheet or a certificate.
type Signatory struct{ Name, Role string }

// SheetCondition is a line of the property table, in SI; Strain is NaN for the
// isotherms' own amplitude.
type SheetCondition struct{ Frequency, Temperature, Strain float64 }

// SheetSections are the sections of a datasheet in their order.
var SheetSections = []string{"identity", "properties", "constants", "temperature dependence", "figures", "shift factors", "strain dependence", "typical values",
	"not told", "method", "findings", "assumptions", "provenance", "signatures"}

// maxLogo bounds a logo file in bytes, maxPixels its picture.
const (
	maxLogo   = 2 << 20
	maxPixels = 4000
)

// OpenSheet reads a settings file of datasheets (YAML). Errors are *place.Error or a
// place.List of them.
func OpenSheet(name string) (*Sheet, error) {
	s := &source{dir: filepath.Dir(name)}
	content, err := s.read(name, path.Base(filepath.ToSlash(name)))
	if err != nil {
		return nil, err
	}
	return readSheet(s, name, content)
}

func readSheet(s *source, name string, content []byte) (*Sheet, error) {
	root, err := parseYAML(name, content)
	if err != nil {
		return nil, err
	}
	t := &tree{file: name}
	m, _ := t.mapping(root, "", "title", "laboratory", "customer", "order", "method", "traceability", "signatories", "logo", "sections", "conditions", "units", "paper")
	out := &Sheet{
		Title: m.text("title"), Laboratory: m.text("laboratory"), Customer: m.text("customer"), Order: m.text("order"),
		Method: m.text("method"), Trace: m.text("traceability"),
		InchPound: m.choice("units", "SI", "SI", "inch-pound") == "inch-pound",
		Letter:    m.choice("paper", "A4", "A4", "letter") == "letter",
	}
	for i, n := range m.list("signatories") {
		k, _ := t.mapping(n, fmt.Sprintf("signatories[%d]", i+1), "name", "role")
		if k.node != nil && k.text("name") == "" {
			t.fault(k.node, k.sub("name"), "{name: …, role: head of laboratory}", "a signatory without a name")
		}
		out.Signatories = append(out.Signatories, Signatory{k.text("name"), k.text("role")})
	}
	for i, n := range m.list("sections") {
		where := fmt.Sprintf("sections[%d]", i+1)
		word := strings.ReplaceAll(t.text(t.follow(n, where), where), "_", " ")
		switch {
		case !slices.Contains(SheetSections, word):
			t.fault(n, where, "one of: "+strings.Join(SheetSections, ", "), "%q is no section", clip(word))
		case slices.Contains(out.Sections, word):
			t.fault(n, where, "", "the section %q stands twice", word)
		default:
			out.Sections = append(out.Sections, word)
		}
	}
	for i, n := range m.list("conditions") {
		out.Conditions = append(out.Conditions, t.sheetCondition(n, i))
	}
	if file := m.text("logo"); file != "" {
		out.LogoFile = file
		b, err := s.read(s.resolve(file), file)
		switch {
		case err != nil:
			t.fault(m.at("logo"), "logo", "the logo is named relative to the settings file", "%v", err)
		case len(b) > maxLogo:
			t.fault(m.at("logo"), "logo", "", "larger than %d MB", maxLogo>>20)
		default:
			config, _, err := image.DecodeConfig(bytes.NewReader(b))
			switch {
			case err != nil:
				t.fault(m.at("logo"), "logo", "export the logo as PNG or JPEG", "%q is neither PNG nor JPEG", clip(file))
			case config.Width > maxPixels || config.Height > maxPixels || config.Width < 1 || config.Height < 1:
				t.fault(m.at("logo"), "logo", "", "the logo has %d × %d pixels; at most %d each way", config.Width, config.Height, maxPixels)
			default:
				out.Logo = b
			}
		}
	}
	if err := t.faults.Err(); err != nil {
		return nil, err
	}
	return out, nil
}

func (t *tree) sheetCondition(n *yaml.Node, i int) SheetCondition {
	k, _ := t.mapping(n, fmt.Sprintf("conditions[%d]", i+1), "frequency", "temperature", "strain")
	c := SheetCondition{k.quantity("frequency", unit.Frequency, positive), k.quantity("temperature", unit.Temperature, positive), k.quantity("strain", unit.Strain, positive)}
	if k.node != nil && (!k.has("frequency") || !k.has("temperature")) {
		t.fault(k.node, k.path, "{frequency: 10 Hz, temperature: 23 °C, strain: 0.5 %}", "a condition needs a frequency and a temperature")
	}
	return c
}
