/** From what a pulse shows to the probability of a spark. */
import { distance, scaled, type Reference } from "./reference.ts";
import { NOISE, SPENT, type Traits } from "./traits.ts";

export interface Likelihood {
  probability: number;
  /** What the probability rests on most. */
  because:
    | "one-ring"
    | "spent"
    | "ring-goes-on"
    | "loss"
    | "course"
    | "turned"
    | "missing"
    | "doubt"
    | "kick"
    | "volt-seconds"
    | "burn-line"
    | "like-quiet"
    | "unlike-quiet";
  /** Distance of the ring after from the run's quiet ring, as a share; null without reference. */
  away: number | null;
  /** Share of the quiet amplitude that is missing after; null where it is not known. */
  loss: number | null;
}

/** `most`: the strongest ring left in a run that has no reference. */
export function likelihoodOf(
  traits: Traits,
  reference: Reference | null,
  place: number,
  most: number | null = null,
): Likelihood {
  const rest = reference?.rest[place];
  return reference && rest ? againstRun(traits, reference, rest) : byItself(traits, most);
}

function againstRun(traits: Traits, reference: Reference, rest: [number, number]): Likelihood {
  const usual = reference.misfit + 3 * reference.misfitSpread;
  const excess = Math.sqrt(Math.max(0, traits.misfit ** 2 - usual ** 2));
  const disturbed = Math.max(
    excess,
    reference.misfit > NOISE ? 0 : Math.sqrt(Math.max(0, traits.split.gain)),
  );
  // Where the quiet ring is far from spent, one that is has been taken from.
  const early = traits.spent && Math.hypot(...rest) * traits.kept > 2 * SPENT;
  if (early) return { probability: 0.97, because: "course", away: null, loss: null };
  const gone = !traits.rest && !traits.spent && !traits.tail && traits.loss === 1 && traits.misfit > NOISE;
  if (gone) return { probability: 0.95, because: "course", away: null, loss: 1 };
  if (!traits.rest || traits.spent) return cutShort(traits, disturbed, reference.misfit < NOISE);
  const calm = disturbed <= NOISE;
  const scale = currentScale(traits.kick / reference.kick, calm);
  const away = Math.min(distance(traits.rest, rest), distance(traits.rest, scaled(rest, scale)));
  const loss = 1 - Math.hypot(...traits.rest) / (Math.hypot(...rest) * Math.min(1, scale));
  // A spark only takes: whatever has clearly more than the reference shows that this had sparked itself.
  if (loss < -MORE) return byItself(traits, null);
  const sure = away / Math.max(0.01, reference.stray);
  const answer = (probability: number, because: Likelihood["because"]) => ({
    probability,
    because,
    away,
    loss,
  });
  if (calm) {
    if (loss > 0.15 && sure > 8) return answer(0.97, "missing");
    if (loss > 0.05 && sure > 6) return answer(0.6, "missing");
    return answer(sure > 5 ? 0.03 : 0.001, "one-ring");
  }
  // All of the ring is there and only its beginning is displaced: a contact's bounce does that as well.
  if (away > 0.03 && Math.abs(loss) < 0.04 && !traits.ringBefore && !traits.late) return answer(0.5, "doubt");
  const plain = disturbed > 3 * NOISE;
  if (away > 0.08 && sure > (plain ? 2 : 4)) return answer(away > 0.15 ? 0.999 : 0.98, "loss");
  if (away > 0.03 && sure > (plain ? 2 : 4)) return answer(plain && !traits.ringBefore ? 0.93 : 0.7, "loss");
  return answer(sure > 3 ? 0.2 : 0.01, "ring-goes-on");
}

/** Share of the reference's amplitude by which more than it is no stray. */
const MORE = 0.25;

/**
 * Less current gives a smaller ring and a smaller kick alike. But a spark cuts the kick as well: where the
 * trace is disturbed, only the few percent that a current strays by are taken from the kick.
 */
function currentScale(ratio: number, calm: boolean): number {
  return calm || (ratio > 0.9 && ratio < 1.1) ? ratio : 1;
}

