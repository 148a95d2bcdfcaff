package reports

import (
	"math"
	"math/cmplx"
	"testing"

	"gonum.org/v1/gonum/mat"

	"phaselag/models/mount"
)

// The transfer function D + C(iωI − A)⁻¹B of a state-space model, solved as a general
// system of equations, is the mount's stiffness within the stated error everywhere in
// the band.
func TestStateSpace(t *testing.T) {
	c := demoResult(t, 1).Compound
	m, err := mount.Open("../data/demo/sifter.yaml")
	if err != nil {
		t.Fatal(err)
	}
	for _, v := range []struct{ T, lo, hi, accuracy float64 }{{296.15, 4, 30, 0.02}, {253.15, 1, 100, 0.01}, {333.15, 1, 30, 0.005}} {
		s, err := StateSpaceModel(c, m, v.T, 3e-4, v.lo, v.hi, v.accuracy)
		if err != nil {
			t.Fatal(err)
		}
		if s.Error.MagnitudePercent > 100*v.accuracy*1.001 || s.Error.PhaseDeg > v.accuracy/2*180/math.Pi*1.001 {
			t.Errorf("%v: error %+v", v, s.Error)
		}
		worst := 0.0
		for i := range 101 {
			f := v.lo * math.Pow(v.hi/v.lo, float64(i)/100)
			at, err := mountAt(c, m, StiffnessQuery{Frequency: f, Temperature: v.T, Displacement: 3e-4})
			if err != nil {
				t.Fatal(err)
			}
			worst = max(worst, math.Abs(cmplx.Abs(transfer(t, s, 2*math.Pi*f))/cmplx.Abs(at.value)-1))
		}
		if worst > v.accuracy*1.02 {
			t.Errorf("%v: the transfer function is %g off", v, worst)
		}
		t.Logf("%.0f K, %g to %g Hz within %g %%: order %d", v.T, v.lo, v.hi, 100*v.accuracy, s.Order)
	}
	if _, err := StateSpaceModel(c, m, 500, 3e-4, 4, 30, 0); err == nil {
		t.Error("a temperature outside the domain was accepted")
	}
}

// transfer solves (iωI − A)z = B as a real system of twice the order.
func transfer(t *testing.T, s *StateSpace, omega float64) complex128 {
	n := s.Order
	a, b := mat.NewDense(2*n, 2*n, nil), mat.NewVecDense(2*n, nil)
	for i := range n {
		for j := range n {
			a.Set(i, j, -s.A[i][j])
			a.Set(n+i, n+j, -s.A[i][j])
		}
		a.Set(i, n+i, a.At(i, n+i)-omega)
		a.Set(n+i, i, a.At(n+i, i)+omega)
		b.SetVec(i, s.B[i][0])
	}
	var z mat.VecDense
	if err := z.SolveVec(a, b); err != nil {
		t.Fatal(err)
	}
	k := complex(s.D[0][0], 0)
	for i := range n {
		k += complex(s.C[0][i], 0) * complex(z.AtVec(i), z.AtVec(n+i))
	}
	return k
}
