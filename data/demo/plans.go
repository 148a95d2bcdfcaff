package demo

import "math"

// HM60Seed is the seed of the committed demonstration; it was fixed before its
// numbers were looked at.
const HM60Seed = 60

// HM60Plan is the demonstration's laboratory: a small mixing shop qualifies
// HM-60 for the mounts of a grain sifter in an unheated mill, −20 to 60 °C,
// shaken at 4 to 30 Hz. Isotherms of one piece, strain sweeps of a second one,
// a temperature sweep, a relaxation test and one static value.
func HM60Plan() Plan {
	const conditioned = "{cycles: 6, strain: 20 %, rest: 1 h}"
	noise := Noise{Magnitude: 0.005, Phase: 0.3}
	return Plan{
		Title:      "HM-60 for sifter mounts",
		Laboratory: "invented: a simulated laboratory, no measurement of a real compound",
		Head: []string{
			"Invented data: a simulated compound in a simulated laboratory.",
			"Nothing here was measured, and nothing describes a real product.",
		},
		Vulcanised: "2026-11-02",
		Polymer:    "NR",
		Batch:      "2611-02",
		Hardness:   "60 IRHD",
		Density:    "1.12 g/cm3",
		Specimens:  []Specimen{{"pair-1", 25, 5}, {"pair-2", 25, 5}},
		Tests: []Test{
			{
				Name: "isotherms", Kind: FrequencySweep, File: "isotherms.csv", Specimen: "pair-1",
				Tested: "2026-11-12", Dwell: "15 min", Conditioning: conditioned,
				Temperatures: Steps(-40, 80, 10), Frequencies: Decades(0.5, 50, 21), Strains: []float64{0.2},
				LossFactor: true, Noise: noise,
			},
			{
				Name: "strain sweeps", Kind: StrainSweep, File: "strain-sweeps.csv", Specimen: "pair-2",
				Tested: "2026-11-13", Dwell: "15 min", Conditioning: conditioned,
				Temperatures: []float64{-10, 23, 60}, Frequencies: []float64{10}, Strains: Decades(0.1, 20, 15),
				Noise: noise,
			},
			{
				Name: "temperature sweep", Kind: TemperatureSweep, File: "temperature-sweep.csv", Specimen: "pair-1",
				Tested: "2026-11-16", Conditioning: conditioned, Rate: 2,
				Temperatures: Steps(-40, 80, 2), Frequencies: []float64{10}, Strains: []float64{0.2},
				Noise: noise,
			},
			{
				Name: "relaxation", Kind: Relaxation, File: "relaxation.csv", Specimen: "pair-1",
				Tested: "2026-11-17", Dwell: "15 min", Conditioning: conditioned, RampTime: 0.05,
				Temperatures: []float64{23}, Strains: []float64{10}, Times: Decades(0.5, 1000, 34),
				Noise: Noise{Magnitude: 0.005},
			},
			{
				Name: "static", Kind: Static, Specimen: "pair-2",
				Tested: "2026-11-17", Conditioning: conditioned,
				Temperatures: []float64{23}, Strains: []float64{10}, Times: []float64{60},
				Noise: Noise{Magnitude: 0.01},
			},
		},
		Analysis: []string{"reference_temperature: 23 °C"},
		Errors: Errors{
			TemperatureScatter: 0.3, TemperatureCommon: 0.2,
			Geometry: 0.015, Phase: 0.05, Lag: 0.5,
		},
		Digits: 5,
	}
}

// IsothermPlan is the plainest campaign: isotherms from −40 to 80 °C in steps
// of 10 K at 21 frequencies from 0.5 to 50 Hz, on one piece.
func IsothermPlan() Plan {
	p := HM60Plan().Only("isotherms")
	p.Title = "isotherms"
	p.Specimens = p.Specimens[:1]
	return p
}

// NarrowPlan suits Narrow: isotherms 4 K apart where it softens.
func NarrowPlan() Plan {
	p := IsothermPlan()
	p.Title = "narrow transition"
	p.Tests[0].Temperatures = Steps(-24, 24, 4)
	p.Tests[0].Frequencies = Decades(0.1, 50, 28)
	return p
}

// LiquidPlan suits Liquid: seven temperatures, three decades of frequency.
func LiquidPlan() Plan {
	p := IsothermPlan()
	p.Title = "a liquid"
	p.Polymer, p.Hardness, p.Density = "", "", ""
	p.Tests[0].Temperatures = Steps(0, 60, 10)
	p.Tests[0].Frequencies = Decades(0.05, 20, 27)
	p.Tests[0].Strains = []float64{0.1}
	p.Tests[0].Conditioning = ""
	return p
}

// Steps returns from, from+step, … up to and including to.
func Steps(from, to, step float64) []float64 {
	n := int(math.Floor((to-from)/step+1e-9)) + 1
	list := make([]float64, n)
	for i := range list {
		list[i] = from + float64(i)*step
	}
	return list
}

// Decades returns n numbers from from to to, evenly spaced in the logarithm,
// with both ends exact.
func Decades(from, to float64, n int) []float64 {
	list := make([]float64, n)
	for i := range list {
		list[i] = from * math.Pow(to/from, float64(i)/float64(n-1))
	}
	list[0], list[n-1] = from, to
	return list
}
