package interactive

import (
	"bytes"
	"encoding/json"
	"fmt"
	"math"

	"phaselag/data/unit"
	"phaselag/models"
	"phaselag/reports/figure"
)

// pageData is the JSON block of the page: the compound file, and what the scripts
// cannot know by themselves.
type pageData struct {
	Compound *models.Compound `json:"compound"`
	Quantile float64          `json:"quantile"` // half-width over standard uncertainty
	Symbol   string           `json:"symbol"`   // G or E
	Note     string           `json:"note"`     // said where no strain amplitude is typed
	Curves   []curve          `json:"curves"`
	Window   [2]float64       `json:"window_Hz"` // of the charts over frequency
	Kinds    []kind           `json:"kinds"`     // frequency, temperature, strain
}

// curve is one temperature of the charts.
type curve struct {
	TemperatureC float64 `json:"temperature_C"`
	Colour       string  `json:"colour"`
	Glyph        int     `json:"glyph"` // as figure.PickGlyph counts
}

// kind is a quantity that can be typed, with its units, the preferred one first.
type kind struct {
	Name  string     `json:"name"`
	Units []unitItem `json:"units"`
}

type unitItem struct {
	Symbol      string   `json:"symbol"`
	Zero        float64  `json:"zero"`
	Numerator   float64  `json:"numerator"`
	Denominator float64  `json:"denominator"`
	Spellings   []string `json:"spellings"` // without blanks
}

// spellings are the ways in which people write the units of a condition; what they
// are worth is asked of package unit.
var spellings = []struct {
	quantity unit.Quantity
	words    []string
}{
	{unit.Frequency, []string{"Hz", "hertz", "kHz", "mHz", "MHz", "rad/s", "rads-1", "rad·s-1", "rad/sec", "rpm", "r/min", "1/min", "min-1", "rev/min"}},
	{unit.Temperature, []string{"°C", "C", "degC", "Cel", "Celsius", "degreesC", "degreesCelsius", "degCelsius", "K", "Kelvin", "°K", "degK", "°F", "F", "degF", "Fahrenheit", "degreesF", "degreesFahrenheit"}},
	{unit.Strain, []string{"%", "percent", "pct", "m/m", "mm/mm", "1", "-", "‰", "µm/m", "microstrain", "ppm"}},
}

func kinds() []kind {
	var out []kind
	for _, s := range spellings {
		k := kind{Name: string(s.quantity)}
		at := map[string]int{}
		for _, w := range s.words {
			u, ok := unit.Lookup(w, s.quantity)
			if !ok {
				panic(fmt.Sprintf("interactive: %q is no unit of %s", w, s.quantity))
			}
			i, seen := at[u.Symbol]
			if !seen {
				i = len(k.Units)
				at[u.Symbol] = i
				k.Units = append(k.Units, unitItem{Symbol: u.Symbol, Zero: u.Zero, Numerator: u.Numerator, Denominator: u.Denominator})
			}
			k.Units[i].Spellings = append(k.Units[i].Spellings, w)
		}
		out = append(out, k)
	}
	return out
}

// temperatures are those of the charts, °C, rising: the tested ones inside the domain,
// or both ends and the reference where the compound names none; at most mostCurves,
// evenly picked.
func temperatures(c *models.Compound) []float64 {
	d := c.Domain.Temperature
	var all []float64
	add := func(T float64) {
		if d.Contains(T) && (len(all) == 0 || T > all[len(all)-1]) {
			all = append(all, T)
		}
	}
	for _, f := range c.Shift.Factors {
		add(math.Round(f.TemperatureC*2) / 2)
	}
	if len(all) == 0 {
		for _, T := range []float64{d[0], c.ReferenceTempC, d[1]} {
			add(T)
		}
	}
	if len(all) <= mostCurves {
		return all
	}
	out := make([]float64, mostCurves)
	for i := range out {
		out[i] = all[int(math.Round(float64(i)*float64(len(all)-1)/(mostCurves-1)))]
	}
	return out
}

// mostCurves is how many curves can be told apart.
const mostCurves = 15

func newData(c *models.Compound, o Options) pageData {
	p := pageData{Compound: c, Quantile: c.Quantile(), Symbol: symbol(c), Note: o.OwnStrainNote, Window: o.Frequencies, Kinds: kinds()}
	if w := p.Window; !(w[0] > 0) || !(w[1] > w[0]) || math.IsInf(w[1], 0) {
		p.Window = [2]float64{0.1, 1000}
	}
	list := temperatures(c)
	for i, T := range list {
		r, g, b := figure.Ramp(i, len(list)).RGB()
		p.Curves = append(p.Curves, curve{TemperatureC: T, Colour: fmt.Sprintf("#%02x%02x%02x", r, g, b), Glyph: i % 5})
	}
	return p
}

// block is p as JSON that may stand inside an element: <, > and & are escaped.
func (p pageData) block() ([]byte, error) {
	b, err := json.Marshal(p)
	if err != nil {
		return nil, err
	}
	var out bytes.Buffer
	json.HTMLEscape(&out, b)
	return out.Bytes(), nil
}

func symbol(c *models.Compound) string {
	if c.ModulusKind == "young" {
		return "E"
	}
	return "G"
}
