/**
 * The window a ring is fitted on, chosen by what is in it: from the switch-off (or the first sample at
 * which the ring is free) to the next edge, the noise floor, or where one ring stops explaining the
 * data. A short burst inside it is left out instead.
 */
import { medianOf } from "../numeric/robust.ts";
import type { RingFit } from "./fit-format.ts";
import { fitRing, type FitOptions } from "./fit.ts";
import { judgeFit } from "./quality.ts";
import { noiseLimit, residualProfile, wavesOf } from "./residuals.ts";

export interface WindowedRing {
  fit: RingFit;
  /** Residual within 1.5 × noise, overall and in every stretch that counts. */
  clean: boolean;
  courseChanges: boolean;
  /** Stretches left out as bursts, pairs of sample numbers, beside the unusable ones. */
  masked: number[];
}

export interface Place {
  samples: Float64Array;
  step_s: number;
  /** Free interval. */
  from: number;
  to: number;
  /** Rough period in samples. */
  period: number;
  noise: number;
  /** How far the noise exceeds that of differences: 1 white, more where neighbouring samples resemble each other. */
  colour?: number;
  lsb: number | null;
  unusable: ArrayLike<number>;
}

const CLEAN = 1.5;
/** Noise of a narrow band: its excess over what was estimated before, and how alike its stretches are. */
const MOST_UNDERESTIMATED = 4;
const EVEN = 2;
const EVEN_ENDS = 1.6;
const MOST_MASKS = 4;
/** Where the tail of a ring is looked for, as shares of the window; the cycles it must have. */
const TAILS = [0.04, 0.12, 0.3, 0.5, 0.7];
const LEAST_PERIODS = 3;
const MOST_HALVINGS = 9;

/** The ring over the whole free interval, where it explains all of it but for short bursts. */
export function undisturbedRing(place: Place): WindowedRing | null {
  const whole = fitTrimmed(place, place.from, place.to);
  if (whole && hidesTransient(whole) && judgeFit(whole, whole.noise).quality === "refused") return null;
  if (whole && (isClean(place, whole) || isEven(place, whole)))
    return { fit: whole, clean: true, courseChanges: false, masked: [] };
  return withoutBursts(place, whole);
}

/** Decays by so many foldings in a cycle are no ring's. */
const GONE = 3;

/** A wave that is gone within its first cycle beside a ring: an arc or a clamp at the beginning, smoothed over. */
const hidesTransient = ({ modes }: RingFit) =>
  modes.length > 1 && modes.some((mode) => mode.decay_per_s > GONE * mode.frequency_Hz);

/** The ring over whatever part of the interval one ring explains; null without any oscillation. */
export const disturbedRing = (place: Place): WindowedRing | null =>
  undisturbedRing(place) ?? partialRing(place);

/** The same where one ring is known not to explain the whole. */
export function partialRing(place: Place): WindowedRing | null {
  const whole = fitTrimmed(place, place.from, place.to);
  const late = lateStart(place);
  const early = earlyEnd(place);
  if (whole && LAST_RESORT * informative(whole) > Math.max(informative(late), informative(early)))
    return { fit: whole, clean: false, courseChanges: false, masked: [] };
  if (late && informative(late) >= informative(early))
    return { fit: late, clean: true, courseChanges: false, masked: [] };
  return early && { fit: early, clean: true, courseChanges: early.to < place.to - place.period, masked: [] };
}

/** Samples in the window, weighed by what the fit is worth. */
/** An unclean whole counts only where neither end holds a ring. */
const LAST_RESORT = 0.02;
const WORTH = { good: 1, poor: 0.2, refused: 0.001 };
const informative = (fit: RingFit | null) =>
  fit ? (fit.to - fit.from) * WORTH[judgeFit(fit, fit.noise).quality] : 0;

const options = (place: Place, extra: FitOptions = {}): FitOptions => ({
  unusable: place.unusable,
  lsb: place.lsb,
  noise: place.noise,
  period: place.period,
  ...extra,
});

/** Fits [from, to), or the part of it that the ring lives in. */
const fitTrimmed = (place: Place, from: number, to: number, extra: FitOptions = {}): RingFit | null =>
  fitRing(place.samples, from, to, place.step_s, options(place, { ...extra, trimmed: true }));

function isClean(place: Place, fit: RingFit, unusable = place.unusable): boolean {
  if (!(fit.residual <= CLEAN * noiseOf(place))) return false;
  const length = stretch(place, fit);
  const { rms } = residualProfile(place.samples, fit, fit.from, fit.to, length, unusable);
  // With little noise the quantisation's error stands still for whole stretches: half an LSB and some.
  const limit = Math.max(limitOf(place, noiseOf(place), length), 0.75 * (place.lsb ?? 0));
  return rms.every((value) => !(value > limit));
}

/** What is left is as large at the end as in the beginning: noise, though of a narrow band and so underestimated. */
function isEven(place: Place, fit: RingFit): boolean {
  if (!(fit.residual <= MOST_UNDERESTIMATED * noiseOf(place))) return false;
  const length = Math.ceil(place.period);
  const { rms } = residualProfile(place.samples, fit, fit.from, fit.to, length, place.unusable);
  if (rms.length < LEAST_PERIODS) return false;
  const sorted = rms.toSorted();
  const third = Math.floor(rms.length / 3);
  const ratio = medianOf(rms, 0, third) / medianOf(rms, rms.length - third);
  return sorted.at(-1)! <= EVEN * sorted[rms.length >> 1] && ratio < EVEN_ENDS && ratio > 1 / EVEN_ENDS;
}

