/**
 * Frequency and decay that move with amplitude (a core near saturation, hysteresis, a junction's
 * capacitance): fits on successive parts of the ring. Reported with the small-amplitude value and the
 * span, never averaged away.
 */
import type { RingFit } from "./fit-format.ts";
import { fitRing } from "./fit.ts";
import { amplitude } from "./quality.ts";
import type { Place } from "./window.ts";

export interface AmplitudeDependence {
  /** The last part's fit, its uncertainty widened by what still moves there. */
  small: RingFit;
  frequencySpan_Hz: number;
  decaySpan_per_s: number;
  text: string;
}

const PARTS = 4;
const LEAST_CYCLES = 3;
/** A move counts from this many standard uncertainties on. */
const SURE = 4;
/** A frequency that seems to move further than this is another wave. */
const MOST_MOVE = 0.25;

/** Null where frequency and decay stay, or where there are too few cycles to tell. */
export function amplitudeDependence(place: Place, whole: RingFit): AmplitudeDependence | null {
  const mode = whole.modes.reduce((a, b) => (amplitude(b) > amplitude(a) ? b : a));
  // Only where the ring stands out of the noise: the last part must tell its frequency.
  const foldings = Math.log(amplitude(mode) / (2 * Math.max(whole.residual, place.noise)));
  const alive = mode.decay_per_s > 0 ? foldings / (mode.decay_per_s * place.step_s) : Infinity;
  const length = Math.min(whole.to - whole.from, Math.floor(alive));
  const cycles = length * place.step_s * mode.frequency_Hz;
  const count = Math.min(PARTS, Math.floor(cycles / LEAST_CYCLES));
  if (count < 2) return null;
  const fits: RingFit[] = [];
  for (let k = 0; k < count; k++) {
    const at = (share: number) => whole.from + Math.round((share * length) / count);
    const fit = fitRing(place.samples, at(k), at(k + 1), place.step_s, { ...place, start: [mode] });
    if (!fit || Math.abs(fit.modes[0].frequency_Hz / mode.frequency_Hz - 1) > MOST_MOVE) return null;
    fits.push(fit);
  }
  const frequency = moves(fits, 0);
  const decay = moves(fits, 1);
  if (!frequency.sure && !decay.sure) return null;
  const last = fits.at(-1)!;
  return {
    small: widened(last, [frequency.lastStep, decay.lastStep]),
    frequencySpan_Hz: frequency.span,
    decaySpan_per_s: decay.span,
    text: describe(fits, frequency.sure, decay.sure),
  };
}

const valueOf = (fit: RingFit, which: 0 | 1) =>
  which === 0 ? fit.modes[0].frequency_Hz : fit.modes[0].decay_per_s;
const uncertaintyOf = (fit: RingFit, which: 0 | 1) => Math.sqrt(fit.covariance[which * 4 + which]);

/** One direction all along, and further than the uncertainties of first and last. */
function moves(fits: RingFit[], which: 0 | 1): { sure: boolean; span: number; lastStep: number } {
  const values = fits.map((fit) => valueOf(fit, which));
  const span = values[0] - values.at(-1)!;
  const u = Math.hypot(uncertaintyOf(fits[0], which), uncertaintyOf(fits.at(-1)!, which));
  const steps = values.slice(1).map((value, k) => ({
    back: Math.sign(span) * (value - values[k]),
    u: Math.hypot(uncertaintyOf(fits[k], which), uncertaintyOf(fits[k + 1], which)),
  }));
  const monotonic = steps.every(({ back, u: own }) => back < 2 * own);
  return { sure: monotonic && Math.abs(span) > SURE * u, span, lastStep: values.at(-2)! - values.at(-1)! };
}

function widened(fit: RingFit, steps: [number, number]): RingFit {
  const covariance = fit.covariance.slice();
  const size = 4 * fit.modes.length;
  steps.forEach((step, k) => (covariance[k * size + k] += (step / 2) ** 2));
  return { ...fit, covariance };
}

function describe(fits: RingFit[], frequency: boolean, decay: boolean): string {
  const [first, last] = [fits[0], fits.at(-1)!];
  const a = amplitude(first.modes[0]).toPrecision(3);
  const b = amplitude(last.modes[0]).toPrecision(3);
  const percent = (which: 0 | 1) => (100 * (valueOf(first, which) / valueOf(last, which) - 1)).toPrecision(2);
  const what = [frequency ? `frequency by ${percent(0)} %` : "", decay ? `decay by ${percent(1)} %` : ""]
    .filter(Boolean)
    .join(" and ");
  return `The ring's ${what} against its small-amplitude value moves with amplitude (from ${a} to ${b}): saturation, hysteresis or a capacitance that changes with voltage.`;
}
