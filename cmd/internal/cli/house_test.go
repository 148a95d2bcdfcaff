package cli

import (
	"encoding/json"
	"io"
	"os/exec"
	"strings"
	"testing"
)

// TestHouse holds the arrows of the house: who may import whom.
func TestHouse(t *testing.T) {
	type pkg struct {
		ImportPath string
		Imports    []string
	}
	out, err := exec.Command("go", "list", "-json=ImportPath,Imports", "phaselag/...").Output()
	if err != nil {
		t.Fatalf("go list: %v", err)
	}
	dec := json.NewDecoder(strings.NewReader(string(out)))
	n := 0
	for {
		var p pkg
		if err := dec.Decode(&p); err == io.EOF {
			break
		} else if err != nil {
			t.Fatal(err)
		}
		n++
		for _, imp := range p.Imports {
			if why := wrongArrow(p.ImportPath, imp); why != "" {
				t.Errorf("%s imports %s: %s", p.ImportPath, imp, why)
			}
		}
	}
	if n < 10 {
		t.Fatalf("go list named %d packages", n)
	}
}

// room is the top-level folder of a package of this module, "" for others.
func room(path string) string {
	rest, ok := strings.CutPrefix(path, "phaselag/")
	if !ok {
		return ""
	}
	top, _, _ := strings.Cut(rest, "/")
	return top
}

func wrongArrow(from, to string) string {
	leaf := to == "phaselag/data/unit" || to == "phaselag/data/place"
	allowed := map[string]string{
		"data": "data", "models": "models", "fitting": "fitting data models", "reports": "reports fitting data models", "cmd": "cmd reports fitting data models",
	}
	if top := room(to); top != "" {
		switch {
		case from == "phaselag/data/place" || from == "phaselag/data/unit" && to != "phaselag/data/place":
			return "the leaves import nothing of the project, but units may have errors with places"
		case to == "phaselag/data/demo" && from != "phaselag/data/demo" && room(from) != "cmd":
			return "only tests and cmd import the simulator"
		case from == "phaselag/data/demo" && !leaf:
			return "the simulator imports leaves only"
		case leaf:
			return ""
		case !strings.Contains(" "+allowed[room(from)]+" ", " "+top+" "):
			return "arrows point from cmd to reports to fitting to data and models"
		}
		return ""
	}
	for _, rule := range []struct{ prefix, where string }{
		{"github.com/spf13/cobra", "cmd"},
		{"gonum.org/v1/plot", "reports"}, {"codeberg.org/go-pdf", "reports"}, {"codeberg.org/go-fonts", "reports"},
		{"gonum.org/v1/gonum/optimize", "fitting"},
		{"github.com/xuri", "data"}, {"modernc.org", "data"}, {"github.com/jackc", "data"},
	} {
		if strings.HasPrefix(to, rule.prefix) && room(from) != rule.where {
			return "only " + rule.where + " may"
		}
	}
	return ""
}

// TestWrongArrows shows that the rules would see a wrong arrow.
func TestWrongArrows(t *testing.T) {
	for _, c := range [][2]string{
		{"phaselag/models", "phaselag/data"}, {"phaselag/data", "phaselag/models"}, {"phaselag/fitting", "phaselag/reports"},
		{"phaselag/data/place", "phaselag/data/unit"}, {"phaselag/data/unit", "phaselag/data"}, {"phaselag/fitting", "github.com/spf13/cobra"}, {"phaselag/models", "gonum.org/v1/gonum/optimize"},
		{"phaselag/reports", "phaselag/cmd/internal/cli"}, {"phaselag/fitting", "phaselag/data/demo"},
	} {
		if wrongArrow(c[0], c[1]) == "" {
			t.Errorf("%s may import %s", c[0], c[1])
		}
	}
	for _, c := range [][2]string{{"phaselag/models/mount", "phaselag/data/unit"}, {"phaselag/fitting", "phaselag/models"}, {"phaselag/cmd/internal/cli", "phaselag/reports"}} {
		if why := wrongArrow(c[0], c[1]); why != "" {
			t.Errorf("%s may not import %s: %s", c[0], c[1], why)
		}
	}
}
