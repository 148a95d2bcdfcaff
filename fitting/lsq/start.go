package lsq

import (
	"errors"
	"fmt"
	"math"
	"math/rand/v2"

	"gonum.org/v1/gonum/optimize"
)

// Search for a start in a box
//
// Rounds of covariance-matrix adaptation (gonum's CmaEsChol) from random means,
// each followed by a local solution with [Solve]; the best local solution counts.
// The search runs in coordinates u of which the box is the unit cube, reflected
// without end (so nothing is ever outside):
//
//	x = l + (u_b − l)·s(u),   s(u) = |u − 2·round(u/2)|
//
// or the same in ln x for a parameter whose bounds are positive and more than a
// factor of 100 apart. An evolution strategy only compares values, so the huge
// range of ‖r‖² over a box does no harm.
//
// Known failure: none of this proves a global minimum. A minimum whose basin is a
// small part of the box is found with the probability of a random draw near it.

// StartSettings controls Start. The zero value works.
type StartSettings struct {
	// Rounds of search and local solution. Default 4.
	Rounds int
	// Evaluations of the residual in the search of each round. Default 100·(N+1).
	Evaluations int
	// Local settings of the solutions; nil for defaults.
	Local *Settings
}

// ErrBox says that a global search needs finite bounds for every parameter.
var ErrBox = errors.New("a search for a start needs finite bounds for every parameter")

// ErrNoStart says that no usable solution was found from any start.
var ErrNoStart = errors.New("no usable solution found from any start in the box")

// Start looks for a minimum of p in the box of its bounds when no start is
// known, and returns the best local solution. The same source gives the same
// bits. All random numbers come from src, which must not be nil.
func Start(p Problem, s *StartSettings, src rand.Source) (Result, error) {
	var set StartSettings
	if s != nil {
		set = *s
	}
	if set.Rounds == 0 {
		set.Rounds = 4
	}
	if set.Evaluations == 0 {
		set.Evaluations = 100 * (p.N + 1)
	}
	if src == nil || set.Rounds < 0 || set.Evaluations < 0 {
		panic("lsq: search without a random source, or negative settings")
	}
	if err := p.check(make([]float64, p.N)); err != nil {
		return Result{}, err
	}
	for i := range p.N {
		if l, u := p.bounds(i); math.IsInf(l, 0) || math.IsInf(u, 0) {
			return Result{}, &StartError{Parameter: i, Cause: ErrBox}
		}
	}
	f := p.Objective()
	x := make([]float64, p.N)
	// gonum evaluates in goroutines of its own, where a panic would end the
	// process out of the caller's reach.
	var panicked any
	objective := func(u []float64) (value float64) {
		defer func() {
			if v := recover(); v != nil && panicked == nil {
				panicked, value = v, math.Inf(1)
			}
		}()
		p.unfold(x, u)
		return f(x)
	}
	rnd := rand.New(src)
	u := make([]float64, p.N)
	var best Result
	for range set.Rounds {
		for i := range u {
			u[i] = rnd.Float64()
		}
		found, _ := optimize.Minimize(optimize.Problem{Func: objective}, u,
			&optimize.Settings{Converger: optimize.NeverTerminate{}, FuncEvaluations: set.Evaluations},
			&optimize.CmaEsChol{InitStepSize: 0.3, Src: src})
		if panicked != nil {
			panic(panicked)
		}
		if found == nil || len(found.X) != p.N || math.IsInf(found.F, 0) || math.IsNaN(found.F) {
			// No point with a value; the next round begins elsewhere.
			continue
		}
		p.unfold(x, found.X)
		res, err := Solve(p, x, set.Local)
		if err != nil {
			continue
		}
		if res.Status == Stopped {
			return res, nil
		}
		if res.Usable() && (best.Status == NotStarted || res.Norm < best.Norm) {
			best = res
		}
	}
	if best.Status == NotStarted {
		return Result{}, fmt.Errorf("least squares: %w (%d rounds)", ErrNoStart, set.Rounds)
	}
	return best, nil
}

// unfold writes the point of the box that u stands for to x.
func (p *Problem) unfold(x, u []float64) {
	for i, v := range u {
		l, h := p.bounds(i)
		s := math.Abs(v - 2*math.Round(v/2))
		if l > 0 && h > 100*l {
			x[i] = math.Exp(math.Log(l) + s*(math.Log(h)-math.Log(l)))
		} else {
			x[i] = l + s*(h-l)
		}
		x[i] = math.Min(math.Max(x[i], l), h)
	}
}
