package demo

import (
	"bytes"
	"fmt"
	"math"
	"math/cmplx"
	"math/rand/v2"
	"strconv"
)

// Drawn is what chance gave one simulated campaign: the errors behind its
// numbers, which its files do not tell.
type Drawn struct {
	TemperatureCommon float64  // K
	Phase             float64  // rad
	Factors           []Factor // of each specimen and mounting, in the order of first use
	Runs              []Run    // in the order of the campaign file
}

// Factor is the factor on every modulus of one mounting of one specimen.
type Factor struct {
	Specimen, Mounting string
	Value              float64
}

// Run is the error of temperature of one run: true minus written, in K, the
// common part excluded.
type Run struct {
	Test   string
	Offset float64
}

// Campaign returns the files that a laboratory working by the plan would hand
// over for the compound. Equal arguments give equal bytes.
//
// Errors act as they do in a laboratory: a specimen's factor multiplies every
// modulus measured on it, the phase's common part turns every modulus, and a
// run's true temperature is the written one plus the common and its own error,
// so the modulus belongs to a temperature that no file mentions. The draws are
// standard normal, in a fixed order (common temperature, common phase, factor
// by factor, then run by run: offset, lag, and four for every row), and they
// are made even where their standard deviation is zero, so that one seed means
// the same chance at every level of noise.
//
// It panics where the plan does not fit together, which is a programmer's
// fault.
func Campaign(truth Truth, plan Plan, seed uint64) Files {
	l := &laboratory{truth: truth, plan: plan, rand: rand.New(rand.NewPCG(seed, 0x706861736c6167))}
	l.drawn.TemperatureCommon = plan.Errors.TemperatureCommon * l.rand.NormFloat64()
	l.drawn.Phase = plan.Errors.Phase * math.Pi / 180 * l.rand.NormFloat64()
	for _, t := range plan.Tests {
		if l.factor(t) == 0 {
			l.drawn.Factors = append(l.drawn.Factors, Factor{t.Specimen, t.mounting(), math.Exp(plan.Errors.Geometry * l.rand.NormFloat64())})
		}
	}
	var tables []file
	var statics []string // by test, "" where it has a table
	for _, t := range plan.Tests {
		if t.Kind == Static {
			statics = append(statics, l.static(t))
			continue
		}
		statics = append(statics, "")
		tables = append(tables, file{t.File, l.table(t)})
	}
	list := append([]file{{CampaignFile, campaignFile(truth, plan, statics)}}, tables...)
	return Files{Drawn: l.drawn, list: list}
}

type laboratory struct {
	truth Truth
	plan  Plan
	rand  *rand.Rand
	drawn Drawn
}

func (t Test) mounting() string {
	if t.Mounting == "" {
		return "1"
	}
	return t.Mounting
}

// factor returns the drawn factor of a test's specimen, 0 if there is none yet.
func (l *laboratory) factor(t Test) float64 {
	for _, f := range l.drawn.Factors {
		if f.Specimen == t.Specimen && f.Mounting == t.mounting() {
			return f.Value
		}
	}
	return 0
}

// run draws the offset of a new run and returns what to add to a written
// temperature to get the true one.
func (l *laboratory) run(t Test) float64 {
	scatter, lag := l.rand.NormFloat64(), l.rand.NormFloat64()
	offset := l.plan.Errors.TemperatureScatter * scatter
	if t.Kind == TemperatureSweep {
		offset += l.plan.Errors.Lag * lag
	}
	l.drawn.Runs = append(l.drawn.Runs, Run{t.Name, offset})
	return l.drawn.TemperatureCommon + offset
}

// table measures one test and writes its rows.
func (l *laboratory) table(t Test) []byte {
	var b bytes.Buffer
	for _, h := range l.plan.Head {
		fmt.Fprintf(&b, "# %s\n", h)
	}
	fmt.Fprintln(&b, t.heading())
	switch t.Kind {
	case FrequencySweep:
		for _, celsius := range t.Temperatures {
			offset := l.run(t)
			for _, f := range t.Frequencies {
				l.oscillate(&b, t, f, celsius, offset, one(t.Strains, t.Name))
			}
		}
	case StrainSweep:
		for _, celsius := range t.Temperatures {
			for _, f := range t.Frequencies {
				offset := l.run(t)
				for _, s := range t.Strains {
					l.oscillate(&b, t, f, celsius, offset, s)
				}
			}
		}
	case TemperatureSweep:
		for _, f := range t.Frequencies {
			offset := l.run(t)
			for _, celsius := range t.Temperatures {
				l.oscillate(&b, t, f, celsius, offset, one(t.Strains, t.Name))
			}
		}
	case Relaxation:
		for _, celsius := range t.Temperatures {
			offset := l.run(t)
			for _, s := range t.Times {
				l.relax(&b, t, s, celsius, offset, one(t.Strains, t.Name))
			}
		}
	default:
		panic("demo: unknown kind of test: " + string(t.Kind))
	}
	return b.Bytes()
}

