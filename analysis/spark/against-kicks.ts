/**
 * The kick against those of pulses of the same conduction: one current makes one kick, and what is cut short where
 * its neighbours rise on has been cut by something of its own.
 */
import { nearest } from "./reference.ts";
import { NOISE } from "./traits.ts";
import type { Judged } from "./judge.ts";
import type { Likelihood } from "./likelihood.ts";

export interface Kicked {
  judged: Judged;
  /** How long the switch conducted, or the current it broke: what the kick is made of; null unknown. */
  drive: number | null;
}

/** Pulses on either side that are looked at: supplies sag slowly. */
const NEIGHBOURS = 6;
/** Drives this far apart are alike, as a share. */
const ALIKE = 0.04;
/** Pulses of a like drive needed to know how high a kick rises. */
const LEAST = 3;
/** A kick below this share of the others' is cut short. */
const SHORT = 0.72;

/** One likelihood for each of `run`: its own, or that of a kick cut short. */
export function againstKicks(run: Kicked[]): Likelihood[] {
  const whole = ({ drive, judged: { traits } }: Kicked) =>
    drive !== null && !traits.clipped && !traits.startsInRing;
  const known = run.flatMap((each, i) => (whole(each) ? [i] : []));
  return run.map((each, place) => {
    const { likelihood, traits } = each.judged;
    const { drive } = each;
    if (drive === null || !whole(each) || likelihood.probability > 0.9) return likelihood;
    const others = nearest(known, place, 2 * NEIGHBOURS).filter(
      (i) => Math.abs(run[i].drive! / drive - 1) < ALIKE,
    );
    if (others.length < LEAST) return likelihood;
    // The second highest: a burst may stand on one of them.
    const [, usual] = others.map((i) => run[i].judged.traits.kick).toSorted((p, q) => q - p);
    const share = traits.kick / usual;
    if (share > SHORT) return likelihood;
    const probability = traits.misfit > 2 * NOISE ? 0.95 : 0.6;
    return { probability, because: "kick", away: null, loss: 1 - share };
  });
}
