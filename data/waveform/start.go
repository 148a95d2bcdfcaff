package waveform

import (
	"math"
	"math/cmplx"

	"gonum.org/v1/gonum/dsp/fourier"
)

// Problem: a frequency near enough for Gauss-Newton, that is within a third of a
// cycle over the record.
//
// The largest line of the Fourier transform of the detrended, Hann-windowed and
// zero-padded samples, its place improved by the parabola through the logarithms
// of three lines. The window's main lobe is four lines of the record wide: below
// six cycles the record is searched instead for the frequency whose sine, fitted
// together with the trend, leaves the least residual, in steps of a twentieth of a
// cycle over the record. At most maxStart samples are looked at: the first ones,
// and where these hold fewer than six cycles, averages over the whole.

const maxStart = 1 << 14

// startFrequency returns a frequency in Hz, 0 if y has none between low and high.
// dt is the usual step of t in seconds.
func startFrequency(t, y []float64, dt float64, trend int, low, high float64) float64 {
	if len(t) > maxStart {
		f := startFrequency(t[:maxStart], y[:maxStart], dt, trend, low, high)
		if f*(t[maxStart-1]-t[0]) >= 6 {
			return f
		}
		m := (len(t) + maxStart - 1) / maxStart
		var ts, ys []float64
		for i := 0; i+m <= len(t); i += m {
			ts, ys = append(ts, mean(t[i:i+m])), append(ys, mean(y[i:i+m]))
		}
		return startFrequency(ts, ys, dt*float64(m), trend, low, high)
	}
	n := len(t)
	if n < 8 {
		return 0
	}
	length := t[n-1] - t[0]
	if !(length > 0) || math.IsInf(length, 0) {
		return 0
	}
	z, ok := detrended(t, y)
	if !ok {
		return 0
	}
	f := largestLine(t, z, dt, low, high)
	if f*length < 6 {
		f = leastResidual(t, z, trend, low, high)
	}
	return f
}

func mean(x []float64) float64 {
	var s float64
	for _, v := range x {
		s += v / float64(len(x))
	}
	return s
}

// detrended takes the straight line of least squares off y and scales what is left
// to about 1. It reports false where nothing but rounding is left.
func detrended(t, y []float64) ([]float64, bool) {
	tm, ym := mean(t), mean(y)
	var tt, ty, largest float64
	half := (t[len(t)-1] - t[0]) / 2
	for i := range t {
		u := (t[i] - tm) / half
		tt += u * u
		ty += u * (y[i] - ym)
		largest = math.Max(largest, math.Abs(y[i]))
	}
	z := make([]float64, len(t))
	var rest float64
	for i := range t {
		z[i] = y[i] - ym - ty/tt*(t[i]-tm)/half
		rest = math.Max(rest, math.Abs(z[i]))
	}
	if !(rest > 1e-13*largest) || math.IsInf(rest, 0) || math.IsInf(1/rest, 0) {
		return nil, false
	}
	for i := range z {
		z[i] /= rest
	}
	return z, true
}

// largestLine puts the samples on the even grid of dt, with nothing where samples
// are missing. A record with more gaps than samples is taken as if it had none.
func largestLine(t, z []float64, dt, low, high float64) float64 {
	n := len(t)
	slots := n
	if k := (t[n-1] - t[0]) / dt; k < float64(2*n) {
		slots = max(n, int(math.Round(k))+1)
	}
	size := 1
	for size < 2*slots {
		size *= 2
	}
	x := make([]float64, size)
	for i := range t {
		k := i
		if slots > n {
			k = int(math.Round((t[i] - t[0]) / dt))
		}
		if k >= 0 && k < slots {
			x[k] = z[i] * (0.5 - 0.5*math.Cos(2*math.Pi*(float64(k)+0.5)/float64(slots)))
		}
	}
	line := fourier.NewFFT(size).Coefficients(nil, x)
	step := 1 / (float64(size) * dt)
	best, most := 0, 0.0
	for k := 1; k < len(line)-1; k++ {
		if f := float64(k) * step; f < low || f > high {
			continue
		}
		if a := cmplx.Abs(line[k]); a > most {
			best, most = k, a
		}
	}
	if best == 0 {
		return 0
	}
	a, b, c := math.Log(cmplx.Abs(line[best-1])), math.Log(most), math.Log(cmplx.Abs(line[best+1]))
	shift := (a - c) / (2 * (a - 2*b + c))
	if !(math.Abs(shift) <= 1) {
		shift = 0
	}
	return (float64(best) + shift) * step
}

// leastResidual searches from 0.3 to 8 cycles a record.
func leastResidual(t, z []float64, trend int, low, high float64) float64 {
	m := (len(t) + 1023) / 1024
	var ts, zs []float64
	for i := 0; i+m <= len(t); i += m {
		ts, zs = append(ts, mean(t[i:i+m])), append(zs, mean(z[i:i+m]))
	}
	l := layout{harmonics: 1, trend: trend, channels: 1}
	length := t[len(t)-1] - t[0]
	best, least := 0.0, math.Inf(1)
	for k := 6; k <= 160; k++ {
		f := float64(k) / 20 / length
		if f < low || f > high || f > float64(len(ts)-1)/length/2.5 {
			continue
		}
		s := fitSamples(ts, [][]float64{zs}, l, 2*math.Pi*f, false)
		if s != nil && s.rss[0][0] < least {
			best, least = f, s.rss[0][0]
		}
	}
	return best
}