// heading returns the heading row of a test's table.
func (t Test) heading() string {
	strain := ",strain / %"
	if t.OmitStrain {
		strain = ""
	}
	if t.Kind == Relaxation {
		return "t / s,T / °C" + strain + ",G(t) / MPa"
	}
	head := "f / Hz,T / °C" + strain
	switch t.Pair {
	case StorageLossFactor:
		return head + ",G' / MPa,tan δ"
	case MagnitudePhase:
		return head + ",|G*| / MPa,δ / deg"
	}
	if t.LossFactor {
		return head + ",G' / MPa,G'' / MPa,tan δ"
	}
	return head + ",G' / MPa,G'' / MPa"
}

// oscillate measures one point and writes its row. The conditions are rounded
// first: what is written is what was set.
func (l *laboratory) oscillate(b *bytes.Buffer, t Test, hertz, celsius, offset, percent float64) {
	hertz, percent = l.round(hertz), l.round(percent)
	g := l.truth.Modulus(hertz, celsius+273.15+offset, percent/100)
	n := t.Noise
	magnitude, phase := n.Magnitude*l.rand.NormFloat64(), n.Phase*math.Pi/180*l.rand.NormFloat64()
	storage, loss := n.Storage*l.rand.NormFloat64(), n.Loss*l.rand.NormFloat64()
	if n.Magnitude != 0 || n.Phase != 0 || l.drawn.Phase != 0 {
		g *= cmplx.Rect(math.Exp(magnitude), phase+l.drawn.Phase)
	}
	g = complex(real(g)*(1+storage), imag(g)*(1+loss)) * complex(l.factor(t)*1e-6, 0)
	fmt.Fprintf(b, "%s,%s", l.write(hertz), l.write(celsius))
	if !t.OmitStrain {
		fmt.Fprintf(b, ",%s", l.write(percent))
	}
	switch t.Pair {
	case StorageLossFactor:
		fmt.Fprintf(b, ",%s,%s\n", l.write(real(g)), l.write(imag(g)/real(g)))
	case MagnitudePhase:
		fmt.Fprintf(b, ",%s,%s\n", l.write(cmplx.Abs(g)), l.write(cmplx.Phase(g)*180/math.Pi))
	default:
		fmt.Fprintf(b, ",%s,%s", l.write(real(g)), l.write(imag(g)))
		if t.LossFactor {
			fmt.Fprintf(b, ",%s", l.write(imag(g)/real(g)))
		}
		b.WriteByte('\n')
	}
}

// relax measures one point of a relaxation and writes its row.
func (l *laboratory) relax(b *bytes.Buffer, t Test, seconds, celsius, offset, percent float64) {
	seconds, percent = l.round(seconds), l.round(percent)
	g := l.relaxed(t, seconds, celsius, offset, percent)
	fmt.Fprintf(b, "%s,%s", l.write(seconds), l.write(celsius))
	if !t.OmitStrain {
		fmt.Fprintf(b, ",%s", l.write(percent))
	}
	fmt.Fprintf(b, ",%s\n", l.write(g))
}

// relaxed returns a measured relaxation modulus in MPa.
func (l *laboratory) relaxed(t Test, seconds, celsius, offset, percent float64) float64 {
	draw := l.rand.NormFloat64()
	for range 3 { // four draws a row, whatever its kind
		l.rand.NormFloat64()
	}
	g := l.truth.Relaxation(seconds, celsius+273.15+offset, percent/100)
	return g * math.Exp(t.Noise.Magnitude*draw) * l.factor(t) * 1e-6
}

// static measures a static modulus and returns its entry in the campaign file.
func (l *laboratory) static(t Test) string {
	offset := l.run(t)
	celsius, percent, seconds := one(t.Temperatures, t.Name), one(t.Strains, t.Name), one(t.Times, t.Name)
	g := l.relaxed(t, seconds, celsius, offset, percent)
	u := ""
	if t.Noise.Magnitude > 0 {
		u = fmt.Sprintf("u: %s %%, ", l.write(t.Noise.Magnitude*100))
	}
	return fmt.Sprintf("{modulus: %s MPa, %sstrain: %s %%, time: %s s, temperature: %s °C}",
		l.write(g), u, l.write(percent), l.write(seconds), l.write(celsius))
}

// write formats a number as the plan's laboratory does.
func (l *laboratory) write(x float64) string {
	if l.plan.Digits == 0 {
		return strconv.FormatFloat(x, 'g', -1, 64)
	}
	return strconv.FormatFloat(l.round(x), 'g', -1, 64)
}

// round rounds to the plan's digits.
func (l *laboratory) round(x float64) float64 {
	if l.plan.Digits == 0 {
		return x
	}
	r, err := strconv.ParseFloat(strconv.FormatFloat(x, 'e', l.plan.Digits-1, 64), 64)
	if err != nil {
		panic("demo: " + err.Error())
	}
	return r
}

// one returns the only element of a list that must have one.
func one(list []float64, test string) float64 {
	if len(list) != 1 {
		panic("demo: test " + test + ": want exactly one value")
	}
	return list[0]
}
