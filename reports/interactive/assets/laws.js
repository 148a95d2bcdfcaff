// The laws of a compound: shift factors over temperature, and the filler term over
// strain amplitude, frequency and temperature, with their derivatives. Temperatures in
// K, moduli in Pa, strains in m/m. Complex numbers are pairs [re, im].
const phaselagLaws = (() => {
  "use strict";
  const zeroC = 273.15, mega = 1e6, R = 8.31446261815324;
  const number = (x) => x === null || x === undefined ? NaN : x;
  const add = (a, b) => [a[0] + b[0], a[1] + b[1]];
  const mul = (a, b) => [a[0] * b[0] - a[1] * b[1], a[0] * b[1] + a[1] * b[0]];
  const scale = (a, x) => [a[0] * x, a[1] * x];

  // Shift laws: log10 a_T, its slope in T and its gradient by the constants.
  function wlf(C1, C2, T0) {
    return {
      log: (T) => C2 + (T - T0) <= 0 ? Infinity : -C1 * (T - T0) / (C2 + (T - T0)),
      slope: (T) => { const q = C2 + T - T0; return -C1 * C2 / (q * q); },
      gradient: (T) => { const d = T - T0, q = C2 + d; return [-d / q, C1 * d / (q * q), 0]; },
    };
  }

  function arrhenius(E, T0) {
    return {
      log: (T) => E / (R * Math.LN10) * (1 / T - 1 / T0),
      slope: (T) => -E / (R * Math.LN10 * T * T),
      gradient: (T) => [(1 / T - 1 / T0) / (R * Math.LN10)],
      factor: (T) => Math.exp(E / R * (1 / T - 1 / T0)),
    };
  }

  // WLF down to Tc; below it Arrhenius with the slope that WLF has there.
  function crossover(C1, C2, T0, Tc) {
    const w = wlf(C1, C2, T0), q = C2 + Tc - T0, A = Tc * Tc * C1 * C2 / (q * q);
    return {
      log: (T) => T >= Tc ? w.log(T) : w.log(Tc) + A * (1 / T - 1 / Tc),
      slope: (T) => T >= Tc ? w.slope(T) : -A / (T * T),
      gradient: (T) => {
        if (T >= Tc) return w.gradient(T);
        const x = 1 / T - 1 / Tc, g = w.gradient(Tc);
        return [g[0] + A / C1 * x, g[1] + Tc * Tc * C1 * x * (q - 2 * C2) / (q * q * q), x * 2 * C1 * C2 * Tc * (q - Tc) / (q * q * q)];
      },
    };
  }

  // The factors themselves: cubic Hermite polynomials between the knots with the
  // slopes of Fritsch and Butland (1984), straight on outside.
  function factors(Ts, ys) {
    const n = Ts.length;
    const secant = (i) => { const h = Ts[i + 1] - Ts[i]; return [h, (ys[i + 1] - ys[i]) / h]; };
    // knot is the slope at a knot and its derivatives by the factors before, at and after it.
    function knot(i) {
      if (n === 1) return [0, [0, 0, 0]];
      if (i === 0) { const [h, s] = secant(0); return [s, [0, -1 / h, 1 / h]]; }
      if (i === n - 1) { const [h, s] = secant(n - 2); return [s, [-1 / h, 1 / h, 0]]; }
      const [h0, s0] = secant(i - 1), [h1, s1] = secant(i);
      if (s0 * s1 <= 0) return [0, [0, 0, 0]];
      const w = (h0 + 2 * h1) / (3 * (h0 + h1)), q = w * s1 + (1 - w) * s0;
      const g0 = w * s1 * s1 / (q * q), g1 = (1 - w) * s0 * s0 / (q * q);
      return [s0 * s1 / q, [-g0 / h0, g0 / h0 - g1 / h1, g1 / h1]];
    }
    const end = (T) => T <= Ts[0] ? 0 : T >= Ts[n - 1] ? n - 1 : -1;
    function inner(T) {
      let i = 0;
      while (i < n - 2 && Ts[i + 1] < T) i++;
      const h = Ts[i + 1] - Ts[i], u = (T - Ts[i]) / h, v = 1 - u;
      return { i, h, u, h00: (1 + 2 * u) * v * v, h10: u * v * v, h01: u * u * (3 - 2 * u), h11: -u * u * v };
    }
    return {
      log: (T) => {
        if (n === 1) return ys[0];
        const k = end(T);
        if (k >= 0) return ys[k] + knot(k)[0] * (T - Ts[k]);
        const p = inner(T), i = p.i;
        return p.h00 * ys[i] + p.h * p.h10 * knot(i)[0] + p.h01 * ys[i + 1] + p.h * p.h11 * knot(i + 1)[0];
      },
      slope: (T) => {
        if (n === 1) return 0;
        const k = end(T);
        if (k >= 0) return knot(k)[0];
        const { i, h, u } = inner(T);
        return (6 * u * u - 6 * u) * (ys[i] - ys[i + 1]) / h + (3 * u * u - 4 * u + 1) * knot(i)[0] + (3 * u * u - 2 * u) * knot(i + 1)[0];
      },
      gradient: (T) => {
        const g = new Array(n).fill(0);
        if (n === 1) { g[0] = 1; return g; }
        const more = (i, weight) => knot(i)[1].forEach((v, k) => { const j = i - 1 + k; if (j >= 0 && j < n) g[j] += weight * v; });
        const k = end(T);
        if (k >= 0) { g[k] = 1; more(k, T - Ts[k]); return g; }
        const p = inner(T);
        g[p.i] += p.h00;
        g[p.i + 1] += p.h01;
        more(p.i, p.h * p.h10);
        more(p.i + 1, p.h * p.h11);
        return g;
      },
    };
  }

  // shares are K1, K2, K3 at a strain amplitude with their derivatives: of K1 and K2
  // by ln γ_c (c) and by the exponent (m), of K3 by ln γ_2 (e).
  function shares(a, gamma) {
    const t = { k1: 1, k2: 0, k3: 0, c1: 0, c2: 0, m1: 0, m2: 0, e3: 0 };
    const critical = number(a.critical_strain_percent) / 100, m = number(a.exponent);
    if (a.law === "maier_goritz") {
      const r = Math.max(gamma, 0) / critical;
      t.k1 = 1 / (1 + r);
      t.k2 = r > 1e15 ? 4 / r : 4 * t.k1 * (1 - t.k1);
      t.c1 = t.k1 * (1 - t.k1);
      t.c2 = -t.k2 * (2 * t.k1 - 1);
      return t;
    }
    if (a.law === "kraus_extra_loss") {
      const x = Math.max(gamma, 0) / (a.extra_loss_strain_percent / 100);
      t.k3 = Math.exp(-x);
      if (t.k3 > 0) t.e3 = t.k3 * x;
    }
    if (gamma <= 0) return t;
    const lnr = Math.log(gamma / critical), q = Math.exp(m * lnr);
    if (q === Infinity) { t.k1 = 0; } else { t.k1 = 1 / (1 + q * q); t.k2 = 2 * q * t.k1; }
    const d1 = -2 * t.k1 * (1 - t.k1), d2 = t.k2 * (2 * t.k1 - 1);
    t.c1 = -m * d1;
    t.c2 = -m * d2;
    t.m1 = lnr * d1;
    t.m2 = lnr * d2;
    return t;
  }

  // filler is the amplitude term: its value and its derivatives at f, T, γ.
  function filler(a, T0) {
    const scaling = a.coupling === "scaling", kappa = a.frequency_dependence === "causal" ? 1 : 0;
    const storage = scaling ? a.storage_ratio : number(a.storage_MPa) * mega;
    const loss = scaling ? a.loss_ratio : number(a.loss_MPa) * mega;
    const extra = a.law === "kraus_extra_loss" ? a.extra_loss_MPa * mega : 0;
    const E = Number.isNaN(number(a.activation_kJ_per_mol)) ? 0 : a.activation_kJ_per_mol * 1e3;
    const law = arrhenius(E, T0), f0 = number(a.reference_frequency_Hz), unit = scaling ? 1 : mega;
    return {
      scaling,
      at: (f, T, gamma) => {
        const t = shares(a, gamma), phi = law.factor(T);
        const dir = [kappa === 0 ? 0 : kappa * 2 / Math.PI * Math.log(f / f0), 1];
        const term = (x, y, z) => add([phi * storage * x, 0], scale(dir, phi * (loss * y + extra * z)));
        const v = term(t.k1, t.k2, t.k3);
        return {
          term: v, value: v,
          byT: scale(v, -E / (R * T * T)),
          byStorage: [unit * phi * t.k1, 0],
          byLoss: scale(dir, unit * phi * t.k2),
          byExtra: scale(dir, mega * phi * t.k3),
          byLnExtra: scale(dir, phi * extra * t.e3),
          byLnCritical: term(t.c1, t.c2, 0),
          byExponent: term(t.m1, t.m2, 0),
          byActivation: scale(v, 1e3 / R * (1 / T - 1 / T0)),
        };
      },
    };
  }

  return { zeroC, mega, number, add, mul, scale, wlf, arrhenius, crossover, factors, filler };
})();
