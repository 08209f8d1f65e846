/** All pulses of a run judged together: first what they agree on, then each against it. */
import type { BurnLine } from "./burn-line.ts";
import { median } from "../numeric/median.ts";
import { likelihoodOf, soundRing, type Likelihood } from "./likelihood.ts";
import { agreedModes, bestTraits, ownModes } from "./modes.ts";
import { referenceBefore, referenceOf, type Reference } from "./reference.ts";
import type { KnownMode } from "./ring-sums.ts";
import { traitsOf, type Traits } from "./traits.ts";
import type { SparkWindow } from "./window.ts";

export interface Candidate {
  window: SparkWindow;
  /** Modes the ring fit found, best guess; may be empty. */
  modes: KnownMode[];
}

export interface Judged {
  traits: Traits;
  likelihood: Likelihood;
  reference: Reference | null;
  /** What the low mode would be at this pulse's switch-off by the quiet pulses near it; null without reference. */
  quietRest: [cosine: number, sine: number] | null;
  /** Where the verdict rests on it. */
  burn?: BurnLine;
}

/** Pulses searched for modes of their own when no pulse is clean. */
const SEARCHED = 8;

/** One for each candidate, null where no mode of the coil could be found to judge by. */
export function judgePulses(candidates: Candidate[]): (Judged | null)[] {
  const { sets, ceiling } = modeSets(candidates);
  const traits = candidates.map(({ window, modes }) => {
    const fitting = sets.filter((set) => modes.length === 0 || sets.length === 1 || near(set[0], modes[0]));
    if (fitting.length > 0) return bestTraits(window, fitting, ceiling);
    if (sets.length > 0) return bestTraits(window, sets, ceiling);
    return modes.length > 0 ? bestTraits(window, [modes], ceiling) : null;
  });
  const judged = judgedBySet(traits);
  const [known] = bySize(judged.flatMap((each) => (each?.reference ? [each.traits.modes] : [])));
  const doubtful = (each: Judged | null) =>
    each && !each.reference && !isClean(each.traits) && each.likelihood.probability > 0.1;
  const stray = judged.flatMap((each, i) => (known && doubtful(each) ? [i] : []));
  if (stray.length === 0) return judged;
  // An arc rings in modes of its own: what has no reference by these, and is no free ring of another capacitor,
  // is held against the run's ring.
  for (const i of stray) traits[i] = bestTraits(candidates[i].window, [known], ceiling);
  const again = judgedBySet(traits.map((each) => (each?.modes === known ? each : null)));
  return judged.map((each, i) => (stray.includes(i) ? again[i] : each));
}

function judgedBySet(traits: (Traits | null)[]): (Judged | null)[] {
  const judged = traits.map((): Judged | null => null);
  for (const set of new Set(traits.map((each) => each?.modes))) {
    const members = traits.flatMap((each, i) => (each && each.modes === set ? [i] : []));
    judgeGroup(members.map((i) => traits[i]!)).forEach((each, k) => (judged[members[k]] = each));
  }
  return judged;
}

/** The sets among `modes`, the one most often met first. */
function bySize(modes: KnownMode[][]): KnownMode[][] {
  const count = (set: KnownMode[]) => modes.filter((each) => each === set).length;
  return [...new Set(modes)].toSorted((a, b) => count(b) - count(a));
}

const alike = (a: KnownMode, b: KnownMode) => Math.abs(a.frequency_Hz / b.frequency_Hz - 1) < 0.03;
const near = (a: KnownMode, b: KnownMode) => Math.abs(a.frequency_Hz / b.frequency_Hz - 1) < 0.12;

interface Own {
  modes: KnownMode[];
  traits: Traits;
  /** Variance over what the samples' own noise gives. */
  excess: number;
}

/** Modes of the run and the variance of its free rings, from its clean pulses; else from a search in some. */
function modeSets(candidates: Candidate[]): { sets: KnownMode[][]; ceiling?: number } {
  const lowest = lowestShared(candidates);
  const rings = candidates.flatMap(({ window, modes }): Own[] => {
    if (modes.length === 0) return [];
    const traits = traitsOf(window, modes);
    return [{ modes, traits, excess: traits.split.variance / window.noise ** 2 }];
  });
  const isFast = ({ modes }: Own) => modes[0].frequency_Hz > 1.6 * lowest;
  const slowKick = median(rings.filter((ring) => !isFast(ring)).map(({ traits }) => traits.kick));
  // A fast ring that is free from switch-off on and kicks higher is a smaller capacitor's, else an arc's.
  const own = rings.filter(
    (ring) => !isFast(ring) || (ring.traits.oneRing && soundRing(ring.traits) && ring.traits.kick > slowKick),
  );
  const quietest = Math.min(...own.map(({ excess }) => excess));
  const calm = own.filter(({ excess }) => excess < 4 * Math.max(1, quietest));
  const ceiling =
    candidates.length > 2 && calm.length > 0
      ? 3 * median(calm.map(({ traits }) => traits.split.variance))
      : undefined;
  const clean = strongest(calm.filter(({ traits }) => isClean(traits)));
  if (clean.length > 0) return { sets: agreedModes(clean.map(({ modes }) => modes)), ceiling };
  const step = Math.max(1, Math.floor(candidates.length / SEARCHED));
  const searched = candidates.filter((_, i) => i % step === 0);
  const best = searched.flatMap(({ window, modes }) => {
    const sets = ownModes(window, modes);
    return sets.length > 0 ? [bestTraits(window, sets, ceiling).modes] : [];
  });
  return { sets: agreedModes(best), ceiling };
}

