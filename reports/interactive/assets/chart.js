// A chart of curves with their 95 % bands, as SVG. It knows nothing of rubber: it gets
// points in numbers, draws axes, and reports which curve is read at which abscissa, by
// pointer or by keyboard. Glyphs, as in the printed figures, tell the curves apart
// without colour.
const phaselagChart = (() => {
  "use strict";
  const space = "http://www.w3.org/2000/svg";
  const margin = { left: 54, right: 14, top: 12, bottom: 40 };

  function element(parent, name, attributes, text) {
    const e = document.createElementNS(space, name);
    for (const [k, v] of Object.entries(attributes || {})) e.setAttribute(k, v);
    if (text !== undefined) e.textContent = text;
    parent.append(e);
    return e;
  }

  const superscript = (n) => String(n).replace(/[-0-9]/g, (c) => c === "-" ? "⁻" : "⁰¹²³⁴⁵⁶⁷⁸⁹"[c]);
  const tickText = (v, log) => {
    const e = Math.round(Math.log10(v));
    if (log && (e > 3 || e < -3) && Math.abs(v - 10 ** e) < 1e-9 * v) return "10" + superscript(e);
    return String(Number(v.toPrecision(6))).replace("-", "−");
  };

  // linearTicks are multiples of 1, 2 or 5 times a power of ten, about n of them.
  function linearTicks(lo, hi, n) {
    const raw = (hi - lo) / n, power = 10 ** Math.floor(Math.log10(raw)), f = raw / power;
    const step = power * (f > 5 ? 10 : f > 2 ? 5 : f > 1 ? 2 : 1), out = [];
    for (let k = Math.ceil(lo / step - 1e-9); k * step <= hi + 1e-9 * step; k++) out.push(Number((k * step).toPrecision(12)));
    return out;
  }

  // logTicks are decades, with 2 and 5 where there are few; every second one and so on
  // where there are many.
  function logTicks(lo, hi, n) {
    const a = Math.log10(lo), b = Math.log10(hi), every = Math.max(1, Math.ceil((b - a) / n)), out = [];
    const parts = b - a <= 0.35 * n ? [1, 2, 5] : [1];
    for (let k = Math.floor(a); k <= b + 1e-9; k++) {
      if (every > 1 && k % every !== 0) continue;
      for (const m of parts) {
        const v = Number((m + "e" + k));
        if (v >= lo * (1 - 1e-9) && v <= hi * (1 + 1e-9)) out.push(v);
      }
    }
    return out.length >= 2 ? out : linearTicks(lo, hi, 4).filter((v) => v > 0);
  }

  // scale maps values to pixels and back.
  function scale(range, pixels, log) {
    const f = log ? Math.log10 : (x) => x, a = f(range[0]), b = f(range[1]);
    const to = (v) => pixels[0] + (f(v) - a) / (b - a) * (pixels[1] - pixels[0]);
    const back = (p) => { const u = a + (p - pixels[0]) / (pixels[1] - pixels[0]) * (b - a); return log ? 10 ** u : u; };
    return { to, back };
  }

  const outlines = [null, [[-0.87, -0.87], [0.87, -0.87], [0.87, 0.87], [-0.87, 0.87]], [[-1.07, 0.8], [1.07, 0.8], [0, -1.1]],
    [[0, -1.2], [1.2, 0], [0, 1.2], [-1.2, 0]], [[-1.07, -0.8], [1.07, -0.8], [0, 1.1]]];

  // glyph draws the mark of a curve; the first five are filled, the next hollow.
  function glyph(parent, index, hollow, x, y, r, colour) {
    const style = { fill: hollow ? "#fff" : colour, stroke: colour, "stroke-width": 1.2 };
    const shape = outlines[index % outlines.length];
    if (shape === null) element(parent, "circle", { cx: x.toFixed(2), cy: y.toFixed(2), r, ...style });
    else element(parent, "polygon", { points: shape.map(([a, b]) => `${(x + a * r).toFixed(2)},${(y + b * r).toFixed(2)}`).join(" "), ...style });
  }

  // create puts an empty chart into an element. on has the answers to a reader:
  // read(curve, x), step(direction), turn(direction), end(which), take(), leave(), enter().
  function create(parent, label, on) {
    const svg = element(parent, "svg", { role: "application", tabindex: 0, "aria-label": label, "aria-roledescription": "chart" });
    const layer = element(svg, "g"), marks = element(svg, "g", { class: "marks" });
    let drawn = null;

    // draw replaces the picture. o: x, y {range, log, label}, curves [{points [{x, y,
    // low, high}], colour, glyph, hollow, index}].
    function draw(o) {
      const width = Math.max(240, Math.round(parent.clientWidth)), height = Math.round(Math.min(300, 0.55 * width + 60));
      svg.setAttribute("viewBox", `0 0 ${width} ${height}`);
      svg.setAttribute("height", height);
      layer.replaceChildren();
      marks.replaceChildren();
      const right = width - margin.right, bottom = height - margin.bottom;
      const sx = scale(o.x.range, [margin.left, right], o.x.log), sy = scale(o.y.range, [bottom, margin.top], o.y.log);
      drawn = { ...o, sx, sy, width, height, right, bottom };
      for (const v of (o.x.log ? logTicks : linearTicks)(...o.x.range, Math.floor(width / 60))) {
        const x = sx.to(v).toFixed(2);
        element(layer, "line", { x1: x, x2: x, y1: margin.top, y2: bottom, class: "grid" });
        element(layer, "text", { x, y: bottom + 16, "text-anchor": "middle" }, tickText(v, o.x.log));
      }
      for (const v of (o.y.log ? logTicks : linearTicks)(...o.y.range, 6)) {
        const y = sy.to(v);
        element(layer, "line", { x1: margin.left, x2: right, y1: y.toFixed(2), y2: y.toFixed(2), class: "grid" });
        element(layer, "text", { x: margin.left - 6, y: (y + 4).toFixed(2), "text-anchor": "end" }, tickText(v, o.y.log));
      }
      element(layer, "rect", { x: margin.left, y: margin.top, width: right - margin.left, height: bottom - margin.top, class: "frame" });
      element(layer, "text", { x: (margin.left + right) / 2, y: height - 6, "text-anchor": "middle", class: "axis" }, o.x.label);
      element(layer, "text", { transform: `translate(13 ${(margin.top + bottom) / 2}) rotate(-90)`, "text-anchor": "middle", class: "axis" }, o.y.label);
      const floor = o.y.range[0];
      const at = (x, y) => `${sx.to(x).toFixed(2)},${sy.to(Math.max(y, floor)).toFixed(2)}`;
      for (const c of o.curves) {
        element(layer, "polygon", { points: c.points.map((p) => at(p.x, p.high)).concat(c.points.map((p) => at(p.x, p.low)).reverse()).join(" "), fill: c.colour, class: "band" });
      }
      for (const c of o.curves) {
        element(layer, "polyline", { points: c.points.map((p) => at(p.x, p.y)).join(" "), stroke: c.colour, class: "curve", "data-curve": c.index });
        // a few glyphs, not below each other on neighbouring curves
        const n = Math.max(1, Math.floor(c.points.length / 5));
        for (let k = (3 * c.index) % n; k < c.points.length; k += n) {
          glyph(layer, c.glyph, c.hollow, sx.to(c.points[k].x), sy.to(Math.max(c.points[k].y, floor)), 3.6, c.colour);
        }
      }
    }

    // mark shows the point that is read (with a text) and the typed one (without).
    function mark(list, active) {
      marks.replaceChildren();
      for (const line of layer.querySelectorAll(".curve")) {
        const on = active !== null && Number(line.dataset.curve) === active;
        line.classList.toggle("active", on);
        if (on && line !== layer.lastChild) layer.append(line); // on top of the others
      }
      if (drawn === null) return;
      const { sx, sy, right, bottom } = drawn;
      for (const m of list) {
        const [a, b] = drawn.x.range, [c, d] = drawn.y.range;
        if (!(m.x >= a * (1 - 1e-9) && m.x <= b * (1 + 1e-9)) || !(m.y >= c && m.y <= d)) continue;
        const x = sx.to(m.x), y = sy.to(m.y);
        if (m.text === undefined) {
          element(marks, "path", { d: `M${x - 6} ${y - 6}L${x + 6} ${y + 6}M${x - 6} ${y + 6}L${x + 6} ${y - 6}`, class: "typed" });
          continue;
        }
        element(marks, "line", { x1: x, x2: x, y1: margin.top, y2: bottom, class: "cursor" });
        element(marks, "circle", { cx: x, cy: y, r: 5, class: "point" });
        const left = x > (margin.left + right) / 2;
        element(marks, "text", { x: left ? x - 9 : x + 9, y: y < margin.top + 26 ? y + 20 : y - 9, "text-anchor": left ? "end" : "start", class: "value" }, m.text);
      }
    }

    // near finds the curve next to the pointer: first by what it passes at this
    // abscissa, its end where it does not reach there.
    function near(event) {
      if (drawn === null || drawn.curves.length === 0) return null;
      const box = svg.getBoundingClientRect();
      const px = (event.clientX - box.left) * drawn.width / box.width, py = (event.clientY - box.top) * drawn.height / box.height;
      const x = drawn.sx.back(Math.min(Math.max(px, margin.left), drawn.right));
      let best = null;
      for (const c of drawn.curves) {
        const p = c.points, lo = p[0].x, hi = p[p.length - 1].x, v = Math.min(Math.max(x, lo), hi);
        let k = 1;
        while (k < p.length - 1 && p[k].x < v) k++;
        const a = p[Math.max(0, k - 1)], b = p[Math.min(k, p.length - 1)], u = b.x > a.x ? (v - a.x) / (b.x - a.x) : 0;
        const away = Math.hypot(drawn.sy.to(Math.max(a.y + u * (b.y - a.y), drawn.y.range[0])) - py, drawn.sx.to(v) - Math.min(Math.max(px, margin.left), drawn.right));
        if (best === null || away < best.away) best = { away, curve: c.index, x: v };
      }
      return best;
    }

    const follow = (event) => { const n = near(event); if (n) on.read(n.curve, n.x); };
    svg.addEventListener("pointermove", follow);
    svg.addEventListener("pointerdown", follow);
    svg.addEventListener("pointerleave", () => { if (document.activeElement !== svg) on.leave(); });
    svg.addEventListener("click", () => on.take());
    svg.addEventListener("focus", () => on.enter());
    svg.addEventListener("blur", () => on.leave());
    const keys = {
      ArrowRight: () => on.step(1), ArrowLeft: () => on.step(-1), PageUp: () => on.step(20), PageDown: () => on.step(-20),
      ArrowUp: () => on.turn(1), ArrowDown: () => on.turn(-1), Home: () => on.end(-1), End: () => on.end(1),
      Enter: () => on.take(), Escape: () => on.leave(),
    };
    svg.addEventListener("keydown", (event) => {
      if (!keys[event.key] || event.ctrlKey || event.altKey || event.metaKey) return;
      event.preventDefault();
      keys[event.key]();
    });
    return { svg, draw, mark };
  }

  return { create, element, glyph };
})();
