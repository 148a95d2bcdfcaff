// Quantities as text: a number with a decimal point, a blank or none, a unit. The
// value in SI is (x + zero)·numerator/denominator. The units come with the page.
const phaselagUnit = (() => {
  "use strict";
  const clip = (s) => [...s].length > 40 ? [...s].slice(0, 40).join("") + "…" : s;
  const quote = (s) => JSON.stringify(clip(s));
  const fault = (what, hint) => ({ fault: what, hint: hint || "" });

  const plain = (s) => s.replace(/[−–﹣－]/g, "-").replace(/[\u00a0\u202f\u2009\u2007\t]/g, " ").replace(/\ufeff/g, "").trim();

  // normal brings the spellings of a unit to one.
  function normal(s) {
    s = s.trim().replace(/ per /g, "/").replace(/Â([°º·µ])/g, "$1").replace(/[º˚∘]/g, "°").replace(/℃/g, "°C").replace(/℉/g, "°F")
      .replace(/\ufffd(?=[CF])/g, "°").replace(/μ/g, "µ").replace(/¹/g, "1").replace(/⁻/g, "-").replace(/\^|\*\*/g, "")
      .replace(/[−–‐‑﹣－]/g, "-").replace(/[⋅∙•×*]/g, "·").replace(/[∕⁄]/g, "/").replace(/％/g, "%").replace(/[\s\ufeff\u200b]/g, "");
    const dot = s.indexOf(".");
    if (dot > 0 && dot < s.length - 1) s = s.replace(/\./g, "·");
    return s.replace(/\.$/, "");
  }

  // lookup finds a unit. Capitals count, but a symbol all in small letters or all in
  // capitals will do where one unit only reads so.
  function lookup(symbol, units) {
    const s = normal(symbol);
    if (s === "") return null;
    for (const u of units) if (u.spellings.includes(s)) return u;
    if (s !== s.toLowerCase() && s !== s.toUpperCase()) return null;
    const found = units.filter((u) => u.spellings.some((a) => a.toLowerCase() === s.toLowerCase()));
    return found.length === 1 ? found[0] : null;
  }

  // parse reads one quantity: {value} in SI, or {fault, hint}. kind has its name and
  // its units, the preferred one first.
  function parse(text, kind) {
    const s = plain(text);
    const number = /^[-+]?(\d+\.?\d*|\.\d+)([eE][-+]?\d+)?/.exec(s);
    if (!number) return fault(`${quote(text)} is not a number with a unit`, "write a number with a decimal point, then its unit, for example 23 °C or 0.2 %");
    const rest = s.slice(number[0].length).trim();
    if (rest.startsWith(",")) return fault(`a comma in the number of ${quote(text)}`, "write numbers with a decimal point and without thousands separators");
    if (/^[02-9.]/.test(rest)) return fault(`more than one number in ${quote(text)}`, "write one number without blanks in it, then its unit");
    const x = Number(number[0]);
    if (!Number.isFinite(x)) return fault(`the number in ${quote(text)} is too large`);
    const list = kind.units.map((u) => u.symbol).join(", ");
    if (rest === "") {
      if (x === 0 && kind.name !== "temperature") return { value: 0 };
      return fault(`the unit is missing in ${quote(text)}`, `write for example ${clip(text).trim()} ${kind.units[0].symbol}; units of a ${kind.name}: ${list}`);
    }
    const u = lookup(rest, kind.units);
    if (!u) return fault(`${quote(rest)} is not a unit of a ${kind.name}`, `units of a ${kind.name}: ${list}`);
    const value = u.zero !== 0 && u.numerator === 1 ? x + u.zero : (x + u.zero) * u.numerator / u.denominator;
    const written = `${phaselagNumber.general(x, 0)} ${u.symbol}`;
    if (!Number.isFinite(value)) return fault(`${written} is not a finite ${kind.name}`);
    if (kind.name === "temperature" && value < 0) {
      return fault(`${written} is below absolute zero`, "absolute zero is 0 K = -273.15 °C = -459.67 °F; check the sign and the unit");
    }
    return { value };
  }

  return { parse };
})();
