/**
 * The ring of one pulse from the very switch-off on: first on a window that is surely free, then, where
 * that ring run backwards meets the conduction level, from there. Each sample counts: the first quarter
 * cycle of a ring of Q 5 holds a quarter of its information.
 */
import type { SwitchOff } from "../events/event-format.ts";
import { modelCrossing, slopeMatch } from "../events/instant.ts";
import { medianOf } from "../numeric/robust.ts";
import type { RingFit } from "./fit-format.ts";
import { fitRing } from "./fit.ts";
import { amplitudeDependence, type AmplitudeDependence } from "./nonlinear.ts";
import { amplitude, judgeFit } from "./quality.ts";
import { afterFlatTops } from "./flat-tops.ts";
import { noiseLimit, residualProfile } from "./residuals.ts";
import {
  disturbedRing,
  merged,
  partialRing,
  undisturbedRing,
  type Place,
  type WindowedRing,
} from "./window.ts";

export interface PulseRing extends WindowedRing {
  /** Instant of the switch-off by the model; null where the ring is not seen from its beginning. */
  switchOff: { at: number; u: number } | null;
  nonlinear: Omit<AmplitudeDependence, "small"> | null;
}

/** Share of a period after the edge before the first window begins. */
const GUARD = 0.1;
/** How far the model's instant may be from the edge's, in periods: with the noise's share of the ring. */
/** Periods after switch-off from which on a ring that does not hold from there is another's. */
const LATE = 0.1;
const LEAST_REACH = 0.03;
const MOST_REACH = 0.16;
/** A single ring leaves less than this of its amplitude behind, however its frequency moves. */
const RING_SHARE = 0.25;

export function ringOfPulse(place: Omit<Place, "from">, off: SwitchOff): PulseRing | null {
  const { period } = place;
  const begin = off.at === null ? off.freeFrom : Math.ceil(off.at + GUARD * period);
  if (off.freeTo - begin < 8) return null;
  const whole = { ...place, from: begin };
  const undisturbed = undisturbedRing(whole);
  const free = undisturbed ? begin : afterCutWaves(whole);
  // A second mode at a harmonic or beside the first, or a little too much left over: the frequency may move.
  const moving = free > begin || (undisturbed && !suspicious(undisturbed.fit)) ? null : nonlinearRing(whole);
  if (moving && (moving.clean || !undisturbed)) return moving;
  const ring = undisturbed ?? (free > begin ? disturbedRing({ ...place, from: free }) : partialRing(whole));
  if (!ring) return null;
  const fromBeginning = ring.clean && ring.fit.from <= begin + 0.1 * period;
  return fromBeginning ? extended(place, off, ring) : { ...ring, switchOff: null, nonlinear: null };
}

function suspicious({ modes, residual, noise }: RingFit): boolean {
  if (modes.length < 2) return residual > 1.1 * noise;
  const ratio = modes[1].frequency_Hz / modes[0].frequency_Hz;
  return ratio < 3.5 && Math.abs(ratio - Math.round(ratio)) < 0.1;
}

/** A ring all along whose frequency or decay moves with amplitude. */
function nonlinearRing(place: Place): PulseRing | null {
  const { samples, from, to, step_s } = place;
  const whole = fitRing(samples, from, to, step_s, { ...place, mostModes: 1 });
  if (!whole || whole.residual > RING_SHARE * amplitude(whole.modes[0])) return null;
  const found = amplitudeDependence(place, whole);
  if (!found) return null;
  const { small, ...nonlinear } = found;
  const clean = small.residual < 1.5 * Math.max(small.noise, place.noise);
  if (judgeFit(small, small.noise).quality === "refused") return null;
  return { fit: small, clean, courseChanges: false, masked: [], switchOff: null, nonlinear };
}

/** First sample after the last half-wave that a diode or a clamp cuts. */
function afterCutWaves({ samples, from, to, period, noise }: Place): number {
  const level = medianOf(samples, from, Math.min(to, from + Math.ceil(20 * period)));
  const looked = Math.min(to, from + Math.ceil(40 * period));
  return afterFlatTops(samples, from, looked, level, noise, 8 * noise);
}

/** The same ring fitted from the switch-off on, where its first samples agree. */
function extended(place: Omit<Place, "from">, off: SwitchOff, ring: WindowedRing): PulseRing {
  const { samples, step_s, noise, lsb } = place;
  const { fit } = ring;
  const unusable = ring.masked.length > 0 ? merged(place.unusable, ring.masked) : place.unusable;
  if (off.at === null) return { ...ring, switchOff: null, nonlinear: null };
  const period = 1 / (fit.modes[0].frequency_Hz * step_s);
  if (off.levelOn === null) {
    const at = slopeMatch(fit, samples, off.at, period);
    return { ...ring, switchOff: at === null ? null : { at, u: 0.01 * period }, nonlinear: null };
  }
  const unrest = noise / Math.max(...fit.modes.map(amplitude));
  const reach = Math.max(LEAST_REACH, Math.min(MOST_REACH, 4 * unrest));
  const crossing = modelCrossing(fit, off.at, Math.max(2, reach * period), off.levelOn, off.polarity);
  if (!crossing) return { ...ring, switchOff: null, nonlinear: null };
  const u = Math.hypot(0.02, noise / crossing.slope / Math.sqrt(Math.max(1, period / 12)));
  const start = Math.ceil(crossing.at + Math.min(u, 0.02 * period));
  const switchOff = { at: crossing.at, u };
  if (start >= fit.from) return { ...ring, switchOff, nonlinear: null };
  const longer = fitRing(samples, start, fit.to, step_s, { unusable, lsb, noise, like: fit });
  if (!longer) return { ...ring, switchOff: null, nonlinear: null };
  const { rms } = residualProfile(samples, longer, start, fit.from + 2, fit.from + 2 - start, unusable);
  const agrees = rms[0] <= 1.15 * noiseLimit(Math.max(noise, fit.residual), fit.from + 2 - start);
  if (agrees) return { ...ring, fit: longer, switchOff, nonlinear: null };
  // What rings after an arc or a clamp is not the rise, and does not lead back to its foot.
  const late = fit.from - off.at > LATE * period;
  return { ...ring, switchOff: late ? null : switchOff, nonlinear: null };
}
