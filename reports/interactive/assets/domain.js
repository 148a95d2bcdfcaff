// Where a compound answers: within the tested temperatures, the measured reduced
// frequencies and the measured strain amplitudes; above the isotherms' own amplitude
// only near the temperatures of the strain sweeps. The words are the program's.
function phaselagDomain(c, model) {
  "use strict";
  const zeroC = 273.15, guard = 1e-9, reach = 10; // K above and below the sweeps
  const own = model.own, dom = c.domain, strain = dom.strain_amplitude_percent, measured = dom.amplitude_measured_at;
  const g = phaselagNumber.general;
  const inside = (r, x) => x >= r[0] - guard * Math.abs(r[0]) && x <= r[1] + guard * Math.abs(r[1]);
  const clamp = (r, x) => Math.max(r[0], Math.min(r[1], x));
  const around = measured ? [measured.temperature_C[0] - reach, measured.temperature_C[1] + reach] : null;
  const trusted = (p, T) => !measured || !(p > own * (1 + guard)) || inside(around, T);

  // short is the value in the range nearest to x, with the fewest digits (four or more) that stay in it.
  function short(r, x) {
    x = clamp(r, x);
    for (let n = 4; n < 17; n++) {
      const v = Number(g(x, n));
      if (inside(r, v)) return [g(v, 0), v];
    }
    return [g(x, 0), x];
  }

  // refusal is null inside.
  function refusal(q) {
    if (!(q.frequency > 0) || !Number.isFinite(q.frequency)) return { fault: `frequency ${g(q.frequency, 0)} Hz: must be positive and finite` };
    if (!(q.temperature > 0) || !Number.isFinite(q.temperature)) return { fault: `temperature ${g(q.temperature, 0)} K: must be above absolute zero and finite` };
    if (q.strain < 0 || q.strain === Infinity) return { fault: `strain amplitude ${g(q.strain, 0)}: must be positive and finite` };
    const reasons = [], T = model.celsius(q.temperature), fr = q.frequency * model.shift(q.temperature);
    if (!inside(dom.temperature_C, T)) {
      reasons.push(`${g(T, 4)} °C is not within the tested ${g(dom.temperature_C[0], 4)} to ${g(dom.temperature_C[1], 4)} °C`);
    } else if (!inside(dom.reduced_frequency_Hz, fr)) {
      const r = dom.reduced_frequency_Hz;
      reasons.push(`${g(q.frequency, 4)} Hz at ${g(T, 4)} °C is ${g(fr, 3)} Hz reduced to ${g(c.reference_temperature_C, 0)} °C, not within the measured ${g(r[0], 3)} to ${g(r[1], 3)} Hz`);
    }
    const p = 100 * q.strain;
    if (!Number.isNaN(p)) {
      if (strain === null) reasons.push("no strain amplitude was ever stated with the measurements");
      else if (!inside(strain, p)) reasons.push(`a strain amplitude of ${g(p, 3)} % is not within the measured ${g(strain[0], 3)} to ${g(strain[1], 3)} %`);
      else if (!trusted(p, T)) reasons.push(`above the isotherms' amplitude of ${g(own, 3)} % strain dependence was measured from ${g(measured.temperature_C[0], 4)} to ${g(measured.temperature_C[1], 4)} °C only`);
    }
    if (reasons.length === 0) return null;
    return { outside: `outside: ${reasons.join("; ")}; nearest allowed: ${nearest(q)}` };
  }

  // nearest says what has to change.
  function nearest(q) {
    const texts = [];
    let T = model.celsius(q.temperature), kelvin = q.temperature;
    if (!inside(dom.temperature_C, T)) {
      let text;
      [text, T] = short(dom.temperature_C, T);
      kelvin = T + zeroC;
      texts.push(text + " °C");
    }
    const a = model.shift(kelvin), r = dom.reduced_frequency_Hz;
    if (!inside(r, q.frequency * a)) texts.push(short([r[0] / a, r[1] / a], q.frequency)[0] + " Hz at that temperature");
    const p = 100 * q.strain;
    if (Number.isNaN(p)) return texts.join(", ");
    if (strain === null) return texts.concat("leave the strain out").join(", ");
    let text = "", s = p;
    if (!inside(strain, p)) {
      [text, s] = short(strain, p);
      text += " %";
    }
    if (!trusted(s, T)) {
      text = g(own, 0) + " % at that temperature";
      const warm = clamp(around, T);
      if (inside(dom.temperature_C, warm)) text += `, or ${g(warm, 4)} °C`;
    }
    if (text !== "") texts.push(text);
    return texts.join(", ");
  }

  return { refusal };
}
