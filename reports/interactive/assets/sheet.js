// The interactive section of a datasheet: a condition that is typed, and charts that
// are read. Both ask the same model, and print by the same rule.
(() => {
  "use strict";
  const data = JSON.parse(document.getElementById("live-data").textContent);
  const root = document.getElementById("live");
  const find = (name) => root.querySelector(`[data-live="${name}"]`);
  const { significant, interval, withInterval, digits } = phaselagNumber;
  const compound = phaselagModel.open(data.compound, data.quantile);
  const S = data.symbol, zeroC = compound.zeroC, domain = data.compound.domain;
  const [frequencyKind, temperatureKind, strainKind] = data.kinds;
  const rows = [
    { key: "storage", u: "storageU", name: `storage modulus ${S}′`, short: `${S}′`, unit: "MPa", factor: 1e6 },
    { key: "loss", u: "lossU", name: `loss modulus ${S}″`, short: `${S}″`, unit: "MPa", factor: 1e6 },
    { key: "magnitude", u: "magnitudeU", name: `magnitude |${S}*|`, short: `|${S}*|`, unit: "MPa", factor: 1e6 },
    { key: "eta", u: "etaU", name: "loss factor tan δ", short: "tan δ", unit: "", factor: 1 },
  ];
  const printed = (m, row) => ({ value: withInterval(m[row.key] / row.factor, m[row.u] / row.factor), half: interval(m[row.u] / row.factor) });
  const minus = (text) => text.replace(/-/g, "−");
  const round3 = (x) => { const d = digits(x, 3); return Number(`${d.text}e${d.power - 2}`); };
  const degrees = (T) => minus(significant(T, 0)) + " °C";
  const percent = (q) => Number.isNaN(q.strain) ? compound.own : 100 * q.strain;

  function say(q) {
    const p = percent(q);
    return `${significant(q.frequency, 0)} Hz, ${degrees(compound.celsius(q.temperature))}` + (Number.isNaN(p) ? "" : `, ${significant(p, 0)} %`);
  }

  // ---- the typed condition ----

  const inputs = { frequency: find("frequency"), temperature: find("temperature"), strain: find("strain") };
  let typed = null; // {q, answer} of the last condition that could be read

  function condition() {
    const q = { strain: NaN };
    const read = [["frequency", frequencyKind], ["temperature", temperatureKind]];
    if (inputs.strain && inputs.strain.value.trim() !== "") read.push(["strain", strainKind]);
    for (const [key, kind] of read) {
      const got = phaselagUnit.parse(inputs[key].value, kind);
      if (got.fault) return { ...got, at: key };
      q[key] = got.value;
    }
    return { q };
  }

  function answer() {
    const got = condition();
    for (const [key, input] of Object.entries(inputs)) if (input) input.setAttribute("aria-invalid", String(got.at === key));
    const refused = find("refusal"), table = find("answer"), note = find("note");
    const result = got.q ? compound.modulus(got.q) : got;
    const text = result.outside || result.fault;
    refused.hidden = !text;
    table.hidden = !!text;
    refused.textContent = text ? text + (result.hint ? "; " + result.hint : "") : "";
    note.textContent = "";
    if (got.q) typed = { q: got.q, answer: text ? null : result };
    else if (typed) typed.answer = null;
    if (text) return;
    find("at").textContent = `At ${say(got.q)}:`;
    for (const [i, row] of rows.entries()) {
      const p = printed(result, row), cells = table.tBodies[0].rows[i].cells;
      cells[1].textContent = p.value;
      cells[2].textContent = p.half;
    }
    if (Number.isNaN(got.q.strain)) note.textContent = data.note;
  }

  // ---- the charts ----

  const modes = {
    frequency: {
      label: "frequency f (Hz)", log: true,
      range: () => data.window_Hz,
      at: (T, x) => ({ frequency: x, temperature: T + zeroC, strain: typed ? typed.q.strain : NaN }),
      limits: (T) => { const a = compound.shift(T + zeroC), r = domain.reduced_frequency_Hz; return [Math.max(data.window_Hz[0], r[0] / a), Math.min(data.window_Hz[1], r[1] / a)]; },
      place: (q) => q.frequency,
      held: (q) => Number.isNaN(percent(q)) ? "" : `at a strain amplitude of ${significant(percent(q), 0)} %`,
    },
    strain: {
      label: "strain amplitude (%)", log: true,
      range: () => domain.strain_amplitude_percent,
      at: (T, x) => ({ frequency: typed ? typed.q.frequency : 10, temperature: T + zeroC, strain: x / 100 }),
      limits: () => domain.strain_amplitude_percent,
      place: (q) => percent(q),
      held: (q) => `at ${significant(q.frequency, 0)} Hz`,
    },
  };
  let mode = modes.frequency, curves = [], active = null, drawnFor = "";
  const shown = new Set(data.curves.keys());
  const readout = find("readout");

  // points of a curve, 16 a decade and both ends, as far as the model answers.
  function sample(index) {
    const T = data.curves[index].temperature_C, [lo, hi] = mode.limits(T), out = [];
    if (!(lo < hi)) return out;
    const n = Math.max(8, Math.ceil(16 * Math.log10(hi / lo)));
    for (let i = 0; i <= n; i++) {
      const x = i === 0 ? lo : i === n ? hi : lo * (hi / lo) ** (i / n);
      const m = compound.modulus(mode.at(T, x));
      if (m.storage !== undefined) out.push({ x, m });
    }
    return out.length > 1 ? out : [];
  }

  function yRange(row, log) {
    let lo = Infinity, hi = -Infinity;
    for (const c of curves) {
      for (const { m } of c.points) {
        const y = m[row.key] / row.factor, u = Math.min(m[row.u], m[row.key]) / row.factor;
        lo = Math.min(lo, log ? Math.max(y - u, y / 3) : y - u);
        hi = Math.max(hi, Math.min(y + u, 3 * y));
      }
    }
    if (!(lo < hi)) return log ? [1, 10] : [0, 1];
    return log ? [lo / 1.1, hi * 1.1] : [Math.max(0, lo - 0.06 * (hi - lo)), hi + 0.06 * (hi - lo)];
  }

  // held is what the curves hang on beside their temperatures.
  const held = () => { const q = mode.at(0, 1); return mode === modes.frequency ? q.strain : q.frequency; };

  // follow takes over what was typed: new curves where they change, else the cross alone.
  function follow() {
    if (String(held()) !== drawnFor) draw();
    else mark();
  }

  function draw() {
    drawnFor = String(held());
    curves = [];
    const missing = [];
    for (const [index, c] of data.curves.entries()) {
      if (!shown.has(index)) continue;
      const points = sample(index);
      if (points.length > 0) curves.push({ index, points, colour: c.colour, glyph: c.glyph, hollow: index >= 5 });
      else missing.push(degrees(c.temperature_C));
    }
    const q = curves.length > 0 ? mode.at(data.curves[curves[0].index].temperature_C, curves[0].points[0].x) : { frequency: 10, strain: NaN };
    find("held").textContent = [`Curves ${mode.held(q)} with 95 % bands`, missing.length > 0 ? `outside the domain here: ${missing.join(", ")}` : ""].filter(Boolean).join("; ").replace("  ", " ") + ".";
    for (const [i, row] of rows.entries()) {
      const log = row.unit !== "";
      charts[i].draw({
        x: { range: mode.range(), log: mode.log, label: mode.label },
        y: { range: yRange(row, log), log, label: row.unit === "" ? row.name : `${row.name} (${row.unit})` },
        curves: curves.map((c) => ({ ...c, points: c.points.map(({ x, m }) => ({ x, y: m[row.key] / row.factor, low: (m[row.key] - m[row.u]) / row.factor, high: (m[row.key] + m[row.u]) / row.factor })) })),
      });
    }
    if (active && !curves.some((c) => c.index === active.index)) active = null;
    mark();
  }

  // read shows the values of a curve at x: at a number of three digits, so that the
  // same condition can be typed, or at the end of the curve.
  function read(index, x) {
    const c = curves.find((v) => v.index === index);
    if (!c) return;
    const lo = c.points[0].x, hi = c.points[c.points.length - 1].x;
    x = round3(x);
    if (x < lo) x = lo;
    if (x > hi) x = hi;
    const q = mode.at(data.curves[index].temperature_C, x), m = compound.modulus(q);
    if (m.storage === undefined) return;
    active = { index, x, q, m };
    mark();
  }

  function mark() {
    readout.textContent = active === null ? readout.dataset.idle : `${say(active.q)}: ` + rows.map((row) => {
      const p = printed(active.m, row);
      return `${row.short} ${p.value} ± ${p.half}${row.unit ? " " + row.unit : ""}`.replace(/ /g, "\u00a0");
    }).join("; ");
    for (const [i, row] of rows.entries()) {
      const list = [];
      if (typed && typed.answer) list.push({ x: mode.place(typed.q), y: typed.answer[row.key] / row.factor });
      if (active) {
        const p = printed(active.m, row);
        list.push({ x: active.x, y: active.m[row.key] / row.factor, text: `${p.value} ± ${p.half}` });
      }
      charts[i].mark(list, active ? active.index : null);
    }
  }

  const on = {
    read,
    enter: () => {
      if (active || curves.length === 0) return;
      const c = curves[Math.floor(curves.length / 2)], p = c.points;
      read(c.index, Math.sqrt(p[0].x * p[p.length - 1].x));
    },
    // step goes on by twentieths of a decade.
    step: (n) => {
      if (!active) return on.enter();
      const k = 20 * Math.log10(active.x);
      read(active.index, 10 ** ((n > 0 ? Math.floor(k + 0.1) + n : Math.ceil(k - 0.1) + n) / 20));
    },
    turn: (n) => {
      if (!active) return on.enter();
      const k = curves.findIndex((c) => c.index === active.index) + n;
      if (curves[k]) read(curves[k].index, active.x);
    },
    end: (n) => {
      if (!active) on.enter();
      const c = active && curves.find((v) => v.index === active.index);
      if (c) read(c.index, n < 0 ? 0.9 * c.points[0].x : 1.1 * c.points[c.points.length - 1].x);
    },
    take: () => {
      if (!active) return;
      const g = (x) => phaselagNumber.general(x, 0);
      inputs.frequency.value = g(active.q.frequency) + " Hz";
      inputs.temperature.value = g(compound.celsius(active.q.temperature)) + " °C";
      if (inputs.strain) inputs.strain.value = Number.isNaN(active.q.strain) ? "" : g(Number((100 * active.q.strain).toPrecision(12))) + " %";
      answer();
      follow();
    },
    leave: () => { active = null; mark(); },
  };

  const hint = "Left and right arrow keys go along the curve, up and down to the next temperature, Enter takes the condition to the fields above.";
  const charts = rows.map((row) => phaselagChart.create(find("chart-" + row.key), `${row.name}. ${hint}`, on));

  for (const [index, c] of data.curves.entries()) {
    const label = document.createElement("label"), box = document.createElement("input");
    box.type = "checkbox";
    box.checked = true;
    box.addEventListener("change", () => { if (box.checked) shown.add(index); else shown.delete(index); draw(); });
    label.append(box);
    const sign = phaselagChart.element(label, "svg", { viewBox: "0 0 26 12", width: 26, height: 12, "aria-hidden": "true" });
    phaselagChart.element(sign, "line", { x1: 0, x2: 26, y1: 6, y2: 6, stroke: c.colour, "stroke-width": 2 });
    phaselagChart.glyph(sign, c.glyph, index >= 5, 13, 6, 4, c.colour);
    label.append(degrees(c.temperature_C));
    find("temperatures").append(label);
  }
  const tick = (all) => { for (const [i, box] of root.querySelectorAll('[data-live="temperatures"] input').entries()) { box.checked = all; if (all) shown.add(i); else shown.delete(i); } draw(); };
  find("all").addEventListener("click", () => tick(true));
  find("none").addEventListener("click", () => tick(false));
  for (const radio of root.querySelectorAll('input[name="live-mode"]')) {
    radio.addEventListener("change", () => { mode = modes[radio.value]; active = null; draw(); });
  }
  find("form").addEventListener("submit", (event) => { event.preventDefault(); answer(); follow(); });
  for (const input of Object.values(inputs)) if (input) input.addEventListener("input", () => { answer(); follow(); });

  // A start inside the domain: 10 Hz at the reference temperature where it is.
  const start = { frequency: 10, temperature: data.compound.reference_temperature_C + zeroC, strain: NaN };
  if (compound.refusal(start)) {
    const [lo, hi] = domain.temperature_C;
    start.temperature = Math.min(Math.max(data.compound.reference_temperature_C, lo), hi) + zeroC;
    const r = domain.reduced_frequency_Hz, a = compound.shift(start.temperature);
    if (compound.refusal(start)) start.frequency = round3(Math.sqrt(Math.max(r[0], 1e-6 * r[1]) * r[1]) / a);
  }
  inputs.frequency.value = phaselagNumber.general(start.frequency, 0) + " Hz";
  inputs.temperature.value = phaselagNumber.general(compound.celsius(start.temperature), 0) + " °C";
  readout.dataset.idle = readout.textContent;
  root.hidden = false;
  answer();
  draw();
  let width = root.clientWidth;
  window.addEventListener("resize", () => { if (root.clientWidth > 0 && root.clientWidth !== width) { width = root.clientWidth; draw(); } });
})();
