/** The run: every pulse judged against the run's quiet pulses, then counted and combined. */
import { combinePulses } from "./coil/combine.ts";
import type { Note } from "./capture.ts";
import type { CaptureEvidence, PulseEvidence } from "./evidence.ts";
import { combineRamps } from "./ramp/combine-ramps.ts";
import type { CaptureReading, Measured, PulseReading, RunCounts, SparkReading } from "./reading-format.ts";
import type { Setup } from "./setup/schema.ts";
import { againstKicks } from "./spark/against-kicks.ts";
import { againstQuiet } from "./spark/against-quiet.ts";
import { countPulses, verdictOf } from "./spark/counts.ts";
import { expectedOf, type Expectations } from "./spark/expected.ts";
import { breakdownOf, sparkEnergy_J, type Breakdown } from "./spark/account.ts";
import { burnLine } from "./spark/burn-line.ts";
import { endedEarly, gatherHalfWave, judgeHalfWaves, type HalfWave } from "./spark/half-wave.ts";
import { judgePulses, type Judged } from "./spark/judge.ts";
import { timesOf } from "./spark/onset.ts";
import { ringModes, ringPeriods } from "./spark/ring-modes.ts";
import { runTrends, trendNotes, type RunTrends } from "./spark/run-trends.ts";
import { noEvidence, sparkReading } from "./spark/spark-reading.ts";
import { gatherWindow, type SparkWindow } from "./spark/window.ts";

/** `ringbook.run/1`: the run's counts and combined figures. */
export interface RunReading extends RunCounts {
  combined: CaptureReading["combined"];
  notes: Note[];
  /** Absent in readings kept by an older version. */
  trends?: RunTrends;
}

export interface RunJudgement {
  /** In the order of the evidence. */
  readings: CaptureReading[];
  run: RunReading;
}

/** Windows are gathered once, unless the run shows another period: a growing run is judged again and again. */
const windows = new WeakMap<PulseEvidence, { window: SparkWindow | null; asked: number }>();

const halfWaves = new WeakMap<PulseEvidence, HalfWave | null>();

/**
 * Verdicts of a run; can be called again when the run grows or the setup changes. The evidence is not
 * changed. Captures in the order they were taken: a sagging supply is followed along it.
 */
export function judgeRun(evidence: CaptureEvidence[], setup: Setup): RunJudgement {
  const places = evidence.flatMap((capture, c) =>
    capture.pulses.map((pulse, p) => ({ capture, pulse, c, p })),
  );
  const periods = ringPeriods(places);
  const judgeable = places.flatMap((place, i) => {
    const window = windowOf(place.capture, place.pulse, periods[i]);
    const wave = gatherOnce(place.capture, place.pulse);
    return window ? [{ ...place, window, wave, modes: ringModes(place.pulse.fit?.modes ?? []) }] : [];
  });
  const waves = judgeHalfWaves(judgeable.map(({ wave }) => wave));
  const verdicts = judgePulses(judgeable).map((judged, i) =>
    unsure(judged) && !waves[i] ? byItself(judged!, judgeable[i]) : byHalfWave(judged, waves[i]),
  );
  const own = judgeable.flatMap((place, i) => (verdicts[i] ? [{ ...place, judged: verdicts[i] }] : []));
  const kicks = againstKicks(own.map((place) => ({ ...place, drive: driveOf(place) })));
  const first = own.map((place, i) => ({ ...place, judged: { ...place.judged, likelihood: kicks[i] } }));
  const likelihoods = againstQuiet(first, quietPlaces(first));
  const run = first.map((place, i) => ({
    ...place,
    judged: { ...place.judged, likelihood: likelihoods[i] },
  }));
  const quiet = quietPlaces(run);
  const found = new Map(run.map((place, i) => [place.pulse, findings(place, run, quiet, i, setup)]));
  const readings = evidence.map((capture) => {
    const pulses = capture.reading.pulses.map((pulse, p) => judgedPulse(pulse, found.get(capture.pulses[p])));
    return judgedCapture(capture.reading, pulses, setup);
  });
  const pulses = readings.flatMap((reading) => reading.pulses);
  const held_V = run.map(({ pulse, window }) =>
    found.get(pulse)!.spark.verdict === "no-spark" ? (window.secondary?.peak_V ?? null) : null,
  );
  const trends = runTrends(pulses, held_V, setup);
  return {
    readings,
    run: {
      ...countPulses(pulses, setup),
      combined: combinePulses(quietOf(pulses)),
      notes: trendNotes(trends),
      trends,
    },
  };
}

