/** Conduction intervals from the gate: high (or, inverted, low) while the switch conducts. */
import { statesOf, transitionsOf } from "./states.ts";

/** [on, off] pairs as fractional samples; null where the edge is outside the record. */
export type Conduction = { on: number | null; off: number | null };

export function gateConductions(samples: Float64Array, conductsHigh: boolean): Conduction[] {
  const states = statesOf(samples);
  if (!states) return [];
  const found: Conduction[] = [];
  for (const { at, rising } of transitionsOf(samples, states)) {
    const begins = rising === conductsHigh;
    if (begins) found.push({ on: at, off: null });
    else if (found.length > 0 && found.at(-1)!.off === null) found.at(-1)!.off = at;
    else found.push({ on: null, off: at });
  }
  return found;
}
