/** What a fit is worth: good, poor or refused, and why (design.md: at least 3 cycles and 6 samples a cycle). */
import type { RingQuality } from "../reading-format.ts";
import type { RingFit } from "./fit-format.ts";

export interface Judgement {
  quality: RingQuality;
  reason: string | null;
}

const LEAST_CYCLES = 3;
const LEAST_PER_CYCLE = 6;
/** A wave that would need a higher quality than this is none that a coil can have. */
const MOST_Q = 2000;
const GOOD_RESIDUAL = 1.5;
/** Residuals this large against the ring itself mean that it is no ring. */
const REFUSED_SHARE = 0.35;

const refuse = (reason: string): Judgement => ({ quality: "refused", reason });

export function judgeFit(fit: RingFit, noise: number): Judgement {
  const mode = fit.modes.reduce((a, b) => (amplitude(b) > amplitude(a) ? b : a));
  const window_s = (fit.to - fit.from) * fit.step_s;
  const size = 4 * fit.modes.length;
  const at = 4 * fit.modes.indexOf(mode);
  const decayU = Math.sqrt(fit.covariance[(at + 1) * size + at + 1]);
  const frequencyU = Math.sqrt(fit.covariance[at * size + at]);
  const perCycle = 1 / (mode.frequency_Hz * fit.step_s);
  // Cycles that are there to be seen, not only fitted over: until the noise has it.
  const foldings = Math.log(Math.max(1.01, amplitude(mode) / Math.max(noise, 1e-300)));
  const seen_s = mode.decay_per_s > 0 ? Math.min(window_s, foldings / mode.decay_per_s) : window_s;
  const cycles = seen_s * mode.frequency_Hz;
  const power = Math.hypot(...fit.modes.map((m) => rmsOf(m, window_s)));
  if (!(mode.decay_per_s > 0) && -mode.decay_per_s > 2 * decayU && -mode.decay_per_s * window_s > 0.05)
    return refuse("the oscillation grows instead of dying away: not the free ring of a coil");
  if (mode.decay_per_s + 2 * decayU < (Math.PI * mode.frequency_Hz) / MOST_Q)
    return refuse("the oscillation does not die away within the window: not the free ring of a coil");
  if (fit.residual > REFUSED_SHARE * power)
    return refuse("what is left after the fit is too large against the ring itself: no damped oscillation");
  if (cycles < 1) return refuse(`only ${cycles.toFixed(1)} cycles to be seen: too few to fit`);
  if (perCycle < 2.5)
    return refuse(`only ${perCycle.toFixed(1)} samples a cycle: too few to tell the frequency`);
  if (frequencyU > 0.05 * mode.frequency_Hz)
    return refuse("too much noise: the frequency is uncertain by more than 5 %");
  const decays = mode.decay_per_s > 2 * decayU;
  if (!decays && (mode.decay_per_s <= 0 || cycles > 8 || fit.residual > 3 * noise))
    return refuse("no decay to be told, where a coil's ring would show one");
  if (cycles < 2 && !decays)
    return refuse(`only ${cycles.toFixed(1)} cycles to be seen, and no decay to be told: no ring`);
  const reasons: string[] = [];
  if (cycles < LEAST_CYCLES)
    reasons.push(`only ${cycles.toFixed(1)} cycles of the ring can be seen (3 are needed)`);
  if (!decays) reasons.push("the window is too short to tell the decay from none");
  if (perCycle < LEAST_PER_CYCLE) reasons.push(`only ${perCycle.toFixed(1)} samples a cycle (6 are needed)`);
  if (fit.residual > GOOD_RESIDUAL * noise)
    reasons.push(
      `the residual is ${(fit.residual / noise).toFixed(1)} times the noise: one ring does not explain the window`,
    );
  if (fit.stopped !== "converged") reasons.push("the fit did not settle");
  return reasons.length > 0
    ? { quality: "poor", reason: reasons.join("; ") }
    : { quality: "good", reason: null };
}

export const amplitude = (mode: { cosine: number; sine: number }): number =>
  Math.hypot(mode.cosine, mode.sine);

/** Root mean square of a mode over the window. */
function rmsOf(mode: { cosine: number; sine: number; decay_per_s: number }, window_s: number): number {
  const x = 2 * mode.decay_per_s * window_s;
  const mean = Math.abs(x) < 1e-6 ? 1 : -Math.expm1(-x) / x;
  return amplitude(mode) * Math.sqrt(mean / 2);
}
