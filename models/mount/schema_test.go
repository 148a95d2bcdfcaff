package mount

import (
	"bytes"
	"encoding/json"
	"flag"
	"math/rand/v2"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"

	validate "github.com/santhosh-tekuri/jsonschema/v6"
	"gopkg.in/yaml.v3"

	"phaselag/data/place"
)

var update = flag.Bool("update", false, "write golden files")

const schemaID = "urn:phaselag:mount:1"

type object = map[string]any

func ref(name string) object { return object{"$ref": "#/$defs/" + name} }

func describe(o object, text string) object {
	o["description"] = text
	return o
}

// quantity is a number with its unit, or 0.
func quantity(text, example string) object {
	return object{"$ref": "#/$defs/quantity", "description": text, "examples": []string{example}}
}

// keys is an object with these keys and no others.
func keys(text string, required []string, properties object) object {
	o := object{"type": "object", "description": text, "properties": properties, "additionalProperties": false}
	if len(required) > 0 {
		o["required"] = required
	}
	return o
}

// oneOfKeys asks for exactly one of several sets of keys, and at most one of each pair in exclusive.
func oneOfKeys(o object, sets [][]string, exclusive ...[]string) object {
	if len(sets) > 0 {
		var list []object
		for _, s := range sets {
			list = append(list, object{"required": s})
		}
		o["oneOf"] = list
	}
	var not []object
	for _, e := range exclusive {
		not = append(not, object{"required": e})
	}
	if len(not) > 0 {
		o["not"] = object{"anyOf": not}
	}
	return o
}

// merged is several sets of keys in one.
func merged(all ...object) object {
	out := object{}
	for _, o := range all {
		for k, v := range o {
			out[k] = v
		}
	}
	return out
}

