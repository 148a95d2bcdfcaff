package specimen_test

import (
	"fmt"
	"math"

	"phaselag/data/specimen"
)

// A double shear piece, 10 Hz, on a machine with 0.2 kg between piece and load
// cell: the stiffness of the piece, its modulus, its strain, and what 1 % in
// the diameter and the thickness does to it. Invented numbers.
func Example() {
	piece := specimen.Unstated("double shear")
	piece.Diameter, piece.Thickness = 0.025, 0.005
	shape, _, err := piece.Build()
	if err != nil {
		fmt.Println(err)
		return
	}
	machine := specimen.Machine{MovingMass: 0.2, FrameStiffness: 5e6}
	k, err := machine.Correct(complex(2e5, 2e4), 2*math.Pi*10)
	if err != nil {
		fmt.Println(err)
		return
	}
	g := shape.Modulus(k.Stiffness)
	u, _ := specimen.RelativeUncertainty(shape, g, map[string]float64{"diameter": 0.01, "thickness": 0.01})
	fmt.Printf("frame %.1f %%, mass %.2f %%\n", 100*k.FrameShare, 100*k.MassPart)
	fmt.Printf("G' %.3f MPa, G'' %.4f MPa, u %.1f %%\n", real(g)/1e6, imag(g)/1e6, 100*u)
	fmt.Printf("0.1 mm is %.1f %% shear\n", 100*shape.Strain(0.1e-3))
	// Output:
	// frame 4.0 %, mass 0.38 %
	// G' 1.065 MPa, G'' 0.1105 MPa, u 2.2 %
	// 0.1 mm is 2.0 % shear
}
