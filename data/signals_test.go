package data

import (
	"flag"
	"fmt"
	"io"
	"math"
	"math/rand/v2"
	"runtime"
	"strconv"
	"strings"
	"testing"

	"phaselag/data/table"
)

var signalSamples = flag.Int("samples", 1_000_000, "samples of the long record of TestLongSignals")

// piece is one segment of simulated signals: a specimen of known stiffness is moved
// by x0 cos ωt and answers with noise.
type piece struct {
	f, T, x0 float64 // Hz, °C, m
	k        complex128
}

// signalText writes segments as an instrument would: 50 samples a cycle, 12 cycles,
// noise of 0.2 % on both channels.
func signalText(pieces []piece, step bool, noise float64) string {
	random := rand.New(rand.NewPCG(1, 2))
	var b strings.Builder
	if step {
		b.WriteString("step\t")
	}
	b.WriteString("t / s\tF / N\tx / mm\tT / °C\n")
	clock := 0.0
	for i, q := range pieces {
		w := 2 * math.Pi * q.f
		a, d := math.Hypot(real(q.k), imag(q.k)), math.Atan2(imag(q.k), real(q.k))
		for n := range 600 {
			t := float64(n) / (50 * q.f)
			x := q.x0 * (math.Cos(w*t) + noise*random.NormFloat64())
			F := q.x0*a*(math.Cos(w*t+d)+noise*random.NormFloat64()) + 3 // a static part
			if step {
				fmt.Fprintf(&b, "%d\t", i+1)
			}
			fmt.Fprintf(&b, "%.6f\t%.6f\t%.7f\t%.2f\n", clock+t, F, 1e3*x, q.T+0.02*random.NormFloat64())
		}
		clock += 600 / (50 * q.f)
	}
	return b.String()
}

const doublePiece = "specimens: {pair: {shape: double shear, diameter: 25 mm, thickness: 5 mm}}\n"

// A sweep over frequency and temperature comes back as the moduli it was made of,
// with a column of steps and without one.
func TestSignals(t *testing.T) {
	area, h := math.Pi*0.025*0.025/4, 0.005
	var pieces []piece
	for _, T := range []float64{0, 23, 50} {
		for i, f := range []float64{1, 2, 5, 10} {
			pieces = append(pieces, piece{f, T, 5e-5, complex(4e5-2e3*T+3e4*float64(i), 4e4-4e2*T)})
		}
	}
	for _, step := range []bool{true, false} {
		c := mustOpen(t, doublePiece+"tests: [{name: raw, kind: waveform, file: s.txt}]\n", "s.txt", signalText(pieces, step, 0.002))
		test := c.Tests[0]
		if test.Kind != FrequencySweep || len(test.Runs) != 3 || len(test.Signals) != 12 {
			t.Fatalf("step %v: %s with %d runs of %d signals; findings %+v", step, test.Kind, len(test.Runs), len(test.Signals), c.Findings)
		}
		i := 0
		for _, r := range test.Runs {
			for _, p := range r.Points {
				want := pieces[i].k * complex(h/(2*area), 0)
				if math.Abs(p.Frequency/pieces[i].f-1) > 1e-3 || math.Abs(p.Storage/real(want)-1) > 2e-3 || math.Abs(p.Loss/imag(want)-1) > 1e-2 ||
					math.Abs(p.Strain/(5e-5/h)-1) > 1e-3 || math.Abs(p.Temperature-273.15-pieces[i].T) > 0.02 || !p.Used {
					t.Errorf("step %v, segment %d: %+v, should be %v at %g Hz, %g °C", step, i, p, want, pieces[i].f, pieces[i].T)
				}
				i++
			}
		}
		for _, f := range c.Findings {
			if f.Severity == Severe {
				t.Errorf("step %v: %+v", step, f)
			}
		}
		g := test.Signals[5]
		if want := 2 + 5*600; step && g.Row != want {
			t.Errorf("the sixth segment begins in line %d, not %d", g.Row, want)
		}
	}
}

