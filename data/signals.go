package data

import (
	"errors"
	"fmt"
	"io"
	"math"

	"phaselag/data/place"
	"phaselag/data/table"
	"phaselag/data/waveform"
)

// From signals to points. A file of force and displacement (or torque and angle)
// against time is read sample by sample and parted into segments of one frequency
// and amplitude: by a column that numbers them, by blank lines and repeated headings,
// by a time that starts again, and else where the motion changes. Each segment's
// sine fits give K*, and the specimen's shape makes it G*.

// Signal is what was found in one segment of raw signals.
type Signal struct {
	File        string
	Row         int     // of its first sample
	Temperature float64 // K, mean over the segment; NaN if not known
	Torsion     bool    // torque and angle in place of force and displacement
	waveform.Segment
}

// signalSettings are the key "signals" of a test of kind waveform.
type signalSettings struct {
	known     bool   // the frequency stated for the test is exact
	segments  string // "auto", "stated" or "detected"
	leaveOut  int    // cycles; 0: found
	harmonics int    // 0: five
	sweep     Kind   // "": by what varies
	reversed  bool   // the force has the other sign
}

func (t *tree) signalSettings(k mapping) *signalSettings {
	m, _ := t.mapping(k.values["signals"], k.sub("signals"), "segments", "frequency", "leave_out_cycles", "harmonics", "sweep", "reverse_force")
	set := &signalSettings{
		segments:  m.choice("segments", "auto", "auto", "stated", "detected"),
		known:     m.choice("frequency", "fitted", "fitted", "known") == "known",
		leaveOut:  m.count("leave_out_cycles"),
		harmonics: m.count("harmonics"),
		sweep:     map[string]Kind{"frequency": FrequencySweep, "strain": StrainSweep, "temperature": TemperatureSweep}[m.choice("sweep", "", "frequency", "strain", "temperature")],
		reversed:  m.flag("reverse_force"),
	}
	if set.known && !k.has("frequency") {
		t.fault(m.at("frequency"), m.sub("frequency"), "frequency: 10 Hz beside signals", "a known frequency, and the test states none")
	}
	if set.harmonics > 9 {
		t.fault(m.at("harmonics"), m.sub("harmonics"), "", "at most 9 harmonics are fitted")
	}
	return set
}

// signalColumns are the columns of a file of signals; -1: none.
type signalColumns struct {
	time, force, displacement, temperature int
	segments                               []int
	torsion                                bool
}

// signalColumnsOf finds them; ok is false where the table has no signals.
func signalColumnsOf(t *table.Table) (cols signalColumns, ok bool, err error) {
	find := func(c table.Concept) int {
		i, e := t.Find(c)
		if e != nil && err == nil {
			err = e
		}
		return i
	}
	has := func(c table.Concept) bool { return len(t.FindAll(c)) > 0 }
	cols.torsion = has(table.Torque) && has(table.Angle) && !(has(table.Force) && has(table.Displacement))
	force, displacement := table.Force, table.Displacement
	if cols.torsion {
		force, displacement = table.Torque, table.Angle
	}
	if !has(table.Time) || !has(force) || !has(displacement) {
		return cols, false, nil
	}
	cols.time, cols.force, cols.displacement = find(table.Time), find(force), find(displacement)
	cols.temperature = -1
	if has(table.Temperature) {
		cols.temperature = find(table.Temperature)
	}
	cols.segments = t.FindAll(table.Segment)
	return cols, err == nil, err
}

// meanEvery is over how many samples a slow channel is averaged while it streams
// by.
const meanEvery = 256

// slow keeps a slow channel and the lines of a long record in little memory.
type slow struct {
	sums   []float64 // before every meanEvery-th sample, of the samples that have a value
	counts []int
	sum    float64
	count  int
	n      int
	lines  [][2]int // sample and line, where line − sample changes
}

func (s *slow) add(value float64, line int) {
	if s.n%meanEvery == 0 {
		s.sums, s.counts = append(s.sums, s.sum), append(s.counts, s.count)
	}
	if k := len(s.lines); k == 0 || line-s.n != s.lines[k-1][1]-s.lines[k-1][0] {
		s.lines = append(s.lines, [2]int{s.n, line})
	}
	if !math.IsNaN(value) {
		s.sum += value
		s.count++
	}
	s.n++
}

// mean is over samples first to last, to the next meanEvery-th sample inside;
// over the nearest ones of a segment shorter than that. NaN of nothing.
func (s *slow) mean(first, last int) float64 {
	a, b := (first+meanEvery-1)/meanEvery, (last+1)/meanEvery
	if b <= a {
		a, b = first/meanEvery, last/meanEvery+1
	}
	at := func(k int) (float64, int) {
		if k >= len(s.sums) {
			return s.sum, s.count
		}
		return s.sums[k], s.counts[k]
	}
	s0, n0 := at(a)
	s1, n1 := at(b)
	return (s1 - s0) / float64(n1-n0)
}

