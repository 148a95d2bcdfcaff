package figure_test

import (
	"flag"
	"os"
	"path/filepath"
	"testing"

	"phaselag/reports/figure"
	"phaselag/reports/figure/figuretest"
)

var samples = flag.String("samples", "", "write the sample figures to this folder, to be looked at")

// TestSamples writes every sample figure as a file.
func TestSamples(t *testing.T) {
	dir := *samples
	if dir == "" {
		dir = t.TempDir()
	}
	for _, s := range figuretest.All() {
		b, err := figure.SVG(s.Figure)
		if err != nil {
			t.Fatal(err)
		}
		if err := os.WriteFile(filepath.Join(dir, s.Name+".svg"), b, 0o644); err != nil {
			t.Fatal(err)
		}
	}
}
