package lsq

import (
	"bufio"
	"errors"
	"fmt"
	"io/fs"
	"math"
	"os"
	"path/filepath"
	"slices"
	"strconv"
	"strings"
	"testing"
)

// Origin of the reference values: NIST/ITL Statistical Reference Datasets,
// Nonlinear Regression. Parameters and standard deviations are certified to 11
// digits. The usual score is the logarithmic relative error, −log10 of the
// relative deviation: the number of right digits.

const nistDir = "../../../shared/data/nist-strd"

type nistProblem struct {
	name                      string
	y                         []float64
	x                         [][]float64
	start                     [2][]float64
	certified, sd             []float64
	rss, residualSD           float64
	degreesOfFreedom, obs     int
	model                     nistModel
	lower, upper              []float64
	residualCalls, tangentRun int
}

func readNIST(t testing.TB) []*nistProblem {
	t.Helper()
	files, _ := filepath.Glob(filepath.Join(nistDir, "*.dat"))
	if _, err := os.Stat(nistDir); errors.Is(err, fs.ErrNotExist) {
		t.Skip("reference data of NIST not there: ", nistDir)
	}
	slices.Sort(files)
	var all []*nistProblem
	for _, f := range files {
		p, err := readNISTFile(f)
		if err != nil {
			t.Fatal(err)
		}
		all = append(all, p)
	}
	if len(all) != 27 {
		t.Fatalf("%d problems, want 27", len(all))
	}
	return all
}

// readNISTFile reads certified values from line 41 on and data from line 61 on.
func readNISTFile(name string) (*nistProblem, error) {
	file, err := os.Open(name)
	if err != nil {
		return nil, err
	}
	defer file.Close()
	p := &nistProblem{name: strings.TrimSuffix(filepath.Base(name), ".dat")}
	p.model = nistModels[p.name]
	if p.model == nil {
		return nil, fmt.Errorf("%s: no model", name)
	}
	scan := bufio.NewScanner(file)
	for line := 1; scan.Scan(); line++ {
		text := scan.Text()
		last := func() float64 {
			f := strings.Fields(text)
			v, e := strconv.ParseFloat(f[len(f)-1], 64)
			if e != nil {
				err = fmt.Errorf("%s:%d: %w", name, line, e)
			}
			return v
		}
		left, right, found := strings.Cut(text, "=")
		switch {
		case line < 41:
		case line < 61 && found && strings.HasPrefix(strings.TrimSpace(left), "b"):
			v, e := floatFields(right)
			if e != nil || len(v) != 4 {
				return nil, fmt.Errorf("%s:%d: want four numbers: %w", name, line, e)
			}
			p.start[0] = append(p.start[0], v[0])
			p.start[1] = append(p.start[1], v[1])
			p.certified = append(p.certified, v[2])
			p.sd = append(p.sd, v[3])
		case line < 61 && strings.HasPrefix(text, "Residual Sum"):
			p.rss = last()
		case line < 61 && strings.HasPrefix(text, "Residual Standard"):
			p.residualSD = last()
		case line < 61 && strings.HasPrefix(text, "Degrees"):
			p.degreesOfFreedom = int(last())
		case line < 61 && strings.HasPrefix(text, "Number of"):
			p.obs = int(last())
		case line > 60 && strings.TrimSpace(text) != "":
			v, e := floatFields(text)
			if e != nil || len(v) < 2 {
				return nil, fmt.Errorf("%s:%d: want y and x: %w", name, line, e)
			}
			if p.name == "Nelson" {
				v[0] = math.Log(v[0])
			}
			p.y = append(p.y, v[0])
			p.x = append(p.x, v[1:])
		}
		if err != nil {
			return nil, err
		}
	}
	if len(p.y) != p.obs {
		return nil, fmt.Errorf("%s: %d rows, want %d", name, len(p.y), p.obs)
	}
	return p, scan.Err()
}

func floatFields(s string) ([]float64, error) {
	var v []float64
	for _, f := range strings.Fields(s) {
		x, err := strconv.ParseFloat(f, 64)
		if err != nil {
			return nil, err
		}
		v = append(v, x)
	}
	return v, nil
}

func (p *nistProblem) problem() Problem {
	m, n := len(p.y), len(p.certified)
	d := make([]float64, n)
	return Problem{
		M: m, N: n, Lower: p.lower, Upper: p.upper,
		Residual: func(r, b []float64) error {
			p.residualCalls++
			for i, x := range p.x {
				r[i] = p.model(d, b, x) - p.y[i]
			}
			return nil
		},
		Jacobian: func(j, b []float64) error {
			p.tangentRun++
			for i, x := range p.x {
				p.model(d, b, x)
				for k, v := range d {
					j[i+k*m] = v
				}
			}
			return nil
		},
	}
}

