/**
 * Which candidates of a voltage trace are pulses: those with a ring, those whose kick stands beyond a
 * change of state (a spark leaves no ring), and those that resemble the pulses so confirmed.
 */
import type { Channel } from "../capture.ts";
import type { PulseEvidence } from "../evidence.ts";
import { meanAndDeviation, medianOf } from "../numeric/robust.ts";
import type { RingQuality } from "../reading-format.ts";
import { makeBlocks, type Blocks } from "../ring/blocks.ts";
import type { FittedMode, RingFit } from "../ring/fit-format.ts";
import { amplitude } from "../ring/quality.ts";
import { residualProfile } from "../ring/residuals.ts";
import { costAt } from "../ring/solve.ts";

export interface Candidate {
  evidence: PulseEvidence;
  quality: RingQuality | null;
  witnessed: boolean | null;
}

/** Candidates in order of time; answers for each whether it is a pulse. */
export function confirm(channel: Channel, candidates: Candidate[], noise: number): boolean[] {
  const rings = clearest(candidates);
  const nothingNew = candidates.map(
    (candidate, k) =>
      candidate.witnessed === null &&
      (goesOn(channel, candidates[k - 1], candidate, noise) ||
        ringsThrough(channel, rings, candidate, noise)),
  );
  const sure = candidates.map(
    (candidate, k) =>
      candidate.witnessed ??
      (!nothingNew[k] && (hasRing(candidate, noise) || kicks(channel, candidate, noise))),
  );
  const known = candidates.filter((_, k) => sure[k] && candidates[k].evidence.switchOff !== null);
  if (known.length === 0) return sure;
  const swing = medianOf(known.map(({ evidence }) => swingOf(evidence)));
  const level = medianOf(known.map(({ evidence }) => evidence.levelOn ?? NaN));
  return candidates.map(({ evidence, witnessed }, k) => {
    if (sure[k] || witnessed === false || nothingNew[k]) return sure[k];
    if (evidence.levelOn === null || evidence.switchOff === null) return false;
    const alike = Math.abs(evidence.levelOn - level) < Math.max(6 * noise, 0.1 * swing);
    return alike && swingOf(evidence) > 0.5 * swing && isSmooth(channel, evidence);
  });
}

const swingOf = ({ kick, levelOn }: PulseEvidence) => (kick ? Math.abs(kick.value - (levelOn ?? 0)) : 0);

function hasRing({ evidence, quality }: Candidate, noise: number): boolean {
  const { fit } = evidence;
  if (!fit || quality === "refused" || quality === null) return false;
  const largest = Math.max(...fit.modes.map(amplitude));
  if (evidence.switchOff !== null) return largest > 3 * noise;
  // Without its beginning on screen a wave must be the clearer a ring.
  const main = fit.modes.find((mode) => amplitude(mode) === largest)!;
  const decays = main.decay_per_s * (fit.to - fit.from) * fit.step_s > 0.4;
  return decays && largest > 6 * noise && fit.residual < 3 * fit.noise;
}

/** How long a ring is followed on to see whether it goes on. */
const CONTINUED_PERIODS = 4;

/** The ring of the pulse before, still to be seen, explains what comes after a burst: it goes on, and nothing is new. */
function goesOn(channel: Channel, before: Candidate | undefined, { evidence }: Candidate, noise: number) {
  const { switchOff, period, freeTo } = evidence;
  const earlier = before?.evidence.fit;
  if (!earlier || switchOff === null || !period) return false;
  const from = Math.ceil(switchOff + period);
  const to = Math.min(freeTo, from + Math.ceil(CONTINUED_PERIODS * period));
  if (to - from < period) return false;
  const left = (mode: FittedMode) =>
    amplitude(mode) * Math.exp(-mode.decay_per_s * (from - earlier.from) * earlier.step_s);
  if (Math.max(...earlier.modes.map(left)) < 2 * noise) return false;
  const [rms] = residualProfile(channel.samples, earlier, from, to, to - from, channel.unusable).rms;
  return rms < 1.3 * Math.max(noise, earlier.residual);
}

/** Fits of the record's clearest rings, at most so many. */
const RINGS = 6;

function clearest(candidates: Candidate[]): RingFit[] {
  const strength = (fit: RingFit) => Math.max(...fit.modes.map(amplitude)) / fit.residual;
  const fits = candidates.flatMap(({ evidence: { fit } }) => (fit && fit.modes.length > 0 ? [fit] : []));
  return fits.toSorted((a, b) => strength(b) - strength(a)).slice(0, RINGS);
}

/** How far before and after a candidate a ring must go on for nothing to be new there, in periods. */
const BEFORE = 0.9;
/** The shorter where an arc or an edge follows soon. */
const AFTER = [1.5, 0.6];
/** Root mean square over the noise that a free ring leaves. */
const EXPLAINED = 1.4;

/**
 * A free ring of the coil's modes explains the stretch about the candidate: a lull between its beats, and nothing
 * new. Quiet with a kick out of it is no sum of damped waves.
 */
