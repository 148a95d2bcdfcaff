package models

import (
	"bytes"
	"encoding/json"
	"reflect"
	"strings"
	"testing"

	generate "github.com/invopop/jsonschema"
	validate "github.com/santhosh-tekuri/jsonschema/v6"
	"gopkg.in/yaml.v3"
	"pgregory.net/rapid"

	"phaselag/data/unit"
)

const schemaID = "urn:phaselag:compound:1"

// narrower says more of a key than its Go type does.
var narrower = map[string]func(*generate.Schema){
	"Compound.phaselag_compound": func(s *generate.Schema) { s.Minimum, s.Maximum = "1", "1" },
	"Compound.modulus":           oneOf("shear", "young"),
	"Shift.law":                  oneOf(LawWLF, LawArrhenius, LawCrossover, LawNone),
	"Vertical.law":               oneOf(VerticalNone, VerticalDensity, VerticalFactors),
	"Amplitude.law":              oneOf(AmplitudeNone, AmplitudeKraus, AmplitudeExtraLoss, AmplitudeMaierGoritz),
	"Amplitude.coupling":         oneOf(Overlay, Scaling),

	"Amplitude.frequency_dependence": oneOf(Causal, RateIndependent),
	"Linear.equilibrium_modulus_MPa": func(s *generate.Schema) { s.Minimum = "0" },
	"Branch.relaxation_time_s":       func(s *generate.Schema) { s.ExclusiveMinimum = "0" },
	"Branch.modulus_MPa":             func(s *generate.Schema) { s.Minimum = "0" },
	"StaticItem.modulus_MPa":         func(s *generate.Schema) { s.ExclusiveMinimum = "0" },
	"Uncertainty.coverage":           func(s *generate.Schema) { s.ExclusiveMinimum, s.ExclusiveMaximum = "0", "1" },
}

func oneOf(words ...string) func(*generate.Schema) {
	return func(s *generate.Schema) {
		for _, w := range words {
			s.Enum = append(s.Enum, w)
		}
	}
}

// generated makes the schema from the fields of Compound and their comments.
func generated(t *testing.T) []byte {
	t.Helper()
	r := generate.Reflector{
		Anonymous: true,
		Mapper: func(t reflect.Type) *generate.Schema {
			if t == reflect.TypeFor[unit.Number]() {
				return &generate.Schema{Extras: map[string]any{"type": []string{"number", "null"}}}
			}
			return nil
		},
	}
	if err := r.AddGoComments("phaselag/models", "."); err != nil {
		t.Fatal(err)
	}
	s := r.Reflect(&Compound{})
	s.ID, s.Title = schemaID, "Compound file, version 1"
	refine(t, s, reflect.TypeFor[Compound]())
	b, err := json.MarshalIndent(s, "", "  ")
	if err != nil {
		t.Fatal(err)
	}
	return append(b, '\n')
}

// refine lets optional parts be null, which the generator does not say, and
// applies narrower, type by type.
func refine(t *testing.T, s *generate.Schema, typ reflect.Type) {
	t.Helper()
	switch typ.Kind() {
	case reflect.Pointer, reflect.Slice, reflect.Array:
		refine(t, s, typ.Elem())
		return
	case reflect.Struct:
	default:
		return
	}
	def := s.Definitions[typ.Name()]
	for i := range typ.NumField() {
		f := typ.Field(i)
		key, _, _ := strings.Cut(f.Tag.Get("json"), ",")
		if key == "" {
			continue
		}
		p, ok := def.Properties.Get(key)
		if !ok {
			t.Fatalf("the schema has no %s.%s", typ.Name(), key)
		}
		if f.Type.Kind() == reflect.Pointer {
			describe := p.Description
			p.Description = ""
			def.Properties.Set(key, &generate.Schema{Description: describe, AnyOf: []*generate.Schema{p, {Type: "null"}}})
		}
		if more := narrower[typ.Name()+"."+key]; more != nil {
			more(p)
		}
		refine(t, s, f.Type)
	}
}

