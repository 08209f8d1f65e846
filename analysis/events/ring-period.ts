/** One period of the coil's ring, where the spacing of the record's large half-waves may tell another story. */
import { conductionStart } from "./conduction.ts";
import { linePeriod } from "./line-period.ts";
import { sharpness, type Onset } from "./onsets.ts";
import { toleranceOf } from "./tolerance.ts";

/** Rough periods the ring's own is looked for in. */
const LOOKED_PERIODS = 200;
/** Share of the free interval after which an arc has usually gone out. */
const LATE = 0.4;

/**
 * Period of the strongest oscillation after the sharpest onset; `rough` without one. While an arc burns
 * the fast modes are stronger: where the later part rings more slowly, that is the ring.
 */
export function ringPeriod(
  samples: Float64Array,
  onsets: Onset[],
  rough: number,
  noise: number,
  lsb: number | null,
): number {
  if (onsets.length === 0) return rough;
  const anchor = onsets.reduce((a, b) => (sharpness(b) > sharpness(a) ? b : a));
  const next = onsets.find(
    (onset) =>
      onset.at > anchor.at && sharpness(onset) > 0.4 * sharpness(anchor) && likeKick(onset, anchor, 0.34),
  );
  const from = Math.ceil(anchor.at);
  const end = Math.floor(next?.at ?? samples.length);
  const to = Math.min(end, from + Math.ceil(LOOKED_PERIODS * rough));
  if (to - from < 3 * rough) return slowRing(samples, onsets, rough, noise, lsb) ?? rough;
  const width = Math.max(1, Math.floor(rough / 16));
  const early = strongest(samples, from, to, end, width, rough);
  const start = Math.round(from + LATE * (to - from));
  const late = linePeriod(samples, start, to, width, CYCLES, 40 * noise * noise);
  const sure = late !== null && !isFoot(late, to - start);
  if (sure && late > 1.2 * early && late < MUCH_SLOWER * early) return late;
  // Where the fast ring is still the strongest late in the free interval it is the coil's own.
  const goesOn = late !== null && Math.abs(late / early - 1) < 0.2 && (!next || alike(next, anchor));
  const slow = goesOn ? null : slowRing(samples, onsets, rough, noise, lsb);
  return slow !== null && slow > MUCH_SLOWER * early ? slow : early;
}

/**
 * The strongest oscillation from the anchor on. At few cycles it may be the lone kick's own shape, the foot of the
 * spectrum: then more is looked at, and without more the rough period stands.
 */
function strongest(
  samples: Float64Array,
  from: number,
  to: number,
  end: number,
  width: number,
  rough: number,
): number {
  const line = linePeriod(samples, from, to, width, 1.5, 0) ?? rough;
  const kicksShape = line > FOOT * rough && line < LONGEST_KICK * rough;
  if (!kicksShape || (to - from) / line > CYCLES) return line;
  if (to >= end) return rough;
  const further = Math.min(end, from + 4 * (to - from));
  return strongest(samples, from, further, end, Math.max(width, Math.floor(line / 64)), rough);
}

const MUCH_SLOWER = 6;
/** Rough periods that a lone kick's own shape lasts. */
const FOOT = 3;
const LONGEST_KICK = 20;
/** Cycles a slow ring shows at least, values it is looked for in at most. */
const CYCLES = 4;
const VALUES = 4096;

/**
 * A clamp or an arc leaves so little of the coil's ring that the strays' fast one is all that stands out: the
 * coil's own is what dies away slowly after it, until the next conduction. Null without one.
 */
function slowRing(
  samples: Float64Array,
  onsets: Onset[],
  rough: number,
  noise: number,
  lsb: number | null,
): number | null {
  const anchor = onsets.reduce((a, b) => (sharpness(b) > sharpness(a) ? b : a));
  const kicks = onsets.filter((onset) => onset === anchor || alike(onset, anchor));
  const k = Math.max(0, Math.min(kicks.indexOf(anchor), kicks.length - 2));
  const from = Math.ceil(kicks[k].at);
  const to = kicks[k + 1] ? conductionBefore(samples, kicks[k + 1], from, rough, noise, lsb) : samples.length;
  const start = Math.round(from + LATE * (to - from));
  const width = Math.max(1, Math.ceil((to - start) / VALUES));
  if (rough < 2 * width || to - start < 64) return null;
  const energy = 400 * noise * noise + 40 * (lsb ?? 0) ** 2;
  const period = linePeriod(samples, start, to, width, CYCLES, energy);
  if (period === null || isFoot(period, to - start)) return null;
  return diesAway(samples, start, to, period) ? period : null;
}

/** At the least number of cycles a line is the foot of something slower still. */
const isFoot = (period: number, length: number) => length / period < 1.15 * CYCLES;

const likeKick = (onset: Onset, anchor: Onset, share: number) =>
  Math.abs(onset.level - anchor.level) < 0.06 * Math.abs(anchor.swing) &&
  Math.abs(onset.swing) > share * Math.abs(anchor.swing);

const alike = (onset: Onset, anchor: Onset) =>
  onset.polarity === anchor.polarity && likeKick(onset, anchor, 0.5);

function conductionBefore(
  samples: Float64Array,
  kick: Onset,
  back: number,
  rough: number,
  noise: number,
  lsb: number | null,
): number {
  const width = Math.max(2, Math.round(rough / 8));
  const tolerance = toleranceOf(kick, lsb, width, noise);
  return Math.floor(conductionStart(samples, kick.at, back, kick.level, tolerance, width) ?? kick.at);
}

/** Hum and a supply's ripple go on as they are; a ring loses most of its energy on the way. */
function diesAway(samples: Float64Array, from: number, to: number, period: number): boolean {
  const middle = Math.round((from + to) / 2);
  return energyAt(samples, from, middle, period) > 2.5 * energyAt(samples, middle, to, period);
}

/** Energy at one frequency (one term of the discrete Fourier transform), level removed. */
function energyAt(samples: Float64Array, from: number, to: number, period: number): number {
  let mean = 0;
  for (let i = from; i < to; i++) mean += (samples[i] || 0) / (to - from);
  let [re, im] = [0, 0];
  for (let i = from; i < to; i++) {
    const turn = (2 * Math.PI * (i - from)) / period;
    re += ((samples[i] || mean) - mean) * Math.cos(turn);
    im += ((samples[i] || mean) - mean) * Math.sin(turn);
  }
  return (re * re + im * im) / (to - from);
}
