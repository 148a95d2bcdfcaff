package reports

import (
	"encoding/json"
	"errors"
	"fmt"
	"math"
	"sort"

	"phaselag/fitting/compact"
	"phaselag/models"
	"phaselag/models/mount"
)

// A state-space model of a mount at one temperature and amplitude
//
// Over a band of frequencies the mount's stiffness is drawn near by the fewest
// relaxations that keep a tolerance, K(s) = K₀ + Σ K_i·sτ_i/(1+sτ_i), a spring beside
// springs in series with dashpots. With z_i the dashpots' displacements, x the input
// and F the output,
//
//	ż_i = (x − z_i)/τ_i,   F = K₀x + Σ K_i(x − z_i),
//
// so A = −diag(1/τ), B = 1/τ, C = −K, D = K₀ + ΣK. The order is the least for this
// form, in which all relaxations are real, as those of a passive solid are.

// StateSpace is a linear model of a mount. Matrices are lists of rows.
type StateSpace struct {
	Phaselag string `json:"phaselag"` // "state-space 1"
	Mount    string `json:"mount"`
	Compound string `json:"compound"`
	Valid    struct {
		TemperatureC   float64    `json:"temperature_C"`
		DisplacementMM float64    `json:"displacement_amplitude_mm"`
		FrequencyHz    [2]float64 `json:"frequency_Hz"`
	} `json:"valid"`
	Input  Port        `json:"input"`
	Output Port        `json:"output"`
	Order  int         `json:"order"`
	A      [][]float64 `json:"A"`
	B      [][]float64 `json:"B"`
	C      [][]float64 `json:"C"`
	D      [][]float64 `json:"D"`
	Error  struct {
		MagnitudePercent float64 `json:"magnitude_percent"`
		PhaseDeg         float64 `json:"phase_deg"`
	} `json:"error"` // the greatest in the band
	Notes []string `json:"notes"`
}

// Port is an input or an output.
type Port struct {
	Name string `json:"name"`
	Unit string `json:"unit"`
}

// StateSpaceModel finds the model of a mount between two frequencies, Hz, at a
// temperature, K, and displacement amplitude, m (NaN: the mount file's excitation).
// accuracy is the greatest relative error of |K*|, 0 for 2 %; the greatest error of the
// phase is half that in radians.
func StateSpaceModel(c *models.Compound, m *mount.Mount, kelvin, displacement, lo, hi, accuracy float64) (*StateSpace, error) {
	if accuracy == 0 {
		accuracy = 0.02
	}
	if math.IsNaN(displacement) {
		s, err := mountAt(c, m, StiffnessQuery{Frequency: math.Sqrt(lo * hi), Temperature: kelvin, Displacement: displacement})
		if err != nil {
			return nil, err
		}
		displacement = s.state.Displacement
	}
	var fault error
	at := func(omega float64) complex128 {
		s, err := mountAt(c, m, StiffnessQuery{Frequency: omega / (2 * math.Pi), Temperature: kelvin, Displacement: displacement})
		if err != nil {
			fault = errors.Join(fault, err)
			return 0
		}
		return s.value
	}
	for _, f := range []float64{lo, hi} {
		s, err := mountAt(c, m, StiffnessQuery{Frequency: f, Temperature: kelvin, Displacement: displacement})
		if err != nil {
			return nil, err
		}
		if out := s.inside(c); out != nil {
			return nil, out
		}
	}
	few, misfit, err := compact.FewOf(at, 2*math.Pi*lo, 2*math.Pi*hi, compact.Tolerance{Magnitude: accuracy, Phase: accuracy / 2})
	if fault != nil {
		return nil, fault
	}
	if err != nil {
		return nil, fmt.Errorf("no state-space model within %.2g %% between %.4g and %.4g Hz: %w", 100*accuracy, lo, hi, err)
	}
	n := len(few.Times)
	order := make([]int, n)
	for i := range order {
		order[i] = i
	}
	sort.Slice(order, func(a, b int) bool { return few.Times[order[a]] < few.Times[order[b]] })
	out := &StateSpace{Phaselag: "state-space 1", Mount: m.Name, Compound: c.Compound.Name, Input: Port{"displacement", "m"}, Output: Port{"force", "N"}, Order: n}
	if m.Rotates() {
		out.Input, out.Output = Port{"angle", "rad"}, Port{"torque", "N·m"}
	}
	out.Valid.TemperatureC, out.Valid.DisplacementMM, out.Valid.FrequencyHz = celsius(kelvin), 1e3*displacement, [2]float64{lo, hi}
	out.A, out.B, out.C = make([][]float64, n), make([][]float64, n), [][]float64{make([]float64, n)}
	d := few.Equilibrium
	for row, i := range order {
		out.A[row] = make([]float64, n)
		out.A[row][row] = -1 / few.Times[i]
		out.B[row] = []float64{1 / few.Times[i]}
		out.C[0][row] = -few.Moduli[i]
		d += few.Moduli[i]
	}
	out.D = [][]float64{{d}}
	out.Error.MagnitudePercent, out.Error.PhaseDeg = 100*misfit.WorstMagnitude, misfit.WorstPhase*180/math.Pi
	out.Notes = append(out.Notes,
		"force and displacement of the whole arrangement, all its mounts together",
		"linear, at the stated amplitude and temperature: where the compound softens with amplitude, a larger motion is softer",
		"outside the stated frequencies the model is not the compound's; its static stiffness is not that of a static test",
		partCaution)
	return out, nil
}

// JSON writes the model.
func (s *StateSpace) JSON() ([]byte, error) {
	b, err := json.MarshalIndent(s, "", "  ")
	return append(b, '\n'), err
}