const noiseOf = (place: Place) => Math.max(place.noise, (place.lsb ?? 0) / Math.sqrt(12));
/** What a stretch of plain noise stays below; coloured noise holds fewer independent values than samples. */
const limitOf = (place: Place, noise: number, length: number) =>
  CLEAN * noiseLimit(noise, length / (place.colour ?? 1) ** 4);
const stretch = (place: Place, fit: RingFit) =>
  Math.max(4, Math.round(Math.min(place.period, (fit.to - fit.from) / 8) / 4));

/** Stretches that may be bursts: a share of a long window, two short ones where it is short. */
const mostMasked = (stretches: number) => Math.max(0.15 * stretches, Math.min(8, 0.25 * stretches));

/** Leaves out isolated stretches of large residual, a few at a time. */
function withoutBursts(place: Place, whole: RingFit | null): WindowedRing | null {
  let fit = whole;
  const masked: number[] = [];
  for (let round = 0; fit && round < MOST_MASKS; round++) {
    const length = stretch(place, fit);
    const unusable = merged(place.unusable, masked);
    const { rms } = residualProfile(place.samples, fit, fit.from, fit.to, length, unusable);
    const typical = Math.max(noiseOf(place), rms.toSorted()[rms.length >> 1] || 0);
    const limit = limitOf(place, typical, length);
    let share = 0;
    rms.forEach((value, s) => {
      if (!(value > limit)) return;
      share++;
      masked.push(fit!.from + (s - 1) * length, fit!.from + (s + 2) * length);
    });
    if (share === 0 || share > mostMasked(rms.length)) return null;
    const patched = merged(place.unusable, masked);
    fit = fitRing(place.samples, fit.from, fit.to, place.step_s, options(place, { unusable: patched }));
    if (fit && isClean(place, fit, patched)) return { fit, clean: true, courseChanges: false, masked };
  }
  return null;
}

/** Two lists of stretches as one, sorted and apart. */
export function merged(a: ArrayLike<number>, b: number[]): number[] {
  const pairs: [number, number][] = [];
  for (let k = 0; k + 1 < a.length; k += 2) pairs.push([a[k], a[k + 1]]);
  for (let k = 0; k + 1 < b.length; k += 2) pairs.push([b[k], b[k + 1]]);
  pairs.sort((x, y) => x[0] - y[0]);
  const out: number[] = [];
  for (const [from, to] of pairs)
    if (out.length > 0 && from <= out.at(-1)!) out[out.length - 1] = Math.max(out.at(-1)!, to);
    else out.push(from, to);
  return out;
}

/**
 * The earliest start from which one ring explains the rest (a clamp, an arc or a switch transient comes
 * before it). The tail tells the modes; the start is then moved back as far as they hold.
 */
function lateStart(place: Place): RingFit | null {
  const { to } = place;
  let good: RingFit | null = null;
  let bad = place.from;
  for (const share of TAILS) {
    const from = Math.round(place.from + share * (to - place.from));
    if (to - from < LEAST_PERIODS * place.period) break;
    good = fitTrimmed(place, from, to);
    if (good && isClean(place, good)) break;
    good = null;
    bad = from;
  }
  if (!good) return null;
  for (let round = 0; round < MOST_HALVINGS && good.from - bad > place.period / 16; round++) {
    const middle: number = (bad + good.from) >> 1;
    const fit = holds(place, middle, to, good);
    if (fit) good = fit;
    else bad = middle;
  }
  return good;
}

/** The ring of `known` modes from an earlier start; a mode that had died by then is looked for once. */
function holds(place: Place, from: number, to: number, known: RingFit): RingFit | null {
  const same = fitTrimmed(place, from, to, { start: wavesOf(known) });
  if (same && isClean(place, same)) return same;
  if (known.modes.length > 1 || !same || same.residual > 6 * noiseOf(place)) return null;
  const fresh = fitTrimmed(place, from, to);
  return fresh && isClean(place, fresh) ? fresh : null;
}

/** The longest beginning that one ring explains: it ends where the course changes. */
function earlyEnd(place: Place): RingFit | null {
  let good: RingFit | null = null;
  let bad = place.to;
  for (let cycles = 2.5; ; cycles *= 1.5) {
    const to = Math.min(place.to, Math.round(place.from + cycles * place.period));
    const fit = fitRing(
      place.samples,
      place.from,
      to,
      place.step_s,
      options(place, { mostModes: cycles < 5 ? 1 : 2 }),
    );
    if (fit && isClean(place, fit)) good = fit;
    else if (good) {
      bad = to;
      break;
    }
    if (to === place.to || cycles > 400) break;
    if (!good && cycles > 5) return null;
  }
  if (!good) return null;
  while (bad - good.to > Math.max(2, place.period / 16)) {
    const middle = (bad + good.to) >> 1;
    const fit = fitRing(place.samples, place.from, middle, place.step_s, options(place));
    if (fit && isClean(place, fit)) good = fit;
    else bad = middle;
  }
  return good;
}