// generated makes the schema.
func generated(t *testing.T) []byte {
	t.Helper()
	shape := func(name, text string) object { return object{"shape": object{"const": name, "description": text}} }
	resistance := object{"thermal_resistance": quantity("thermal resistance of the rubber of one mount to its surroundings", "2 K/W")}
	rubber := object{
		"factor":                  describe(ref("positive"), "k of E_c = E0(1+2kS²): 1 for unfilled rubber, less for filled"),
		"compression_coefficient": describe(ref("positive"), "the same as factor"),
		"factor_from_hardness":    quantity("k from the handbook table that hardness_table names", "60 IRHD"),
		"bulk_modulus":            quantity("B of 1/E_c' = 1/E_c + 1/B", "1150 MPa"),
		"bulk_from_hardness":      quantity("B from the handbook table that hardness_table names", "60 IRHD"),
		"hardness_table":          describe(ref("table"), "the table by name"),
	}
	exclusive := [][]string{
		{"factor", "compression_coefficient"}, {"factor", "factor_from_hardness"}, {"compression_coefficient", "factor_from_hardness"}, {"bulk_modulus", "bulk_from_hardness"},
	}
	layer := object{"thickness": quantity("of one layer, unloaded", "12 mm")}
	section := object{
		"diameter": quantity("of a round pad", "50 mm"),
		"length":   quantity("side along the shear; the long side of a strip", "40 mm"),
		"width":    quantity("the other side", "30 mm"),
	}
	round, oblong := []string{"diameter"}, []string{"length", "width"}
	area := object{"area": quantity("of one layer", "1200 mm2")}
	tube := object{
		"inner_diameter": quantity("the rubber's inner diameter", "20 mm"),
		"outer_diameter": quantity("the rubber's outer diameter", "40 mm"),
		"length":         quantity("the rubber's length along the axis", "40 mm"),
	}
	ring := object{"inner_diameter": tube["inner_diameter"], "outer_diameter": tube["outer_diameter"], "thickness": quantity("the ring's height, unloaded", "15 mm")}
	tubeKeys := []string{"shape", "inner_diameter", "outer_diameter", "length"}
	shear := keys("a pad moved along its faces", []string{"shape", "thickness"}, merged(shape("shear pad", "simple shear"), area, layer, section, rubber, resistance,
		object{"bending": object{"type": "boolean", "description": "take the bending of a thick pad off; not with area"}}))
	pressed := keys("a pad moved along its normal", []string{"shape", "thickness"}, merged(shape("compression pad", "bonded compression"), layer, section, rubber, resistance))
	strip := keys("a long strip moved along its normal", []string{"shape", "thickness", "length", "width"}, merged(shape("compression strip", "bonded compression"), layer, object{"length": section["length"], "width": section["width"]}, rubber, resistance))
	rings := keys("a ring moved along its axis", []string{"shape", "thickness", "inner_diameter", "outer_diameter"}, merged(shape("compression ring", "bonded compression"), ring, rubber, resistance))
	bush := keys("a bush, moved in its direction or else that of the mount", tubeKeys, merged(shape("bush", "a tube between sleeves"), tube, resistance,
		object{"direction": object{"enum": ways, "description": "how it is moved"}}))
	axial := keys("a bush moved along its axis", tubeKeys, merged(shape("axial bush", "a tube between sleeves"), tube, resistance))
	disc := oneOfKeys(keys("a disc or ring twisted about its normal", []string{"shape", "thickness"}, merged(shape("torsion disc", "simple torsion"), layer, resistance,
		object{"diameter": section["diameter"], "inner_diameter": tube["inner_diameter"], "outer_diameter": tube["outer_diameter"]})),
		[][]string{round, {"inner_diameter", "outer_diameter"}}, []string{"diameter", "inner_diameter"}, []string{"diameter", "outer_diameter"})
	measured := keys("a part whose stiffness was measured at one condition", []string{"measured", "strain_per_displacement"}, merged(resistance, object{
		"measured": oneOfKeys(keys("the measurement", []string{"stiffness", "frequency", "temperature", "amplitude"}, object{
			"stiffness":   quantity("its magnitude or storage part", "420 N/mm"),
			"part":        object{"enum": []string{"magnitude", "storage"}, "description": "which of the two the stiffness is; magnitude if left out"},
			"loss_factor": describe(ref("positive"), "K''/K'; the compound's if left out"),
			"loss_angle":  quantity("in place of loss_factor", "7 deg"),
			"frequency":   quantity("of the measurement", "15 Hz"),
			"temperature": quantity("of the measurement", "23 °C"),
			"amplitude":   quantity("of displacement, zero to peak", "0.5 mm"),
			"static_load": quantity("of the measurement", "600 N"),
			"u":           quantity("relative standard uncertainty of the stiffness", "3 %"),
		}), nil, []string{"loss_factor", "loss_angle"}),
		"strain_per_displacement": quantity("shear strain for a displacement", "4 %/mm"),
	}))
	names := describe(object{"type": "string"}, "an element's name")
	root := keys("A rubber mount: elements, how they are joined, and what they carry. Every quantity has its unit; amplitudes are zero to peak.", []string{"elements"}, merged(resistance, object{
		"mount":       describe(object{"type": "string"}, "its name"),
		"elements":    object{"type": "object", "description": "by name", "minProperties": 1, "additionalProperties": ref("element")},
		"arrangement": ref("arrangement"),
		"count":       object{"type": "integer", "minimum": 1, "maximum": 1000000, "description": "mounts that carry the load side by side"},
		"direction":   describe(object{"type": "string"}, "vertical or horizontal for inclined pairs; axial, torsional, radial or conical for bushes; any word otherwise"),
		"load": oneOfKeys(keys("what stands on all mounts together", nil, object{
			"mass":                         quantity("it swings, and its weight is the static load", "200 kg"),
			"static_force":                 quantity("static load in place of the weight", "2 kN"),
			"static_modulus":               quantity("shear modulus against the static load", "0.9 MPa"),
			"static_modulus_from_hardness": quantity("the same from the table that hardness_table names", "60 IRHD"),
			"hardness_table":               describe(ref("table"), "the table by name"),
		}), nil, []string{"static_modulus", "static_modulus_from_hardness"}),
		"excitation": merged(keys("what is held, zero to peak", nil, object{
			"displacement": quantity("across the mounts", "0.3 mm"), "force": quantity("on all mounts together", "50 N"),
			"angle": quantity("of a mount that is turned or tilted", "0.5 deg"), "torque": quantity("of a mount that is turned or tilted", "5 N·m"),
		}), object{"maxProperties": 1}),
		"part_factor": object{"description": "what multiplies the stiffness of a part beyond the specimens", "oneOf": []object{
			ref("positive"), keys("the factor with its uncertainty", []string{"value"}, object{"value": ref("positive"), "u": quantity("relative standard uncertainty", "3 %")}),
		}},
		"tolerance": keys("spread of production, to either side", nil, object{"hardness": quantity("of the hardness", "5 IRHD")}),
	}))
	root["$schema"], root["$id"], root["title"] = "https://json-schema.org/draft/2020-12/schema", schemaID, "Mount file, version 1"
	root["$defs"] = object{
		"quantity": object{"description": "a number with its unit, or 0", "oneOf": []object{
			{"type": "string", "pattern": `^\s*[-+−]?([0-9]+\.?[0-9]*|\.[0-9]+)([eE][-+−]?[0-9]+)?(\s*\S.*)?$`}, {"const": 0},
		}},
		"positive": object{"type": "number", "exclusiveMinimum": 0},
		"table":    object{"enum": []Table{Lindley, Gent}},
		"element": object{"description": "a shape or a measured part", "oneOf": []object{
			oneOfKeys(shear, [][]string{{"area"}, round, oblong}, exclusive...), oneOfKeys(pressed, [][]string{round, oblong}, exclusive...),
			oneOfKeys(strip, nil, exclusive...), oneOfKeys(rings, nil, exclusive...), bush, axial, disc, measured,
		}},
		"arrangement": object{"description": "how elements are joined; may be left out where there is one", "oneOf": []object{
			names,
			keys("side by side", []string{"parallel"}, object{"parallel": object{"type": "array", "minItems": 1, "items": ref("arrangement")}}),
			keys("in a row", []string{"series"}, object{"series": object{"type": "array", "minItems": 1, "items": ref("arrangement")}}),
			keys("two pads that lean against each other", []string{"inclined_pair", "angle"}, object{"inclined_pair": names, "angle": quantity("between the pads' normal and the vertical", "30 deg")}),
		}},
	}
	b, err := json.MarshalIndent(root, "", "  ")
	if err != nil {
		t.Fatal(err)
	}
	return append(b, '\n')
}

