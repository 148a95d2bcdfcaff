package changes

import (
	"fmt"
	"math"
	"math/cmplx"
	"sort"
	"strings"

	"gonum.org/v1/gonum/stat/distuv"

	"phaselag/models"
)

// Kind is one of the changes; its text is its name for people, as a specification has
// it.
type Kind string

// The changes.
const (
	Temperature Kind = "temperature shift"       // K
	Stiffness   Kind = "stiffness factor"        // 1
	Loss        Kind = "loss factor change"      // 1
	Filler      Kind = "filler amplitude factor" // 1
	Critical    Kind = "critical strain factor"  // 1
)

// kinds in the order of the unknowns.
var kinds = []Kind{Temperature, Stiffness, Loss, Filler, Critical}

// Unit of a change: "K" or "1".
func (k Kind) Unit() string {
	if k == Temperature {
		return "K"
	}
	return "1"
}

// Change is what was found of one of them. Factors are 1 where nothing changed.
type Change struct {
	Kind       Kind
	Determined bool
	Reason     string  // why it is not, "" otherwise
	Value, U95 float64 // NaN where not determined
	P          float64 // two-sided, that there is no change
	Real       bool    // after Holm's correction at 5 %
	Smallest   float64 // K, or the factor less 1, that would have been seen in nine of ten cases
}

// Comparison is what changed between a batch and an approved compound.
type Comparison struct {
	Changes    []Change // all kinds, in their order
	Points     int
	Freedom    float64 // degrees of freedom of the noise
	SigmaM     float64 // relative
	SigmaPhase float64 // rad
	// Misfit is the p that the changes describe the difference as well as the approved
	// compound meets its own measurements; NaN where its noise is not known.
	Misfit float64
	// OfCompounds: two compound files were compared; SigmaM and SigmaPhase are then what
	// the changes leave undescribed, rms.
	OfCompounds bool
	Assumptions []string

	approved *models.Compound
	theta    []float64 // of the active changes
	active   []Kind
	cov      []float64 // of theta and z together
	z        []float64
	lower    [][]float64 // L, with what cancels taken out
	state    []float64   // all unknowns while they are sought
}

// significance of the family of changes.
const significance = 0.05

func (c *Comparison) student() distuv.StudentsT {
	return distuv.StudentsT{Mu: 0, Sigma: 1, Nu: max(c.Freedom, 1)}
}

// judge fills in p, Holm's verdicts and the smallest changes; x and u are of the active
// changes, factors as logarithms.
func (c *Comparison) judge(u []float64) {
	t := c.student()
	m := len(c.active)
	quantile := t.Quantile(0.975)
	type ranked struct {
		at int
		p  float64
	}
	var order []ranked
	for i, k := range c.active {
		ch := c.change(k)
		x := c.theta[i]
		ch.P = 2 * t.Survival(math.Abs(x)/u[i])
		seen := (t.Quantile(1-significance/2/float64(m)) + t.Quantile(0.9)) * u[i]
		if k == Temperature {
			ch.Value, ch.U95, ch.Smallest = x, quantile*u[i], seen
		} else {
			ch.Value = math.Exp(x)
			ch.U95, ch.Smallest = quantile*u[i]*ch.Value, math.Expm1(seen)
		}
		order = append(order, ranked{i, ch.P})
	}
	sort.SliceStable(order, func(a, b int) bool { return order[a].p < order[b].p })
	for rank, o := range order {
		if o.p > significance/float64(m-rank) {
			break
		}
		c.change(c.active[o.at]).Real = true
	}
}

func (c *Comparison) change(k Kind) *Change {
	for i := range c.Changes {
		if c.Changes[i].Kind == k {
			return &c.Changes[i]
		}
	}
	panic("changes: no change " + string(k))
}

// Found gives a change by its name; ok is false for a name that is none.
func (c *Comparison) Found(name string) (Change, bool) {
	for _, v := range c.Changes {
		if string(v.Kind) == name {
			return v, true
		}
	}
	return Change{}, false
}

// Summary lists the changes that could be told, in one line.
func (c *Comparison) Summary() string {
	var parts []string
	for _, v := range c.Changes {
		switch {
		case !v.Determined:
		case v.Kind == Temperature:
			parts = append(parts, fmt.Sprintf("%s %.2g ± %.2g K", v.Kind, v.Value, v.U95))
		default:
			parts = append(parts, fmt.Sprintf("%s %.3f ± %.2g", v.Kind, v.Value, v.U95))
		}
	}
	return strings.Join(parts, ", ")
}

// Any reports whether a change is real.
func (c *Comparison) Any() bool {
	for _, v := range c.Changes {
		if v.Real {
			return true
		}
	}
	return false
}

// Modulus is the batch's complex modulus at a condition inside the approved compound's
// domain, in Pa, with the half-widths of the 95 % intervals, from approved compound and
// changes together.
func (c *Comparison) Modulus(q models.Condition) (models.Modulus, error) {
	if err := c.approved.Inside(q); err != nil {
		return models.Modulus{}, err
	}
	value := c.predict(q, c.theta, c.z)
	n := len(c.theta) + len(c.z)
	g := make([]complex128, n)
	for i := range c.theta {
		g[i] = c.slope(q, i) * value
	}
	w := whitened(c.approved, c.lower, c.moved(q))
	copy(g[len(c.theta):], scaledBy(w, value))
	storage, loss, mag := real(value), imag(value), cmplx.Abs(value)
	eta := loss / storage
	half := func(f func(complex128) float64) float64 {
		part := make([]float64, n)
		for i, v := range g {
			part[i] = f(v)
		}
		return c.student().Quantile(0.975) * deviation(c.cov, part)
	}
	return models.Modulus{
		Storage: storage, Loss: loss, Magnitude: mag, LossFactor: eta,
		StorageU95:    half(func(v complex128) float64 { return real(v) }),
		LossU95:       half(func(v complex128) float64 { return imag(v) }),
		MagnitudeU95:  half(func(v complex128) float64 { return (storage*real(v) + loss*imag(v)) / mag }),
		LossFactorU95: half(func(v complex128) float64 { return (imag(v) - eta*real(v)) / storage }),
		Domain:        "inside",
	}, nil
}

// Freedoms are the degrees of freedom of the intervals.
func (c *Comparison) Freedoms() float64 { return c.Freedom }

func deviation(cov, g []float64) float64 {
	var s float64
	n := len(g)
	for i := range g {
		for k := range g {
			s += g[i] * cov[i*n+k] * g[k]
		}
	}
	return math.Sqrt(max(s, 0))
}

// all starts the list of changes.
func all(reason map[Kind]string) []Change {
	nan := math.NaN()
	var out []Change
	for _, k := range kinds {
		why := reason[k]
		out = append(out, Change{Kind: k, Determined: why == "", Reason: why, Value: nan, U95: nan, P: nan, Smallest: nan})
	}
	return out
}

// percentOf is for messages.
func percentOf(x float64) string { return fmt.Sprintf("%.2g %%", 100*x) }
