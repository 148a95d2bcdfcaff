package data

import (
	"math"

	"phaselag/data/table"
)

// Storage and loss modulus from any two that determine them. With G* = G' + iG”,
// G' = |G*|cos δ, G” = |G*|sin δ, η = tan δ = G”/G':
//
//	G', G''    as they stand
//	G', η      G'' = ηG'
//	G', δ      G'' = G' tan δ
//	G'', η     G' = G''/η
//	G'', δ     G' = G''/tan δ
//	|G*|, δ    as above
//	|G*|, η    G' = |G*|/√(1+η²), G'' = ηG'
//	|G*|, G'   G'' = √(|G*|²−G'²), the positive root
//	|G*|, G''  G' = √(|G*|²−G''²), the positive root
//
// The first pair of this list that a table has is taken. The roots lose digits
// where their two numbers are close; a difference that is negative by less than
// the printed digits carry (1e-3) gives zero.
type pair struct {
	a, b    table.Concept
	complex func(a, b float64) (storage, loss float64)
}

var pairs = []pair{
	{table.Storage, table.Loss, func(a, b float64) (float64, float64) { return a, b }},
	{table.Storage, table.LossFactor, func(a, b float64) (float64, float64) { return a, a * b }},
	{table.Storage, table.Phase, func(a, b float64) (float64, float64) { return a, a * tangent(b) }},
	{table.Loss, table.LossFactor, func(a, b float64) (float64, float64) { return a / b, a }},
	{table.Loss, table.Phase, func(a, b float64) (float64, float64) { return a / tangent(b), a }},
	{table.Magnitude, table.Phase, func(a, b float64) (float64, float64) { return a * math.Cos(b), a * math.Sin(b) }},
	{table.Magnitude, table.LossFactor, func(a, b float64) (float64, float64) { s := a / math.Hypot(1, b); return s, b * s }},
	{table.Magnitude, table.Storage, func(a, b float64) (float64, float64) { return b, leg(a, b) }},
	{table.Magnitude, table.Loss, func(a, b float64) (float64, float64) { return leg(a, b), b }},
}

// leg is the other leg of a right triangle; NaN where the leg is longer than
// the hypotenuse.
func leg(hypotenuse, other float64) float64 {
	r := other / hypotenuse
	d := (1 - r) * (1 + r)
	if d < 0 && d > -2e-3 {
		d = 0
	}
	return hypotenuse * math.Sqrt(d)
}

// tangent is tan δ for angles that a loss angle can have, NaN outside 0 ≤ δ < π/2
// except for small negative ones, which become negative loss moduli and are
// reported as such.
func tangent(delta float64) float64 {
	if delta <= -math.Pi/2 || delta >= math.Pi/2 {
		return math.NaN()
	}
	return math.Tan(delta)
}

// fault says why a complex modulus cannot be used, "" if it can.
func modulusFault(storage, loss float64) string {
	switch {
	case math.IsNaN(storage) || math.IsNaN(loss):
		return "modulus not measured"
	case math.IsInf(storage, 0) || math.IsInf(loss, 0):
		return "modulus infinite"
	case storage <= 0:
		return "storage modulus not positive"
	case loss < 0:
		return "loss modulus negative"
	}
	return ""
}
