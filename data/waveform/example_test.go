package waveform_test

import (
	"fmt"
	"math"

	"phaselag/data/waveform"
)

// A second of an invented double-shear specimen at 10 Hz: 500 kN/m and tan δ 0.2.
func ExampleAnalyse() {
	var r waveform.Record
	for k := range 1000 {
		t := float64(k) / 1000
		w := 2 * math.Pi * 10 * t
		r.Time = append(r.Time, t)
		r.Force = append(r.Force, 100+50*math.Cos(w+math.Atan(0.2)))
		r.Displacement = append(r.Displacement, 1e-4*math.Cos(w))
	}
	res, err := waveform.Analyse(r, nil)
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Printf("%.4f Hz, |K*| = %.1f kN/m, tan δ = %.4f, %.3f mN·m a cycle\n",
		res.Frequency, res.Magnitude/1000, res.LossFactor, 1000*res.Energy)
	// Output: 10.0000 Hz, |K*| = 500.0 kN/m, tan δ = 0.2000, 3.081 mN·m a cycle
}
