package unit

import (
	"math"
	"strings"
)

// Quantity is a kind of quantity; its text is its name for people.
type Quantity string

// The quantities, with the unit of the value that Parse returns.
const (
	Temperature           Quantity = "temperature"             // K, never below 0
	TemperatureDifference Quantity = "temperature difference"  // K
	Frequency             Quantity = "frequency"               // Hz
	Modulus               Quantity = "modulus"                 // Pa; stress and pressure, too
	Strain                Quantity = "strain"                  // m/m
	Force                 Quantity = "force"                   // N
	Length                Quantity = "length"                  // m
	Area                  Quantity = "area"                    // m²
	Density               Quantity = "density"                 // kg/m³
	Mass                  Quantity = "mass"                    // kg
	Stiffness             Quantity = "stiffness"               // N/m
	Angle                 Quantity = "angle"                   // rad
	StrainPerLength       Quantity = "strain per displacement" // 1/m
	Time                  Quantity = "time"                    // s
	TemperatureRate       Quantity = "temperature rate"        // K/s
	ThermalResistance     Quantity = "thermal resistance"      // K/W
	Relative              Quantity = "relative value"          // 1
	Hardness              Quantity = "hardness"                // the number on the scale named
	Viscosity             Quantity = "viscosity"               // Pa·s
	Expansion             Quantity = "thermal expansion"       // 1/K
	Torque                Quantity = "torque"                  // N·m
)

// Unit is one unit of one quantity.
type Unit struct {
	Symbol   string // as the program prints it
	Quantity Quantity
	// The value in SI is (x + Zero)·Numerator/Denominator. Two factors instead
	// of one keep decimal numbers exact: 0.2 % is 0.2/100, not 0.2·0.01.
	Zero, Numerator, Denominator float64
	spellings                    []string
}

// SI converts x in this unit; the result may be infinite for an x near the
// largest float64. A unit of temperature does not check against 0 K.
func (u Unit) SI(x float64) float64 {
	if u.Zero != 0 && u.Numerator == 1 {
		return x + u.Zero
	}
	return (x + u.Zero) * u.Numerator / u.Denominator
}

// From converts a value in SI to this unit. Temperatures are rounded to 1e-9 of
// a degree, so that 233.15 K is −40 °C and not −39.99999999999997 °C.
func (u Unit) From(si float64) float64 {
	if u.Zero != 0 {
		return math.Round((si*u.Denominator/u.Numerator-u.Zero)*1e9) / 1e9
	}
	return si * u.Denominator / u.Numerator
}

func scale(q Quantity, numerator, denominator float64, symbol string, spellings ...string) Unit {
	return Unit{Symbol: symbol, Quantity: q, Numerator: numerator, Denominator: denominator, spellings: spellings}
}

