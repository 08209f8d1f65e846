/** Switch-offs from a voltage trace: onsets of the kick's own direction out of the conduction level. */
import type { Channel } from "../capture.ts";
import { robustSpread } from "../numeric/median.ts";
import { meanAndDeviation, medianOf } from "../numeric/robust.ts";
import { differenceNoise } from "../ring/noise.ts";
import { conductionStart } from "./conduction.ts";
import type { SwitchOff } from "./event-format.ts";
import { findOnsets, sharpness, type Onset } from "./onsets.ts";
import { ringPeriod } from "./ring-period.ts";
import { toleranceOf } from "./tolerance.ts";
import { scaleOf } from "./scale.ts";

/** Onsets against the kick's direction must be this large against it to be pulses of their own. */
const OPPOSITE_SHARE = 0.6;
/** Conduction levels of one record agree (hum, AC coupling) within this share of the swing that follows. */
const LEVEL_SHARE = 0.12;
/** Scatter of a conduction, in units of the noise. */
const FLAT = 2;
/** Swings below this share of the record's largest are looked at twice. */
const SMALL_SHARE = 0.34;
const STEP_OVERSHOOT = 2.3;

export function voltageSwitchOffs({ samples, lsb, unusable }: Channel): {
  offs: SwitchOff[];
  period: number;
  noise: number;
} {
  const noise = differenceNoise(samples, 0, samples.length, lsb, unusable);
  const rough = scaleOf(samples, noise);
  if (!rough) return { offs: [], period: 0, noise };
  const first = findOnsets(samples, rough, noise, lsb);
  // Arcs and a fast second mode make the spacing of half-waves too short: the ring itself tells better.
  const period = ringPeriod(samples, first, rough.period, noise, lsb);
  const scale = { ...rough, period };
  const moved = Math.abs(period / rough.period - 1) > 0.15;
  const onsets = outOfConduction(
    samples,
    moved ? findOnsets(samples, scale, noise, lsb) : first,
    period,
    noise,
    lsb,
  );
  const width = Math.max(2, Math.round(scale.period / 8));
  const offs: SwitchOff[] = onsets.map((onset, k) => {
    const previous = k > 0 ? onsets[k - 1].at : 0;
    const back = k > 0 ? Math.ceil(previous + scale.period / 4) : 0;
    const tolerance = toleranceOf(onset, lsb, width, noise);
    const start = conductionStart(samples, onset.at, back, onset.level, tolerance, width);
    return {
      at: onset.at,
      u: onset.u,
      on: start !== null && start > back ? start : null,
      freeFrom: Math.max(0, Math.ceil(onset.at)),
      freeTo: samples.length,
      polarity: onset.polarity,
      levelOn: onset.level,
      scatter: onset.scatter,
      witnessed: null,
    };
  });
  for (let k = 0; k < offs.length; k++)
    offs[k].freeTo = freeEnd(samples, offs, onsets[k], k, { lsb, noise, period: scale.period });
  const early = beginsInRing(samples, offs[0] ?? null, scale.period, noise);
  return { offs: early ? [early, ...offs] : offs, period: scale.period, noise };
}

/** A record that starts inside a ring: swinging from its first period on, and less so later. */
function beginsInRing(
  samples: Float64Array,
  first: SwitchOff | null,
  period: number,
  noise: number,
): SwitchOff | null {
  const to = first ? Math.floor(first.on ?? first.at!) : samples.length;
  const length = Math.min(Math.ceil(period), to >> 2);
  if (length < 6) return null;
  const begin = meanAndDeviation(samples, 0, length);
  const end = meanAndDeviation(samples, to - length, to);
  if (!(begin.deviation > 4 * noise && begin.deviation > 1.2 * end.deviation)) return null;
  const polarity = first?.polarity ?? 1;
  return {
    at: null,
    u: null,
    on: null,
    freeFrom: 0,
    freeTo: to,
    polarity,
    levelOn: null,
    scatter: null,
    witnessed: null,
  };
}