function ringsThrough(channel: Channel, rings: RingFit[], { evidence }: Candidate, noise: number): boolean {
  const { switchOff, period, freeTo } = evidence;
  if (switchOff === null || !period) return false;
  const from = Math.max(0, Math.floor(switchOff - BEFORE * period));
  if (switchOff - from < 0.5 * BEFORE * period) return false;
  return AFTER.some((after) => {
    const to = Math.ceil(switchOff + after * period);
    if (to > freeTo) return false;
    const blocks = makeBlocks(
      channel.samples,
      from,
      to,
      channel.unusable,
      Math.max(1, Math.floor(period / 32)),
    );
    return blocks.used >= 24 && rings.some((ring) => explains(ring, blocks, noise));
  });
}

/** Whether a sum of the ring's modes, of any size and phase, is all there is. */
function explains({ modes, step_s }: RingFit, blocks: Blocks, noise: number): boolean {
  const { decimation, used } = blocks;
  const known = modes.map(({ frequency_Hz, decay_per_s }) => ({
    omega: 2 * Math.PI * frequency_Hz * step_s * decimation,
    decay: decay_per_s * step_s * decimation,
  }));
  return costAt(blocks, known, 1) < EXPLAINED ** 2 * (noise ** 2 / decimation) * used;
}

/** The kick goes well beyond the change from the conduction level to the level after it, or swings about the latter. */
function kicks(channel: Channel, { evidence }: Candidate, noise: number): boolean {
  const { kick, levelOn, freeFrom, freeTo } = evidence;
  if (!kick || levelOn === null || !isSmooth(channel, evidence)) return false;
  const third = (freeTo - freeFrom) / 3;
  const high = Math.abs(kick.value - levelOn);
  // The last third may hold the next conduction.
  return [freeTo - third, freeFrom + third].some((start) => {
    const [from, to] = [Math.floor(start), Math.floor(start + third)];
    const levels = levelsOf(channel.samples, from, to, evidence.period ?? to - from);
    const level = medianOf(levels);
    const change = Math.abs(level - levelOn);
    if (high < 2 * change) return false;
    return (
      change > levelBlur(levels, noise, channel.lsb ?? 0) ||
      swingsAbout(channel.samples, evidence, level, noise)
    );
  });
}

/** Pieces of a stretch at most whose levels are compared. */
const PIECES = 8;

/** Medians over pieces no shorter than a period, so that a ring in them does not count. */
function levelsOf(samples: Float64Array, from: number, to: number, period: number): Float64Array {
  const count = Math.min(PIECES, Math.max(1, Math.floor((to - from) / period)));
  const length = (to - from) / count;
  return Float64Array.from({ length: count }, (_, k) =>
    medianOf(samples, Math.floor(from + k * length), Math.floor(from + (k + 1) * length)),
  );
}

/** Noise of this many steps of the converter makes means finer than a step (Widrow & Kollár). */
const DITHER = 0.4;

/**
 * How far two levels, means of many samples each, may lie apart for no change of state: by hum and drift, as
 * neighbouring levels show them, by the noise in few independent values, and by coarse steps it does not blur.
 */
function levelBlur(levels: Float64Array, noise: number, step: number): number {
  const wander = Math.max(...levels) - Math.min(...levels);
  return Math.max(1.5 * wander, 0.5 * noise, noise > DITHER * step ? 0.5 * step : 1.5 * step);
}

/** Swings this far to both sides, in units of the noise, belong to a ring, however an arc has bent it. */
const FAR = 10;

/** Both sides of its level are reached within two periods, and less of both later. */
function swingsAbout(
  samples: Float64Array,
  { freeFrom, freeTo, period }: PulseEvidence,
  level: number,
  noise: number,
): boolean {
  const middle = Math.min(Math.floor(freeFrom + 2 * (period ?? 0)), (freeFrom + freeTo) >> 1);
  const reach = (from: number, to: number) => {
    let [low, high] = [0, 0];
    for (let i = from; i < to; i++) {
      low = Math.min(low, samples[i] - level || 0);
      high = Math.max(high, samples[i] - level || 0);
    }
    return { low: -low, high };
  };
  const early = reach(freeFrom, middle);
  const late = reach(middle, freeTo);
  return Math.min(early.low, early.high) > FAR * noise && early.low > late.low && early.high > late.high;
}

/** Neighbouring samples alike over the first half period (von Neumann's ratio): a wave, not a noise burst. */
function isSmooth(channel: Channel, { freeFrom, freeTo, period, levelOn }: PulseEvidence): boolean {
  const { samples } = channel;
  const to = Math.min(freeTo, freeFrom + Math.max(6, Math.ceil((period ?? 16) / 2)));
  const { mean } = meanAndDeviation(samples, freeFrom, to);
  const centre = levelOn ?? mean;
  let steps = 0;
  let squares = 0;
  for (let i = freeFrom + 1; i < to; i++) {
    steps += (samples[i] - samples[i - 1]) ** 2 || 0;
    squares += (samples[i] - centre) ** 2 || 0;
  }
  return steps < 0.8 * squares;
}