// Amplitude sweeps are told from frequency sweeps, torsion has torque and angle, and
// a channel with the other sign is named, and turned on request.
func TestSignalKinds(t *testing.T) {
	var pieces []piece
	for i := range 6 {
		pieces = append(pieces, piece{5, 23, 1e-5 * math.Pow(2, float64(i)), complex(4e5-1e4*float64(i), 5e4)})
	}
	text := signalText(pieces, true, 0.001)
	c := mustOpen(t, doublePiece+"tests: [{name: raw, kind: waveform, file: s.txt, frequency: 5 Hz, signals: {frequency: known}}]\n", "s.txt", text)
	if k := c.Tests[0].Kind; k != StrainSweep {
		t.Errorf("an amplitude sweep is taken as a %s", k)
	}
	if r := c.Tests[0].Runs[0]; len(r.Points) != 6 || r.Frequency != 5 {
		t.Errorf("%d points at %g Hz", len(r.Points), r.Frequency)
	}

	torsion := strings.Replace(strings.Replace(text, "F / N", "torque / N·m", 1), "x / mm", "angle / mrad", 1)
	torsion = strings.Replace(torsion, "angle / mrad", "angle / rad", 1)
	c = mustOpen(t, "specimens: {p: {shape: parallel plates, diameter: 25 mm, thickness: 2 mm}}\ntests: [{name: raw, kind: waveform, file: s.txt}]\n", "s.txt", torsion)
	// K* = πG*R⁴/2h; the text's x is in mm, the angle in rad, so the numbers differ by 1e3.
	want := real(pieces[0].k) / 1e3 * 2 * 0.002 / (math.Pi * math.Pow(0.0125, 4))
	if p := c.Tests[0].Runs[0].Points[0]; math.Abs(p.Storage/want-1) > 2e-3 {
		t.Errorf("torsion: G' %g, should be %g", p.Storage, want)
	}
	if _, err := OpenFS(memory("c.yaml", doublePiece+"tests: [{name: raw, kind: waveform, file: s.txt}]\n", "s.txt", torsion), "c.yaml"); err == nil || !strings.Contains(err.Error(), "does not turn") {
		t.Errorf("torque on a double shear piece: %v", err)
	}

	for i := range pieces {
		pieces[i].k = -pieces[i].k
	}
	turned := signalText(pieces, true, 0.001)
	_, err := OpenFS(memory("c.yaml", doublePiece+"tests: [{name: raw, kind: waveform, file: s.txt}]\n", "s.txt", turned), "c.yaml")
	if err == nil || !strings.Contains(err.Error(), "reverse_force") {
		t.Errorf("channels that run against each other: %v", err)
	}
	c = mustOpen(t, doublePiece+"tests: [{name: raw, kind: waveform, file: s.txt, signals: {reverse_force: true}}]\n", "s.txt", turned)
	if p := c.Tests[0].Runs[0].Points[0]; !p.Used || !(p.Storage > 0) {
		t.Errorf("turned: %+v", p)
	}
}

// A clipped force makes its segments unusable, and says so.
func TestSignalDoubts(t *testing.T) {
	text := signalText([]piece{{5, 23, 5e-5, complex(4e5, 5e4)}, {10, 23, 5e-5, complex(4e5, 5e4)}, {5, 40, 5e-5, complex(3e5, 5e4)}, {10, 40, 5e-5, complex(3e5, 5e4)}}, true, 0.0005)
	lines := strings.Split(text, "\n")
	for i, l := range lines[1:601] {
		cells := strings.Split(l, "\t")
		if v, _ := strconv.ParseFloat(cells[2], 64); v > 18 {
			cells[2] = "18.000000"
		}
		lines[i+1] = strings.Join(cells, "\t")
	}
	c := mustOpen(t, doublePiece+"tests: [{name: raw, kind: waveform, file: s.txt}]\n", "s.txt", strings.Join(lines, "\n"))
	codes := map[string]Finding{}
	for _, f := range c.Findings {
		codes[f.Code] = f
	}
	if f := codes["channel-clipped"]; f.Severity != Severe || f.Rows != "s.txt:2" || !strings.Contains(f.Evidence, "force") {
		t.Errorf("clipped: %+v", f)
	}
	if p := c.Tests[0].Runs[0].Points[0]; p.Used || !strings.Contains(p.Reason, "not usable") {
		t.Errorf("the clipped segment: %+v", p)
	}
	for _, v := range []struct{ text, want string }{
		{"t / s,F / N\n0,1\n", "time with force and displacement"},
		{"t / s,F / N,x / mm,T / °C\n" + strings.Repeat("0,1,1,20\n", 100), "no steady oscillation"},
		{"t / s,F / N,x / mm\n0,1,1\n1,2,2\n", "temperature"},
	} {
		if _, err := OpenFS(memory("c.yaml", doublePiece+"tests: [{name: raw, kind: waveform, file: s.txt}]\n", "s.txt", v.text), "c.yaml"); err == nil || !strings.Contains(err.Error(), v.want) {
			t.Errorf("%.40q: %v, should say %q", v.text, err, v.want)
		}
	}
}

