package fitting

import (
	"fmt"
	"math"
	"sort"

	"phaselag/data"
	"phaselag/fitting/superpose"
	"phaselag/models/amplitude"
)

type rival struct {
	name   string
	s      *superpose.Solution
	chosen bool
	note   string
}

// amplitudeName names a form of the filler term for people.
func amplitudeName(f superpose.Form) string {
	if !f.Filler {
		return "none"
	}
	name := f.Amplitude.String()
	if f.Kappa == 1 {
		name += ", causal"
	} else {
		name += ", rate independent"
	}
	if f.Scaling {
		name += ", scaling"
	}
	return name
}

// amplitudeForms lists the forms of the filler term that the campaign admits.
func (a *answer) amplitudeForms() []superpose.Form {
	law, coupling := a.campaign.Analysis.AmplitudeLaw, a.campaign.Analysis.AmplitudeCoupling
	if law == "" {
		law = "auto"
	}
	kinds := map[string][]amplitude.Kind{
		"auto": {amplitude.OfKraus, amplitude.ExtraLoss, amplitude.MaierGoritz}, "kraus": {amplitude.OfKraus},
		"kraus_extra_loss": {amplitude.ExtraLoss}, "maier_goritz": {amplitude.MaierGoritz},
	}[law]
	var out []superpose.Form
	for _, kappa := range a.kappas() {
		for _, k := range kinds {
			for _, scaling := range []bool{false, true} {
				if scaling && (coupling == "overlay" || k == amplitude.ExtraLoss) || !scaling && coupling == "scaling" && k != amplitude.ExtraLoss {
					continue
				}
				out = append(out, superpose.Form{Filler: true, Kappa: kappa, Amplitude: k, Scaling: scaling})
			}
		}
	}
	if law == "auto" {
		out = append(out, superpose.Form{})
	}
	return out
}

// chooseAmplitude fits every form of the filler term, and none, and keeps the best
// by AICc.
func (a *answer) chooseAmplitude(first *superpose.Solution) error {
	best, noise, err := a.densify(first)
	if err != nil {
		return err
	}
	a.final, a.noise = best, noise
	if !a.amp.sweeps {
		return nil
	}
	var rivals []rival
	// Kraus with both frequency dependences decides which of them the other forms
	// are tried with.
	forms := a.amplitudeForms()
	plain := func(f superpose.Form) bool { return f.Filler && f.Amplitude == amplitude.OfKraus && !f.Scaling }
	sort.SliceStable(forms, func(i, j int) bool { return plain(forms[i]) && !plain(forms[j]) })
	kappa, least := math.NaN(), math.Inf(1)
	for _, form := range forms {
		if form.Filler && !plain(form) && !math.IsNaN(kappa) && form.Kappa != kappa {
			continue
		}
		f := best.Form
		f.Filler, f.Kappa, f.Amplitude, f.Scaling = form.Filler, form.Kappa, form.Amplitude, form.Scaling
		f.Activation = best.Form.Activation && f.Filler
		s := best
		if f.Filler != best.Form.Filler || f.Kappa != best.Form.Kappa || f.Amplitude != best.Form.Amplitude || f.Scaling != best.Form.Scaling {
			if s, err = best.Rival(f, best.Start()); err != nil {
				continue
			}
		}
		rivals = append(rivals, rival{name: amplitudeName(f), s: s})
		if v := s.AICc(); plain(f) && v < least {
			kappa, least = f.Kappa, v
		}
	}
	if len(rivals) == 0 {
		return nil
	}
	at := leastAICc(rivals)
	a.amplitude = rivals
	if rivals[at].name == "none" {
		a.find("no-strain-dependence", data.Note, "", "the amplitude law does not improve the fit", "the compound is not filled, or the amplitudes are small", "")
	}
	if rivals[at].s == best {
		return nil
	}
	a.final, a.noise, err = rivals[at].s.Refine(6)
	return err
}

// indistinguishable is the difference of AICc within which two forms are no
// different.
const indistinguishable = 2

