/** What the program says of a simulated run, pulse by pulse, beside the truth. */
import type { SparkReading } from "../../analysis/reading-format.ts";
import { readCapture } from "../../analysis/reading.ts";
import { judgeRun } from "../../analysis/run.ts";
import type { PulseTruth, RunRecipe, SimulatedRun, SparkKind } from "./spark-set.ts";
import { simulateRun } from "./spark-set.ts";
import { troubles } from "./spark-bench.ts";

export interface Scored {
  run: SimulatedRun;
  truth: PulseTruth;
  /** Null where the pulse was not found at all. */
  spark: SparkReading | null;
  /** Pulses found in its capture that no switch-off explains; told with the capture's first pulse only. */
  invented: number;
}

/** Pulses are told by their switch-off, within a third of a ring period. */
export function scoreRun(run: SimulatedRun): Scored[] {
  const evidence = run.captures.map((capture) => readCapture(capture, run.setup));
  const { readings } = judgeRun(evidence, run.setup);
  return readings.flatMap((reading, k) =>
    run.truths[k].map((truth, i) => {
      const near = (off: number | null, { switchOff_s }: PulseTruth) =>
        off !== null && Math.abs(off - switchOff_s) < 0.33 * run.period_s;
      const pulse = reading.pulses.find(({ switchOffTime_s }) => near(switchOffTime_s, truth));
      const invented = reading.pulses.filter(
        ({ switchOffTime_s }) => !run.truths[k].some((other) => near(switchOffTime_s, other)),
      );
      return { run, truth, spark: pulse?.spark ?? null, invented: i === 0 ? invented.length : 0 };
    }),
  );
}

const kinds: SparkKind[] = ["first-rise", "first-rise", "late", "low", "glow"];
/** None, few, half, most and all of a run's pulses spark. */
const shares = [0, 0.1, 0.5, 0.9, 1, 0.3];

/** The set: for every trouble `runs` runs of twelve pulses, trains and single captures in turn. */
export function* sparkSet(
  runs: number,
  only: { kinds?: SparkKind[]; secondary?: boolean; seed?: number } = {},
): Generator<SimulatedRun> {
  for (const trouble of troubles)
    for (let k = 0; k < runs; k++) {
      const recipe: RunRecipe = {
        trouble,
        pulses: 12,
        sparkShare: shares[k % shares.length],
        kinds: only.kinds ?? kinds,
        train: k % 2 === 0,
        secondary: only.secondary,
      };
      yield simulateRun((only.seed ?? 1) + 7919 * k, recipe);
    }
}

export interface Tally {
  sparks: number;
  called: number;
  quiet: number;
  alarms: number;
  unclear: number;
  missing: number;
  invented: number;
  brier: number;
  onsets: number[];
}

/** Sparks of the strength from which the targets hold. */
export const COUNTED = 28;

export function tally(scored: Scored[]): Tally {
  const sum: Tally = {
    sparks: 0,
    called: 0,
    quiet: 0,
    alarms: 0,
    unclear: 0,
    missing: 0,
    invented: 0,
    brier: 0,
    onsets: [],
  };
  for (const { invented } of scored) sum.invented += invented;
  const counted = scored.filter(({ truth }) => !truth.spark || truth.strength >= COUNTED);
  for (const { run, truth, spark } of counted) {
    const said = spark?.verdict === "spark";
    if (truth.spark) sum.sparks++;
    else sum.quiet++;
    if (!spark) sum.missing++;
    if (said && truth.spark) sum.called++;
    if (said && !truth.spark) sum.alarms++;
    if (spark?.verdict === "unclear") sum.unclear++;
    sum.brier += ((spark?.probability ?? 0.5) - Number(truth.spark)) ** 2 / counted.length;
    // Without an onset the error counts as a whole period.
    if (said && truth.spark && run.perPeriod >= 50)
      sum.onsets.push(spark.onset_s === null ? 1 : Math.abs(spark.onset_s - truth.onset_s!) / run.period_s);
  }
  sum.onsets.sort((a, b) => a - b);
  return sum;
}

export const quantile = (sorted: number[], p: number) =>
  sorted[Math.min(sorted.length - 1, Math.floor(p * sorted.length))] ?? Number.NaN;