func (s *slow) line(sample int) int {
	line := 0
	for _, l := range s.lines {
		if l[0] > sample {
			break
		}
		line = l[1] + sample - l[0]
	}
	return line
}

// readSignals analyses one file and adds a point for each of its segments.
func (p *plan) readSignals(s *source, c *Campaign, f tableFile) error {
	var found []Signal
	err := s.stream(f.resolved, f.written, func(r io.Reader) error {
		st, err := table.NewStream(f.resolved, r, p.settings)
		if err != nil {
			return err
		}
		for _, a := range st.Table.Assumptions {
			c.assume("%s: %s", f.written, a)
		}
		cols, ok, err := signalColumnsOf(st.Table)
		if err != nil {
			return err
		}
		if !ok {
			return p.lack(st.Table, "signals: time with force and displacement, or with torque and angle, are needed", table.Time, table.Force, table.Displacement)
		}
		if err := p.describeShape(c, st.Table); err != nil {
			return err
		}
		if err := p.shaped(st.Table, "the table has force and displacement", cols.torsion); err != nil {
			return err
		}
		if cols.temperature < 0 && math.IsNaN(p.temperature) {
			return p.constants(st.Table, &columnSet{temperature: -1}, false)
		}
		p.describeSignals(st.Table, f.written, cols)
		found, err = analyse(st, cols, p.frequency, p.signals)
		return err
	})
	if err != nil {
		return err
	}
	for i := range found {
		g := &found[i]
		g.File = f.written
		if math.IsNaN(g.Temperature) {
			g.Temperature = p.temperature
		}
		p.points = append(p.points, p.signalPoint(g))
	}
	p.Signals = append(p.Signals, found...)
	return p.screenPoints(c, f.written)
}

func (p *plan) describeSignals(t *table.Table, written string, cols signalColumns) {
	for i, col := range t.Columns {
		if i == cols.time || i == cols.force || i == cols.displacement || i == cols.temperature {
			p.Columns = append(p.Columns, Column{File: written, Heading: col.Heading, Quantity: string(col.Concept), Unit: col.Unit.Symbol})
		}
	}
}

// analyse streams a table of signals through the analyser. frequency is the nominal
// one in Hz, NaN if not stated.
func analyse(st *table.Stream, cols signalColumns, frequency float64, set *signalSettings) ([]Signal, error) {
	settings := &waveform.Settings{LeaveOut: set.leaveOut, Harmonics: set.harmonics}
	if frequency > 0 {
		settings.Frequency, settings.Known = frequency, set.known
	}
	settings.Detect = set.segments == "detected" || set.segments == "auto" && len(cols.segments) == 0
	a, err := waveform.NewAnalyser(settings)
	if err != nil {
		return nil, &place.Error{File: st.Table.File, Err: err}
	}
	columns := []int{cols.time, cols.force, cols.displacement}
	if cols.temperature >= 0 {
		columns = append(columns, cols.temperature)
	}
	values := make([]float64, len(columns))
	texts, before := make([]string, len(cols.segments)), make([]string, len(cols.segments))
	var keep slow
	step, block, last := 0, 0, math.NaN()
	for {
		at, err := st.Next(columns, values, cols.segments, texts)
		if errors.Is(err, io.EOF) {
			break
		}
		if err != nil {
			return nil, err
		}
		changed := at.Block != block
		for i := range texts {
			changed = changed || texts[i] != before[i]
		}
		// A clock that starts again, not one that stumbles.
		if t := values[0]; t < last && t <= 0.01*last {
			changed = true
		}
		if changed && keep.n > 0 && set.segments != "detected" {
			step++
		}
		block = at.Block
		copy(before, texts)
		if !math.IsNaN(values[0]) {
			last = values[0]
		}
		force := values[1]
		if set.reversed {
			force = -force
		}
		a.AddStep(float64(step), values[0], force, values[2])
		temperature := math.NaN()
		if cols.temperature >= 0 {
			temperature = values[3]
		}
		keep.add(temperature, at.Line)
	}
	var out []Signal
	for _, s := range a.Finish() {
		out = append(out, Signal{Row: keep.line(s.First), Temperature: keep.mean(s.First, s.Last), Torsion: cols.torsion, Segment: s})
	}
	if len(out) == 0 {
		return nil, &place.Error{File: st.Table.File, What: "no steady oscillation was found in the displacement",
			Hint: "a segment needs a cycle or more at one frequency and amplitude; with a column that numbers the segments say signals: {segments: stated}"}
	}
	return out, nil
}

