package table

import (
	"regexp"
	"strings"
	"unicode"

	"phaselag/data/unit"
)

// meaning is what a heading's name says.
type meaning struct {
	concept Concept
	modulus string // "shear" or "young" where the name says so, else ""
	angular bool   // an angular frequency
	// amplitude is "zero to peak", "peak to peak" or "rms" where the name says so.
	amplitude string
}

// amplitudes are the ways in which headings say what kind of amplitude is meant.
var amplitudes = []struct {
	kind    string
	pattern *regexp.Regexp
}{
	{"peak to peak", regexp.MustCompile(`(?i)(\bpeak[-_ ]?(to[-_ ]?)?peak\b|\bpk[-_ ]?pk\b|\bp[-/]p\b|\bdouble amplitude\b)`)},
	{"zero to peak", regexp.MustCompile(`(?i)(\bzero[-_ ]?to[-_ ]?peak\b|\b0[-/ ]?p\b|\bsingle amplitude\b)`)},
	{"rms", regexp.MustCompile(`(?i)\brms\b`)},
}

// recognize understands a heading's name without its unit.
func recognize(name string) (meaning, bool) {
	for _, a := range amplitudes {
		if at := a.pattern.FindStringIndex(name); at != nil {
			rest := strings.Trim(name[:at[0]]+" "+name[at[1]:], " ,-_()")
			m, ok := recognizeName(rest)
			m.amplitude = a.kind
			return m, ok
		}
	}
	return recognizeName(name)
}

var primes = strings.NewReplacer(
	"′", "'", "’", "'", "‘", "'", "´", "'", "`", "'", "ʹ", "'", "ʼ", "'",
	"″", "''", "”", "''", "“", "''", "ʺ", "''", "\"", "''",
	"∗", "*", "⋆", "*", "＊", "*", "ɷ", "ω", "ϖ", "ω", "∣", "|", "¦", "|", "ǀ", "|",
	"Â´", "'", "Î´", "δ", "Ï‰", "ω", "Î³", "γ", "Îµ", "ε", "Î·", "η",
)

func recognizeName(name string) (meaning, bool) {
	s := strings.TrimSpace(primes.Replace(name))
	if m, ok := symbol(s); ok {
		return m, ok
	}
	if m, ok := words(s); ok {
		return m, ok
	}
	// A symbol beside its words: "Storage modulus G'", "G' (storage modulus)".
	tokens := strings.FieldsFunc(s, func(r rune) bool {
		return r == ' ' || r == ',' || r == ':' || r == '(' || r == ')' || r == '[' || r == ']' || r == '_'
	})
	if len(tokens) < 2 {
		return meaning{}, false
	}
	last := len(tokens) - 1
	for _, split := range [][2]string{
		{tokens[last], strings.Join(tokens[:last], " ")},
		{tokens[0], strings.Join(tokens[1:], " ")},
		{strings.Join(tokens[last-1:], " "), strings.Join(tokens[:last-1], " ")},
		{strings.Join(tokens[:2], " "), strings.Join(tokens[2:], " ")},
	} {
		a, ok := symbol(split[0])
		if !ok {
			continue
		}
		if b, ok := words(split[1]); ok && a.concept == b.concept {
			a.angular = a.angular || b.angular
			if a.modulus == "" {
				a.modulus = b.modulus
			}
			return a, true
		}
	}
	return meaning{}, false
}

// symbol looks s up among the symbols, in which capitals count.
func symbol(s string) (meaning, bool) {
	s = strings.NewReplacer(" ", "", "_", "", "\u00a0", "").Replace(s)
	s = strings.ReplaceAll(s, "delta", "δ")
	if s == "δ" {
		return meaning{concept: Phase}, true
	}
	for _, v := range vocabulary {
		for _, sym := range v.symbols {
			if s != sym {
				continue
			}
			m := meaning{concept: v.name}
			if v.quantity == unit.Modulus && v.name != Stress {
				switch strings.ToUpper(strings.Trim(sym, "|"))[0] {
				case 'G':
					m.modulus = "shear"
				case 'E':
					m.modulus = "young"
				}
			}
			m.angular = v.name == Frequency && sym != "f"
			return m, true
		}
	}
	return meaning{}, false
}

// words looks s up among the words, in which capitals, blanks, hyphens and
// underscores do not count. Words for the kind of strain say which modulus is
// meant and are taken off.
func words(s string) (meaning, bool) {
	var m meaning
	var kept []string
	fields := strings.FieldsFunc(strings.ToLower(s), func(r rune) bool {
		return unicode.IsSpace(r) || r == '_' || r == '-' || r == '.'
	})
	for _, w := range fields {
		switch w {
		case "shear":
			m.modulus = "shear"
		case "tensile", "young's", "youngs", "young", "compressive", "elongational", "flexural":
			m.modulus = "young"
		case "average", "avg", "measured":
		default:
			kept = append(kept, w)
		}
	}
	joined := strings.Join(kept, "")
	if joined == "" {
		return meaning{}, false
	}
	for _, v := range vocabulary {
		for _, w := range v.words {
			if joined == w {
				m.concept = v.name
				m.angular = v.name == Frequency && (strings.HasPrefix(w, "ang") || strings.HasPrefix(w, "circ"))
				return m, true
			}
		}
	}
	return meaning{}, false
}

