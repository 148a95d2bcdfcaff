package cli

import (
	"bytes"
	"flag"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

var update = flag.Bool("update", false, "write the README's session and figure anew")

// TestReadme runs the README's session and compares what it prints, and the
// figure it shows. Look at the difference before accepting it with -update.
func TestReadme(t *testing.T) {
	root, err := filepath.Abs("../../..")
	if err != nil {
		t.Fatal(err)
	}
	readme := filepath.Join(root, "README.md")
	text, err := os.ReadFile(readme)
	if err != nil {
		t.Fatal(err)
	}
	dir := t.TempDir()
	if err := os.Symlink(filepath.Join(root, "data"), filepath.Join(dir, "data")); err != nil {
		t.Skipf("no symbolic links here: %v", err)
	}
	t.Chdir(dir)
	lines := strings.Split(string(text), "\n")
	var out []string
	commands := 0
	for i := 0; i < len(lines); i++ {
		out = append(out, lines[i])
		args, ok := strings.CutPrefix(lines[i], "    $ go run ./cmd/phaselag ")
		if !ok {
			continue
		}
		commands++
		var stdout, stderr bytes.Buffer
		if code := Main(strings.Fields(args), &stdout, &stderr); code != 0 {
			t.Fatalf("%s: exit code %d\n%s", args, code, stderr.String())
		}
		// The command's output follows at once, or is not shown at all.
		if i+1 >= len(lines) || !strings.HasPrefix(lines[i+1], "    ") {
			continue
		}
		for _, l := range strings.Split(strings.TrimRight(stdout.String(), "\n"), "\n") {
			if l != "" {
				l = "    " + l
			}
			out = append(out, strings.TrimRight(l, " "))
		}
		for i+1 < len(lines) && (strings.HasPrefix(lines[i+1], "    ") || lines[i+1] == "" && i+2 < len(lines) && strings.HasPrefix(lines[i+2], "    ") && !strings.HasPrefix(lines[i+2], "    $")) {
			i++
		}
	}
	if commands < 4 {
		t.Fatalf("the README has %d commands", commands)
	}
	figure, err := os.ReadFile("hm60/figures/master-curve.svg")
	if err != nil {
		t.Fatal(err)
	}
	shown := filepath.Join(root, "data", "demo", "master-curve.svg")
	want := strings.Join(out, "\n")
	if *update {
		if err := os.WriteFile(readme, []byte(want), 0o644); err != nil {
			t.Fatal(err)
		}
		if err := os.WriteFile(shown, figure, 0o644); err != nil {
			t.Fatal(err)
		}
		return
	}
	if want != string(text) {
		got := strings.Split(want, "\n")
		for i, l := range lines {
			if i >= len(got) || got[i] != l {
				t.Fatalf("the README's session is out of date from line %d on: %q; go test ./cmd/internal/cli -run TestReadme -update", i+1, l)
			}
		}
	}
	if old, _ := os.ReadFile(shown); !bytes.Equal(old, figure) {
		t.Error("the README's figure is out of date: go test ./cmd/internal/cli -run TestReadme -update")
	}
}
