package models_test

import (
	"fmt"
	"math"

	"phaselag/models"
)

// A compound file gives the modulus at any frequency, temperature and strain
// amplitude of its domain, with the half-width of the 95 % interval.
func Example() {
	compound, err := models.Open("testdata/invented.yaml")
	if err != nil {
		panic(err)
	}
	modulus, err := compound.Modulus(models.Condition{Frequency: 15, Temperature: 273.15 + 40, Strain: 0.01})
	if err != nil {
		panic(err) // *models.OutsideError: not measured there
	}
	fmt.Printf("G' = %.3f ± %.3f MPa, tan δ = %.4f ± %.4f\n", modulus.Storage/1e6, modulus.StorageU95/1e6, modulus.LossFactor, modulus.LossFactorU95)
	// Output: G' = 2.081 ± 0.047 MPa, tan δ = 0.1367 ± 0.0031
}

// Outside the domain there is a refusal with the nearest allowed values.
func ExampleOutsideError() {
	compound, err := models.Open("testdata/invented.yaml")
	if err != nil {
		panic(err)
	}
	_, err = compound.Modulus(models.Condition{Frequency: 15, Temperature: 273.15 + 95, Strain: math.NaN()})
	fmt.Println(err)
	// Output: outside: 95 °C is not within the tested -40 to 80 °C; nearest allowed: 80 °C
}