// longSignal writes samples of one oscillation as text without ever holding it.
type longSignal struct {
	n, i int
	buf  []byte
}

func (l *longSignal) Read(b []byte) (int, error) {
	for len(l.buf) < len(b) && l.i < l.n {
		if l.i == 0 {
			l.buf = append(l.buf, "t / s;F / N;x / mm;T / °C\n"...)
		}
		// 1000 samples a cycle at 1 Hz; δ = 0.1.
		s, c := math.Sincos(2 * math.Pi * float64(l.i%1000) / 1000)
		l.buf = strconv.AppendFloat(l.buf, float64(l.i)/1000, 'f', 3, 64)
		l.buf = append(l.buf, ';')
		l.buf = strconv.AppendFloat(l.buf, 100*(c*math.Cos(0.1)-s*math.Sin(0.1)), 'f', 5, 64)
		l.buf = append(l.buf, ';')
		l.buf = strconv.AppendFloat(l.buf, c, 'f', 6, 64)
		l.buf = append(l.buf, ";23.1\n"...)
		l.i++
	}
	if len(l.buf) == 0 {
		return 0, io.EOF
	}
	n := copy(b, l.buf)
	l.buf = append(l.buf[:0], l.buf[n:]...)
	return n, nil
}

// Millions of samples stream by in little memory (-samples 10000000 takes 300 MB of
// text).
func TestLongSignals(t *testing.T) {
	var before, after runtime.MemStats
	var most uint64
	st, err := table.NewStream("long.csv", &longSignal{n: *signalSamples}, table.Settings{})
	if err != nil {
		t.Fatal(err)
	}
	cols, ok, err := signalColumnsOf(st.Table)
	if !ok || err != nil {
		t.Fatal(ok, err)
	}
	runtime.GC()
	runtime.ReadMemStats(&before)
	done := make(chan struct{})
	go func() {
		defer close(done)
		found, err := analyse(st, cols, math.NaN(), &signalSettings{segments: "stated"})
		if err != nil || len(found) != 1 {
			t.Errorf("%d segments, %v", len(found), err)
			return
		}
		r := found[0].Result
		if math.Abs(r.Frequency-1) > 1e-7 || math.Abs(r.LossAngle-0.1) > 1e-5 || math.Abs(r.Magnitude/1e5-1) > 1e-5 || found[0].Temperature < 296.24 || found[0].Temperature > 296.26 {
			t.Errorf("f %v, δ %v, |K*| %v, T %v", r.Frequency, r.LossAngle, r.Magnitude, found[0].Temperature)
		}
	}()
	for running := true; running; {
		select {
		case <-done:
			running = false
		default:
			runtime.GC()
			runtime.ReadMemStats(&after)
			most = max(most, after.HeapAlloc)
			for range 50 {
				runtime.Gosched()
			}
		}
	}
	if extra := int64(most) - int64(before.HeapAlloc); extra > 16<<20 {
		t.Errorf("%d MB more in use while streaming", extra>>20)
	} else {
		t.Logf("%d samples, %.1f MB more in use while streaming", *signalSamples, float64(extra)/(1<<20))
	}
}

// BenchmarkSignals reads and analyses text signals.
func BenchmarkSignals(b *testing.B) {
	text, _ := io.ReadAll(&longSignal{n: 200_000})
	b.SetBytes(int64(len(text)))
	for b.Loop() {
		st, err := table.NewStream("long.csv", strings.NewReader(string(text)), table.Settings{})
		if err != nil {
			b.Fatal(err)
		}
		cols, _, _ := signalColumnsOf(st.Table)
		found, err := analyse(st, cols, math.NaN(), &signalSettings{segments: "stated"})
		if err != nil || len(found) != 1 || math.Abs(found[0].Result.LossAngle-0.1) > 1e-5 {
			b.Fatal(err, found)
		}
	}
}
