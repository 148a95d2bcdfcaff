// The compound model in closed form. Everything is SI inside: Pa, s, Hz, K, m/m.
//
//   G*(f,T,γ) = b_T·[G_e + Σ G_k iωa_Tτ_k/(1+iωa_Tτ_k)] + φ(T)·F*(γ,f)
//   F*        = ΔG'·K1(γ) + [ΔG″·K2(γ) + ΔG₂·K3(γ)]·[i + κ(2/π) ln(f/f0)]
//   φ(T)      = exp[(E_a/R)(1/T − 1/T_ref)]
//
// where the term scales, G* is the polymer term times one plus φF*. The half-width of
// an answer y with the gradient g = ∂y/∂p is t(0.975, ν)·‖Lᵀg‖, LLᵀ the covariance of
// the parameters. Complex numbers are pairs [re, im]. The operations come in the order
// in which the program does them, so that both give the same digits.
const phaselagModel = (() => {
  "use strict";
  const { zeroC, mega, number, add, mul, scale, wlf, arrhenius, crossover, factors, filler } = phaselagLaws;
  const divide = (a, x) => [a[0] / x, a[1] / x];

  function hypot(a, b) {
    let p = Math.abs(a), q = Math.abs(b);
    if (p < q) [p, q] = [q, p];
    if (p === 0 || p === Infinity) return p;
    q = q / p;
    return p * Math.sqrt(1 + q * q);
  }

  // celsius turns K into °C without the noise of the subtraction.
  function celsius(T) {
    const x = (T - zeroC) * 1e9, whole = Math.trunc(x);
    return (Math.abs(x - whole) >= 0.5 ? whole + Math.sign(x) : whole) / 1e9;
  }

  // open makes a compound file ready for use; t is the quantile of its intervals.
  function open(c, t) {
    const T0 = c.reference_temperature_C + zeroC, s = c.shift, dom = c.domain, own = number(dom.own_strain_amplitude_percent);
    const known = s.factors.map((f, i) => ({ ...f, i })).filter((f) => f.log10_aT !== null);
    let law = null;
    if (s.law === "WLF") law = wlf(s.c1, s.c2_K, T0);
    else if (s.law === "Arrhenius") law = arrhenius(s.activation_kJ_per_mol * 1e3, T0);
    else if (s.law === "WLF+Arrhenius") law = crossover(s.c1, s.c2_K, T0, s.crossover_C + zeroC);
    else if (known.length > 0) law = factors(known.map((f) => f.temperature_C + zeroC), known.map((f) => f.log10_aT));
    const v = c.vertical, steps = v.law === "factors" ? factors(v.factors.map((f) => f.temperature_C + zeroC), v.factors.map((f) => Math.log(f.b_T))) : null;
    const fil = c.amplitude.law === "none" ? null : filler(c.amplitude, T0);
    const branches = c.linear.branches.map((b) => [b.relaxation_time_s, b.modulus_MPa * mega]);
    const rows = c.uncertainty.parameters.map((name) => parameter(name));
    const L = c.uncertainty.cholesky;

    const shift = (T) => law === null ? 1 : Math.exp(Math.LN10 * law.log(T));
    const strainOf = (q) => Number.isNaN(q.strain) ? own / 100 : q.strain;

    // vertical is b_T and its slope: of the density law (T/T0)/(1 + α(T−T0)).
    function vertical(T) {
      if (v.law === "density") {
        const q = 1 + v.expansion_per_K * (T - T0);
        return [T / T0 / q, (1 - v.expansion_per_K * T0) / (T0 * q * q)];
      }
      if (steps === null) return [1, 0];
      const b = Math.exp(steps.log(T));
      return [b, b * steps.slope(T)];
    }

    // branch is iωτ/(1+iωτ) at x = ωτ, branchSlope its derivative by ln x.
    const branch = (x) => { if (x > 1e150) return [1, 1 / x]; const d = 1 / (1 + x * x); return [x * x * d, x * d]; };
    const branchSlope = (x) => { if (x > 1e75) return [0, -1 / x]; const d = 1 / (1 + x * x); return [2 * x * x * d * d, x * (1 - x * x) * d * d]; };
    const spectrum = (x, part, rest) => branches.reduce((g, [tau, G]) => { const p = part(x * tau); return [g[0] + G * p[0], g[1] + G * p[1]]; }, [rest, 0]);

    // parameter gives the derivative of G* that a row of the covariance stands for.
    function parameter(name) {
      const plain = {
        "linear.equilibrium_modulus_MPa": (w) => scale(w.cb, mega),
        "shift.c1": (w) => scale(w.bySlope, Math.LN10 * w.lawGradient[0]),
        "shift.c2_K": (w) => scale(w.bySlope, Math.LN10 * w.lawGradient[1]),
        "shift.crossover_C": (w) => scale(w.bySlope, Math.LN10 * w.lawGradient[2]),
        "shift.activation_kJ_per_mol": (w) => scale(w.bySlope, 1e3 * Math.LN10 * w.lawGradient[0]),
        "amplitude.storage_MPa": (w) => w.fil.byStorage,
        "amplitude.storage_ratio": (w) => w.fil.byStorage,
        "amplitude.loss_MPa": (w) => w.fil.byLoss,
        "amplitude.loss_ratio": (w) => w.fil.byLoss,
        "amplitude.extra_loss_MPa": (w) => w.fil.byExtra,
        "amplitude.extra_loss_strain_percent": (w) => divide(w.fil.byLnExtra, c.amplitude.extra_loss_strain_percent),
        "amplitude.critical_strain_percent": (w) => divide(w.fil.byLnCritical, c.amplitude.critical_strain_percent),
        "amplitude.exponent": (w) => w.fil.byExponent,
        "amplitude.activation_kJ_per_mol": (w) => w.fil.byActivation,
        "specimen_factor": (w) => w.value,
        "temperature_common_K": (w) => scale(w.byT, -1),
        "phase_common_deg": () => [0, 0], // the moduli are those without the error of the phase
      };
      if (plain[name]) return plain[name];
      const i = Number(name.split(".")[2]);
      if (name.startsWith("linear.branches.")) return (w) => mul(w.cb, scale(branch(w.x * branches[i][0]), mega));
      if (name.startsWith("vertical.factors.")) return (w) => scale(mul(w.cb, w.poly), w.verticalGradient[i] / v.factors[i].b_T);
      const k = known.findIndex((f) => f.i === i);
      return (w) => scale(w.bySlope, Math.LN10 * w.lawGradient[k]);
    }

    // gradient is G* and its derivative by every row of the covariance.
    function gradient(q) {
      const T = q.temperature, x = 2 * Math.PI * q.frequency * shift(T), [b, bSlope] = vertical(T);
      const w = { x, poly: spectrum(x, branch, c.linear.equilibrium_modulus_MPa * mega), cb: [b, 0], fil: null };
      const slope = spectrum(x, branchSlope, 0);
      let h = [1, 0];
      if (fil) {
        w.fil = fil.at(q.frequency, T, strainOf(q));
        if (fil.scaling) {
          // what belongs to the polymer gets the factor 1 + F, what belongs to F the polymer term
          const p = mul(w.cb, w.poly);
          h = add([1, 0], w.fil.term);
          for (const key of Object.keys(w.fil)) if (key !== "term") w.fil[key] = mul(w.fil[key], p);
          w.cb = mul(w.cb, h);
        }
      }
      w.value = mul(w.cb, w.poly);
      if (fil && !fil.scaling) w.value = add(w.value, w.fil.value);
      w.lawGradient = law ? law.gradient(T) : [];
      w.verticalGradient = steps ? steps.gradient(T) : [];
      w.bySlope = mul(w.cb, slope);
      w.byT = add(scale(w.bySlope, law ? Math.LN10 * law.slope(T) : 0), mul(scale(h, bSlope), w.poly));
      if (fil) w.byT = add(w.byT, w.fil.byT);
      return { value: w.value, rows: rows.map((row) => row(w)) };
    }

    // deviation is ‖Lᵀg‖, gathered row by row as L is stored.
    const u = new Float64Array(L.length);
    function deviation(g) {
      u.fill(0);
      for (let i = 0; i < L.length; i++) {
        const row = L[i], gi = g[i];
        for (let j = 0; j <= i; j++) u[j] += row[j] * gi;
      }
      let sum = 0;
      for (let j = 0; j < u.length; j++) sum += u[j] * u[j];
      return Math.sqrt(sum);
    }

    // answer has moduli and half-widths without a look at the domain.
    function answer(q) {
      const { value: [storage, loss], rows: g } = gradient(q);
      const magnitude = hypot(storage, loss), eta = loss / storage, reduced = q.frequency * shift(q.temperature);
      if (!(storage > 0) || !Number.isFinite(storage) || !Number.isFinite(reduced)) {
        const n = phaselagNumber.general;
        return { fault: `the model has no value at ${n(q.frequency, 4)} Hz, ${n(q.temperature - zeroC, 4)} °C: beyond the pole of the shift law or of the frequency law of the filler` };
      }
      const half = (part) => t * deviation(g.map(part));
      return {
        storage, loss, magnitude, eta, reduced,
        storageU: half((d) => d[0]), lossU: half((d) => d[1]),
        magnitudeU: half((d) => (storage * d[0] + loss * d[1]) / magnitude),
        etaU: half((d) => (d[1] - eta * d[0]) / storage),
      };
    }

    const domain = phaselagDomain(c, { shift, own, celsius });
    // modulus answers inside the domain; else {outside: reason, near: condition} or {fault}.
    const modulus = (q) => domain.refusal(q) || answer(q);
    return { modulus, answer, refusal: domain.refusal, shift, own, celsius, zeroC };
  }

  return { open };
})();
