/** The table of figures on the simulated set, the receiver operating curve, and the speed of judging. */
import { readCapture } from "../../analysis/reading.ts";
import { judgeRun } from "../../analysis/run.ts";
import { COUNTED, quantile, scoreRun, sparkSet, tally, type Scored } from "../reference/spark-score.ts";
import { simulateRun } from "../reference/spark-set.ts";
import { troubles } from "../reference/spark-bench.ts";

const percent = (part: number, whole: number) =>
  whole === 0 ? "–" : `${((100 * part) / whole).toFixed(2)} %`;

export async function run(): Promise<void> {
  const runs = Number(process.env.SPARK_RUNS ?? 30);
  const scored = [...sparkSet(runs)].flatMap(scoreRun);
  byTrouble(scored);
  reached(scored);
  breakdowns(
    [...sparkSet(4, { secondary: true, kinds: ["first-rise", "late"], seed: 77 })].flatMap(scoreRun),
  );
  operatingCurve([...scored, ...[...sparkSet(12, { kinds: ["weak"], seed: 500 })].flatMap(scoreRun)]);
  speed();
}

function byTrouble(scored: Scored[]): void {
  console.log("trouble        sparks  called    quiet  alarms  unclear  not found  invented  Brier");
  for (const trouble of troubles) {
    const t = tally(scored.filter(({ run: from }) => from.trouble === trouble));
    console.log(
      `${trouble.padEnd(14)} ${String(t.sparks).padStart(6)} ${percent(t.called, t.sparks).padStart(9)} ${String(t.quiet).padStart(6)} ${String(t.alarms).padStart(7)} ${String(t.unclear).padStart(8)} ${String(t.missing).padStart(10)} ${String(t.invented).padStart(9)}  ${t.brier.toFixed(4)}`,
    );
  }
}

function reached(scored: Scored[]): void {
  const t = tally(scored);
  const found = t.sparks + t.quiet;
  console.log(
    `\n${t.sparks} sparks of strength ${COUNTED} and more, ${t.quiet} quiet pulses; judged end to end from the samples`,
  );
  console.log("figure                                reached     target");
  console.log(`sensitivity                           ${percent(t.called, t.sparks).padEnd(11)} ≥ 99 %`);
  console.log(`false alarms                          ${percent(t.alarms, t.quiet).padEnd(11)} ≤ 0.3 %`);
  console.log(`unclear                               ${percent(t.unclear, found).padEnd(11)} ≤ 2 %`);
  console.log(`pulses not found                      ${percent(t.missing, found).padEnd(11)} 0`);
  console.log(`pulses invented                       ${percent(t.invented, scored.length).padEnd(11)} 0`);
  console.log(
    `onset error in periods, median        ${quantile(t.onsets, 0.5).toFixed(4).padEnd(11)} ≤ 0.02`,
  );
  console.log(`onset error in periods, 90th          ${quantile(t.onsets, 0.9).toFixed(4).padEnd(11)} ≤ 0.1`);
  console.log(`Brier score                           ${t.brier.toFixed(4).padEnd(11)} ≤ 0.01`);
}

function breakdowns(scored: Scored[]): void {
  const errors = scored.flatMap(({ truth, spark }) =>
    truth.breakdown_V !== null && spark?.breakdownFrom === "secondary"
      ? [Math.abs(spark.breakdown_V! / Math.abs(truth.breakdown_V) - 1)]
      : [],
  );
  const within = errors.filter((error) => error <= 0.03).length;
  console.log(
    `breakdown voltage within 3 % (${errors.length})   ${percent(within, errors.length).padEnd(11)} ≥ 90 %`,
  );
}

/** Share of sparks called at a threshold on the probability, by strength; false alarms at the same threshold. */
function operatingCurve(scored: Scored[]): void {
  const thresholds = [0.1, 0.3, 0.5, 0.7, 0.9, 0.975, 0.99];
  const edges = [0, 4, 8, 12, 17, 28, 60, Number.POSITIVE_INFINITY];
  const share = (of: Scored[], threshold: number) =>
    percent(of.filter(({ spark }) => (spark?.probability ?? 0) > threshold).length, of.length).padStart(9);
  console.log(`\nprobability above   ${thresholds.map((t) => String(t).padStart(9)).join("")}`);
  const quiet = scored.filter(({ truth }) => !truth.spark);
  console.log(`false alarms        ${thresholds.map((t) => share(quiet, t)).join("")}  of ${quiet.length}`);
  for (let k = 0; k + 1 < edges.length; k++) {
    const of = scored.filter(
      ({ truth }) => truth.spark && truth.strength >= edges[k] && truth.strength < edges[k + 1],
    );
    const name = Number.isFinite(edges[k + 1])
      ? `strength ${edges[k]}–${edges[k + 1]}`
      : `strength ${edges[k]} up`;
    console.log(`${name.padEnd(19)} ${thresholds.map((t) => share(of, t)).join("")}  of ${of.length}`);
  }
}

function speed(): void {
  const one = simulateRun(3, {
    trouble: "plain",
    pulses: 100,
    sparkShare: 0.5,
    kinds: ["first-rise", "late"],
    train: false,
  });
  const captures = [...one.captures, ...one.captures, ...one.captures];
  judgeRun(
    captures.slice(0, 50).map((capture) => readCapture(capture, one.setup)),
    one.setup,
  );
  const start = performance.now();
  const evidence = captures.map((capture) => readCapture(capture, one.setup));
  const read = performance.now() - start;
  const first = performance.now();
  judgeRun(evidence, one.setup);
  const judged = performance.now() - first;
  const second = performance.now();
  judgeRun(evidence, one.setup);
  const again = performance.now() - second;
  console.log(
    `\n300 pulses: reading ${read.toFixed(0)} ms, judging ${judged.toFixed(0)} ms (${(judged / read).toFixed(2)} of reading; target ≤ 1), judged again as the run grows ${again.toFixed(0)} ms (target < 200 ms)`,
  );
}