/** Nothing free is left after the disturbance: the arc burns until the next edge, or there is none. */
function cutShort(traits: Traits, disturbed: number, othersRing = false): Likelihood {
  const nothing = { away: null, loss: traits.loss };
  // The run's quiet pulses are disturbed as much (bursts), but not at the ring's cost.
  const costly = traits.misfit > 3 * NOISE && traits.ringBefore && traits.loss !== null && traits.loss > 0.2;
  if (disturbed <= NOISE && costly) return { probability: 0.4, because: "doubt", ...nothing };
  if (disturbed <= NOISE) return { probability: 0.005, because: "one-ring", ...nothing };
  // The window's very end may hold the next edge: no spark is read from it, nor from a ring that is spent.
  if (traits.spent) return { probability: 0.03, because: "spent", ...nothing };
  if (traits.tail) return { probability: disturbed > 2 * NOISE ? 0.3 : 0.03, because: "doubt", ...nothing };
  if (traits.ringBefore && disturbed > 20) return { probability: 0.97, because: "course", ...nothing };
  return {
    // Where the run's quiet pulses are free rings to their end, none here is an arc's work.
    probability:
      (othersRing && disturbed > 2 * NOISE) || (disturbed > 5 * NOISE && traits.loss === 1)
        ? 0.95
        : disturbed > 20
          ? 0.8
          : 0.4,
    because: "doubt",
    ...nothing,
  };
}

function byItself(traits: Traits, most: number | null): Likelihood {
  const { misfit, loss, jump, ringBefore } = traits;
  const gain = Math.sqrt(Math.max(0, traits.split.gain));
  const answer = (probability: number, because: Likelihood["because"]) => ({
    probability,
    because,
    away: null,
    loss,
  });
  if (traits.oneRing) return soundRing(traits) ? answer(0.005, "one-ring") : answer(0.4, "doubt");
  if (!traits.ringAfter || traits.spent) return cutShort(traits, Math.max(misfit, gain));
  if (ringBefore && jump !== null) {
    if (jump > 0.2) return answer(0.98, "course");
    if (jump > 0.1) return answer(0.6, "doubt");
    return answer(0.02, "ring-goes-on");
  }
  const missing = most && traits.rest ? 1 - Math.hypot(...traits.rest) / most : 0;
  if (missing > 0.2) return { ...answer(0.96, "missing"), loss: missing };
  if (loss !== null && loss > 0.35) return answer(0.98, "loss");
  const turned = traits.rest ? phaseTurned(traits.rest, LEADS * traits.passed) : 0;
  if (misfit > 2 * NOISE && turned > 0.7 * FREE_START)
    return answer(turned > FREE_START ? 0.97 : 0.7, "turned");
  if (loss !== null && loss > 0.25) return answer(0.6, "doubt");
  // Long past a clamp or a bounce and still no free ring: something went on, be it only a core's own bend.
  const long = misfit > 3 * NOISE && traits.late;
  return loss !== null && (loss > 0.2 || long) ? answer(0.3, "doubt") : answer(0.05, "ring-goes-on");
}

/** Radians; a saturating core leads by up to about as much, a clamp lags by less. */
const FREE_START = 1.2;
/** Share of the phase passed that a saturating core gains at most, and what it gains in all. */
const LEADS = 0.35;
const MOST_LEAD = 2;

/**
 * A ring that was free from switch-off on starts near the level of conduction and rises: its low mode, carried
 * back, is nearly a sine. How far it is turned from that, in radians: a lag counts more, a lead less, for a
 * saturating core rings faster while its current is large; in a part of a period it gains but little.
 */
function phaseTurned([cosine, sine]: [number, number], lead = MOST_LEAD): number {
  const turn = Math.atan2(-cosine, sine);
  return turn > 0 ? turn * 1.5 : (-turn * FREE_START) / Math.min(MOST_LEAD, Math.max(0.6, lead));
}

/** One ring explains a pulse only if it is the ring the kick began: of its size, and starting where it starts. */
export function soundRing({ rest, kick, startsInRing, clipped }: Traits): boolean {
  if (startsInRing) return true;
  if (!rest) return false;
  const share = Math.hypot(...rest) / kick;
  return share > 0.45 && (share < 1.5 || clipped) && phaseTurned(rest) < FREE_START;
}
