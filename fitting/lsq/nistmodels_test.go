package lsq

import "math"

// A nistModel returns the model at x (two regressors for Nelson, one otherwise)
// and writes its derivatives by the parameters b to d.
type nistModel func(d, b, x []float64) float64

var exp, pow = math.Exp, math.Pow

// The 27 models as NIST states them, each with its derivatives.
var nistModels = map[string]nistModel{
	"Bennett5": func(d, b, x []float64) float64 {
		u := b[1] + x[0]
		e := pow(u, -1/b[2])
		d[0] = e
		d[1] = -b[0] / b[2] * e / u
		d[2] = b[0] * e * math.Log(u) / (b[2] * b[2])
		return b[0] * e
	},
	"BoxBOD": saturation,
	"Chwirut1": func(d, b, x []float64) float64 {
		e := exp(-b[0] * x[0])
		v := b[1] + b[2]*x[0]
		f := e / v
		d[0], d[1], d[2] = -x[0]*f, -f/v, -x[0]*f/v
		return f
	},
	"DanWood": func(d, b, x []float64) float64 {
		e := pow(x[0], b[1])
		d[0], d[1] = e, b[0]*e*math.Log(x[0])
		return b[0] * e
	},
	"ENSO": func(d, b, x []float64) float64 {
		year := 2 * math.Pi * x[0] / 12
		d[0], d[1], d[2] = 1, math.Cos(year), math.Sin(year)
		f := b[0] + b[1]*d[1] + b[2]*d[2]
		for _, k := range []int{3, 6} {
			w := 2 * math.Pi * x[0] / b[k]
			s, c := math.Sincos(w)
			d[k] = (b[k+1]*s - b[k+2]*c) * w / b[k]
			d[k+1], d[k+2] = c, s
			f += b[k+1]*c + b[k+2]*s
		}
		return f
	},
	"Eckerle4": func(d, b, x []float64) float64 {
		z := (x[0] - b[2]) / b[1]
		e := exp(-0.5*z*z) / b[1]
		f := b[0] * e
		d[0], d[1], d[2] = e, f*(z*z-1)/b[1], f*z/b[1]
		return f
	},
	"Gauss1": func(d, b, x []float64) float64 {
		d[0] = exp(-b[1] * x[0])
		f := b[0] * d[0]
		d[1] = -x[0] * f
		for _, k := range []int{2, 5} {
			z := (x[0] - b[k+1]) / b[k+2]
			e := exp(-z * z)
			d[k] = e
			d[k+1] = 2 * b[k] * e * z / b[k+2]
			d[k+2] = d[k+1] * z
			f += b[k] * e
		}
		return f
	},
	"Hahn1": func(d, b, x []float64) float64 {
		t := x[0]
		v := 1 + t*(b[4]+t*(b[5]+t*b[6]))
		f := (b[0] + t*(b[1]+t*(b[2]+t*b[3]))) / v
		d[0], d[1], d[2], d[3] = 1/v, t/v, t*t/v, t*t*t/v
		d[4], d[5], d[6] = -f*t/v, -f*t*t/v, -f*t*t*t/v
		return f
	},
	"Kirby2": func(d, b, x []float64) float64 {
		t := x[0]
		v := 1 + t*(b[3]+t*b[4])
		f := (b[0] + t*(b[1]+t*b[2])) / v
		d[0], d[1], d[2] = 1/v, t/v, t*t/v
		d[3], d[4] = -f*t/v, -f*t*t/v
		return f
	},
	"Lanczos1": func(d, b, x []float64) float64 {
		var f float64
		for k := 0; k < 6; k += 2 {
			e := exp(-b[k+1] * x[0])
			d[k], d[k+1] = e, -x[0]*b[k]*e
			f += b[k] * e
		}
		return f
	},
	"MGH09": func(d, b, x []float64) float64 {
		t := x[0]
		u, v := t*(t+b[1]), t*(t+b[2])+b[3]
		f := b[0] * u / v
		d[0], d[1], d[2], d[3] = u/v, b[0]*t/v, -f*t/v, -f/v
		return f
	},
	"MGH10": func(d, b, x []float64) float64 {
		v := x[0] + b[2]
		e := exp(b[1] / v)
		f := b[0] * e
		d[0], d[1], d[2] = e, f/v, -f*b[1]/(v*v)
		return f
	},
	"MGH17": func(d, b, x []float64) float64 {
		e, g := exp(-x[0]*b[3]), exp(-x[0]*b[4])
		d[0], d[1], d[2] = 1, e, g
		d[3], d[4] = -x[0]*b[1]*e, -x[0]*b[2]*g
		return b[0] + b[1]*e + b[2]*g
	},
	"Misra1a": saturation,
	"Misra1b": func(d, b, x []float64) float64 {
		u := 1 + b[1]*x[0]/2
		d[0] = 1 - 1/(u*u)
		d[1] = b[0] * x[0] / (u * u * u)
		return b[0] * d[0]
	},
	"Misra1c": func(d, b, x []float64) float64 {
		u := 1 + 2*b[1]*x[0]
		d[0] = 1 - 1/math.Sqrt(u)
		d[1] = b[0] * x[0] / (u * math.Sqrt(u))
		return b[0] * d[0]
	},
	"Misra1d": func(d, b, x []float64) float64 {
		u := 1 + b[1]*x[0]
		d[0] = b[1] * x[0] / u
		d[1] = b[0] * x[0] / (u * u)
		return b[0] * d[0]
	},
	"Nelson": func(d, b, x []float64) float64 {
		e := exp(-b[2] * x[1])
		d[0], d[1], d[2] = 1, -x[0]*e, b[1]*x[0]*x[1]*e
		return b[0] - b[1]*x[0]*e
	},
	"Rat42": func(d, b, x []float64) float64 {
		e := exp(b[1] - b[2]*x[0])
		f := b[0] / (1 + e)
		d[0], d[1], d[2] = 1/(1+e), -f*e/(1+e), f*x[0]*e/(1+e)
		return f
	},
	"Rat43": func(d, b, x []float64) float64 {
		e := exp(b[1] - b[2]*x[0])
		g := pow(1+e, -1/b[3])
		f := b[0] * g
		d[0] = g
		d[1] = -f / b[3] * e / (1 + e)
		d[2] = -x[0] * d[1]
		d[3] = f * math.Log1p(e) / (b[3] * b[3])
		return f
	},
	"Roszman1": func(d, b, x []float64) float64 {
		v := x[0] - b[3]
		s := math.Pi * (v*v + b[2]*b[2])
		d[0], d[1], d[2], d[3] = 1, -x[0], -v/s, -b[2]/s
		return b[0] - b[1]*x[0] - math.Atan(b[2]/v)/math.Pi
	},
}

func init() {
	for name, same := range map[string]string{
		"Chwirut2": "Chwirut1", "Gauss2": "Gauss1", "Gauss3": "Gauss1",
		"Lanczos2": "Lanczos1", "Lanczos3": "Lanczos1", "Thurber": "Hahn1",
	} {
		nistModels[name] = nistModels[same]
	}
}

// b1·(1 − exp(−b2·x))
func saturation(d, b, x []float64) float64 {
	e := exp(-b[1] * x[0])
	d[0] = -math.Expm1(-b[1] * x[0])
	d[1] = b[0] * x[0] * e
	return b[0] * d[0]
}
