/**
 * A file that ends in mid-line: its last number may have lost digits. It is told by what the column's
 * other cells have and the last one lacks: cells, decimals, an exponent or its digits.
 */
import { filledWidth } from "./cells.ts";
import type { BulkPlan } from "./bulk.ts";

export function isCutLine(last: string[], before: string[][], plan: BulkPlan): boolean {
  const whole = before.filter((cells) => filledWidth(cells) >= plan.width);
  if (whole.length < 2) return false;
  if (filledWidth(last) < Math.min(...whole.map(filledWidth))) return true;
  const column = last.length - 1;
  const spelled = spelling(last[column] ?? "", plan);
  const others = whole.map((cells) => spelling(cells[column] ?? "", plan));
  return spelled.some((count, i) => count < Math.min(...others.map((other) => other[i])));
}

/** Digits after the decimal mark, exponents, exponent digits. */
function spelling(cell: string, { format }: BulkPlan): number[] {
  const [mantissa, exponent] = cell.trim().split(/e/i);
  const decimals = mantissa.split(format.decimal)[1]?.length ?? 0;
  return [decimals, exponent === undefined ? 0 : 1, exponent?.replace(/^[+-]/, "").length ?? 0];
}