// The shipped schema is the one that belongs to the fields.
func TestSchemaIsOfTheFields(t *testing.T) {
	golden(t, "compound.schema.json", generated(t))
	if !*update && !bytes.Equal(Schema(), generated(t)) {
		t.Error("Schema gives another text")
	}
	s := Schema()
	s[0] = 'x'
	if Schema()[0] == 'x' {
		t.Error("Schema hands out its own bytes")
	}
}

// compiled is the shipped schema, ready to validate.
func compiled(t *testing.T) *validate.Schema {
	t.Helper()
	doc, err := validate.UnmarshalJSON(bytes.NewReader(Schema()))
	if err != nil {
		t.Fatal(err)
	}
	c := validate.NewCompiler()
	if err := c.AddResource(schemaID, doc); err != nil {
		t.Fatal(err)
	}
	s, err := c.Compile(schemaID)
	if err != nil {
		t.Fatal(err)
	}
	return s
}

// Every file that is written, YAML or JSON, keeps to the schema.
func TestFilesKeepToSchema(t *testing.T) {
	s := compiled(t)
	rapid.Check(t, func(t *rapid.T) {
		c := mustNew(t, extreme(t))
		j, err := c.JSON()
		if err != nil {
			t.Fatal(err)
		}
		doc, err := validate.UnmarshalJSON(bytes.NewReader(j))
		if err != nil {
			t.Fatal(err)
		}
		if err := s.Validate(doc); err != nil {
			t.Errorf("JSON: %v", err)
		}
		y, err := c.YAML()
		if err != nil {
			t.Fatal(err)
		}
		var value any
		if err := yaml.Unmarshal(y, &value); err != nil {
			t.Fatal(err)
		}
		if err := s.Validate(value); err != nil {
			t.Errorf("YAML: %v", err)
		}
	})
}

// A broken file fails the schema where it also fails Read.
func TestSchemaRefuses(t *testing.T) {
	s := compiled(t)
	j, err := mustNew(t, sample()).JSON()
	if err != nil {
		t.Fatal(err)
	}
	check := func(text string) error {
		doc, err := validate.UnmarshalJSON(strings.NewReader(text))
		if err != nil {
			t.Fatal(err)
		}
		return s.Validate(doc)
	}
	if err := check(string(j)); err != nil {
		t.Fatal(err)
	}
	for _, c := range [][2]string{
		{`"modulus": "shear",`, ``},
		{`"modulus": "shear"`, `"modulus": "shore"`},
		{`"modulus": "shear"`, `"modulus": "shear", "colour": "red"`},
		{`"phaselag_compound": 1`, `"phaselag_compound": 2`},
		{`"reference_temperature_C": 23`, `"reference_temperature_C": null`},
		{`"reference_temperature_C": 23`, `"reference_temperature_C": "23"`},
		{`"c1": 6.01`, `"c1": "6.01"`},
		{`"c1": 6.01`, `"c1": [6.01]`},
		{`"law": "WLF"`, `"law": "wlf"`},
		{`"relaxation_time_s": 1e-7`, `"relaxation_time_s": 0`},
		{`"modulus_MPa": 0.62`, `"modulus_MPa": -0.62`},
		{`"coverage": 0.95`, `"coverage": 95`},
		{`"points": 318`, `"points": 318.5`},
		{`"own_strain_amplitude_percent": 0.2,`, ``},
	} {
		if !strings.Contains(string(j), c[0]) {
			t.Fatalf("%s is not in the sample", c[0])
		}
		text := strings.Replace(string(j), c[0], c[1], 1)
		if check(text) == nil {
			t.Errorf("the schema takes %q", c[1])
		}
		if _, err := Read([]byte(text)); err == nil {
			t.Errorf("Read takes %q", c[1])
		}
	}
}