// The shipped schema is the one above.
func TestSchemaIsOfTheKeys(t *testing.T) {
	want := generated(t)
	if *update {
		if err := os.WriteFile("mount.schema.json", want, 0o666); err != nil {
			t.Fatal(err)
		}
	}
	got, err := os.ReadFile("mount.schema.json")
	if err != nil {
		t.Fatal(err)
	}
	if !bytes.Equal(got, want) {
		t.Error("mount.schema.json is not what is written now; run go test -update and look at the difference")
	}
	if !*update && !bytes.Equal(Schema(), want) {
		t.Error("Schema gives another text")
	}
	s := Schema()
	s[0] = 'x'
	if Schema()[0] == 'x' {
		t.Error("Schema hands out its own bytes")
	}
}

// Read names the keys it knows when it meets one it does not; they are the schema's.
func TestSchemaHasTheReadersKeys(t *testing.T) {
	var doc object
	if err := json.Unmarshal(Schema(), &doc); err != nil {
		t.Fatal(err)
	}
	properties := func(o any) (list []string) {
		for k := range o.(object)["properties"].(object) {
			list = append(list, k)
		}
		return list
	}
	known := func(text string) []string {
		_, err := read(t, text)
		for _, e := range place.All(err) {
			if list, ok := strings.CutPrefix(place.Hint(e), "known keys: "); ok {
				return strings.Split(list, ", ")
			}
		}
		t.Fatalf("%s: %v", text, err)
		return nil
	}
	defs := doc["$defs"].(object)
	variants := defs["element"].(object)["oneOf"].([]any)
	var shapes, forms []string
	for _, v := range variants[:len(variants)-1] {
		shapes = append(shapes, properties(v)...)
	}
	for _, v := range defs["arrangement"].(object)["oneOf"].([]any)[1:] {
		forms = append(forms, properties(v)...)
	}
	part := variants[len(variants)-1]
	inside := func(o any, key string) any { return o.(object)["properties"].(object)[key] }
	for _, c := range []struct {
		name string
		got  []string
		text string
		but  []string // keys by which the reader tells what it reads
	}{
		{"file", properties(doc), "qqqqqqqqqqqqq: 1\n", nil},
		{"element", shapes, "elements: {a: {qqqqqqqqqqqqq: 1}}\n", []string{"measured", "strain_per_displacement"}},
		{"measured element", properties(part), "elements: {a: {measured: {}, qqqqqqqqqqqqq: 1}}\n", nil},
		{"measurement", properties(inside(part, "measured")), "elements: {a: {measured: {qqqqqqqqqqqqq: 1}, strain_per_displacement: 1 %/mm}}\n", nil},
		{"arrangement", forms, "elements: {a: {shape: shear pad, area: 1 mm2, thickness: 1 mm}}\narrangement: {qqqqqqqqqqqqq: 1}\n", nil},
		{"load", properties(inside(doc, "load")), "elements: {a: {shape: shear pad, area: 1 mm2, thickness: 1 mm}}\nload: {qqqqqqqqqqqqq: 1}\n", nil},
		{"excitation", properties(inside(doc, "excitation")), "elements: {a: {shape: shear pad, area: 1 mm2, thickness: 1 mm}}\nexcitation: {qqqqqqqqqqqqq: 1}\n", nil},
		{"tolerance", properties(inside(doc, "tolerance")), "elements: {a: {shape: shear pad, area: 1 mm2, thickness: 1 mm}}\ntolerance: {qqqqqqqqqqqqq: 1}\n", nil},
	} {
		want := known(c.text)
		want = slices.DeleteFunc(want, func(k string) bool { return slices.Contains(c.but, k) })
		slices.Sort(want)
		slices.Sort(c.got)
		if got := slices.Compact(c.got); !slices.Equal(got, want) {
			t.Errorf("%s: schema %v, reader %v", c.name, got, want)
		}
	}
}

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