// decisive is by how much the AICc of a form with more constants must be lower.
// Akaike's penalty alone takes five needless constants in 7 % of cases and one in
// 5 % where the fewer are tried within 2; a bar of 5 is a likelihood-ratio test
// at about 1 %, whether one constant is in question or ten.
const decisive = 5

// leastAICc chooses the rival with the least AICc, unless one with fewer
// constants is not decisively worse.
func leastAICc(r []rival) int {
	best := 0
	value := make([]float64, len(r))
	for i := range r {
		value[i] = r[i].s.AICc()
		if value[i] < value[best] {
			best = i
		}
	}
	at := best
	for i := range r {
		if value[i] <= value[best]+decisive && r[i].s.Constants() < r[at].s.Constants() {
			at = i
		}
	}
	for i := range r {
		switch {
		case i == at || r[i].note != "":
		case math.Abs(value[i]-value[at]) <= indistinguishable:
			r[i].note = "no different from the one used"
		case value[i] < value[at]:
			r[i].note = fmt.Sprintf("better, but not by the %d that more constants need", decisive)
		}
	}
	r[at].chosen = true
	return at
}

// chooseLaw compares the shift laws by marginal likelihood.
func (a *answer) chooseLaw() error {
	if a.oneTemperature() {
		return nil
	}
	base := a.final
	free := a.freely(base)
	if free == nil {
		return superpose.ErrNoFit
	}
	a.free = free
	a.laws = []rival{{name: "none", s: free, note: "the factors themselves, interpolated"}}
	n := len(a.problem.Knots)
	try := func(law superpose.Law, least int) {
		if n < least {
			return
		}
		f := base.Form
		f.Law = law
		if s, err := base.Rival(f, free.Start()); err == nil {
			a.laws = append(a.laws, rival{name: law.String(), s: s})
		}
	}
	try(superpose.WLF, 4)
	try(superpose.Arrhenius, 3)
	if s := a.crossover(base, free); s != nil {
		a.laws = append(a.laws, rival{name: superpose.Crossover.String(), s: s})
	}
	at := leastAICc(a.laws)
	if wish := a.campaign.Analysis.ShiftLaw; wish != "" && wish != "auto" {
		found := false
		for i := range a.laws {
			a.laws[i].chosen = a.laws[i].name == wish
			if a.laws[i].chosen {
				at, found = i, true
			}
		}
		if !found {
			at = 0
			a.laws[0].chosen = true
			a.find("shift-law-not-supported", data.Doubt, "",
				fmt.Sprintf("%s was wished for, with %d tested temperatures", wish, n),
				"too few temperatures, or no crossover within them", "the factors themselves are used")
		}
	}
	var err error
	a.final, a.noise, err = a.laws[at].s.Refine(6)
	return err
}

// crossover fits WLF above and Arrhenius below a temperature, from several of the
// tested temperatures; nil where there are fewer than six, or where it does not
// end inside the tested temperatures: two of them must be left below it.
func (a *answer) crossover(base, free *superpose.Solution) *superpose.Solution {
	knots := a.problem.Knots
	if len(knots) < 6 {
		return nil
	}
	f := base.Form
	f.Law = superpose.Crossover
	var best *superpose.Solution
	for _, k := range []int{2, 3, len(knots) / 2} {
		if knots[k] >= a.reference {
			continue
		}
		start := free.Start()
		start.Cross = knots[k] + 0.5
		var T, y []float64
		for i := k; i < len(knots); i++ {
			T, y = append(T, knots[i]), append(y, free.LogShift(knots[i]))
		}
		if len(T) >= 4 {
			start.WLF = superpose.BestWLF(T, y, a.reference)
		}
		if s, err := base.Rival(f, start); err == nil && (best == nil || s.Objective < best.Objective) {
			best = s
		}
	}
	if best == nil || best.Theta[best.Indices().Law+2] < knots[1] {
		return nil
	}
	return best
}

// glassy is the modulus above which a density law has no meaning, Pa.
const glassy = 100e6

// defaultExpansion is the volume expansion of gum rubber, 1/K (6 to 7e-4 in
// handbooks; value from memory).
const defaultExpansion = 6.6e-4