/** The current at switch-off where it was measured, else the dwell: alike in pulses of one setting. */
function driveOf({ capture, pulse }: { capture: CaptureEvidence; pulse: PulseEvidence }): number | null {
  const { switchOn, switchOff, current_A } = pulse;
  if (current_A) return current_A.value;
  if (switchOn === null || switchOff === null || capture.timebase.step_s === null) return null;
  return (switchOff - switchOn) * capture.timebase.step_s;
}

interface Place {
  pulse: PulseEvidence;
  window: SparkWindow;
  judged: Judged;
}

const NOTHING: Expectations = { course: [], rise: null, peers: [] };

const quietPlaces = (run: { judged: Judged }[]) =>
  run.flatMap(({ judged }, i) => (judged.likelihood.probability < 0.1 ? [i] : []));

interface Findings {
  spark: SparkReading;
  energy_J: Measured | null;
  breakdown: Breakdown | null;
  onsetUncertainty_s: number | null;
}

function findings(
  { pulse, window, judged }: Place,
  run: Place[],
  quiet: number[],
  i: number,
  setup: Setup,
): Findings {
  const likely = judged.likelihood.probability > 0.1 || (window.secondary?.strikes.length ?? 0) > 0;
  const expected = likely ? expectedOf(judged, run, quiet, i, window) : NOTHING;
  const times = timesOf(window, judged.traits, expected);
  const known = expected.course.length > 0;
  const breakdown = likely ? breakdownOf(window, setup, known ? judged.traits : null, times) : null;
  const spark = sparkReading(judged, window, times, breakdown);
  const sparked = spark.verdict === "spark";
  const energy_J = sparked ? sparkEnergy_J(judged, pulse, setup, window) : null;
  return { spark, energy_J, breakdown, onsetUncertainty_s: times.onsetUncertainty_s };
}

/** No clear word, or none that a ring cut at ground would bear out. */
const unsure = (judged: Judged | null) =>
  judged !== null && judged.quietRest === null && judged.likelihood.probability > 0.1;

/** What only an arc leaves behind, whatever the ring would have been. */
function byItself(judged: Judged, { wave, window }: { wave: HalfWave | null; window: SparkWindow }): Judged {
  const early = endedEarly(wave);
  if (early) return byHalfWave(judged, early)!;
  const burn = burnLine(window);
  if (!burn) return judged;
  const likelihood = { probability: 0.98, because: "burn-line" as const, away: null, loss: null };
  return { ...judged, likelihood, burn };
}

/** Where a diode cuts the half-waves their volt-seconds decide: no ring is free there. */
function byHalfWave(
  judged: Judged | null,
  wave: { probability: number; loss: number } | null,
): Judged | null {
  if (!judged || !wave) return judged;
  const likelihood = {
    probability: wave.probability,
    because: "volt-seconds" as const,
    away: null,
    loss: wave.loss,
  };
  return { ...judged, likelihood };
}

function judgedPulse(pulse: PulseReading, found: Findings | undefined): PulseReading {
  if (!found) return { ...pulse, spark: noEvidence("no ring was found to judge by", pulse.switchOffTime_s) };
  const { spark, energy_J, breakdown, onsetUncertainty_s } = found;
  const u = { ...pulse.u };
  if (spark.onset_s !== null && onsetUncertainty_s !== null) u["spark.onset_s"] = onsetUncertainty_s;
  if (spark.breakdown_V !== null && breakdown) u["spark.breakdown_V"] = breakdown.u;
  if (energy_J) u["energy_J.spark"] = energy_J.u;
  return { ...pulse, spark, u, energy_J: { ...pulse.energy_J, spark: energy_J?.value ?? null } };
}

function gatherOnce(capture: CaptureEvidence, pulse: PulseEvidence): HalfWave | null {
  const held = halfWaves.get(pulse);
  if (held !== undefined) return held;
  const wave = gatherHalfWave(capture, pulse);
  halfWaves.set(pulse, wave);
  return wave;
}

function windowOf(capture: CaptureEvidence, pulse: PulseEvidence, period: number | null): SparkWindow | null {
  const held = windows.get(pulse);
  if (held && (period === null || Math.abs(period / held.asked - 1) < 0.05)) return held.window;
  const window = gatherWindow(capture, pulse, period);
  windows.set(pulse, { window, asked: period ?? 0 });
  return window;
}

/** Sparks bend the ring: figures of the coil rest on quiet pulses, where there are any. */
function quietOf(pulses: PulseReading[]): PulseReading[] {
  return pulses.filter((pulse) => verdictOf(pulse) === "no-spark");
}

function judgedCapture(reading: CaptureReading, pulses: PulseReading[], setup: Setup): CaptureReading {
  return {
    ...reading,
    pulses,
    combined: combinePulses(quietOf(pulses)),
    ramp: combineRamps(pulses),
    run: countPulses(pulses, setup),
  };
}