// units is the table of all units; the first one of a quantity is the one the
// program prints and proposes. A spelling is compared after normalize.
//
// Definitions: inch, pound, standard gravity and pound-force are those of
// NIST Special Publication 811, appendix B (values from memory): 25.4 mm,
// 0.45359237 kg, 9.80665 m/s².
var units = []Unit{
	{"°C", Temperature, 273.15, 1, 1, []string{"C", "degC", "Cel", "Celsius", "degreesC", "degreesCelsius", "degCelsius"}},
	scale(Temperature, 1, 1, "K", "Kelvin", "°K", "degK"),
	{"°F", Temperature, 459.67, 5, 9, []string{"F", "degF", "Fahrenheit", "degreesF", "degreesFahrenheit"}},

	scale(TemperatureDifference, 1, 1, "K", "Kelvin", "°C", "C", "degC"),
	scale(TemperatureDifference, 5, 9, "°F", "F", "degF"),

	scale(Frequency, 1, 1, "Hz", "hertz"),
	scale(Frequency, 1e3, 1, "kHz"),
	scale(Frequency, 1, 1e3, "mHz"),
	scale(Frequency, 1e6, 1, "MHz"),
	scale(Frequency, 1, 2*math.Pi, "rad/s", "rads-1", "rad·s-1", "rad/sec"),
	scale(Frequency, 1, 60, "rpm", "r/min", "1/min", "min-1", "rev/min"),

	scale(Modulus, 1e6, 1, "MPa"),
	scale(Modulus, 1, 1, "Pa"),
	scale(Modulus, 1e3, 1, "kPa"),
	scale(Modulus, 1e9, 1, "GPa"),
	scale(Modulus, 1e2, 1, "hPa", "mbar"),
	scale(Modulus, 1e5, 1, "bar"),
	scale(Modulus, 1e6, 1, "N/mm2", "MN/m2", "Nmm-2", "N·mm-2"),
	scale(Modulus, 1e4, 1, "N/cm2"),
	scale(Modulus, 1, 1, "N/m2", "Nm-2", "N·m-2"),
	scale(Modulus, 1e3, 1, "kN/m2"),
	scale(Modulus, 0.45359237*9.80665, 0.0254*0.0254, "psi", "lbf/in2", "lb/in2"),
	scale(Modulus, 1e3*0.45359237*9.80665, 0.0254*0.0254, "ksi"),
	scale(Modulus, 1, 10, "dyn/cm2", "dynes/cm2", "dyne/cm2"),
	scale(Modulus, 98066.5, 1, "kgf/cm2", "kp/cm2"),
	scale(Modulus, 9806650, 1, "kgf/mm2", "kp/mm2"),

	scale(Strain, 1, 100, "%", "percent", "pct"),
	scale(Strain, 1, 1, "m/m", "mm/mm", "1", "-"),
	scale(Strain, 1, 1e3, "‰"),
	scale(Strain, 1, 1e6, "µm/m", "microstrain", "ppm"),

	scale(Force, 1, 1, "N", "newton"),
	scale(Force, 1e3, 1, "kN"),
	scale(Force, 1, 1e3, "mN"),
	scale(Force, 1e6, 1, "MN"),
	scale(Force, 0.45359237*9.80665, 1, "lbf"),
	scale(Force, 9.80665, 1, "kgf", "kp"),
	scale(Force, 9.80665, 1e3, "gf", "p"),

	scale(Length, 1, 1e3, "mm"),
	scale(Length, 1, 1, "m"),
	scale(Length, 1, 1e2, "cm"),
	scale(Length, 1, 1e6, "µm", "um", "micron", "microns"),
	scale(Length, 0.0254, 1, "in", "inch", "inches", "\""),

	scale(Area, 1, 1e6, "mm2", "sqmm"),
	scale(Area, 1, 1, "m2"),
	scale(Area, 1, 1e4, "cm2"),
	scale(Area, 0.0254*0.0254, 1, "in2", "sqin"),

	scale(Density, 1e3, 1, "g/cm3", "g/ml", "g/cc", "Mg/m3", "t/m3", "kg/l", "kg/dm3"),
	scale(Density, 1, 1, "kg/m3", "g/l"),

	scale(Mass, 1, 1, "kg"),
	scale(Mass, 1, 1e3, "g"),
	scale(Mass, 1e3, 1, "t"),
	scale(Mass, 0.45359237, 1, "lb", "lbm"),

	scale(Stiffness, 1e3, 1, "N/mm", "kN/m"),
	scale(Stiffness, 1, 1, "N/m"),
	scale(Stiffness, 1e6, 1, "kN/mm", "MN/m"),
	scale(Stiffness, 1e6, 1, "N/µm", "N/um"),
	scale(Stiffness, 0.45359237*9.80665, 0.0254, "lbf/in", "lb/in"),
	scale(Stiffness, 9806.65, 1, "kgf/mm", "kp/mm"),
	scale(Stiffness, 980.665, 1, "kgf/cm", "kp/cm"),

	scale(Angle, math.Pi, 180, "deg", "°", "degree", "degrees"),
	scale(Angle, 1, 1, "rad", "radian", "radians"),
	scale(Angle, 1, 1e3, "mrad"),

	scale(StrainPerLength, 1e3, 100, "%/mm"),
	scale(StrainPerLength, 1e3, 1, "1/mm", "mm-1"),
	scale(StrainPerLength, 1, 1, "1/m", "m-1"),
	scale(StrainPerLength, 1, 100, "%/m"),

	scale(Time, 1, 1, "s", "sec", "second", "seconds"),
	scale(Time, 60, 1, "min", "minute", "minutes"),
	scale(Time, 3600, 1, "h", "hr", "hour", "hours"),
	scale(Time, 86400, 1, "d", "day", "days"),
	scale(Time, 1, 1e3, "ms"),
	scale(Time, 1, 1e6, "µs", "us"),

	scale(TemperatureRate, 1, 60, "K/min", "°C/min", "C/min", "degC/min"),
	scale(TemperatureRate, 1, 1, "K/s", "°C/s", "C/s"),
	scale(TemperatureRate, 1, 3600, "K/h", "°C/h", "C/h"),

	scale(ThermalResistance, 1, 1, "K/W", "°C/W", "C/W"),

	scale(Relative, 1, 100, "%", "percent", "pct"),
	scale(Relative, 1, 1, "1", "-"),
	scale(Relative, 1, 1e6, "ppm"),

	scale(Hardness, 1, 1, "IRHD"),
	scale(Hardness, 1, 1, "Shore A", "ShA", "ShoreA", "SHA"),

	scale(Viscosity, 1, 1, "Pa·s", "Pas", "Pa-s", "N·s/m2", "Ns/m2"),
	scale(Viscosity, 1, 1e3, "mPa·s", "mPas", "mPa-s", "cP"),
	scale(Viscosity, 1e3, 1, "kPa·s", "kPas", "kPa-s"),
	scale(Viscosity, 1e6, 1, "MPa·s", "MPas", "MPa-s"),
	scale(Viscosity, 1, 10, "P", "poise"),

	scale(Expansion, 1, 1, "1/K", "/K", "K-1", "1/°C", "°C-1"),
	scale(Expansion, 1, 1e6, "ppm/K", "10-6/K", "µm/m/K"),

	scale(Torque, 1, 1, "N·m", "Nm"),
	scale(Torque, 1, 1e3, "mN·m", "mNm", "N·mm", "Nmm"),
	scale(Torque, 1, 1e6, "µN·m", "µNm", "uNm"),
}

// Symbols lists the units of a quantity, the preferred one first.
func Symbols(q Quantity) []string {
	var s []string
	for _, u := range units {
		if u.Quantity == q {
			s = append(s, u.Symbol)
		}
	}
	return s
}

// Preferred is the unit in which the program prints a quantity. It panics for
// a quantity that does not exist.
func Preferred(q Quantity) Unit {
	for _, u := range units {
		if u.Quantity == q {
			return u
		}
	}
	panic("unit: no such quantity: " + string(q))
}

// article gives "a temperature", "an angle".
func article(q Quantity) string {
	if strings.ContainsRune("aeiou", rune(q[0])) {
		return "an " + string(q)
	}
	return "a " + string(q)
}
