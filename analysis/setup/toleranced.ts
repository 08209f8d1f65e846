import type { Measured } from "../reading-format.ts";
import type { Toleranced } from "./schema.ts";

/**
 * A stated value with its standard uncertainty: a rectangular tolerance counts value·t/√3
 * (JCGM 100:2008, 4.3.7), an expanded uncertainty value·t/k. No tolerance: u = 0.
 */
export function standard(stated: Toleranced | null | undefined): Measured | null {
  if (stated === null || stated === undefined) return null;
  if (typeof stated === "number") return { value: stated, u: 0 };
  const halfWidth = Math.abs(stated.value) * (stated.tolerance ?? 0);
  return { value: stated.value, u: halfWidth / (stated.k ?? Math.sqrt(3)) };
}