// Every file that Read takes keeps to the schema: the demonstrations', and a thousand drawn ones.
func TestSoundFilesKeepToSchema(t *testing.T) {
	s := compiled(t)
	check := func(name, text string) {
		t.Helper()
		var value any
		if err := yaml.Unmarshal([]byte(text), &value); err != nil {
			t.Fatal(err)
		}
		if err := s.Validate(value); err != nil {
			t.Errorf("%s: %v\n%s", name, err, text)
		}
	}
	check("whole", whole)
	files, err := filepath.Glob("../../data/demo/*.yaml")
	if err != nil {
		t.Fatal(err)
	}
	demos := 0
	for _, f := range files {
		if _, err := Open(f); err != nil {
			continue // a campaign
		}
		text, err := os.ReadFile(f)
		if err != nil {
			t.Fatal(err)
		}
		check(f, string(text))
		demos++
	}
	if demos < 4 {
		t.Errorf("%d demonstrations", demos)
	}
	d := &sketch{Rand: rand.New(rand.NewPCG(20261201, 2))}
	for range 1000 {
		text := d.file()
		if _, err := read(t, text); err == nil && !t.Failed() {
			check("drawn", text)
		}
	}
}

// A broken file fails the schema where it also fails Read.
func TestSchemaRefuses(t *testing.T) {
	s := compiled(t)
	const pad = "elements: {a: {shape: shear pad, area: 12 mm2, thickness: 1 mm}}\n"
	const pressed = "elements: {a: {shape: compression pad, diameter: 12 mm, thickness: 1 mm, factor: 0.6"
	for _, text := range []string{
		"mount: x\n", "elements: {}\n", "elements: [1]\n", "elements: {a: thick}\n", pad + "colour: red\n", pad + "count: 2.5\n", pad + "count: 0\n",
		"elements: {a: {shape: cone, area: 12 mm2, thickness: 1 mm}}\n", "elements: {a: {shape: shear pad, area: 12, thickness: thick}}\n",
		"elements: {a: {shape: shear pad, thickness: 1 mm}}\n", "elements: {a: {shape: shear pad, area: 12 mm2}}\n",
		"elements: {a: {shape: shear pad, area: 12 mm2, diameter: 2 mm, thickness: 1 mm}}\n", "elements: {a: {shape: shear pad, length: 2 mm, thickness: 1 mm}}\n",
		pressed + ", compression_coefficient: 0.6}}\n", pressed + ", factor_from_hardness: 60 IRHD}}\n", pressed + ", bulk_modulus: 1 GPa, bulk_from_hardness: 60 IRHD}}\n", pressed + ", hardness_table: mine}}\n",
		"elements: {a: {shape: bush, inner_diameter: 1 mm, outer_diameter: 2 mm, length: 5 mm, direction: sideways}}\n",
		"elements: {a: {shape: axial bush, inner_diameter: 1 mm, outer_diameter: 2 mm, length: 5 mm, area: 5 mm2}}\n",
		"elements: {a: {measured: {}, strain_per_displacement: 1 %/mm}}\n",
		pad + "arrangement: {series: []}\n", pad + "arrangement: {angle: 3 deg}\n", pad + "arrangement: {series: [a], parallel: [a]}\n",
		pad + "excitation: {force: 1 N, displacement: 1 mm}\n", pad + "load: {mass: 1 kg, static_modulus: 1 MPa, static_modulus_from_hardness: 60 IRHD, hardness_table: Gent}\n",
		pad + "part_factor: {u: 3 %}\n", pad + "part_factor: -1\n",
	} {
		if _, err := read(t, text); err == nil {
			t.Errorf("Read takes %s", text)
		}
		var value any
		if err := yaml.Unmarshal([]byte(text), &value); err != nil {
			t.Fatal(err)
		}
		if s.Validate(value) == nil {
			t.Errorf("the schema takes %s", text)
		}
	}
}
