/** All pulses of a run judged together: first what they agree on, then each against it. */
import { likelihoodOf, type Likelihood } from "./likelihood.ts";
import { agreedModes, bestTraits, ownModes } from "./modes.ts";
import { referenceOf, distance, type Reference } from "./reference.ts";
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
}

/** A pulse that one free ring explains to the noise. */
const CLEAN = 12;
/** Pulses searched for modes of their own when no pulse is clean. */
const SEARCHED = 8;

export function judgePulses(candidates: Candidate[]): Judged[] {
  const sets = modeSets(candidates);
  const traits = candidates.map(({ window, modes }) => {
    const fitting = sets.filter((set) => modes.length === 0 || sets.length === 1 || near(set[0], modes[0]));
    if (fitting.length > 0) return bestTraits(window, fitting);
    return bestTraits(window, sets.length > 0 ? sets : [modes]);
  });
  const judged: Judged[] = [];
  for (const set of new Set(traits.map(({ modes }) => modes))) {
    const members = traits.flatMap((each, i) => (each.modes === set ? [i] : []));
    judgeGroup(members.map((i) => traits[i])).forEach((each, k) => (judged[members[k]] = each));
  }
  return judged;
}

const near = (a: KnownMode, b: KnownMode) => Math.abs(a.frequency_Hz / b.frequency_Hz - 1) < 0.12;

function modeSets(candidates: Candidate[]): KnownMode[][] {
  const own = candidates.flatMap(({ window, modes }) =>
    modes.length > 0 ? [{ modes, traits: traitsOf(window, modes), window }] : [],
  );
  const quietest = Math.min(...own.map(({ traits, window }) => traits.split.variance / window.noise ** 2));
  const clean = own.filter(
    ({ traits, window }) =>
      isClean(traits) && traits.split.variance / window.noise ** 2 < 4 * Math.max(1, quietest),
  );
  if (clean.length > 0) return agreedModes(clean.map(({ modes }) => modes));
  const step = Math.max(1, Math.floor(candidates.length / SEARCHED));
  const searched = candidates.filter((_, i) => i % step === 0);
  const best = searched.flatMap(({ window, modes }) => {
    const sets = ownModes(window, modes);
    return sets.length > 0 ? [bestTraits(window, sets).modes] : [];
  });
  return agreedModes(best);
}

const isClean = ({ misfit, split }: Traits) => misfit < CLEAN && split.gain < CLEAN * CLEAN;

function judgeGroup(group: Traits[]): Judged[] {
  let quiet = seeds(group);
  let reference = referenceOf(group, quiet);
  // Twice: the second time with the pulses that the first found quiet.
  for (let round = 0; round < 2 && reference && group.length > 1; round++) {
    const found = group.flatMap((traits, i) =>
      likelihoodOf(traits, reference, i).probability < 0.05 ? [i] : [],
    );
    if (found.length === 0) break;
    quiet = found;
    reference = referenceOf(group, quiet);
  }
  const used = group.length > 1 ? reference : null;
  return group.map((traits, i) => ({ traits, likelihood: likelihoodOf(traits, used, i), reference: used }));
}

/** Pulses to begin with: those without loss of their own, held together by the strongest rings. */
function seeds(group: Traits[]): number[] {
  const places = group.map((_, i) => i);
  const clean = places.filter((i) => isClean(group[i]) && group[i].rest);
  const candidates =
    clean.length > 0
      ? clean
      : places.filter((i) => group[i].rest && likelihoodOf(group[i], null, i).probability < 0.3);
  if (candidates.length === 0) return [];
  const sizes = candidates.map((i) => Math.hypot(...group[i].rest!));
  const top = candidates[sizes.indexOf(Math.max(...sizes))];
  const alike = candidates.filter((i) => distance(group[i].rest!, group[top].rest!) < 0.15);
  return alike.length > 0 ? alike : candidates;
}
