/** What the secondary's own channels show: a collapse of the voltage, a pulse of current. */
import type { CaptureEvidence, PulseEvidence } from "../evidence.ts";

export interface SecondaryEvidence {
  /** Sample positions of each breakdown and where the voltage comes back; null: not on screen. */
  strikes: { onset: number; extinction: number | null; breakdown_V: number | null }[];
  /** Largest magnitude of the secondary voltage after switch-off; null without that channel. */
  peak_V: number | null;
}

export function gatherSecondary(
  _evidence: CaptureEvidence,
  _pulse: PulseEvidence,
  _from: number,
  _to: number,
): SecondaryEvidence | null {
  return null;
}
