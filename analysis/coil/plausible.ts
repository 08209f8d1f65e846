/**
 * Whether the ring can be the coil's own, where the ramp or the user knows its inductance. A burning
 * arc rings faster, through the leakage inductance; an undersampled ring shows an alias, mostly slower.
 */
import type { PulseEvidence } from "../evidence.ts";
import type { Figure } from "../reading-format.ts";
import { standard } from "../setup/toleranced.ts";
import type { Setup } from "../setup/schema.ts";

/** Ring and ramp may differ this far: capacitor tolerance, saturation. */
const FAST = 0.6;
/** The other way the secondary's capacitance, where it is not stated, may add as much as the primary's, and more. */
const SLOW = 1.6;
const SLOW_WITH_SECONDARY = 6;
/** A kick that rises within this many samples, and a cycle of fewer than six, may be an alias. */
const FEW_SAMPLES = 2;
const FEW_PER_CYCLE = 6;

/** What L ought to be: from the ramp, else as the user knows it beside a capacitor; null unknown. */
export function expectedInductance(ramp: Figure, setup: Setup): Figure {
  if (ramp && ramp.u < 0.2 * ramp.value) return ramp;
  return setup.capacitor_F ? standard(setup.knownInductance_H) : null;
}

/** Why the ring cannot be the coil's own; null where nothing speaks against it. */
export function ringDoubt(
  inductance_H: Figure,
  expected: Figure,
  evidence: Pick<PulseEvidence, "kick" | "switchOff" | "period">,
  secondaryUnknown: boolean,
): { reason: string; tooFast: boolean; refused: boolean } | null {
  const { kick, switchOff, period } = evidence;
  const rise = kick && switchOff !== null ? kick.index - switchOff : null;
  const few =
    (period ?? Infinity) < FEW_PER_CYCLE ||
    (rise !== null && rise < FEW_SAMPLES && (period ?? 0) > 8 * FEW_SAMPLES);
  if (inductance_H && expected) {
    const ratio = inductance_H.value / expected.value;
    const far = `the ring's inductance is ${ratio.toPrecision(2)} times what the ramp or the setup says`;
    if (ratio < FAST)
      return {
        reason: `${far}: an arc's or a leakage ring, not the coil's own`,
        tooFast: true,
        refused: true,
      };
    if (few && ratio > SLOW)
      return { reason: `${far}, and the samples are few: probably an alias`, tooFast: false, refused: true };
    if (ratio > (secondaryUnknown ? SLOW_WITH_SECONDARY : SLOW))
      return { reason: `${far}: check the capacitor and the supply`, tooFast: false, refused: false };
    return null;
  }
  return few
    ? {
        reason: "the kick rises within two samples: the ring may be an alias of a faster one",
        tooFast: false,
        refused: false,
      }
    : null;
}
