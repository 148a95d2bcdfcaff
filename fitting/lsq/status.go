package lsq

import "fmt"

// Status says why a solution ended.
type Status int

const (
	// NotStarted is the zero value; no result of Solve carries it.
	NotStarted Status = iota
	// GradientConverged: the residual is orthogonal to the model's tangents.
	GradientConverged
	// FunctionConverged: neither predicted nor observed reductions matter.
	FunctionConverged
	// StepConverged: steps, or the region for them, have become negligible.
	StepConverged
	// Stalled: no step, however short, reduces the residual although the gradient
	// is not small. The Jacobian may be wrong, or the residual not smooth.
	Stalled
	// EvaluationLimit: MaxEvaluations was reached.
	EvaluationLimit
	// JacobianFailed: the Jacobian was not finite or returned an error at the
	// best point, which Result.Cause tells.
	JacobianFailed
	// Stopped on request of the Recorder or of Residual; see Result.Cause.
	Stopped
)

var statusWords = [...]string{
	NotStarted:        "not started",
	GradientConverged: "gradient converged",
	FunctionConverged: "function converged",
	StepConverged:     "step converged",
	Stalled:           "stalled",
	EvaluationLimit:   "evaluation limit",
	JacobianFailed:    "jacobian failed",
	Stopped:           "stopped",
}

// String returns the status in words.
func (s Status) String() string {
	if s < 0 || int(s) >= len(statusWords) {
		return fmt.Sprintf("Status(%d)", int(s))
	}
	return statusWords[s]
}

// Converged reports whether a test of convergence was passed.
func (s Status) Converged() bool {
	return s == GradientConverged || s == FunctionConverged || s == StepConverged
}
