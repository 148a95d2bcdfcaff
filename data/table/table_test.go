package table

import (
	"os"
	"testing"
)

func TestReference(t *testing.T) {
	for _, f := range []string{"binder-sweeps/frequency-sweeps.csv", "foam-temperature-steps/temperature-steps.csv"} {
		b, err := os.ReadFile("../../../shared/data/" + f)
		if err != nil {
			t.Skip("reference data is absent")
		}
		tab, err := Read(f, b, Settings{})
		if err != nil {
			t.Error(err)
			continue
		}
		for _, c := range tab.Columns {
			t.Logf("%q %s %s %s %v", c.Heading, c.Concept, c.UnitText, c.Unit.Symbol, c.HasUnit)
		}
		t.Log(len(tab.Rows), tab.Separator, tab.Decimal, tab.Encoding)
	}
}
