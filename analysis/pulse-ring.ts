/** The ring of a pulse with what follows from it: fit, quality, L–C–R, and doubts where the ramp says otherwise. */
import type { Capture } from "./capture.ts";
import { inferTank, type Tank } from "./coil/infer.ts";
import { ringDoubt } from "./coil/plausible.ts";
import { hasSecondary } from "./coil/secondary.ts";
import type { ChannelMap, PulseEvidence } from "./evidence.ts";
import type { SwitchOff } from "./events/event-format.ts";
import type { Figure, RingReading } from "./reading-format.ts";
import { describeRing, modeCovariance, refusedRing } from "./ring/describe.ts";
import type { RingFit } from "./ring/fit-format.ts";
import { judgeFit } from "./ring/quality.ts";
import { ringOfPulse, type PulseRing } from "./ring/ring-of-pulse.ts";
import { disturbedRing, type Place } from "./ring/window.ts";
import type { Setup } from "./setup/schema.ts";

export interface PulseContext {
  capture: Capture;
  step_s: number;
  setup: Setup;
  map: ChannelMap;
  /** Rough ring period in samples, 0 unknown. */
  period: number;
  /** Noise per sample of the ring channel. */
  noise: number;
  timeRelative: number;
}

export interface RingOutcome {
  ring: RingReading | null;
  /** Null where the ring is refused. */
  fit: RingFit | null;
  tank: Tank | null;
  /** Instant by the model, where the ring is seen from its beginning. */
  switchOff: PulseRing["switchOff"];
  courseChanges: boolean;
}

export const periodOf = (fit: RingFit): number => 1 / (fit.modes[0].frequency_Hz * fit.step_s);

/** What else is known of the coil: its inductance from ramp or setup, its winding's resistance from the ramp. */
export interface KnownCoil {
  inductance_H: Figure;
  resistance_ohm: Figure;
}

export function readRing(
  context: PulseContext,
  off: SwitchOff,
  kick: PulseEvidence["kick"],
  known: KnownCoil,
): RingOutcome {
  const place = placeOf(context, off);
  const nothing = { fit: null, tank: null, switchOff: null, courseChanges: false };
  if (!place) return { ...nothing, ring: null };
  const first = outcomeOf(context, ringOfPulse(place, off), known);
  if (!first.fit) return first;
  const doubt = doubtOf(context, first, off, kick, known.inductance_H);
  if (!doubt) return first;
  if (doubt.tooFast) {
    const slower = slowerRing(context, place, first.fit, known);
    if (slower.fit && !doubtOf(context, slower, off, kick, known.inductance_H)) return slower;
  }
  if (doubt.refused) return { ...nothing, ring: { ...first.ring!, ...refusedFigures, reason: doubt.reason } };
  const reason = [first.ring!.reason, doubt.reason].filter(Boolean).join("; ");
  return { ...first, ring: { ...first.ring!, quality: "poor", reason } };
}

const refusedFigures = { modes: [], phases_rad: [], offset: null, quality: "refused" as const };

function placeOf(context: PulseContext, off: SwitchOff): Omit<Place, "from"> | null {
  const { map, capture, step_s } = context;
  if (map.ring === null) return null;
  const { samples, lsb, unusable } = capture.channels[map.ring];
  // Coloured noise shows in the quiet before; a trace that was not quiet must not pass for noise.
  const noise = Math.max(context.noise, Math.min(off.scatter ?? 0, 3 * context.noise));
  const period = context.period || (off.freeTo - off.freeFrom) / 8;
  return { samples, step_s, to: off.freeTo, period, noise, colour: noise / context.noise, lsb, unusable };
}

function outcomeOf(context: PulseContext, found: PulseRing | null, known: KnownCoil): RingOutcome {
  const channel = context.capture.channels[context.map.ring!];
  if (!found) {
    const reason = "no damped oscillation stands out of the noise after the switch-off";
    const ring = refusedRing(channel, reason, context.noise);
    return { ring, fit: null, tank: null, switchOff: null, courseChanges: false };
  }
  const judgement = judgeFit(found.fit, found.fit.noise);
  const { start_s } = context.capture.timebase;
  const ring = describeRing(channel, found.fit, judgement, start_s, context.timeRelative);
  ring.nonlinear = found.nonlinear;
  const fit = judgement.quality === "refused" ? null : found.fit;
  const tank = fit ? tankOf(context, fit, known) : null;
  return { ring, fit, tank, switchOff: fit ? found.switchOff : null, courseChanges: found.courseChanges };
}

function tankOf({ timeRelative, setup }: PulseContext, fit: RingFit, known: KnownCoil): Tank {
  const { frequency_Hz, decay_per_s } = fit.modes[0];
  const ring = { frequency_Hz, decay_per_s, covariance: modeCovariance(fit, 0), timeRelative };
  return inferTank(ring, setup, known.resistance_ohm);
}

function doubtOf(
  { setup, map }: PulseContext,
  { fit, tank }: RingOutcome,
  off: SwitchOff,
  kick: PulseEvidence["kick"],
  expected: Figure,
) {
  const unknown = (hasSecondary(setup) || map.secondary !== null) && !setup.secondaryCapacitance_F;
  const seen = { kick, switchOff: off.at, period: periodOf(fit!) };
  return ringDoubt(setup.capacitor_F ? (tank?.inductance_H ?? null) : null, expected, seen, unknown);
}

/** After the fast ring, one of the period that the expected inductance gives with the same capacitance. */
function slowerRing(
  context: PulseContext,
  place: Omit<Place, "from">,
  fast: RingFit,
  known: KnownCoil,
): RingOutcome {
  const tank = tankOf(context, fast, known);
  const period = periodOf(fast) * Math.sqrt(known.inductance_H!.value / tank.inductance_H!.value);
  const found = disturbedRing({ ...place, from: fast.to, period });
  return outcomeOf(context, found && { ...found, switchOff: null, nonlinear: null }, known);
}
