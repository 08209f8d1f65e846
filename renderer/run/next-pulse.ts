/** The next pulse of a kind along the run, round from its end to its beginning; null where there is no other. */
import type { PulseRow } from "../../app/bridge.ts";
import { finalVerdict } from "../draw/glyph.ts";

export type Wanted = "unclear" | "no-spark";

export function nextPulse(rows: PulseRow[], from: number, wanted: Wanted): number | null {
  for (let step = 1; step <= rows.length; step++) {
    const at = (Math.max(from, -1) + step) % rows.length;
    if (at !== from && finalVerdict(rows[at]) === wanted) return at;
  }
  return null;
}

/** The same keys on the run's sheet and on a pulse's. */
export const nextKeys: { key: string; does: string; wanted: Wanted; none: string }[] = [
  { key: "q", does: "the next unclear pulse", wanted: "unclear", none: "No other pulse is unclear." },
  {
    key: "j",
    does: "the next pulse without a spark",
    wanted: "no-spark",
    none: "No other pulse stayed without a spark.",
  },
];