// Column says how one column was understood.
type Column struct {
	Heading string  // as it stands in the file; "column 3" where there is none
	Line    int     // of the heading, 0 if there is none
	Place   int     // of the heading in its line, in characters from 1
	Concept Concept // "" if not understood
	Modulus string  // "shear" or "young" where the heading says so, else ""
	Angular bool    // the heading speaks of an angular frequency
	// Amplitude is "zero to peak", "peak to peak" or "rms" where the heading says so,
	// else "".
	Amplitude string
	// UnitText is the unit as written, "" if there is none.
	UnitText string
	// Unit is valid if HasUnit; a loss factor without a unit has the unit 1.
	Unit    unit.Unit
	HasUnit bool
	// Derived marks the column in which the blocks of a wide table differ; the file has
	// no such column.
	Derived bool

	base string // the heading without what a wide table's block is of, "" if it has no such part
}

// name is what headings of the same column in several blocks have in common.
func (col Column) name() string {
	if col.base != "" {
		return col.base
	}
	return col.Heading
}

// understand reads a heading. A unit is split off only if what is left is
// understood, so that unknown headings keep their text.
func understand(heading string) Column {
	col := Column{Heading: heading}
	set := func(m meaning, unitText string) Column {
		col.Concept, col.Modulus, col.Angular, col.Amplitude = m.concept, m.modulus, m.angular, m.amplitude
		col.setUnit(unitText)
		return col
	}
	var foreign *Column // understood, but with a unit of something else
	for _, c := range candidates(heading) {
		m, ok := recognize(c.name)
		if !ok {
			continue
		}
		try := set(m, c.unit)
		if try.HasUnit || c.unit == "" {
			return try
		}
		if foreign == nil && (c.sure || len(unit.Known(c.unit)) > 0) {
			foreign = &try
		}
	}
	if foreign != nil {
		return *foreign
	}
	return Column{Heading: heading}
}

// setUnit finds the unit among those of the concept's quantity. The eta of a
// loss factor with a unit of viscosity is a complex viscosity. "1/s" is rad/s
// for an angular frequency and Hz for the other one.
func (col *Column) setUnit(text string) {
	col.UnitText, col.HasUnit, col.Unit = text, false, unit.Unit{}
	q := col.Concept.Quantity()
	if q == "" {
		return
	}
	if text == "" {
		if col.Concept == LossFactor {
			col.Unit, col.HasUnit = unit.Lookup("1", unit.Relative)
		}
		return
	}
	if col.Concept == Frequency {
		switch strings.NewReplacer(" ", "", "^", "", "⁻¹", "-1", "−", "-").Replace(text) {
		case "1/s", "s-1", "/s":
			text = "Hz"
			if col.Angular {
				text = "rad/s"
			}
		}
		// "ω / Hz" contradicts itself, and the factor 2π is too much to guess.
		if u, ok := unit.Lookup(text, q); ok && col.Angular && !strings.Contains(u.Symbol, "rad") {
			return
		}
	}
	if col.Concept == LossFactor {
		if _, ok := unit.Lookup(text, unit.Viscosity); ok {
			col.Concept, q = ComplexViscosity, unit.Viscosity
		}
	}
	col.Unit, col.HasUnit = unit.Lookup(text, q)
}

type candidate struct {
	name, unit string
	sure       bool // the form says that this is a unit, whatever it is
}

// candidates lists the ways to part a heading into a name and a unit, the
// heading as a whole first.
func candidates(heading string) []candidate {
	h := strings.TrimSpace(heading)
	if len(h) > 200 {
		return nil
	}
	list := []candidate{{name: h}}
	// "G' [MPa]", "G' (MPa)"
	if n := len(h); n > 2 && (h[n-1] == ']' || h[n-1] == ')') {
		opening := map[byte]string{']': "[", ')': "("}[h[n-1]]
		if i := strings.LastIndex(h, opening); i > 0 {
			list = append(list, candidate{strings.TrimRight(h[:i], " ,/"), strings.TrimSpace(h[i+1 : n-1]), true})
			// "ω / (rad/s)" and "G(t) (Pa)" are parted here, too.
		}
	}
	// "G' / MPa", "ω / rad/s": the first slash that works.
	for i := range h {
		if h[i] == '/' && i > 0 {
			list = append(list, candidate{strings.TrimSpace(h[:i]), strings.Trim(strings.TrimSpace(h[i+1:]), "()[]"), true})
		}
	}
	// "frequency, Hz", "frequency in Hz"
	for _, sep := range []string{", ", " in ", "; "} {
		if i := strings.LastIndex(h, sep); i > 0 {
			list = append(list, candidate{strings.TrimSpace(h[:i]), strings.TrimSpace(h[i+len(sep):]), sep == ", "})
		}
	}
	// "storage_modulus_MPa", "angular_frequency_rad_s", "Frequency Hz"
	tokens := strings.FieldsFunc(h, func(r rune) bool { return r == '_' || r == ' ' })
	for n := 1; n <= 4 && n < len(tokens); n++ {
		name := strings.Join(tokens[:len(tokens)-n], " ")
		suffix := tokens[len(tokens)-n:]
		u := strings.ReplaceAll(strings.Join(suffix, "/"), "/per/", "/")
		list = append(list, candidate{name, u, false})
	}
	return list
}