// signalPoint turns a segment into a point.
func (p *plan) signalPoint(g *Signal) raw {
	nan := math.NaN()
	pt := raw{Point: Point{File: g.File, Row: g.Row, Frequency: g.Result.Frequency, Temperature: g.Temperature, Strain: nan, Time: nan,
		Storage: nan, Loss: nan, MassShare: nan, FrameShare: nan, StatedLossFactor: nan, StatedViscosity: nan}, set: nan}
	if g.Err != nil {
		pt.Frequency = nan
		pt.Reason = "segment not usable: " + g.Err.Error()
		return pt
	}
	r := &g.Result
	pt.Storage, pt.Loss = real(r.Stiffness), imag(r.Stiffness)
	pt.Strain = p.shape.Strain(r.Displacement.Amplitude)
	p.moved = true
	switch {
	case math.Abs(r.LossAngle) > math.Pi/2:
		pt.Reason = fmt.Sprintf("force and displacement run against each other (loss angle %.1f°); if one has the other sign, say signals: {reverse_force: true}", r.LossAngle*180/math.Pi)
	case !r.Usable():
		for _, d := range r.Doubts {
			if d.Severity == waveform.Severe {
				pt.Reason = "segment not usable: " + d.Evidence
				break
			}
		}
	default:
		pt.Reason = modulusFault(pt.Storage, pt.Loss)
	}
	p.stiff = true
	if pt.Reason == "" {
		p.throughShape(&pt.Point)
	}
	if pt.Reason == "" && math.IsNaN(pt.Temperature) {
		pt.Reason = "temperature not measured"
	}
	for _, x := range p.leaveOut {
		if pt.Reason == "" && x.holds(pt.Point) {
			pt.Reason = leftOutPrefix + x.because
		}
	}
	pt.Used = pt.Reason == ""
	return pt
}

// nonlinear is the third harmonic of the force over its fundamental from which on a
// sine says less than the loop; this program's own rule.
const nonlinear = 0.03

// concludeSignals settles the kind of the test and turns the segments' doubts into
// findings.
func (p *plan) concludeSignals(c *Campaign) {
	p.Kind = p.signals.sweep
	if p.Kind == "" {
		p.Kind = p.variation()
		c.assume("%s: signals of %d segments, taken as a %s by what varies", p.Name, len(p.Signals), p.Kind)
	}
	type group struct {
		worst  waveform.Doubt
		points []Point
	}
	groups := map[waveform.Code]*group{}
	var order []waveform.Code
	usable := 0
	for i, g := range p.Signals {
		if g.Err != nil {
			continue
		}
		usable++
		doubts := g.Result.Doubts
		if r := g.Result.Nonlinearity; r > nonlinear && r > 3*g.Result.UNonlinearity {
			doubts = append(doubts[:len(doubts):len(doubts)], waveform.Doubt{Code: "force-not-sinusoidal", Severity: waveform.Suspect, Value: r, Limit: nonlinear,
				Evidence: fmt.Sprintf("the third harmonic of the force is %.1f %% of its fundamental", 100*r),
				Cause:    "the amplitude is beyond the linear range, contact is lost, or the piece slips", Remedy: "use smaller amplitudes, or take the modulus as that of the fundamental"})
		}
		for _, d := range doubts {
			v := groups[d.Code]
			if v == nil {
				v = &group{worst: d}
				groups[d.Code] = v
				order = append(order, d.Code)
			}
			if math.Abs(d.Value) > math.Abs(v.worst.Value) && d.Severity == v.worst.Severity || rank(d.Severity) > rank(v.worst.Severity) {
				v.worst = d
			}
			v.points = append(v.points, p.points[len(p.points)-len(p.Signals)+i].Point)
		}
	}
	for _, code := range order {
		v := groups[code]
		channel := ""
		if v.worst.Channel != "" {
			channel = v.worst.Channel + ": "
		}
		many := ""
		if len(v.points) > 1 {
			many = fmt.Sprintf("; worst of %d segments among %d", len(v.points), usable)
		}
		c.Findings = append(c.Findings, Finding{Code: string(code), Severity: Severity(v.worst.Severity), Test: p.Name, Rows: Places(v.points),
			Evidence: channel + v.worst.Evidence + many, Cause: v.worst.Cause, Remedy: v.worst.Remedy})
	}
}

func rank(s waveform.Severity) int {
	return map[waveform.Severity]int{waveform.Note: 0, waveform.Suspect: 1, waveform.Severe: 2}[s]
}

// variation tells the kind of a test of signals by what changes most often from
// segment to segment.
func (p *plan) variation() Kind {
	var f, s, T int
	var before *raw
	for i := range p.points {
		q := &p.points[i]
		if !q.Used {
			continue
		}
		if b := before; b != nil {
			if math.Abs(q.Frequency-b.Frequency) > 0.02*b.Frequency {
				f++
			}
			if math.Abs(q.Strain-b.Strain) > 0.05*b.Strain {
				s++
			}
			if math.Abs(q.Temperature-b.Temperature) > temperatureJump {
				T++
			}
		}
		before = q
	}
	switch {
	case f >= max(s, T):
		return FrequencySweep
	case s >= T:
		return StrainSweep
	}
	return TemperatureSweep
}
