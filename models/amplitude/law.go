package amplitude

import "math"

// Kind is a form of the amplitude dependence.
type Kind int

// The forms. All share the critical strain γ_c, where half of the storage term is
// broken down.
//
//   - Kraus: K1 and K2 of the package comment.
//   - ExtraLoss: Kraus, and a loss that falls with strain from the smallest
//     amplitudes on, K3 = exp(−γ/γ_2) (Ulmer, Rubber Chem. Technol. 69 (1996) 15;
//     from memory), which many filled compounds need below γ_c.
//   - MaierGoritz: K1 = 1/(1 + r), K2 = 4r/(1 + r)², r = γ/γ_c (Maier and Göritz,
//     Kautsch. Gummi Kunstst. 49 (1996) 18; from memory). K1 is that of Kraus
//     with m = 1/2, K2 is not. It has no exponent.
const (
	OfKraus Kind = iota
	ExtraLoss
	MaierGoritz
)

func (k Kind) String() string {
	return [...]string{"Kraus", "Kraus with extra loss", "Maier–Göritz"}[k]
}

// Law is a form with its constants.
type Law struct {
	Kind     Kind
	Critical float64 // γ_c, m/m, single amplitude
	Exponent float64 // m of Kraus
	Extra    float64 // γ_2 of the extra loss, m/m
}

// Terms are the shares of storage, loss and extra loss term at an amplitude, and
// their derivatives: of K1 and K2 by ln γ_c and m, of K3 by ln γ_2.
type Terms struct {
	K1, K2, K3             float64
	K1Critical, K2Critical float64
	K1Exponent, K2Exponent float64
	K3Extra                float64
}

// Terms computes everything at the single strain amplitude gamma ≥ 0, m/m.
func (l Law) Terms(gamma float64) (t Terms) {
	switch l.Kind {
	case MaierGoritz:
		r := max(gamma, 0) / l.Critical
		t.K1 = 1 / (1 + r)
		t.K2 = 4 * t.K1 * (1 - t.K1)
		if r > 1e15 {
			t.K2 = 4 / r
		}
		// dK1/d ln r = −K1(1−K1), dK2/d ln r = K2(2K1−1).
		t.K1Critical, t.K2Critical = t.K1*(1-t.K1), -t.K2*(2*t.K1-1)
		return t
	case ExtraLoss:
		x := max(gamma, 0) / l.Extra
		t.K3 = math.Exp(-x)
		if t.K3 > 0 {
			t.K3Extra = t.K3 * x
		}
	}
	k := Kraus{Critical: l.Critical, Exponent: l.Exponent}
	t.K1, t.K2, t.K1Critical, t.K2Critical, t.K1Exponent, t.K2Exponent = k.Slopes(gamma)
	return t
}

// Shares gives K1, K2 and K3 alone.
func (l Law) Shares(gamma float64) (k1, k2, k3 float64) {
	if l.Kind == OfKraus {
		k1, k2 = Kraus{Critical: l.Critical, Exponent: l.Exponent}.Shape(gamma)
		return k1, k2, 0
	}
	t := l.Terms(gamma)
	return t.K1, t.K2, t.K3
}
