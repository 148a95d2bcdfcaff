package lsq

import (
	"fmt"

	"gonum.org/v1/gonum/optimize"
)

// Method is the trust-region solver as a method of gonum's optimize package, so
// that programs written against optimize.Minimize, or a global search, can take
// it for the local step. It minimises ½‖r‖²:
//
//	m := &lsq.Method{Problem: p}
//	result, err := optimize.Minimize(optimize.Problem{Func: p.Objective()}, x0,
//		&optimize.Settings{Converger: optimize.NeverTerminate{}}, m)
//
// Every accepted step is a major iteration; limits and convergers of optimize
// therefore work. Residual and Jacobian are called by the method itself and do not
// appear in optimize.Stats; Result has the true counts. A panic of Residual or
// Jacobian would end the process, since methods run in a goroutine of their own;
// it is turned into an error.
//
// Use one Method for one call of Minimize at a time.
type Method struct {
	Problem  Problem
	Settings *Settings // nil for defaults

	result    Result
	err       error
	operation chan<- optimize.Task
	answer    <-chan optimize.Task
	task      optimize.Task
}

var (
	_ optimize.Method   = (*Method)(nil)
	_ optimize.Statuser = (*Method)(nil)
)

// Result returns the full result of the last run and the error of its start.
func (m *Method) Result() (Result, error) { return m.result, m.err }

// Init is called by optimize.Minimize. It panics when the dimension is not that
// of the problem.
func (m *Method) Init(dim, tasks int) int {
	if dim != m.Problem.N {
		panic("lsq: dimension of the start is not N")
	}
	m.result, m.err = Result{}, nil
	return 1
}

// Uses is called by optimize.Minimize: nothing of optimize.Problem is used.
func (m *Method) Uses(has optimize.Available) (optimize.Available, error) {
	return optimize.Available{}, nil
}

// Run is called by optimize.Minimize. It follows the protocol of optimize.Method:
// results are read until they end, and only then are operations closed.
func (m *Method) Run(operation chan<- optimize.Task, result <-chan optimize.Task, tasks []optimize.Task) {
	m.operation, m.answer, m.task = operation, result, tasks[0]
	m.solve()
	if m.result.Status != Stopped || m.result.Cause != errPost {
		m.task.Op = optimize.MethodDone
		operation <- m.task
	}
	for range result {
	}
	close(operation)
}

func (m *Method) solve() {
	defer func() {
		if v := recover(); v != nil {
			m.err = fmt.Errorf("least squares: residual or jacobian panicked: %v", v)
		}
	}()
	var s Settings
	if m.Settings != nil {
		s = *m.Settings
	}
	s.Recorder = iterations{m, s.Recorder}
	m.result, m.err = Solve(m.Problem, m.task.X, &s)
	if m.Settings != nil {
		m.result.Given = *m.Settings
		m.result.Used.Recorder = m.Settings.Recorder
	} else {
		m.result.Given, m.result.Used.Recorder = Settings{}, nil
	}
}

// errPost ends a solution that optimize has ended.
var errPost = fmt.Errorf("ended by optimize: %w", ErrStop)

// iterations reports steps as major iterations.
type iterations struct {
	m    *Method
	next Recorder
}

func (r iterations) Record(it Iteration) error {
	m := r.m
	copy(m.task.X, it.X)
	m.task.F = 0.5 * it.Norm * it.Norm
	m.task.Op = optimize.MajorIteration
	m.operation <- m.task
	if t := <-m.answer; t.Op == optimize.PostIteration {
		return errPost
	}
	if r.next != nil {
		return r.next.Record(it)
	}
	return nil
}

// Status is called by optimize.Minimize after Run.
func (m *Method) Status() (optimize.Status, error) {
	if m.err != nil {
		return optimize.Failure, m.err
	}
	switch s := m.result.Status; {
	case s.Converged():
		return optimize.MethodConverge, nil
	case s == EvaluationLimit:
		return optimize.FunctionEvaluationLimit, nil
	default:
		if m.result.Cause != nil {
			return optimize.Failure, fmt.Errorf("least squares: %v: %w", s, m.result.Cause)
		}
		return optimize.Failure, fmt.Errorf("least squares: %v", s)
	}
}
