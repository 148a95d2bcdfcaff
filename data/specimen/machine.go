package specimen

import (
	"fmt"
	"math"
	"math/cmplx"

	"phaselag/data/place"
)

// Machine is what a testing machine adds to the stiffness of a test piece. The
// zero value adds nothing.
//
// Between the specimen and the load cell moves a mass m; the cell's force also
// bends the frame, the cell and the grips, and the displacement transducer sees
// that. At the angular frequency ω
//
//	1/K_meas = 1/(K − mω²) + 1/K_f
//	K        = 1/(1/K_meas − 1/K_f) + mω²
//
// Derived. Inertia lowers the storage part and leaves the loss part, so that it
// raises tan δ; a stiff frame in series lowers both, and tan δ a little. For a
// shape that rotates put a moment of inertia in kg·m² and N·m/rad.
type Machine struct {
	MovingMass     float64    // kg; 0: none, or corrected already
	FrameStiffness complex128 // N/m, series; 0: rigid, or corrected already
}

// Correction is a stiffness freed from the machine, and what that took.
type Correction struct {
	Stiffness complex128 // of the specimen, N/m
	// MassPart is mω²/|K|: the force on the moving mass as a part of the
	// specimen's.
	MassPart float64
	// FrameShare is |K_meas/K_f|: the displacement of the frame as a part of what
	// was measured.
	FrameShare float64
	// Phase is how much the loss angle was corrected, in rad: positive where the
	// specimen's is greater than what was measured.
	Phase float64
}

// Validate refuses masses and frames that do not exist.
func (m Machine) Validate() error {
	if !(m.MovingMass >= 0) || math.IsInf(m.MovingMass, 0) {
		return &place.Error{What: fmt.Sprintf("machine: moving mass must be a finite mass of at least 0 in kg, not %g", m.MovingMass), Hint: "for example 0.2 for 200 g; 0 for none"}
	}
	f := m.FrameStiffness
	if f != 0 && !(real(f) > 0 && imag(f) >= 0) || cmplx.IsInf(f) {
		return &place.Error{What: fmt.Sprintf("machine: frame stiffness must have a storage part above zero and a loss part of at least zero in N/m, not %g%+gi", real(f), imag(f)), Hint: "for example 5e6; 0 for a rigid frame"}
	}
	return nil
}

// Correct returns the stiffness of the specimen from a measured one in N/m at
// the angular frequency omega in rad/s. A machine that fails Validate, a
// frequency that is not positive, a stiffness that is not finite, and a frame
// that is no stiffer than what was measured with it are errors.
func (m Machine) Correct(measured complex128, omega float64) (Correction, error) {
	if err := m.point(measured, omega); err != nil {
		return Correction{}, err
	}
	inertia := m.MovingMass * omega * omega
	inner, share := measured, complex(0, 0)
	if m.FrameStiffness != 0 {
		share = measured / m.FrameStiffness
		if !(real(share) < 1) {
			return Correction{}, &place.Error{
				What: fmt.Sprintf("machine: the measured stiffness %.4g N/m is not below the frame's, %.4g N/m", real(measured), real(m.FrameStiffness)),
				Hint: "a frame in series only softens: one of the two stiffnesses is wrong",
			}
		}
		inner = measured / (1 - share)
	}
	k := inner + complex(inertia, 0)
	return Correction{
		Stiffness:  k,
		MassPart:   inertia / cmplx.Abs(k),
		FrameShare: cmplx.Abs(share),
		Phase:      cmplx.Phase(k) - cmplx.Phase(measured),
	}, nil
}

// Apply is the inverse of Correct: the stiffness that the machine would measure
// on a specimen of stiffness k in N/m. It fails where Correct would, and where
// specimen and mass on the frame resonate without damping.
func (m Machine) Apply(k complex128, omega float64) (complex128, error) {
	if err := m.point(k, omega); err != nil {
		return 0, err
	}
	inner := k - complex(m.MovingMass*omega*omega, 0)
	if m.FrameStiffness == 0 {
		return inner, nil
	}
	measured := inner / (1 + inner/m.FrameStiffness)
	if cmplx.IsInf(measured) || cmplx.IsNaN(measured) {
		return 0, &place.Error{What: "machine: specimen, mass and frame resonate without damping at this frequency", Hint: "a stiffness with a loss part, or another frequency"}
	}
	return measured, nil
}

func (m Machine) point(k complex128, omega float64) error {
	if err := m.Validate(); err != nil {
		return err
	}
	if !(omega > 0) || math.IsInf(omega, 0) {
		return &place.Error{What: fmt.Sprintf("machine: angular frequency must be finite and above zero in rad/s, not %g", omega), Hint: "2π times the frequency in Hz"}
	}
	if cmplx.IsNaN(k) || cmplx.IsInf(k) {
		return &place.Error{What: "machine: the stiffness is not a finite number", Hint: "leave the point out"}
	}
	return nil
}
