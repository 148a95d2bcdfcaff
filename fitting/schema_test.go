package fitting

import (
	"bytes"
	"encoding/json"
	"flag"
	"os"
	"path"
	"reflect"
	"strings"
	"testing"

	generate "github.com/invopop/jsonschema"
	validate "github.com/santhosh-tekuri/jsonschema/v6"

	"phaselag/data"
	"phaselag/data/unit"
	"phaselag/models"
)

var update = flag.Bool("update", false, "rewrite the schema")

const schemaID = "urn:phaselag:result:1"

// schemaName tells apart types of the same name in different packages: those
// of the compound file have Compound before them.
func schemaName(t reflect.Type) string {
	if path.Base(t.PkgPath()) == "models" && t.Name() != "Compound" && t.Name() != "InputFile" {
		return "Compound" + t.Name()
	}
	return t.Name()
}

// narrower says more of a key than its Go type does.
var narrower = map[string]func(*generate.Schema){
	"Result.phaselag_result":     func(s *generate.Schema) { s.Minimum, s.Maximum = "1", "1" },
	"Compound.phaselag_compound": func(s *generate.Schema) { s.Minimum, s.Maximum = "1", "1" },
	"Finding.severity": func(s *generate.Schema) {
		s.Enum = []any{string(data.Note), string(data.Doubt), string(data.Severe)}
	},
	"Header.modulus": func(s *generate.Schema) { s.Enum = []any{string(data.Shear), string(data.Young)} },
}

// generatedSchema makes the schema from the fields of Result and their
// comments.
func generatedSchema(t *testing.T) []byte {
	t.Helper()
	r := generate.Reflector{
		Anonymous: true,
		Namer:     schemaName,
		Mapper: func(t reflect.Type) *generate.Schema {
			if t == reflect.TypeFor[unit.Number]() {
				return &generate.Schema{Extras: map[string]any{"type": []string{"number", "null"}}}
			}
			return nil
		},
	}
	for _, dir := range []string{".", "../models", "../data"} {
		if err := r.AddGoComments("phaselag/fitting", dir); err != nil {
			t.Fatal(err)
		}
	}
	s := r.Reflect(&Result{})
	s.ID, s.Title = schemaID, "Result of a characterization, version 1"
	refineSchema(t, s, reflect.TypeFor[Result]())
	b, err := json.MarshalIndent(s, "", " ")
	if err != nil {
		t.Fatal(err)
	}
	return append(b, '\n')
}

// refineSchema lets optional parts be null, which the generator does not say,
// and applies narrower, type by type.
func refineSchema(t *testing.T, s *generate.Schema, typ reflect.Type) {
	t.Helper()
	switch typ.Kind() {
	case reflect.Pointer, reflect.Slice, reflect.Array:
		refineSchema(t, s, typ.Elem())
		return
	case reflect.Struct:
	default:
		return
	}
	def := s.Definitions[schemaName(typ)]
	for i := range typ.NumField() {
		f := typ.Field(i)
		key, _, _ := strings.Cut(f.Tag.Get("json"), ",")
		if key == "" {
			continue
		}
		p, ok := def.Properties.Get(key)
		if !ok {
			t.Fatalf("the schema has no %s.%s", schemaName(typ), key)
		}
		if f.Type.Kind() == reflect.Pointer && len(p.AnyOf) == 0 {
			describe := p.Description
			p.Description = ""
			def.Properties.Set(key, &generate.Schema{Description: describe, AnyOf: []*generate.Schema{p, {Type: "null"}}})
		}
		if more := narrower[schemaName(typ)+"."+key]; more != nil {
			more(p)
		}
		refineSchema(t, s, f.Type)
	}
}

// The shipped schema is the one that belongs to the fields.
func TestSchemaIsOfTheFields(t *testing.T) {
	got := generatedSchema(t)
	if *update {
		if err := os.WriteFile("result.schema.json", got, 0o666); err != nil {
			t.Fatal(err)
		}
		return
	}
	if !bytes.Equal(Schema(), got) {
		t.Error("result.schema.json is not that of the fields of Result; run go test ./fitting -run Schema -update and look at the difference")
	}
}

// resultSchema is the shipped schema, ready to validate.
func resultSchema(t *testing.T) func([]byte) error {
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
	return func(b []byte) error {
		doc, err := validate.UnmarshalJSON(bytes.NewReader(b))
		if err != nil {
			return err
		}
		return s.Validate(doc)
	}
}

// A result with a compound and one without keep to the schema, and reading
// them back gives the same bytes; broken ones fail both.
func TestResultsKeepToSchema(t *testing.T) {
	if *update {
		t.Skip("the schema is being rewritten")
	}
	check := resultSchema(t)
	c, err := data.Open("../data/demo/campaign.yaml")
	if err != nil {
		t.Fatal(err)
	}
	full, err := Characterize(c, nil)
	if err != nil {
		t.Fatal(err)
	}
	if full.Compound == nil {
		t.Fatal("the demo campaign gives no compound")
	}
	bare := &Result{Format: FormatVersion, Campaign: Header{Modulus: string(data.Shear)}}
	bare.noNil()
	for name, r := range map[string]*Result{"full": full, "bare": bare} {
		b, err := r.JSON()
		if err != nil {
			t.Fatal(err)
		}
		if err := check(b); err != nil {
			t.Errorf("%s: %v", name, err)
		}
		back, err := ReadResult(b)
		if err != nil {
			t.Fatalf("%s: %v", name, err)
		}
		again, err := back.JSON()
		if err != nil || !bytes.Equal(again, b) {
			t.Errorf("%s: read back it is another text (%v)", name, err)
		}
	}

	b, err := full.JSON()
	if err != nil {
		t.Fatal(err)
	}
	for _, c := range [][2]string{
		{`"phaselag_result": 1`, `"phaselag_result": 2`},
		{`"phaselag_result": 1`, `"phaselag_result": 1, "colour": "red"`},
		{`"modulus": "shear"`, `"modulus": 7`},
		{`"reference_temperature_C": `, `"reference_temperature_K": `},
		{`"coverage": 0.95`, `"coverage": "0.95"`},
	} {
		if !bytes.Contains(b, []byte(c[0])) {
			t.Fatalf("%s is not in the result", c[0])
		}
		text := bytes.Replace(b, []byte(c[0]), []byte(c[1]), 1)
		if check(text) == nil {
			t.Errorf("the schema takes %s", c[1])
		}
		if _, err := ReadResult(text); err == nil {
			t.Errorf("ReadResult takes %s", c[1])
		}
	}

	// What a program reads from the result's compound is the compound file.
	j, err := full.Compound.JSON()
	if err != nil {
		t.Fatal(err)
	}
	if _, err := models.Read(j); err != nil {
		t.Errorf("the result's compound as a file: %v", err)
	}
}
