/**
 * The reading as JSON, `ringbook.capture/1` and `ringbook.run/1`. SI units in the keys.
 * A figure that could not be had is null, with the reason in the notes or beside it.
 */
import type { Note } from "./capture.ts";

/** A value and its standard uncertainty. */
export interface Measured {
  value: number;
  u: number;
}
export type Figure = Measured | null;

/** What one input adds to a figure's uncertainty: the standard uncertainty it would have alone. */
export interface BudgetLine {
  source: string;
  u: number;
}

export interface RingMode {
  frequency_Hz: Measured;
  decay_per_s: Measured;
  q: Measured;
  /** Amplitude at the window's first sample, extrapolated; `amplitude` instead where the unit is not volt. */
  amplitude_V?: Measured;
  amplitude?: Measured;
}

export type RingQuality = "good" | "poor" | "refused";

export interface RingReading {
  channel: string;
  unit: string;
  from_s: number | null;
  to_s: number | null;
  /** The ring's own mode first: lowest frequency first. Empty when refused. */
  modes: RingMode[];
  /** Level the ring settles to, in the channel's unit. */
  offset: number | null;
  /** Phase of each mode at from_s in radians: with `modes` and `offset` the fitted curve can be drawn. */
  phases_rad: number[];
  residual_V?: number | null;
  residual?: number | null;
  noise: number | null;
  /** Frequency and decay against amplitude, where they move: small-amplitude value and span. */
  nonlinear?: { frequencySpan_Hz: number; decaySpan_per_s: number; text: string } | null;
  quality: RingQuality;
  reason: string | null;
}

export interface RampReading {
  inductance_H: Figure;
  resistance_ohm: Figure;
  initialCurrent_A: Figure;
  finalCurrent_A: Figure;
  saturationCurrent_A: Figure;
  timeConstant_s: Figure;
  energy_J: Figure;
  /** Winding resistance at 20 °C, from the ramp less the stated external resistance. */
  resistance20_ohm: Figure;
  /** Incremental inductance against current, where the core saturates. */
  curve?: { current_A: number[]; inductance_H: number[] } | null;
  reason: string | null;
}

export type Verdict = "spark" | "no-spark" | "unclear";

export interface Strike {
  onset_s: number;
  extinction_s: number | null;
}

export interface SparkReading {
  verdict: Verdict;
  /** Probability of a spark. */
  probability: number;
  /** max(probability, 1 − probability). */
  confidence: number;
  onset_s: number | null;
  extinction_s: number | null;
  breakdown_V: number | null;
  /** How the breakdown voltage was had. */
  breakdownFrom: "secondary" | "ratio" | null;
  strikes: Strike[];
  judgedAgainst: "run" | "setup" | "itself";
  /** In plain words with their figures. */
  reasons: string[];
  /** Where on the trace each reason points, one for one with `reasons`; null where it has no one place. */
  places_s: (number | null)[];
}

export interface Ruling {
  verdict: Verdict;
  at: string;
  remark: string;
}

export interface PulseReading {
  index: number;
  switchOffTime_s: number | null;
  dwell_s: number | null;
  ring: RingReading | null;
  inductance_H: Figure;
  capacitance_F: Figure;
  resistance_ohm: Figure;
  peak_V: number | null;
  /** Where peak_V was reached; null with it. */
  peakTime_s: number | null;
  /** Lower bound of a clipped peak. */
  peakAtLeast_V?: number;
  /** What L, C and the current at switch-off would give without losses or clamp. */
  expectedPeak_V: number | null;
  margin: number | null;
  energy_J: { coil: number | null; capacitor: number | null; spark: number | null };
  ramp: RampReading | null;
  spark: SparkReading | null;
  ruled: Ruling | null;
  /** Standard uncertainties of the figures written as plain numbers, under the same key. */
  u: Record<string, number>;
  /** Per figure, what contributes how much. */
  budget?: Record<string, BudgetLine[]>;
}

export interface ChannelReading {
  name: string;
  unit: string;
  fileUnit: string | null;
  role: string;
  roleGuessed: boolean;
  scale: number;
  lsb: number | null;
  overrange: number;
  first: number | null;
  last: number | null;
  minimum: number | null;
  maximum: number | null;
}

export interface RateReading {
  value: number | null;
  low: number;
  high: number;
  level: number;
}

export interface RunCounts {
  pulses: number;
  sparks: number;
  quiet: number;
  unclear: number;
  misfires: number | null;
  misfireRate: RateReading | null;
}

/** Everything but file, hash and setup, which the host adds around it. */
export interface CaptureReading {
  record: { index: number; count: number; time: string | null };
  notes: Note[];
  channels: ChannelReading[];
  timebase: { start_s: number | null; step_s: number | null; stepUncertainty_s: number; samples: number };
  pulses: PulseReading[];
  ramp: RampReading | null;
  combined: { inductance_H: Figure; capacitance_F: Figure; resistance_ohm: Figure; q: Figure };
  run: RunCounts;
}
