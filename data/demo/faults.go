package demo

import (
	"bytes"
	"fmt"
	"math"
	"math/cmplx"
	"strconv"
	"strings"
)

// Row is one row of a simulated oscillatory table, as a Fault sees and changes
// it. What is NaN has no column.
type Row struct {
	Index       int     // from 0, in the order of the table
	Frequency   float64 // Hz
	Temperature float64 // °C
	Strain      float64 // %
	Modulus     complex128
	// LossFactor is written where the table has such a column; a change of Modulus
	// changes it, too, as in a machine that computes it.
	LossFactor float64
}

// Fault is something that goes wrong in the laboratory and that its file does not
// tell. It changes a row; Modulus is in Pa.
type Fault func(*Row)

// Spoil returns a copy of the folder in which the faults act, one after the other,
// on every row of an oscillatory table. Numbers are written with as many digits
// as the plan's, 0 for all.
//
// It panics where there is no such table, or where it does not hold storage and
// loss modulus: a programmer's fault.
func (f Files) Spoil(table string, digits int, faults ...Fault) Files {
	text := f.Bytes(table)
	if text == nil {
		panic("demo: no file " + table)
	}
	l := &laboratory{plan: Plan{Digits: digits}}
	var b bytes.Buffer
	var head []string
	n := 0
	for line := range strings.Lines(string(text)) {
		cells := strings.Split(strings.TrimRight(line, "\n"), ",")
		switch {
		case strings.HasPrefix(line, "#"):
			b.WriteString(line)
			continue
		case head == nil:
			head = cells
			b.WriteString(line)
			continue
		}
		r := Row{Index: n, Frequency: math.NaN(), Temperature: math.NaN(), Strain: math.NaN(), LossFactor: math.NaN()}
		n++
		var storage, loss float64
		at := map[string]*float64{
			"f / Hz": &r.Frequency, "T / °C": &r.Temperature, "strain / %": &r.Strain,
			"G' / MPa": &storage, "G'' / MPa": &loss, "tan δ": &r.LossFactor,
		}
		for i, c := range cells {
			x, err := strconv.ParseFloat(c, 64)
			if err != nil || at[head[i]] == nil {
				panic(fmt.Sprintf("demo: %s: %q under %q cannot be spoiled", table, c, head[i]))
			}
			*at[head[i]] = x
		}
		r.Modulus = complex(storage, loss) * 1e6
		for _, fault := range faults {
			before, stated := r.Modulus, r.LossFactor
			fault(&r)
			if r.Modulus != before && r.LossFactor == stated {
				r.LossFactor = imag(r.Modulus) / real(r.Modulus)
			}
		}
		storage, loss = real(r.Modulus)/1e6, imag(r.Modulus)/1e6
		for i := range cells {
			cells[i] = l.write(*at[head[i]])
		}
		b.WriteString(strings.Join(cells, ",") + "\n")
	}
	return f.With(table, b.Bytes())
}

// Stiffness returns the stiffness of a double-shear piece in N/m for a modulus of
// 1 Pa, K* = 2(A/h)·G*.
func (s Specimen) Stiffness() float64 {
	a := math.Pi / 4 * s.Diameter * s.Diameter * 1e-6
	return 2 * a / (s.Thickness * 1e-3)
}

// MovingMass leaves the force on a mass in kg beside a specimen uncorrected,
// K_meas = K − mω².
func MovingMass(kg float64, s Specimen) Fault {
	return func(r *Row) {
		w := 2 * math.Pi * r.Frequency
		r.Modulus -= complex(kg*w*w/s.Stiffness(), 0)
	}
}

// SoftFrame leaves the stiffness in N/m of a frame in series uncorrected,
// 1/K_meas = 1/K + 1/K_f.
func SoftFrame(stiffness float64, s Specimen) Fault {
	return func(r *Row) {
		r.Modulus = 1 / (1/r.Modulus + complex(s.Stiffness()/stiffness, 0))
	}
}

// Slip takes a share of the modulus from the row of an index on up to, and
// excluding, another one, and turns its phase by an angle in degrees: part of the
// contact is lost.
func Slip(from, to int, share, degrees float64) Fault {
	return Softened(from, to, func(Row) float64 { return share }, degrees)
}

// Softened takes a share that depends on the row from the rows of an interval of
// indices, and turns their phase by an angle in degrees.
func Softened(from, to int, share func(Row) float64, degrees float64) Fault {
	return func(r *Row) {
		if r.Index >= from && r.Index < to {
			r.Modulus *= cmplx.Rect(1-share(*r), degrees*math.Pi/180)
		}
	}
}

// Warming lets the specimen's own loss warm it by so many K a kW/m³ of
// dissipated power πfγ²G”; the table's temperature is measured in the specimen. The
// modulus falls by a share a K.
func Warming(kelvin, share float64) Fault {
	return func(r *Row) {
		g := r.Strain / 100
		rise := kelvin * math.Pi * r.Frequency * g * g * imag(r.Modulus) / 1000
		r.Temperature += rise
		r.Modulus *= complex(math.Exp(-share*rise), 0)
	}
}

// WrongStrain multiplies the strains written, such as by 2 for a peak-to-peak
// amplitude taken for a single one.
func WrongStrain(factor float64) Fault {
	return func(r *Row) { r.Strain *= factor }
}

// WrongModulus multiplies the moduli written, such as by 3 for E taken for G.
func WrongModulus(factor float64) Fault {
	return func(r *Row) { r.Modulus *= complex(factor, 0) }
}