/** The lowest frequency that two pulses share: an arc's fast ring may be all that other pulses show. */
function lowestShared(candidates: Candidate[]): number {
  const lows = candidates.flatMap(({ modes }) => (modes.length > 0 ? [modes[0].frequency_Hz] : []));
  const shared = lows.filter((f) => lows.filter((other) => Math.abs(other / f - 1) < 0.1).length > 1);
  return shared.length > 0 ? Math.min(...shared) : Number.POSITIVE_INFINITY;
}

/** A spark leaves less of the ring: of clean pulses with one frequency those with the most left are the quiet ones. */
function strongest(clean: Own[]): Own[] {
  const size = ({ traits }: Own) => Math.hypot(...traits.rest!);
  return clean.filter((each) =>
    clean.every((other) => !alike(each.modes[0], other.modes[0]) || size(each) > 0.8 * size(other)),
  );
}

/** One ring, and it is the one the kick began: what is left of the kick's size belongs to the low mode. */
const isClean = ({ oneRing, rest, kick }: Traits) =>
  oneRing && rest !== null && Math.hypot(...rest) > 0.3 * kick;

function judgeGroup(group: Traits[]): Judged[] {
  let reference = group.length > 1 ? (referenceOf(group, seeds(group)) ?? referenceBefore(group)) : null;
  // Twice: the second time with the pulses that the first found quiet.
  for (let round = 0; round < 2 && reference; round++) {
    const held = reference;
    const quiet = group.flatMap((traits, i) => (likelihoodOf(traits, held, i).probability < 0.05 ? [i] : []));
    reference = referenceOf(group, quiet) ?? held;
    reference = stronger(group, reference) ?? reference;
  }
  const most = reference ? null : mostLeft(group);
  return group.map((traits, i) => ({
    traits,
    likelihood: likelihoodOf(traits, reference, i, most),
    reference,
    quietRest: reference?.rest[i] ?? null,
  }));
}

/**
 * A spark only takes: pulses that have clearly more ring left than the reference, and no loss of their own, show
 * that the reference itself had sparked. Theirs, or null where there are none.
 */
function stronger(group: Traits[], reference: Reference): Reference | null {
  const more = group.flatMap((traits, i) => {
    const rest = reference.rest[i];
    if (!rest || !traits.rest || Math.hypot(...traits.rest) < 1.25 * Math.hypot(...rest)) return [];
    return likelihoodOf(traits, null, i).probability < 0.75 ? [i] : [];
  });
  if (more.length === 0) return null;
  const centre = median(more.map((i) => Math.hypot(...group[i].rest!)));
  return referenceOf(
    group,
    more.filter((i) => Math.abs(Math.hypot(...group[i].rest!) / centre - 1) < 0.12),
  );
}

/** The strongest ring left in a group that has no reference: whatever has clearly less of it has lost some. */
function mostLeft(group: Traits[]): number | null {
  const sizes = group.flatMap(({ rest }) => (rest ? [Math.hypot(...rest)] : []));
  return sizes.length > 1 ? Math.max(...sizes) : null;
}

/**
 * Pulses to begin with: clean ones, the strongest rings among them; or many that no free ring explains but that
 * agree closely, where they have clearly more left than the clean ones, or as much and far outnumber them.
 */
function seeds(group: Traits[]): number[] {
  const places = group.flatMap(({ rest }, i) => (rest ? [i] : []));
  const size = (i: number) => Math.hypot(...group[i].rest!);
  const strongest = (of: number[], within: number) => {
    const top = of.toSorted((p, q) => size(q) - size(p)).slice(0, Math.ceil(of.length / 2));
    const centre = median(top.map(size));
    return { centre, alike: of.filter((i) => Math.abs(size(i) / centre - 1) < within) };
  };
  const clean = strongest(
    places.filter((i) => isClean(group[i])),
    0.12,
  );
  const others = strongest(
    places.filter((i) => likelihoodOf(group[i], null, i).probability < 0.75),
    0.04,
  );
  const agree = others.alike.length >= Math.max(3, 0.25 * group.length);
  if (clean.alike.length === 0) return agree ? others.alike : [];
  const larger = others.centre > 1.2 * clean.centre;
  const more = others.alike.length > 2 * clean.alike.length && others.centre > 0.9 * clean.centre;
  return agree && (larger || more) ? others.alike : clean.alike;
}
