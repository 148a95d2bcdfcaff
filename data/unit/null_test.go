package unit

import (
	"encoding/json"
	"math"
	"testing"

	"gopkg.in/yaml.v3"
)

type sheet struct {
	A    Number  `yaml:"a"`
	B    Number  `yaml:"b"`
	C    *Number `yaml:"c"`
	Name string  `yaml:"name"`
	Rows []struct {
		X Number `yaml:"x"`
	} `yaml:"rows"`
	Grid [][]Number `yaml:"grid"`
}

// The YAML library does not show nulls to UnmarshalYAML. If this test fails
// because A is NaN, the library has changed and NullsToNaN may go.
func TestYAMLNullIsZeroWithoutHelp(t *testing.T) {
	var s sheet
	if err := yaml.Unmarshal([]byte("a: null\n"), &s); err != nil {
		t.Fatal(err)
	}
	if s.A != 0 {
		t.Errorf("got %v", s.A)
	}
}

func TestNullsToNaN(t *testing.T) {
	var node yaml.Node
	text := "a: null\nname: null\nrows: [{x: ~}, {x: 2}, {}]\ngrid: [[1, null], [.nan]]\n"
	if err := yaml.Unmarshal([]byte(text), &node); err != nil {
		t.Fatal(err)
	}
	var s sheet
	NullsToNaN(&node, &s)
	if err := node.Decode(&s); err != nil {
		t.Fatal(err)
	}
	isNaN := func(n Number) bool { return math.IsNaN(float64(n)) }
	if !isNaN(s.A) || !isNaN(s.B) || s.C != nil || s.Name != "" {
		t.Errorf("got %+v", s)
	}
	if len(s.Rows) != 3 || !isNaN(s.Rows[0].X) || s.Rows[1].X != 2 || !isNaN(s.Rows[2].X) {
		t.Errorf("rows: %+v", s.Rows)
	}
	if s.Grid[0][0] != 1 || !isNaN(s.Grid[0][1]) || !isNaN(s.Grid[1][0]) {
		t.Errorf("grid: %+v", s.Grid)
	}
}

func TestNumberRoundTrip(t *testing.T) {
	in := []Number{1.0 / 3, NaN(), 1e-300, -0.1}
	y, err := yaml.Marshal(in)
	if err != nil {
		t.Fatal(err)
	}
	var node yaml.Node
	if err := yaml.Unmarshal(y, &node); err != nil {
		t.Fatal(err)
	}
	var fromYAML, fromJSON []Number
	NullsToNaN(&node, fromYAML)
	if err := node.Decode(&fromYAML); err != nil {
		t.Fatal(err)
	}
	j, err := json.Marshal(in)
	if err != nil {
		t.Fatal(err)
	}
	if err := json.Unmarshal(j, &fromJSON); err != nil {
		t.Fatal(err)
	}
	for i, x := range in {
		for _, y := range []Number{fromYAML[i], fromJSON[i]} {
			if math.Float64bits(float64(x)) != math.Float64bits(float64(y)) && !(math.IsNaN(float64(x)) && math.IsNaN(float64(y))) {
				t.Errorf("%v came back as %v", x, y)
			}
		}
	}
}
