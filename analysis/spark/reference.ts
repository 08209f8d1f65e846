/** What the quiet pulses of a run agree on, and how well: the ring every pulse is held against. */
import { median, robustSpread } from "../numeric/median.ts";
import type { Traits } from "./traits.ts";

export interface Reference {
  /** Quiet pulses it rests on. */
  quiet: number;
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
export function referenceOf(traits: Traits[], quiet: number[]): Reference | null {
  const known = quiet.filter((i) => traits[i].rest !== null);
  if (known.length === 0) return null;
  const rest = traits.map((_, i) => {
    const near = known.toSorted((p, q) => Math.abs(p - i) - Math.abs(q - i)).filter((p) => p !== i);
    if (near.length === 0) return null;
    const rests = near.slice(0, 2 * NEIGHBOURS).map((p) => traits[p].rest!);
    return [median(rests.map(([c]) => c)), median(rests.map(([, s]) => s))] as [number, number];
  });
  const kick = median(known.map((i) => traits[i].kick));
  const strays = known.flatMap((i) =>
    rest[i] ? [distance(traits[i].rest!, scaled(rest[i], traits[i].kick / kick))] : [],
  );
  const stray = known.length > 2 ? 1.5 * median(strays) : 0.02;
  // Pulses that do not agree are no reference.
  if (stray > MOST_STRAY) return null;
  const misfits = known.map((i) => traits[i].misfit);
  return {
    quiet: known.length,
    rest,
    stray,
    kick,
    misfit: median(misfits),
    misfitSpread: known.length > 2 ? robustSpread(misfits) : 0.2 * median(misfits),
  };
}

/** Distance of two complex amplitudes as a share of the second. */
export function distance(rest: [number, number], from: [number, number]): number {
  return Math.hypot(rest[0] - from[0], rest[1] - from[1]) / Math.hypot(...from);
}

/** The same ring from another current: kick and ring grow alike. */
export const scaled = (rest: [number, number], by: number): [number, number] => [rest[0] * by, rest[1] * by];
