// How numbers are written, the same way as in the tables of the other pages: plain for files and copying, spaced for
// reading. Pure functions; Node loads this file too.
"use strict";

const readerNumbers = (() => {
  const MISSING = "—";
  const [THIN_SPACE, NARROW_SPACE, MINUS] = ["\u2009", "\u202f", "\u2212"];
  const SUPERSCRIPT = { "-": "⁻", 0: "⁰", 1: "¹", 2: "²", 3: "³", 4: "⁴", 5: "⁵", 6: "⁶", 7: "⁷", 8: "⁸", 9: "⁹" };

  // A fixed number of decimals; empty where there is no number, and never a negative zero.
  const fixed = (value, decimals) => {
    if (!Number.isFinite(value)) {
      return "";
    }
    const text = value.toFixed(decimals);
    return Number(text) === 0 ? text.replace("-", "") : text;
  };

  // Significant digits, scientific below 1e-4 only; empty where there is no number.
  const significant = (value, digits) => {
    if (!Number.isFinite(value)) {
      return "";
    }
    if (value === 0) {
      return "0";
    }
    const [mantissa, power] = value.toExponential(digits - 1).split("e");
    const exponent = Number(power);
    if (exponent < -4) {
      return `${mantissa}e-${String(-exponent).padStart(2, "0")}`;
    }
    return Number(`${mantissa}e${power}`).toFixed(Math.max(digits - 1 - exponent, 0));
  };

  // A colour temperature with the digits that are true: a step in chromaticity is ever more kelvins up there.
  const kelvin = (value) => significant(value, value >= 30000 ? 2 : value >= 10000 ? 3 : 4);

  // A plain number as it is read on a page: true minus, thin spaces from five digits on, powers, dash for none.
  const spaced = (text) => {
    if (!text) {
      return MISSING;
    }
    const [mantissa, power] = text.split("e");
    if (power) {
      const raised = [...String(Number(power))].map((digit) => SUPERSCRIPT[digit]).join("");
      return `${spaced(mantissa)}${NARROW_SPACE}×${NARROW_SPACE}10${raised}`;
    }
    const [sign, body] = text.startsWith("-") ? [MINUS, text.slice(1)] : ["", text];
    const [whole, ...decimals] = body.split(".");
    const grouped = whole.length > 4 ? whole.replace(/\B(?=(\d{3})+$)/g, THIN_SPACE) : whole;
    return sign + [grouped, ...decimals].join(".");
  };

  // A number as short as it can be with at most so many decimals: 12, 12.5, -0.25.
  const short = (value, decimals) => String(Number(fixed(value, decimals)));

  // One line of a CSV file; quotes only where a comma or a quote asks for them.
  const csvLine = (cells) =>
    `${cells.map((cell) => (/[",\n]/.test(cell) ? `"${cell.replaceAll('"', '""')}"` : cell)).join(",")}\n`;

  return { MISSING, csvLine, fixed, kelvin, short, significant, spaced };
})();

if (typeof module !== "undefined") {
  module.exports = readerNumbers;
}
