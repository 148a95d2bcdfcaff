// Numbers for people, by the rules of the program's tables: a value to the place of
// the second significant digit of its interval (JCGM 100:2008, 7.2.6), ties to even.
//
// A double is m·2^e with whole m, so that x·10^p is a quotient of whole numbers and
// can be rounded exactly. The browser's own toFixed rounds ties away from zero.
const phaselagNumber = (() => {
  "use strict";
  const words = new DataView(new ArrayBuffer(8));

  // scaled is the whole number nearest to |x|·10^p, ties to even.
  function scaled(x, p) {
    words.setFloat64(0, Math.abs(x));
    const bits = words.getBigUint64(0);
    const raw = Number(bits >> 52n);
    let m = bits & 0xfffffffffffffn;
    if (raw > 0) m |= 1n << 52n;
    const e = (raw > 0 ? raw : 1) - 1075;
    let denominator = 1n;
    if (e >= 0) m <<= BigInt(e); else denominator <<= BigInt(-e);
    if (p >= 0) m *= 10n ** BigInt(p); else denominator *= 10n ** BigInt(-p);
    const q = m / denominator, twice = 2n * (m % denominator);
    return twice > denominator || twice === denominator && (q & 1n) === 1n ? q + 1n : q;
  }

  const sign = (x) => x < 0 || Object.is(x, -0) ? "-" : "";

  // fixed writes x with so many places behind the point.
  function fixed(x, places) {
    const s = scaled(x, places).toString().padStart(places + 1, "0");
    const cut = s.length - places;
    return sign(x) + s.slice(0, cut) + (places > 0 ? "." + s.slice(cut) : "");
  }

  // digits rounds x to n digits: their text, and the power of ten of the first.
  function digits(x, n) {
    if (x === 0) return { text: "0".repeat(n), power: 0 };
    let power = Math.floor(Math.log10(Math.abs(x)));
    let d = scaled(x, n - 1 - power);
    const least = 10n ** BigInt(n - 1);
    while (d < least) d = scaled(x, n - 1 - --power);
    while (d >= 10n * least) d = scaled(x, n - 1 - ++power);
    return { text: d.toString(), power };
  }

  // shortest gives the fewest digits that read back as x.
  function shortest(x) {
    const [m, e] = Math.abs(x).toExponential().split("e");
    return { text: m.replace(".", ""), power: Number(e) };
  }

  const mantissa = (text) => text.length > 1 ? text[0] + "." + text.slice(1) : text;

  // general is a number with n significant digits (0: as many as it needs) without
  // zeros at the end, as a power of ten below 1e-4 and from 10^n on (n = 0: 10^6).
  function general(x, n) {
    if (Number.isNaN(x)) return "NaN";
    if (!Number.isFinite(x)) return (x < 0 ? "-" : "+") + "Inf";
    if (x === 0) return sign(x) + "0";
    const d = n > 0 ? digits(x, n) : shortest(x);
    const text = d.text.replace(/0+$/, "");
    let limit = n;
    if (n === 0) limit = 6;
    else if (n > text.length && text.length >= d.power + 1) limit = text.length;
    if (d.power < -4 || d.power >= limit) {
      const e = Math.abs(d.power);
      return sign(x) + mantissa(text) + "e" + (d.power < 0 ? "-" : "+") + (e < 10 ? "0" : "") + e;
    }
    if (d.power < 0) return sign(x) + "0." + "0".repeat(-d.power - 1) + text;
    if (text.length <= d.power + 1) return sign(x) + text + "0".repeat(d.power + 1 - text.length);
    return sign(x) + text.slice(0, d.power + 1) + "." + text.slice(d.power + 1);
  }

  const decade = (x, n) => digits(x, n).power;
  const clean = (s) => /^-[0.]*$/.test(s) ? s.slice(1) : s;

  function rounded(x, place) {
    const n = decade(x, 15) - place;
    if (x === 0 || n < -1) return "0";
    const step = Number("1e" + place);
    if (n === -1) return Math.abs(x) > 0.5 * step ? clean(fixed(x < 0 ? -step : step, 0)) : "0";
    const d = digits(x, n + 1);
    return clean(fixed(Number(sign(x) + mantissa(d.text) + "e" + d.power), 0));
  }

  function toPlace(x, place) {
    const a = Math.abs(x);
    if (a >= 1e6 || a < 1e-4) {
      const d = digits(x, Math.max(0, decade(x, 15) - place) + 1);
      return sign(x) + mantissa(d.text) + "e" + d.power;
    }
    return place > 0 ? rounded(x, place) : clean(fixed(x, -place));
  }

  // significant writes x with n significant digits (0: four), short where it needs
  // fewer; a number that was not measured is a dash.
  function significant(x, n) {
    if (Number.isNaN(x)) return "–";
    n = Math.min(n > 0 ? n : 4, 15);
    if (x === 0) return "0";
    const a = Math.abs(x);
    if (x === Math.trunc(x) && a < 1e6 && a < Number("1e" + (n + 1))) return fixed(x, 0);
    n = Math.min(n, shortest(x).text.length);
    return toPlace(x, decade(x, n) - n + 1);
  }

  // interval writes a half-width with two significant digits.
  function interval(u) {
    return Number.isNaN(u) || u === 0 ? significant(u, 2) : toPlace(u, decade(u, 2) - 1);
  }

  // withInterval writes x to the place of the second digit of its half-width u.
  function withInterval(x, u) {
    if (Number.isNaN(x) || !Number.isFinite(u) || u <= 0) return significant(x, 0);
    let place = decade(u, 2) - 1;
    const a = Math.abs(x);
    if (x !== 0) place = Math.max(place, decade(x, 15) - 14);
    if (x !== 0 && a < 1e-4 && u < 1e-4 || a >= 1e6) {
      if (decade(x, 15) - place + 1 >= 1) return toPlace(x, place);
    }
    return place > 0 ? rounded(x, place) : clean(fixed(x, Math.min(-place, 20)));
  }

  return { fixed, general, significant, interval, withInterval, digits };
})();
