/** What people type into a field: "330n", "330 nF", "0,33 µF", "1.2e-4", "4k7" is not one of them. */

const powers: Record<string, number> = {
  T: 1e12,
  G: 1e9,
  M: 1e6,
  k: 1e3,
  "": 1,
  m: 1e-3,
  µ: 1e-6,
  μ: 1e-6,
  u: 1e-6,
  n: 1e-9,
  p: 1e-12,
  f: 1e-15,
};

const shape = /^([+−-]?\d*[.,]?\d+(?:e[+-]?\d+)?)\s*(.*)$/i;

/** The SI value, or null where the text is no number with an optional prefix and this unit. */
export function parseEntry(text: string, unit: string): number | null {
  const match = shape.exec(text.trim());
  if (!match) return null;
  const number = Number(match[1].replace(",", ".").replace("−", "-"));
  const letter = prefixOf(match[2].trim(), unit);
  if (letter === null || !Number.isFinite(number)) return null;
  // 330 / 1e9 and not 330 · 1e-9: the quotient is the nearest number to what was meant.
  const power = powers[letter];
  return power < 1 ? number / Math.round(1 / power) : number * power;
}

function prefixOf(rest: string, unit: string): string | null {
  const spelled = rest.replace(/ohms?$/i, "Ω").replace("Ω", "Ω");
  const letter = unit !== "" && spelled.endsWith(unit) ? spelled.slice(0, -unit.length).trim() : spelled;
  return letter in powers ? letter : null;
}

/** "5", "5 %", "0.05" is asked as percent: 5 → 0.05. */
export function parsePercent(text: string): number | null {
  const number = parseEntry(text.replace("%", "").trim(), "");
  return number === null || number < 0 || number > 100 ? null : number / 100;
}