func (a *answer) chooseVertical() error {
	wish := a.campaign.Analysis.VerticalShift
	if a.oneTemperature() {
		return nil
	}
	if wish == "" {
		wish = "auto"
	}
	expansion := a.campaign.Analysis.Expansion
	if math.IsNaN(expansion) || expansion == 0 {
		expansion = defaultExpansion
	}
	top := 0.0
	for _, r := range a.problem.Rows {
		top = max(top, math.Hypot(real(r.G), imag(r.G)))
	}
	base := a.final
	a.vertical = []rival{{name: "none", s: base, chosen: true}}
	fitVertical := func(v superpose.Vertical) *superpose.Solution {
		f := base.Form
		f.Vertical, f.Expansion = v, expansion
		s, err := base.Rival(f, base.Start())
		if err != nil {
			return nil
		}
		return s
	}
	choose := func(s *superpose.Solution, name string) error {
		a.vertical[0].chosen = false
		for i := range a.vertical {
			a.vertical[i].chosen = a.vertical[i].name == name
		}
		var err error
		a.final, a.noise, err = s.Refine(6)
		return err
	}
	if wish == "auto" || wish == "density" {
		if top > glassy {
			if wish == "density" {
				a.find("density-law-refused", data.Doubt, "",
					fmt.Sprintf("|%s*| reaches %.3g MPa", a.symbol(), top/1e6),
					"the density law belongs to rubber elasticity; above 100 MPa the material is near its glass", "no vertical shift is used")
			}
			return nil
		}
		s := fitVertical(superpose.Density)
		if s == nil {
			return nil
		}
		a.vertical = append(a.vertical, rival{name: "density", s: s, note: fmt.Sprintf("volume expansion %.3g /K", expansion)})
		// Within 2 the simpler stays.
		if wish == "density" || s.AICc() < base.AICc()-indistinguishable {
			if a.campaign.Analysis.Expansion != expansion {
				a.assume("volume expansion of the density law: %.3g /K, that of gum rubber (value from memory)", expansion)
			}
			return choose(s, "density")
		}
		return nil
	}
	v := map[string]superpose.Vertical{"bounded": superpose.Bounded, "free": superpose.Free}
	if kind, ok := v[wish]; ok {
		s := fitVertical(kind)
		if s == nil {
			return nil
		}
		a.vertical = append(a.vertical, rival{name: wish, s: s})
		a.find("vertical-shift-not-physical", data.Doubt, "",
			fmt.Sprintf("%s vertical shifts were asked for", wish),
			a.degenerate(),
			"do not read the vertical factors as a property; use none or density")
		return choose(s, wish)
	}
	return nil
}

// scatterLimit bounds the estimate of an unstated temperature scatter, K.
const scatterLimit = 3

// settleScatter estimates an unstated temperature scatter by restricted
// likelihood and fits again until it stays.
func (a *answer) settleScatter() error {
	if a.stated || a.oneTemperature() {
		return nil
	}
	if a.final.Form.Law == superpose.Factors {
		a.find("temperature-scatter-not-stated", data.Note, "",
			fmt.Sprintf("temperature scatter from run to run: %.2g K assumed; without a shift law the isotherms do not show it", a.scatter),
			"", "state `uncertainty: {temperature_scatter: …}`")
		a.assume("temperature scatter from run to run: %.2g K, not stated (common practice, no source)", a.scatter)
		return nil
	}
	for range 4 {
		u := a.final.Scatter(a.shared, scatterLimit)
		u = max(u, 0.01) // a hundredth of a kelvin holds the offsets as good as at zero
		moved := math.Abs(math.Log(u / a.scatter))
		a.setScatter(u)
		f := a.final.Form
		s, err := a.final.Rival(f, a.final.Start())
		if err != nil {
			return err
		}
		if a.final, a.noise, err = s.Refine(6); err != nil {
			return err
		}
		if moved < 0.05 {
			break
		}
	}
	a.find("temperature-scatter-not-stated", data.Note, "",
		fmt.Sprintf("temperature scatter from run to run: %.2g K, estimated from the misfit of the shift law by restricted likelihood", a.scatter),
		"", "state `uncertainty: {temperature_scatter: …}` if it is known")
	return nil
}
