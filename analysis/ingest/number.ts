/** What a cell holds when it is not a plain number. */
export type CellKind = "number" | "blank" | "missing" | "over" | "text";

export interface NumberFormat {
  decimal: "." | ",";
  /** Groups digits ("1.234,5"); null where there is none. */
  thousands: string | null;
}

const plain = /^[+-]?(\d+\.?\d*|\.\d+)(e[+-]?\d+)?$/i;
const missing = /^([+-]?nan|n\/?a|null|none|invalid|undef(ined)?|[+-]?1\.#(qnan|snan|ind)|-{1,4}|\?+)$/i;
const over =
  /^[+-]?(inf(inity)?|∞|1\.#inf|ol|ovr|over(range|load|flow)?|ovf|under(range|flow)?|clip(ped)?|\*+|#+)$/i;

// SCPI-99, volume 1, 7.2.1.4 and 7.2.1.5: 9.9E37 stands for infinity, 9.91E37 for "not a number".
const scpiInfinity = 9.9e37;
const scpiMissing = 9.91e37;

/** Reads one cell: its value (NaN where there is none, ±Infinity where over range) and what it is. */
export function readCell(cell: string, format: NumberFormat): { kind: CellKind; value: number } {
  const text = cell
    .trim()
    .replace(/^"(.*)"$/, "$1")
    .trim();
  if (text === "") return { kind: "blank", value: NaN };
  const value = readNumber(text, format);
  if (value !== null) return { kind: sentinel(value), value: asMeant(value) };
  if (missing.test(text)) return { kind: "missing", value: NaN };
  if (over.test(text)) return { kind: "over", value: /^-|under/i.test(text) ? -Infinity : Infinity };
  return { kind: "text", value: NaN };
}

/** A number in the file's spelling, else null: signs, either decimal mark, grouped digits, exponents after E or D. */
export function readNumber(text: string, format: NumberFormat): number | null {
  if (format.decimal === "." && plain.test(text)) return Number(text);
  let spelled = text.replaceAll("−", "-").replace(/(?<=[.,]\d*)d(?=[+-]\d{2,3}$)/i, "e");
  if (format.thousands !== null && spelled.includes(format.thousands)) {
    if (!grouped(spelled, format)) return null;
    spelled = spelled.replaceAll(format.thousands, "");
  }
  if (format.decimal === ",") spelled = spelled.includes(".") ? "" : spelled.replace(",", ".");
  return plain.test(spelled) ? Number(spelled) : null;
}

function grouped(text: string, { decimal, thousands }: NumberFormat): boolean {
  const [whole, ...fraction] = text.replace(/^[+-]/, "").split(decimal);
  // Behind the decimal mark nothing is grouped: there the mark ends a cell ("0.70, 0.57,").
  if (fraction.some((part) => part.includes(thousands ?? ""))) return false;
  const groups = whole.split(thousands ?? "");
  // Who groups digits writes no zeros in front: "0'242" is a damaged decimal mark.
  return groups.every((group, i) => (i === 0 ? /^[1-9]\d{0,2}$/ : /^\d{3}$/).test(group));
}

const sentinel = (value: number): CellKind => {
  const size = Math.abs(value);
  if (size === scpiMissing) return "missing";
  return size === scpiInfinity || size === Infinity ? "over" : "number";
};

function asMeant(value: number): number {
  const kind = sentinel(value);
  if (kind === "missing") return NaN;
  return kind === "over" ? Math.sign(value) * Infinity : value;
}
