package mount_test

import (
	"errors"
	"fmt"
	"math"

	"phaselag/models"
	"phaselag/models/mount"
)

// rubber is an invented compound as mounts ask for it.
func rubber() (*models.Compound, mount.Material) {
	compound, err := models.Open("../testdata/invented.yaml")
	if err != nil {
		panic(err)
	}
	return compound, func(hertz, kelvin, strain float64) complex128 {
		return compound.Value(models.Condition{Frequency: hertz, Temperature: kelvin, Strain: strain})
	}
}

// A compound file and a mount file give the dynamic stiffness of the part. Before a number is
// used, the compound says whether it was measured there.
func Example() {
	compound, material := rubber()
	sifter, err := mount.Open("../../data/demo/sifter.yaml")
	if err != nil {
		panic(err)
	}
	state, err := sifter.Displaced(material, 15, 273.15+23, sifter.Excitation.Displacement)
	if err != nil {
		panic(err)
	}
	strain := state.Leaves[0].Strain
	if err := compound.Inside(models.Condition{Frequency: 15, Temperature: 273.15 + 23, Strain: strain}); err != nil {
		panic(err)
	}
	k := state.Stiffness
	fmt.Printf("strain %.2g %%: K' = %.1f N/mm, loss factor %.4f\n", 100*strain, real(k)/1e3, imag(k)/real(k))
	// Output: strain 1.5 %: K' = 962.8 N/mm, loss factor 0.1602
}

// Under its static load a pressed pad is stiffer than its unloaded shape says; both are given.
func ExampleMount_Loaded() {
	compound, material := rubber()
	pump, err := mount.Open("../../data/demo/pump-foot.yaml")
	if err != nil {
		panic(err)
	}
	rest, err := pump.Loaded(mount.StaticModulus{Shear: 1e6 * compound.Static[0].Modulus})
	var far *mount.CompressionError
	if errors.As(err, &far) {
		fmt.Println(far) // pressed by more than 20 %
		return
	}
	state, err := rest.Mount.Displaced(material, 20, 273.15+23, 1e-4)
	if err != nil {
		panic(err)
	}
	fmt.Printf("compressed by %.1f mm: K' = %.0f N/mm, unloaded %.0f N/mm\n",
		1e3*rest.Deflection, real(state.Stiffness)/1e3, real(state.Uncorrected)/1e3)
	// Output: compressed by 1.8 mm: K' = 4961 N/mm, unloaded 3653 N/mm
}

// The static deflection comes from the compound's static tests; a handbook's is named as such.
func ExampleMount_Static() {
	compound, _ := rubber()
	sifter, err := mount.Open("../../data/demo/sifter.yaml")
	if err != nil {
		panic(err)
	}
	from := mount.StaticSettings{Hardness: 60, Table: mount.Lindley}
	for range 2 {
		answers, err := sifter.Static(from)
		if err != nil {
			panic(err)
		}
		for _, s := range answers {
			fmt.Printf("%.2f mm by %s\n", 1e3*s.Deflection, s.Source)
		}
		for _, v := range compound.Static {
			from.Tests = append(from.Tests, mount.StaticTest{Modulus: 1e6 * v.Modulus, U95: 1e6 * float64(v.U95), Source: v.Source})
		}
	}
	// Output:
	// 3.85 mm by handbook table of hardness: Lindley at 60 (from memory), not this compound
	// 4.01 mm by static test: relaxation test hold
}

// A mount warms by what it damps, and softens as it warms.
func ExampleMount_Heated() {
	_, material := rubber()
	sifter, err := mount.Open("../../data/demo/sifter.yaml")
	if err != nil {
		panic(err)
	}
	sifter.Resistance = 4 // K/W, of one mount
	drive := mount.HeatDrive{Displacement: 1e-3, Force: math.NaN()}
	answers, err := sifter.Heated(material, 30, 273.15+23, 273.15+80, drive)
	if err != nil {
		panic(err) // *mount.RunawayError: it makes more heat than it loses
	}
	for _, w := range answers {
		fmt.Printf("%.1f W in each of %d mounts: %.1f K warmer\n", w.Power/float64(sifter.Count), sifter.Count, w.Rise)
	}
	// Output: 2.7 W in each of 4 mounts: 11.0 K warmer
}

// A bush has a stiffness for each way of moving it; across its axis a short and a long bush
// are the bounds.
func ExampleBush() {
	const g = 0.64e6
	b := mount.Bush{Inner: 0.010, Outer: 0.020, Length: 0.040}
	short, long := b.Radial(g)
	fmt.Printf("axial %.0f N/mm, torsional %.0f N·mm/rad\n", real(b.Axial(g))/1e3, real(b.Torsion(g))*1e3)
	fmt.Printf("radial %.0f N/mm, between %.0f and %.0f N/mm\n", real(b.RadialBetween(g))/1e3, real(short)/1e3, real(long)/1e3)
	// Output:
	// axial 232 N/mm, torsional 42893 N·mm/rad
	// radial 1552 N/mm, between 539 and 3454 N/mm
}