func digits(got, want float64) float64 {
	if got == want {
		return 11
	}
	return math.Min(11, -math.Log10(math.Abs(got-want)/math.Abs(want)))
}

// All 27 problems from both starts with the settings that the zero value stands
// for: at least 6 right digits in every parameter and 4 in every standard error.
func TestNIST(t *testing.T) {
	t.Parallel()
	var table strings.Builder
	fmt.Fprintf(&table, "%-9s %s %10s %9s %6s %6s %7s  %s\n", "problem", "start", "parameters", "std.error", "rss", "evals", "jacob.", "status")
	solved, evaluations := 0, 0
	for _, p := range readNIST(t) {
		for k, start := range p.start {
			p.residualCalls, p.tangentRun = 0, 0
			res, err := Solve(p.problem(), start, nil)
			if err != nil {
				t.Errorf("%s, start %d: %v", p.name, k+1, err)
				continue
			}
			par, dev := 11.0, 11.0
			se, err := res.StandardErrors()
			if err != nil {
				t.Errorf("%s, start %d: %v", p.name, k+1, err)
				dev = math.Inf(-1)
			}
			for i := range res.X {
				par = math.Min(par, digits(res.X[i], p.certified[i]))
				if err == nil {
					dev = math.Min(dev, digits(se[i], p.sd[i]))
				}
			}
			rss := digits(res.Norm*res.Norm, p.rss)
			fmt.Fprintf(&table, "%-9s %5d %10.1f %9.1f %6.1f %6d %7d  %v, gradient %.0e, condition %.0e\n", p.name, k+1, par, dev, rss, res.Evaluations, res.JacobianEvaluations, res.Status, res.Gradient, res.Condition)
			// The certified residuals of Lanczos1 are those of 11 printed digits,
			// 1e-13 of the data: its sum of squares and with it the standard errors
			// are rounding of the certified solution.
			exact := p.name == "Lanczos1"
			ok := par >= 6 && (dev >= 4 || exact) && (rss >= 6 || exact)
			if ok {
				solved++
			} else {
				t.Errorf("%s, start %d: %.1f digits in parameters, %.1f in standard errors, %.1f in the sum of squares: %v\n%v", p.name, k+1, par, dev, rss, res.Status, res.X)
			}
			if !res.Usable() {
				t.Errorf("%s, start %d: not usable: %v", p.name, k+1, res.Status)
			}
			if res.Evaluations != p.residualCalls || res.JacobianEvaluations != p.tangentRun {
				t.Errorf("%s, start %d: counts %d and %d, true %d and %d", p.name, k+1, res.Evaluations, res.JacobianEvaluations, p.residualCalls, p.tangentRun)
			}
			if want := p.obs - len(p.certified); res.DegreesOfFreedom() != want {
				t.Errorf("%s: %d degrees of freedom, want %d", p.name, res.DegreesOfFreedom(), want)
			}
			evaluations += res.Evaluations
		}
	}
	t.Logf("%d of 54 solved, %d evaluations\n%s", solved, evaluations, table.String())
}

// The derivatives of the 27 models against central differences, at the certified
// point and at the starts. Differences with the best step are good to ε^(2/3) of
// the size of the model's terms.
func TestNISTJacobians(t *testing.T) {
	t.Parallel()
	for _, p := range readNIST(t) {
		for _, b := range [][]float64{p.certified, p.start[0], p.start[1]} {
			d, err := CheckJacobian(p.problem(), b)
			if err != nil {
				t.Fatalf("%s: %v", p.name, err)
			}
			if d.Worst > 1e-6 {
				t.Errorf("%s at %v: derivative of residual %d by parameter %d off by %g of its column", p.name, b, d.Row, d.Parameter, d.Worst)
			}
		}
	}
}

// All 54 solutions, one after the other, with one workspace.
func BenchmarkNIST(b *testing.B) {
	all := readNIST(b)
	var s Solver
	for _, p := range all {
		q := p.problem()
		for k, start := range p.start {
			// The measure counts only for right answers.
			res, err := s.Solve(q, start, nil)
			if err != nil || digits(res.X[0], p.certified[0]) < 6 {
				b.Fatalf("%s, start %d: %v", p.name, k+1, res.Status)
			}
		}
	}
	b.ReportAllocs()
	for b.Loop() {
		for _, p := range all {
			q := p.problem()
			_, _ = s.Solve(q, p.start[0], nil)
			_, _ = s.Solve(q, p.start[1], nil)
		}
	}
}
