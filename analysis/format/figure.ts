/**
 * Figures for people: SI prefix, uncertainty, one format for terminal, window and report. Only views
 * use it; the store, the JSON and the functions between them keep plain SI numbers.
 */
import type { Figure, Measured } from "../reading-format.ts";

/** SI Brochure, 9th edition, table 7; by power of a thousand. */
const prefixes: Record<number, string> = {
  [-5]: "f",
  [-4]: "p",
  [-3]: "n",
  [-2]: "µ",
  [-1]: "m",
  0: "",
  1: "k",
  2: "M",
  3: "G",
  4: "T",
};

export const noFigure = "–";

interface Scaled {
  factor: number;
  unit: string;
}

/** Prefix for a value as it will be shown: 0.9996 mH with three digits is 1.00 mH, not 1000 µH. */
function scaleFor(value: number, unit: string, digits: number): Scaled {
  if (unit === "" || unit === "%" || value === 0) return { factor: 1, unit };
  const shown = Math.abs(Number(value.toPrecision(digits)));
  const power = Math.min(4, Math.max(-5, Math.floor(Math.log10(shown) / 3 + 1e-12)));
  return { factor: 1000 ** power, unit: prefixes[power] + unit };
}

const join = (number: string, unit: string) => (unit === "" ? number : `${number} ${unit}`);
const minus = (text: string) => text.replace("-", "−");

/** A plain number to `digits` significant digits: 0.004123 "s" → "4.12 ms". Null → a dash. */
export function formatNumber(value: number | null, unit: string, digits = 3): string {
  if (value === null) return noFigure;
  const { factor, unit: shownUnit } = scaleFor(value, unit, digits);
  const scaled = value / factor;
  const places = scaled === 0 ? 0 : Math.max(0, digits - 1 - exponent(scaled, digits));
  return join(minus(scaled.toFixed(places)), shownUnit);
}

/** A value as somebody stated it, with no digits it has not: 12 V, 330 nF, 0.5 °C. */
export function formatStated(value: number, unit: string): string {
  if (unit === "°C") return minus(`${value} °C`);
  return formatNumber(value, unit, 6)
    .replace(/(\.\d*?)0+(?=\D|$)/, "$1")
    .replace(/\.(?=\D|$)/, "");
}

/**
 * A figure with its standard uncertainty: "5.82 ± 0.04 mH". The uncertainty has two digits when they
 * are 10 to 35, else one (the rounding rule of the Particle Data Group's Review, section 5.3), and the
 * value ends at the same place. Null → a dash.
 */
export function formatFigure(figure: Figure, unit: string): string {
  if (figure === null) return noFigure;
  const parts = figureParts(figure, unit);
  return join(parts.u === null ? parts.value : `${parts.value} ± ${parts.u}`, parts.unit);
}

/** The same in parts, for a table's columns; `u` null where the uncertainty is zero. */
export function figureParts(
  { value, u }: Measured,
  unit: string,
): { value: string; u: string | null; unit: string } {
  if (u === 0) {
    const { factor, unit: shownUnit } = scaleFor(value, unit, 4);
    const scaled = value / factor;
    const places = scaled === 0 ? 0 : Math.max(0, 3 - exponent(scaled, 4));
    return { value: minus(scaled.toFixed(places)), u: null, unit: shownUnit };
  }
  const { factor, unit: shownUnit } = scaleFor(Math.max(Math.abs(value), u), unit, 3);
  const [scaled, spread] = [value / factor, u / factor];
  const leading = Number(spread.toExponential(2).slice(0, 4));
  const twoDigits = leading < 3.55 || leading >= 9.5;
  const places = Math.min(20, (twoDigits ? 1 : 0) - exponent(spread, leading < 3.55 ? 2 : 1));
  const rounded = (number: number) =>
    places >= 0 ? number.toFixed(places) : String(Math.round(number / 10 ** -places) * 10 ** -places);
  return { value: minus(rounded(scaled)), u: rounded(spread), unit: shownUnit };
}

/** Decimal exponent after rounding to `digits`. */
const exponent = (value: number, digits: number) => Number(value.toExponential(digits - 1).split("e")[1]);
