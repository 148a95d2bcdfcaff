package cli

import (
	"bytes"
	"context"
	"fmt"
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"phaselag/data/register"
)

// A shift of the process after the base is called out by the chart of individuals and by
// the EWMA, the capability is given with its interval, and the picture is written.
func TestTrend(t *testing.T) {
	dir := t.TempDir()
	where := filepath.Join(dir, "shop.register")
	r, err := register.Open(where)
	if err != nil {
		t.Fatal(err)
	}
	for i := range 30 {
		x := 2 + 0.02*math.Sin(7*float64(i))
		if i >= 25 {
			x += 0.12
		}
		_, err := r.Add(context.Background(), &register.Entry{
			Batch: fmt.Sprintf("B-%02d", i+1), Compound: "HM-60", Tested: fmt.Sprintf("2026-01-%02d", i+1), Added: "2026-02-01T00:00:00Z", Who: "A. Bench", File: []byte("x"),
			Values: []register.Value{{Name: "storage modulus", Condition: "10 Hz, 23 °C", Value: x, U95: 0.01, Unit: "MPa"}},
		})
		if err != nil {
			t.Fatal(err)
		}
	}
	if err := r.Close(); err != nil {
		t.Fatal(err)
	}
	run := func(args ...string) (string, string, int) {
		var out, errs bytes.Buffer
		code := Main(append([]string{"batch", "trend", "--register", where}, args...), &out, &errs)
		return out.String(), errs.String(), code
	}
	at := []string{"--property", "storage modulus", "--at", "10 Hz, 23 °C"}
	picture := filepath.Join(dir, "trend.svg")
	out, errs, code := run(append(at, "--base", "25", "--upper", "2.2MPa", "--lower", "1.85 MPa", "--picture", picture)...)
	if code != exitNo || strings.Count(out, "beyond a limit") < 5 || !strings.Contains(out, "Cpk") {
		t.Errorf("code %d\n%s\n%s", code, out, errs)
	}
	if svg, err := os.ReadFile(picture); err != nil || !bytes.Contains(svg, []byte("<svg")) {
		t.Error("no picture", err)
	}
	if out, _, code := run(append(at, "--base", "25", "--chart", "ewma", "--format", "csv")...); code != exitNo || !strings.Contains(out, "B-27") {
		t.Errorf("EWMA: code %d\n%s", code, out)
	}
	if out, _, code := run("--list"); code != exitDone || !strings.Contains(out, "10 Hz, 23 °C") {
		t.Errorf("list: %d\n%s", code, out)
	}
	if out, errs, code := run("--all", dir, "--base", "25"); code != exitNo || !strings.Contains(out, "001.svg: storage modulus at 10 Hz, 23 °C, 30 batches, ") {
		t.Errorf("all: code %d\n%s\n%s", code, out, errs)
	}
	for _, v := range []struct {
		args []string
		want string
	}{
		{[]string{}, "--property is missing"},
		{[]string{"--property", "colour"}, "colour"},
		{append(at, "--upper", "2 K"), "--upper"},
		{append(at, "--base", "1"), "no chart"},
	} {
		if _, errs, code := run(v.args...); code != exitUsage || !strings.Contains(errs, v.want) {
			t.Errorf("%q: code %d, %s", v.args, code, errs)
		}
	}
}
