package lsq

import "math"

// Settings controls a solution. The zero value works. In every tolerance zero
// stands for the default and a negative number switches the test off.
type Settings struct {
	// GradientTol: converged when every free column of J is orthogonal to the
	// residual to this cosine, |J_jᵀr| ≤ GradientTol·‖J_j‖·‖r‖.
	// Default 1e-13.
	GradientTol float64

	// FunctionTol: converged when the predicted and the observed reduction of
	// ‖r‖² are both below FunctionTol·‖r‖² and agree within a factor of two. With
	// this tolerance the distance to the minimum is about √(FunctionTol·dof)
	// standard errors. Default 1e-20.
	FunctionTol float64

	// StepTol: converged when ‖D·p‖ ≤ StepTol·‖D·x‖, with p the step, or the
	// radius of the region for p, and D the column norms of J. Default 1e-12; for
	// many fits in a row 1e-8 is enough and saves the last few steps.
	StepTol float64

	// MaxEvaluations limits the calls of Residual. Default 2000·(N+1).
	MaxEvaluations int

	// FirstRadius is the first radius of the region as a multiple of ‖D·x‖ (of
	// one where x is zero). Default 1.
	FirstRadius float64

	// Acceleration is the largest permitted ratio of the second-order correction
	// to the first-order step; a larger one rejects the step. It costs one call
	// of Residual an iteration. Default 0.75; negative: no correction.
	Acceleration float64

	// Recorder, where given, is told of every accepted step.
	Recorder Recorder
}

// Iteration is what a Recorder is told. X and the slices behind it belong to the
// solver and must not be changed or kept.
type Iteration struct {
	Number      int       // accepted steps so far; 0 is the start
	X           []float64 // parameters
	Norm        float64   // ‖r‖
	Radius      float64   // radius of the trust region, in the metric D
	Damping     float64   // λ of the step that led here
	Evaluations int       // calls of Residual so far
}

// Recorder follows the progress of a solution. An error ends it with status
// Stopped.
type Recorder interface {
	Record(Iteration) error
}

// used returns the settings with defaults filled in. It panics on nonsense.
func (s *Settings) used(n int) Settings {
	var u Settings
	if s != nil {
		u = *s
	}
	if u.MaxEvaluations < 0 || u.FirstRadius < 0 {
		panic("lsq: negative MaxEvaluations or FirstRadius")
	}
	for _, v := range []float64{u.GradientTol, u.FunctionTol, u.StepTol, u.FirstRadius, u.Acceleration} {
		if math.IsNaN(v) || v >= 1e6 {
			panic("lsq: setting out of range")
		}
	}
	fill := func(v *float64, d float64) {
		if *v == 0 {
			*v = d
		}
	}
	fill(&u.GradientTol, 1e-13)
	fill(&u.FunctionTol, 1e-20)
	fill(&u.StepTol, 1e-12)
	fill(&u.FirstRadius, 1)
	fill(&u.Acceleration, 0.75)
	if u.MaxEvaluations == 0 {
		u.MaxEvaluations = 2000 * (n + 1)
	}
	return u
}
