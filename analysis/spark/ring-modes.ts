/** Which of a fit's modes are the coil's, and one period of the ring for every pulse of a run. */
import type { CaptureEvidence, PulseEvidence } from "../evidence.ts";
import { median } from "../numeric/median.ts";
import type { FittedMode } from "../ring/fit-format.ts";

/** The strongest mode, what is not much weaker, and what is faster: a slow faint one is hum or a baseline. */
export function ringModes(fitted: FittedMode[]): FittedMode[] {
  const modes = fitted.filter(
    ({ frequency_Hz, decay_per_s }) =>
      decay_per_s < 3 * frequency_Hz || fitted[0].frequency_Hz < frequency_Hz,
  );
  const strongest = modes.reduce<FittedMode | null>(
    (best, mode) => (!best || size(mode) > size(best) ? mode : best),
    null,
  );
  if (!strongest) return [];
  return apart(
    modes.filter((mode) => mode.frequency_Hz >= strongest.frequency_Hz || size(mode) > 0.3 * size(strongest)),
  );
}

/** Modes closer than this are one that a fit has bent around something else: no coil's modes lie so close. */
const APART = 1.15;

/** Of two modes too close the longer lasting one is the coil's. */
function apart(modes: FittedMode[]): FittedMode[] {
  const close = (a: FittedMode, b: FittedMode) =>
    Math.max(a.frequency_Hz / b.frequency_Hz, b.frequency_Hz / a.frequency_Hz) < APART;
  return modes.filter(
    (mode) =>
      !modes.some((other) => other !== mode && close(mode, other) && other.decay_per_s < mode.decay_per_s),
  );
}

/** Periods this close are of one ring. */
const ALIKE = 0.15;
const FAR_SHORTER = 0.5;

/**
 * In samples of each pulse's own capture. An arc's fast ring may be all that a fit found: a pulse whose period
 * is far shorter than one that others share, or that no other shares while most share one, is given theirs.
 */
export function ringPeriods(places: { capture: CaptureEvidence; pulse: PulseEvidence }[]): (number | null)[] {
  const own_s = places.map(({ capture, pulse }) => {
    const step_s = capture.timebase.step_s;
    if (step_s === null) return null;
    const mode = ringModes(pulse.fit?.modes ?? [])[0];
    return mode ? 1 / mode.frequency_Hz : pulse.period === null ? null : pulse.period * step_s;
  });
  const known = own_s.filter((period) => period !== null);
  const usual = known.length > 2 ? median(known) : null;
  const shared = (period: number) => known.filter((other) => alike(period, other)).length;
  const longest = Math.max(0, ...known.filter((period) => shared(period) > 1));
  return places.map(({ capture }, i) => {
    const { step_s } = capture.timebase;
    if (step_s === null) return null;
    let period = own_s[i];
    if (period !== null && period < FAR_SHORTER * longest) period = longest;
    else if (usual !== null && shared(usual) * 2 > known.length && (period === null || shared(period) < 3))
      period = usual;
    return period === null ? null : period / step_s;
  });
}

const alike = (a: number, b: number) => Math.abs(a / b - 1) < ALIKE;
const size = (mode: FittedMode) => Math.hypot(mode.cosine, mode.sine);