/** Next switching edge: the next pulse's conduction, or a conduction that runs to the record's end. */
function freeEnd(
  samples: Float64Array,
  offs: SwitchOff[],
  onset: Onset,
  k: number,
  { lsb, noise, period }: { lsb: number | null; noise: number; period: number },
): number {
  const next = offs[k + 1];
  if (next) return Math.floor(next.on ?? next.at!);
  const width = Math.max(2, Math.round(period / 8));
  const off = Math.ceil(onset.at) + width;
  const tolerance = toleranceOf(onset, lsb, width, noise);
  const start = conductionStart(samples, samples.length, off, onset.level, tolerance, width);
  if (start === null || start <= off || samples.length - start < 2 * width) return samples.length;
  // Without a step there, the ring has merely settled to where it was before.
  const before = medianOf(samples, Math.max(off, Math.floor(start) - 3 * width), Math.floor(start) - 1);
  const stepped = Math.abs(before - onset.level) > 3 * tolerance;
  // An arc's end leaves the supply's level, which may lie within a step's tolerance: the whole stretch tells.
  const { mean } = meanAndDeviation(samples, Math.ceil(start), samples.length);
  const fine = noise > DITHER * (lsb ?? 0) ? 0.3 * (lsb ?? 0) : lsb;
  const same = Math.abs(mean - onset.level) < toleranceOf(onset, fine, Math.round(period / 2), noise);
  return stepped && same ? Math.floor(start) : samples.length;
}

/** Noise of this many steps of the converter makes means finer than a step (Widrow & Kollár). */
const DITHER = 0.4;

/** A body diode lets go, or the switch closes: the swing is little more than the change of level behind it. */
function isStep(samples: Float64Array, onset: Onset, period: number): boolean {
  const from = Math.ceil(onset.at + period);
  const settled = medianOf(samples, from, Math.min(samples.length, from + Math.ceil(4 * period)));
  return Math.abs(onset.swing) < STEP_OVERSHOOT * Math.abs(settled - onset.level);
}

/** Swings so far above what the other kicks of a train reach are disturbances, and set no measure. */
const GIANT = 4;
/** So many other kicks out of the same level make a train. */
const TRAIN = 4;

function withoutGiants(onsets: Onset[], samples: Float64Array, period: number): Onset[] {
  const kicks = onsets.filter((onset) => !isStep(samples, onset, period));
  return onsets.filter((giant) => {
    // What a ring leaves to be taken for an onset begins at other levels.
    const others = kicks.filter(
      (onset) =>
        onset !== giant &&
        onset.polarity === giant.polarity &&
        Math.abs(onset.level - giant.level) < LEVEL_SHARE * Math.abs(onset.swing),
    );
    if (others.length < TRAIN) return true;
    return Math.abs(giant.swing) < GIANT * medianOf(others.map((onset) => Math.abs(onset.swing)));
  });
}

/** Onsets out of a flat level, in the kick's direction, all from the same level. */
function outOfConduction(
  samples: Float64Array,
  onsets: Onset[],
  period: number,
  noise: number,
  lsb: number | null,
): Onset[] {
  if (onsets.length === 0) return [];
  // Hum and coloured noise show in the quiet stretches only: the calmer of them set the measure.
  const calm = onsets.map((onset) => onset.scatter).toSorted((a, b) => a - b)[onsets.length >> 2];
  const unrest = Math.max(noise, Math.min(calm, 3 * noise));
  const flat = withoutGiants(
    onsets.filter((onset) => onset.scatter < FLAT * unrest + 0.02 * Math.abs(onset.swing)),
    samples,
    period,
  );
  if (flat.length === 0) return [];
  const anchor = flat.reduce((a, b) => (sharpness(b) > sharpness(a) ? b : a));
  const reach = Math.max(...flat.map((onset) => Math.abs(onset.swing)));
  const tolerance = Math.max(3 * unrest, 2 * (lsb ?? 0));
  const within = (onset: Onset, about: number, least: number) =>
    Math.abs(onset.level - about) < Math.max(least, LEVEL_SHARE * Math.abs(onset.swing));
  // Edges at turn-on and at an arc's end leave other levels nearby, by small swings: the kicks have the say.
  const kicks = flat.filter((onset) => Math.abs(onset.swing) > SMALL_SHARE * reach);
  const levels = kicks.filter((onset) => within(onset, anchor.level, tolerance)).map((onset) => onset.level);
  const level = medianOf(levels);
  // Hum moves the level of conduction from one pulse to the next.
  const wander = levels.length >= TRAIN ? 3 * robustSpread(levels) : 0;
  return flat.filter(
    (onset) =>
      within(onset, level, Math.max(tolerance, wander)) &&
      !(Math.abs(onset.swing) < SMALL_SHARE * reach && isStep(samples, onset, period)) &&
      (onset.polarity === anchor.polarity || Math.abs(onset.swing) > OPPOSITE_SHARE * reach),
  );
}
