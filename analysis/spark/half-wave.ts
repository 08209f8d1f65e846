/**
 * The first half-wave's volt-seconds: what tells a spark where a diode cuts the half-waves below ground and
 * no ring is free. By Faraday's law ∫(v − V_supply)·dt over the half-wave is L·(I0 + I1), I1 the current that
 * swings back: nearly 2·L·I0 in a quiet pulse, whatever the secondary's own ringing; a spark keeps the current
 * from swinging back.
 */
import type { CaptureEvidence, PulseEvidence } from "../evidence.ts";
import { median } from "../numeric/median.ts";

export interface HalfWave {
  /** From switch-off to the return to the level of conduction, over the ring's period. */
  length: number;
  /** Over the ring's settling level and the current at switch-off, if that is known; in any one unit. */
  voltSeconds: number;
  /** The same over L·I0·(1 + e^(−π/2Q)): 1 in a quiet pulse; null without L or current. */
  share: number | null;
  /** The trace then lies flat at that level: a diode conducts. */
  cut: boolean;
}

/** A quiet half-wave lasts half a period, a little more with the supply below it. */
const WHOLE = { from: 0.44, to: 0.65 };
/** The diode holds for at least this part of a period. */
const HELD = 0.15;
/** Of quiet rings; between 8 and 100 the current that swings back differs by a tenth of the whole. */
const USUAL_Q = 20;
/** A half-wave so short, with so little of L·I0, has been ended by an arc, whatever the core and the clamp. */
const ENDED = { length: 0.38, share: 0.75 };
/** Lost volt-seconds that noise, the supply's sag and the level's doubt explain, and that only a spark does. */
const LOSS = { none: 0.05, sure: 0.1 };

/** Null where the half-wave is not seen from its start to its end, or its edge stays off screen. */
export function gatherHalfWave(evidence: CaptureEvidence, pulse: PulseEvidence): HalfWave | null {
  const { map, channels, timebase } = evidence;
  const { switchOff, levelOn, period, fit, polarity, freeTo, current_A, inductance_H } = pulse;
  if (map.ring === null || map.ring !== map.switchNode || timebase.step_s === null) return null;
  if (switchOff === null || levelOn === null || period === null) return null;
  const { samples, unusable, lsb } = channels[map.ring];
  const tolerance = 4 * (fit?.noise ?? 0) + (lsb ?? 0);
  const level = polarity * (fit?.baseline[0] ?? median(samples.subarray(Math.ceil(switchOff), freeTo)));
  const start = Math.ceil(switchOff) + 1;
  const last = Math.min(freeTo, start + Math.ceil(0.75 * period));
  let [sum, end] = [0, -1];
  for (let i = start; i < last; i++) {
    if (i > start + 0.05 * period && polarity * (samples[i] - levelOn) < tolerance) {
      end = i;
      break;
    }
    sum += polarity * samples[i] - level;
  }
  if (end < 0) return null;
  for (let u = 0; u < unusable.length; u += 2) if (unusable[u] < end && unusable[u + 1] > start) return null;
  const current = current_A && current_A.value !== 0 ? Math.abs(current_A.value) : null;
  const voltSeconds = (sum * timebase.step_s) / (current ?? 1);
  // A spark spoils the ring's inductance, never the ramp's.
  const inductance = (evidence.reading.pulses[pulse.index]?.ramp?.inductance_H ?? inductance_H)?.value;
  const share =
    current && inductance ? voltSeconds / (inductance * (1 + Math.exp(-Math.PI / (2 * USUAL_Q)))) : null;
  const rest = {
    from: end + 2,
    to: Math.floor(end + 2 + HELD * period),
    below: 0.25 * Math.abs(level - polarity * levelOn),
  };
  const cut =
    rest.to < Math.min(freeTo, samples.length) && liesFlat(samples, rest, polarity, levelOn, tolerance);
  return { length: (end - switchOff) / period, voltSeconds, share, cut };
}

/** Flat at the level of conduction or a diode's drop below it, and no farther than `below`. */
function liesFlat(
  samples: Float64Array,
  rest: { from: number; to: number; below: number },
  polarity: number,
  levelOn: number,
  tolerance: number,
): boolean {
  const values = samples.subarray(rest.from, rest.to);
  const middle = median(values);
  const drop = polarity * (levelOn - middle);
  const flat = values.every((value) => Math.abs(value - middle) < tolerance);
  return flat && drop > -tolerance && drop < rest.below + tolerance;
}

/** A pulse by itself, where its first half-wave is cut short beyond doubt; null else. */
export function endedEarly(wave: HalfWave | null): { probability: number; loss: number } | null {
  if (!wave || wave.share === null || wave.length > ENDED.length || wave.share > ENDED.share) return null;
  return { probability: 0.97, loss: 1 - wave.share };
}

const isWhole = ({ length }: HalfWave) => length > WHOLE.from && length < WHOLE.to;

/** A clamp takes its part of every whole half-wave: those that agree with the largest are the quiet ones. */
function alike(whole: HalfWave[]): HalfWave[] {
  const most = Math.max(...whole.map(({ voltSeconds }) => voltSeconds));
  const agreeing = whole.filter(({ voltSeconds }) => voltSeconds > (1 - LOSS.none) * most);
  return agreeing.length > 1 ? agreeing : [];
}

/**
 * Probability of a spark per pulse, null where half-waves say nothing. They speak in runs whose whole
 * half-waves end in a diode; the whole ones are then the run's quiet pulses, or L·I0 says what one would be.
 */
export function judgeHalfWaves(waves: (HalfWave | null)[]): ({ probability: number; loss: number } | null)[] {
  const seen = waves.filter((wave) => wave !== null);
  const whole = seen.filter(isWhole);
  // A diode cuts every half-wave of the bench: an edge that falls into one pulse does not.
  const telling = whole.length > 0 ? whole : seen;
  if (telling.filter(({ cut }) => cut).length < Math.max(1, telling.length / 2)) return waves.map(() => null);
  const free = whole.filter(({ share }) => share === null || share > 1 - LOSS.sure);
  const quiet = free.length > 0 ? free : alike(whole);
  const usual = quiet.length > 0 ? median(quiet.map(({ voltSeconds }) => voltSeconds)) : null;
  return waves.map((wave) => {
    if (!wave) return null;
    const kept = usual === null ? wave.share : wave.voltSeconds / usual;
    if (kept === null) return null;
    const loss = 1 - kept;
    if (loss < LOSS.none && isWhole(wave)) return { probability: 0.003, loss };
    return { probability: loss > LOSS.sure && !isWhole(wave) ? 0.99 : 0.4, loss };
  });
}
