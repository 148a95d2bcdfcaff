package data

import (
	"fmt"
	"math"
	"path"
	"path/filepath"
	"strings"

	"gopkg.in/yaml.v3"

	"phaselag/data/unit"
)

// Specification is what a batch has to meet to be released.
type Specification struct {
	Name     string
	Compound string // "" : any
	Rule     Rule
	// Guard is the factor r of the guard bands w = r·U95 of the rule Guarded.
	Guard  float64
	Limits []Limit

	SHA256 string // of the file
}

// Rule is how a measured value is held against its limits.
type Rule string

// The rules. Simple accepts and rejects by the value alone. Guarded accepts where the
// value keeps a guard band from the limits, rejects where it is beyond them by as
// much, and leaves the rest undecided (ISO 14253-1, JCGM 106).
const (
	Simple  Rule = "simple"
	Guarded Rule = "guarded"
)

// Property is what a limit is of. The values are those of the specification file.
type Property string

// The properties: of the modulus at a condition, and of what changed against the
// approved compound.
const (
	StorageModulus   Property = "storage modulus"
	LossModulus      Property = "loss modulus"
	ComplexModulus   Property = "complex modulus"
	LossFactor       Property = "loss factor"
	TemperatureShift Property = "temperature shift"
	StiffnessFactor  Property = "stiffness factor"
	LossChange       Property = "loss factor change"
	FillerChange     Property = "filler amplitude factor"
	CriticalChange   Property = "critical strain factor"
)

// Properties lists the properties of a specification.
func Properties() []string {
	return []string{string(StorageModulus), string(LossModulus), string(ComplexModulus), string(LossFactor),
		string(TemperatureShift), string(StiffnessFactor), string(LossChange), string(FillerChange), string(CriticalChange)}
}

// AtCondition reports whether the property is one of the modulus at a condition.
func (p Property) AtCondition() bool {
	switch p {
	case StorageModulus, LossModulus, ComplexModulus, LossFactor:
		return true
	}
	return false
}

// Quantity is what the limits of a property are given in.
func (p Property) Quantity() unit.Quantity {
	switch p {
	case StorageModulus, LossModulus, ComplexModulus:
		return unit.Modulus
	case TemperatureShift:
		return unit.TemperatureDifference
	}
	return unit.Relative
}

// Limit is one line of a specification; Lower and Upper in SI, NaN where there is
// none.
type Limit struct {
	Property     Property
	Frequency    float64 // Hz; NaN of a change
	Temperature  float64 // K; NaN of a change
	Strain       float64 // m/m; NaN: the isotherms' own amplitude
	Lower, Upper float64
	Line         int // in the file
}

// OpenSpecification reads a specification file (YAML). Errors are *place.Error or a
// place.List of them.
func OpenSpecification(name string) (*Specification, error) {
	s := &source{}
	content, err := s.read(name, path.Base(filepath.ToSlash(name)))
	if err != nil {
		return nil, err
	}
	spec, err := readSpecification(name, content)
	if err != nil {
		return nil, err
	}
	spec.SHA256 = s.list[0].SHA256
	return spec, nil
}

func readSpecification(name string, content []byte) (*Specification, error) {
	root, err := parseYAML(name, content)
	if err != nil {
		return nil, err
	}
	t := &tree{file: name}
	m, _ := t.mapping(root, "", "specification", "compound", "decision", "limits")
	spec := &Specification{Name: m.text("specification"), Compound: m.text("compound")}
	if spec.Name == "" {
		spec.Name = stem(name)
	}
	d, _ := t.mapping(m.values["decision"], "decision", "rule", "guard")
	spec.Rule = Rule(d.choice("rule", string(Guarded), string(Simple), string(Guarded)))
	spec.Guard = 1
	if d.has("guard") {
		if spec.Guard = d.number("guard"); !(spec.Guard >= 0 && spec.Guard <= 3) {
			t.fault(d.at("guard"), d.sub("guard"), "guard: 1 keeps U95 from the limits", "a guard factor lies between 0 and 3")
		}
		if spec.Rule == Simple {
			t.fault(d.at("guard"), d.sub("guard"), "rule: guarded", "the simple rule has no guard band")
		}
	}
	for i, n := range m.list("limits") {
		spec.Limits = append(spec.Limits, t.limit(n, i, m.sub("limits")))
	}
	if len(spec.Limits) == 0 && m.node != nil && len(t.faults) == 0 {
		t.fault(m.node, "limits", "limits: [{property: storage modulus, frequency: 10 Hz, temperature: 23 °C, lower: 1.8 MPa, upper: 2.2 MPa}]", "no limits are listed")
	}
	if err := t.faults.Err(); err != nil {
		return nil, err
	}
	return spec, nil
}

func (t *tree) limit(n *yaml.Node, i int, where string) Limit {
	k, _ := t.mapping(n, fmt.Sprintf("%s[%d]", where, i+1), "property", "frequency", "temperature", "strain", "lower", "upper")
	nan := math.NaN()
	l := Limit{Frequency: nan, Temperature: nan, Strain: nan, Lower: nan, Upper: nan}
	if k.node == nil {
		t.fault(n, fmt.Sprintf("%s[%d]", where, i+1), "", "an empty limit")
		return l
	}
	l.Line = k.node.Line
	if !k.has("property") {
		t.fault(k.node, k.sub("property"), "one of: "+strings.Join(Properties(), ", "), "the property is missing")
		return l
	}
	l.Property = Property(k.choice("property", "", Properties()...))
	if l.Property == "" {
		return l
	}
	l.Frequency = k.quantity("frequency", unit.Frequency, positive)
	l.Temperature = k.quantity("temperature", unit.Temperature, positive)
	l.Strain = k.quantity("strain", unit.Strain, positive)
	if l.Property.AtCondition() && (!k.has("frequency") || !k.has("temperature")) {
		t.fault(k.node, k.path, "frequency: 10 Hz, temperature: 23 °C", "a %s needs a frequency and a temperature", l.Property)
	}
	if !l.Property.AtCondition() {
		for _, key := range []string{"frequency", "temperature", "strain"} {
			if k.has(key) {
				t.fault(k.at(key), k.sub(key), "leave it out", "a %s has no %s: it is what changed everywhere", l.Property, key)
			}
		}
	}
	q := l.Property.Quantity()
	read := func(key string) float64 {
		if q == unit.Relative && !strings.ContainsAny(k.text(key), "%") && k.has(key) {
			return k.number(key)
		}
		return k.quantity(key, q, anySign)
	}
	l.Lower, l.Upper = read("lower"), read("upper")
	switch {
	case !k.has("lower") && !k.has("upper"):
		t.fault(k.node, k.path, "lower: …, upper: …, or one of them", "a limit without a number")
	case l.Lower >= l.Upper:
		t.fault(k.at("lower"), k.sub("lower"), "exchange them?", "the lower limit is not below the upper one")
	}
	return l
}
