/** What the quiet pulses of a run agree on, and how well: the ring every pulse is held against. */
import { median, robustSpread } from "../numeric/median.ts";
import type { Traits } from "./traits.ts";

export interface Reference {
  /** Quiet pulses it rests on, or late sparks with a quiet ring before them. */
  quiet: number;
  from: "quiet pulses" | "rings before their sparks";
  /** Low mode carried back to switch-off, for each pulse by the others near it; null: there are no others. */
  rest: ([cosine: number, sine: number] | null)[];
  /** How far the quiet pulses' own rings stray from that, as a share. */
  stray: number;
  /** Size of the quiet kick. */
  kick: number;
  /** Strength that one free ring leaves over in the quiet pulses: how they themselves deviate. */
  misfit: number;
  misfitSpread: number;
}

/** Pulses on either side that follow a sagging supply. */
const NEIGHBOURS = 5;
const MOST_STRAY = 0.1;

/** `quiet` holds places in `traits`; null with none that shows a ring to its end. */
export const referenceOf = (traits: Traits[], quiet: number[]): Reference | null =>
  agreedReference(
    traits,
    "quiet pulses",
    quiet.filter((i) => traits[i].rest !== null),
    ({ rest }) => rest!,
    ({ misfit }) => misfit,
  );

/** The same from sparking pulses whose sparks came late: until then each was a quiet one. One alone is none. */
export function referenceBefore(traits: Traits[]): Reference | null {
  const late = traits.flatMap(({ restBefore }, i) => (restBefore ? [i] : []));
  if (late.length < 2) return null;
  const sizes = late.map((i) => Math.hypot(...traits[i].restBefore!));
  // A spark only takes: the largest are the quiet ones.
  const most = Math.max(...sizes);
  const whole = late.filter((_, k) => sizes[k] > (1 - MOST_STRAY) * most);
  if (whole.length < 2) return null;
  return agreedReference(
    traits,
    "rings before their sparks",
    whole,
    ({ restBefore }) => restBefore!,
    ({ split: { before, variance } }) => Math.sqrt(Math.max(0, before.cost / variance - before.blocks)),
  );
}

function agreedReference(
  traits: Traits[],
  from: Reference["from"],
  known: number[],
  restOf: (traits: Traits) => [number, number],
  misfitOf: (traits: Traits) => number,
): Reference | null {
  if (known.length === 0) return null;
  const rest = traits.map((_, i) => {
    const near = nearest(known, i, 2 * NEIGHBOURS);
    if (near.length === 0) return null;
    const rests = near.map((p) => restOf(traits[p]));
    return [median(rests.map(([c]) => c)), median(rests.map(([, s]) => s))] as [number, number];
  });
  const kick = median(known.map((i) => traits[i].kick));
  const strays = known.flatMap((i) =>
    rest[i] ? [distance(restOf(traits[i]), scaled(rest[i], traits[i].kick / kick))] : [],
  );
  const stray = known.length > 2 ? 1.5 * median(strays) : 0.02;
  // Pulses that do not agree are no reference.
  if (stray > MOST_STRAY) return null;
  const misfits = known.map((i) => misfitOf(traits[i]));
  return {
    quiet: known.length,
    from,
    rest,
    stray,
    kick,
    misfit: median(misfits),
    misfitSpread: known.length > 2 ? robustSpread(misfits) : 0.2 * median(misfits),
  };
}

/** The `count` places nearest to i, i itself left out; `sorted` ascends. */
export function nearest(sorted: number[], i: number, count: number): number[] {
  let right = sorted.findIndex((place) => place >= i);
  if (right < 0) right = sorted.length;
  let left = right - 1;
  if (sorted[right] === i) right++;
  const found: number[] = [];
  while (found.length < count && (left >= 0 || right < sorted.length)) {
    const takeLeft = right >= sorted.length || (left >= 0 && i - sorted[left] <= sorted[right] - i);
    found.push(takeLeft ? sorted[left--] : sorted[right++]);
  }
  return found;
}

/** Radians that two switch-offs, each known to a sample or two, may differ by. */
const PHASE_SLACK = 0.15;

/** Distance of two complex amplitudes as a share of the second. */
export function distance(rest: [number, number], from: [number, number]): number {
  const size = Math.hypot(...from);
  const cross = rest[0] * from[1] - rest[1] * from[0];
  const dot = rest[0] * from[0] + rest[1] * from[1];
  const turn = Math.max(0, Math.abs(Math.atan2(cross, dot)) - PHASE_SLACK);
  const length = Math.hypot(...rest);
  return Math.hypot(length * Math.cos(turn) - size, length * Math.sin(turn)) / size;
}

/** The same ring from another current: kick and ring grow alike. */
export const scaled = (rest: [number, number], by: number): [number, number] => [rest[0] * by, rest[1] * by];
